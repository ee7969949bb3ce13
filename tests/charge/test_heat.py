"""The heat balance of charge, body, source and room."""

from __future__ import annotations

from math import exp

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from runbook.charge.heat import HeatPath, Lumps, advance, end_temperature, seconds_until
from runbook.charge.isochore import Isochore
from runbook.errors import InputUnusable, OutsideValidity
from runbook.fluids.substance import substance

CO2 = substance("carbon dioxide")
CELL = 250e-6
ROOM = 294.15
PATHS = {gram: Isochore(CO2, gram / 1000.0 / CELL) for gram in (32.5, 117.0, 120.0, 180.0, 225.0)}
STEEL = HeatPath(1200.0, 5.0, 0.5, 0.0, 0.0, None)
STEEL_30_W = HeatPath(1200.0, 5.0, 0.5, 0.0, 30.0, None)


def stored(lumps: Lumps, mass: float, path: HeatPath) -> float:
    """All the heat there is, but for a constant [J]."""
    return (
        mass * lumps.fluid_energy + path.body_heat_capacity * lumps.body_K + path.source_heat_capacity * lumps.source_K
    )


@pytest.mark.wiring
@pytest.mark.parametrize(
    ("gram", "body", "begins", "level_bar", "minutes"),
    [
        (117.0, 1200.0, ROOM, 5.18, 85 / 60),
        (117.0, 1200.0, ROOM, 20.0, 155 / 60),
        (225.0, 1200.0, ROOM, 5.18, 195 / 60),
        (225.0, 1200.0, ROOM, 20.0, 18.0),
        (225.0, 1200.0, ROOM, 88.3, 96.0),
        (225.0, 300.0, 250.0, 5.18, 21.0),
        (225.0, 300.0, 250.0, 20.0, 38.0),
        (225.0, 300.0, 250.0, 88.3, 72.0),
    ],
)
def test_dry_ice_sealed_in_a_vessel(gram: float, body: float, begins: float, level_bar: float, minutes: float) -> None:
    """How long sealed dry ice takes to pass a pressure, against another program's times: within 25 %."""
    path = HeatPath(body, 5.0, 0.5, 0.0, 0.0, None)
    start = Lumps(PATHS[gram].energy(195.0), begins, begins)
    found = seconds_until(start, gram / 1000.0, PATHS[gram], path, ROOM, False, pressure=level_bar * 1e5)
    assert found is not None
    assert found / 60.0 == pytest.approx(minutes, rel=0.25)


def test_a_modest_charge_never_reaches_the_ceiling() -> None:
    """117 g in a 21 degC room ends at 58.65 bar: 88.3 bar is never passed, with or without waiting for it."""
    start = Lumps(PATHS[117.0].energy(195.0), ROOM, ROOM)
    assert seconds_until(start, 0.117, PATHS[117.0], STEEL, ROOM, False, pressure=88.3e5) is None
    end = advance(start, 0.117, PATHS[117.0], STEEL, ROOM, False, 2 * 86400.0)
    assert PATHS[117.0].pressure_of_energy(end.fluid_energy) == pytest.approx(58.648e5, rel=1e-3)


def test_a_stuck_heater_ends_where_it_must() -> None:
    """30 W stuck on with 0.5 W/K to a 21 degC room ends at 81 degC and 162 bar; lagged to 0.15 W/K at 221 degC."""
    path = PATHS[117.0]
    start = Lumps(path.energy(ROOM), ROOM, ROOM)
    end = advance(start, 0.117, path, STEEL_30_W, ROOM, True, 2 * 86400.0)
    assert end.body_K - 273.15 == pytest.approx(81.0, abs=0.01)
    assert end.body_K == pytest.approx(end_temperature(STEEL_30_W, ROOM, True), abs=0.01)
    assert path.pressure_of_energy(end.fluid_energy) == pytest.approx(162e5, rel=0.005)
    lagged = HeatPath(1200.0, 5.0, 0.15, 0.0, 30.0, None)
    assert end_temperature(lagged, ROOM, True) - 273.15 == pytest.approx(221.0, abs=0.01)


@pytest.mark.wiring
@pytest.mark.parametrize(("body", "minutes"), [(1200.0, 4.6), (300.0, 1.6)])
def test_minutes_to_the_ceiling_with_the_heater_stuck(body: float, minutes: float) -> None:
    """From 35 degC, 30 W takes 117 g to 88 bar in 4.6 min (steel), 1.6 min (light); another program: within 25 %."""
    path = PATHS[117.0]
    start = Lumps(path.energy(308.15), 308.15, 308.15)
    found = seconds_until(start, 0.117, path, HeatPath(body, 5.0, 0.5, 0.0, 30.0, None), ROOM, True, pressure=88e5)
    assert found is not None
    assert found / 60.0 == pytest.approx(minutes, rel=0.25)


@pytest.mark.wiring
def test_the_charge_alone_at_30_watt() -> None:
    """120 g alone at 30 W reach the triple point at 146 s, are without solid at 932 s and in one phase at 1848 s;
    computed beforehand with another solid model: within 2 %."""
    path = PATHS[120.0]
    bare = HeatPath(0.0, 1e6, 0.0, 0.0, 30.0, None)
    start = Lumps(path.energy(195.0), 195.0, 195.0)
    for temperature, seconds in ((CO2.triple_temperature - 1e-4, 146.0), (CO2.triple_temperature, 932.0)):
        found = seconds_until(start, 0.12, path, bare, 295.0, True, temperature=temperature)
        assert found == pytest.approx(seconds, rel=0.02)
    assert seconds_until(start, 0.12, path, bare, 295.0, True, temperature=304.12) == pytest.approx(1848.0, rel=0.02)


def test_a_switched_off_tape_still_warms_the_cell() -> None:
    """A 200 J/K tape at 80 degC warms a 35 degC steel cell by about 5.8 K with nothing lost; another program: 10 %."""
    path = PATHS[117.0]
    tape = HeatPath(1200.0, 5.0, 0.0, 200.0, 30.0, None)
    start = Lumps(path.energy(308.15), 308.15, 353.15)
    end = advance(start, 0.117, path, tape, ROOM, False, 7200.0)
    assert path.temperature_of_energy(end.fluid_energy) - 308.15 == pytest.approx(5.8, rel=0.1)


@settings(max_examples=80, deadline=None)
@given(
    gram=st.sampled_from(sorted(PATHS)),
    charge_K=st.floats(170.0, 330.0),
    body_K=st.floats(180.0, 350.0),
    source_K=st.floats(280.0, 400.0),
    coupling=st.floats(0.1, 1e4),
    seconds=st.floats(0.5, 4000.0),
)
def test_nothing_is_made_or_lost(
    gram: float, charge_K: float, body_K: float, source_K: float, coupling: float, seconds: float
) -> None:
    """Without room and power the heat in charge, body and source together stays the same: within 1e-9 of it."""
    path = HeatPath(1200.0, coupling, 0.0, 200.0, 0.0, None)
    mass, isochore = gram / 1000.0, PATHS[gram]
    start = Lumps(isochore.energy(charge_K), body_K, source_K)
    end = advance(start, mass, isochore, path, ROOM, False, seconds)
    assert stored(end, mass, path) == pytest.approx(stored(start, mass, path), rel=1e-9)
    coldest, hottest = min(charge_K, body_K, source_K), max(charge_K, body_K, source_K)
    for temperature in (isochore.temperature_of_energy(end.fluid_energy), end.body_K, end.source_K):
        assert coldest - 0.1 <= temperature <= hottest + 0.1


def test_full_power_goes_where_it_is_counted() -> None:
    """With no loss, power times time is what the three lumps have gained: within 1e-6."""
    path = HeatPath(1200.0, 5.0, 0.0, 200.0, 30.0, None)
    start = Lumps(PATHS[117.0].energy(ROOM), ROOM, ROOM)
    end = advance(start, 0.117, PATHS[117.0], path, ROOM, True, 600.0)
    assert stored(end, 0.117, path) - stored(start, 0.117, path) == pytest.approx(18000.0, rel=1e-6)


def test_cooling_towards_the_room_is_exponential() -> None:
    """A vessel whose charge hardly counts cools as exp(-t L / C): within 1 % of the step after an hour."""
    path = HeatPath(1200.0, 5.0, 0.5, 0.0, 0.0, None)
    start = Lumps(PATHS[117.0].energy(320.0), 320.0, 320.0)
    end = advance(start, 1e-6, PATHS[117.0], path, ROOM, False, 3600.0)
    assert end.body_K - ROOM == pytest.approx((320.0 - ROOM) * exp(-3600.0 * 0.5 / 1200.0), rel=0.01)


@settings(max_examples=40, deadline=None)
@given(length=st.floats(0.2, 30.0), capacity=st.sampled_from([0.0, 200.0]))
def test_the_cut_out_holds(length: float, capacity: float) -> None:
    """However long the steps, source and body stay at or below the cut-out, and the source reaches it."""
    path = HeatPath(1200.0, 5.0, 0.5, capacity, 300.0, 311.15)
    lumps = Lumps(PATHS[117.0].energy(ROOM), ROOM, ROOM)
    for _ in range(60):
        lumps = advance(lumps, 0.117, PATHS[117.0], path, ROOM, True, length * 10.0)
        assert max(lumps.source_K, lumps.body_K) <= 311.15 + 1e-9
    if length > 10.0:
        assert lumps.source_K == pytest.approx(311.15, abs=1e-6)


@pytest.mark.parametrize("capacity", [0.0, 500.0])
@pytest.mark.parametrize("heating", [True, 305.15, False])
def test_the_end_is_where_it_ends(capacity: float, heating: bool | float) -> None:
    """The end temperature given at once is that which the balance comes to after three days: within 0.01 K."""
    path = HeatPath(1200.0, 5.0, 0.5, capacity, 30.0, 311.15)
    start = Lumps(PATHS[117.0].energy(290.0), 290.0, 290.0)
    end = advance(start, 0.117, PATHS[117.0], path, ROOM, heating, 3 * 86400.0)
    assert end.body_K == pytest.approx(end_temperature(path, ROOM, heating), abs=0.01)


def test_a_source_in_a_hotter_room_gives_nothing() -> None:
    """Where the room is hotter than the set temperature, the vessel comes to the room's."""
    path = HeatPath(1200.0, 5.0, 0.5, 200.0, 30.0, 290.0)
    start = Lumps(PATHS[117.0].energy(285.0), 285.0, 285.0)
    end = advance(start, 0.117, PATHS[117.0], path, ROOM, True, 3 * 86400.0)
    assert end.body_K == pytest.approx(ROOM, abs=0.01)
    assert end_temperature(path, ROOM, True) == ROOM


def test_one_long_step_is_many_short_ones() -> None:
    """An hour in one call and in 3600 calls agree: within 0.1 K."""
    path = PATHS[225.0]
    one = many = Lumps(path.energy(195.0), 290.0, 290.0)
    one = advance(one, 0.225, path, STEEL_30_W, ROOM, True, 3600.0)
    for _ in range(3600):
        many = advance(many, 0.225, path, STEEL_30_W, ROOM, True, 1.0)
    assert one.body_K == pytest.approx(many.body_K, abs=0.1)
    ends = [path.temperature_of_energy(lumps.fluid_energy) for lumps in (one, many)]
    assert ends[0] == pytest.approx(ends[1], abs=0.1)


def test_a_level_is_passed_downwards_too() -> None:
    """A cooling charge passes a pressure from above; the time agrees with stepping to it."""
    path = PATHS[117.0]
    start = Lumps(path.energy(320.0), 320.0, 320.0)
    found = seconds_until(start, 0.117, path, STEEL, ROOM, False, pressure=80e5)
    assert found is not None
    at = advance(start, 0.117, path, STEEL, ROOM, False, found)
    assert path.pressure_of_energy(at.fluid_energy) == pytest.approx(80e5, rel=2e-3)


def test_a_level_beyond_the_horizon_is_none() -> None:
    """What is not passed within the horizon is None, though it would be later."""
    path = PATHS[225.0]
    start = Lumps(path.energy(195.0), ROOM, ROOM)
    assert seconds_until(start, 0.225, path, STEEL, ROOM, False, pressure=88.3e5, horizon=3600.0) is None


def test_heat_without_end_leaves_the_models() -> None:
    """A heater with neither loss nor cut-out drives the charge off its path, and that is said, not guessed."""
    path = HeatPath(10.0, 5.0, 0.0, 0.0, 300.0, None)
    start = Lumps(PATHS[117.0].energy(ROOM), ROOM, ROOM)
    assert end_temperature(path, ROOM, True) == float("inf")
    with pytest.raises(OutsideValidity):
        advance(start, 0.117, PATHS[117.0], path, ROOM, True, 86400.0)


def test_impossible_lumps_are_refused() -> None:
    """Negative heat capacities, no coupling, no charge, and two levels or none are inputs that cannot be used."""
    for numbers in ((-1.0, 5.0, 0.5, 0.0, 0.0), (1.0, 0.0, 0.5, 0.0, 0.0), (1.0, 5.0, float("nan"), 0.0, 0.0)):
        with pytest.raises(InputUnusable):
            HeatPath(*numbers, None)
    start = Lumps(PATHS[117.0].energy(ROOM), ROOM, ROOM)
    with pytest.raises(InputUnusable):
        advance(start, 0.0, PATHS[117.0], STEEL, ROOM, False, 1.0)
    with pytest.raises(InputUnusable):
        seconds_until(start, 0.117, PATHS[117.0], STEEL, ROOM, False)
