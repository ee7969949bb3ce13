"""One step of the heat balance, and the two sides of a body: what one lump says of both stays true."""

from __future__ import annotations

from dataclasses import replace
from math import inf

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from runbook.charge.heat import advance, seconds_until
from runbook.charge.isochore import Isochore
from runbook.charge.lumps import FAR_SHARE, HeatPath, Lumps, driven_to, exchanged, stored, two_sided
from runbook.errors import InputUnusable
from runbook.fluids.substance import substance

CO2 = substance("carbon dioxide")
CELL = 250e-6
ROOM = 294.15
PATHS = {gram: Isochore(CO2, gram / 1000.0 / CELL) for gram in (32.5, 117.0, 180.0)}
JACKET = HeatPath(1200.0, 5.0, 0.5, 2500.0, 60.0, 311.15)


def empty(path: HeatPath, start: Lumps, limit: float | None, seconds: float, steps: int) -> Lumps:
    """A vessel with nothing in it after so long [s], in so many steps."""
    for _ in range(steps):
        start = exchanged(start, 0.0, 0.0, 0.0, path, ROOM, limit, seconds / steps, 0.0)
    return start


@settings(max_examples=200, deadline=None)
@given(
    mass=st.sampled_from([0.0, 1e-4, 0.117]),
    fluid_K=st.floats(190.0, 330.0),
    takes_up=st.sampled_from([0.1, 300.0, inf]),
    sides=st.tuples(st.floats(180.0, 350.0), st.floats(180.0, 350.0)),
    source_K=st.floats(280.0, 400.0),
    capacity=st.sampled_from([0.0, 200.0, 2500.0]),
    limit=st.sampled_from([None, 300.0, 311.15]),
    between=st.floats(1e-3, 1e4),
    h=st.floats(1e-3, 3600.0),
)
def test_a_step_keeps_the_heat(
    mass: float,
    fluid_K: float,
    takes_up: float,
    sides: tuple[float, float],
    source_K: float,
    capacity: float,
    limit: float | None,
    between: float,
    h: float,
) -> None:
    """What is stored more is what room and source gave, however long the step, and no side leaves the span of what it
    touches: 1e-9 of what is stored."""
    path = HeatPath(1200.0, 5.0, 0.5, capacity, 60.0, 311.15, far_share=0.3, between=between)
    near, far = sides
    before = Lumps(-3e5, near, source_K if capacity > 0.0 else near, far)
    after = exchanged(before, mass, fluid_K, takes_up, path, ROOM, limit, h, 1.0 if mass > 0.0 else 0.0)
    gained = stored(after, mass, path) - stored(before, mass, path)
    assert gained == pytest.approx(after.from_room + after.from_source, abs=1e-9 * stored(before, mass, path))
    assert 0.0 <= after.from_source <= 60.0 * h * (1.0 + 1e-9)
    touched = [near, far, ROOM, before.source_K, *([fluid_K] if mass > 0.0 else [])]
    assert after.far_K is not None
    assert min(touched) - 1e-6 <= after.far_K
    assert min(touched) - 1e-6 <= after.body_K
    if limit is None:
        assert max(after.body_K, after.far_K) <= max(touched) + 1e-6


def test_sides_that_are_one_piece_are_one_lump() -> None:
    """Coupled without end the two sides do what one lump does: 1 mK after ten minutes of heating, with charge."""
    start = Lumps(PATHS[117.0].energy(ROOM), ROOM, ROOM)
    one = advance(start, 0.117, PATHS[117.0], JACKET, ROOM, True, 600.0)
    joined = replace(JACKET, far_share=0.4, between=1e7)
    two = advance(start, 0.117, PATHS[117.0], joined, ROOM, True, 600.0)
    assert two.far_K == pytest.approx(one.body_K, abs=1e-3)
    assert two.body_K == pytest.approx(one.body_K, abs=1e-3)
    assert two.fluid_energy == pytest.approx(one.fluid_energy, abs=2.0)


@pytest.mark.independent
def test_the_far_side_lags_by_its_own_time() -> None:
    """Heated at P, a body without loss warms everywhere at P / C, and its far side is behind by that rate times its
    time, 200 s (a first-order lag behind a ramp): 60 W in 1200 J/K give 10 K. Within 1 %."""
    path = two_sided(HeatPath(1200.0, 5.0, 0.0, 0.0, 60.0, None))
    end = empty(path, Lumps(0.0, ROOM, ROOM), inf, 1500.0, 3000)
    assert end.far_K is not None
    assert end.body_K - end.far_K == pytest.approx(60.0 / 1200.0 * 200.0, rel=0.01)


@pytest.mark.independent
def test_the_steady_loss_is_that_of_one_lump() -> None:
    """Held by a power, the mean of the body stands where power is loss, whatever its sides: 30 W / 0.5 W/K over the
    room, by hand. Within 0.01 K."""
    path = two_sided(HeatPath(1200.0, 5.0, 0.5, 0.0, 30.0, None))
    end = empty(path, Lumps(0.0, ROOM, ROOM), inf, 86400.0, 2000)
    assert end.far_K is not None
    assert end.body_K > end.far_K
    assert (1.0 - FAR_SHARE) * end.body_K + FAR_SHARE * end.far_K - ROOM == pytest.approx(60.0, abs=0.01)


@pytest.mark.parametrize("gram", sorted(PATHS))
def test_heated_the_near_side_runs_ahead_of_the_charge_and_the_far_side_lags(gram: float) -> None:
    """Ten minutes of a jacket: source, heated side, charge, far side, in that order; cooled by it the other way."""
    isochore, path = PATHS[gram], two_sided(JACKET)
    warm = advance(Lumps(isochore.energy(285.15), 285.15, 285.15), gram / 1e3, isochore, path, 285.15, True, 600.0)
    assert warm.far_K is not None
    assert warm.source_K > warm.body_K > isochore.temperature_of_energy(warm.fluid_energy) > warm.far_K
    cool = advance(Lumps(isochore.energy(305.0), 305.0, 285.0), gram / 1e3, isochore, path, 305.0, False, 300.0)
    assert cool.far_K is not None
    assert cool.source_K < cool.body_K < isochore.temperature_of_energy(cool.fluid_energy) < cool.far_K


@settings(max_examples=60, deadline=None)
@given(
    gram=st.sampled_from(sorted(PATHS)),
    capacity=st.sampled_from([300.0, 1200.0, 4000.0]),
    coupling=st.sampled_from([0.5, 5.0, 50.0]),
    loss=st.sampled_from([0.1, 0.5, 2.0]),
    source=st.sampled_from([(0.0, 30.0), (200.0, 60.0), (2500.0, 60.0), (2500.0, 300.0)]),
    limit=st.sampled_from([311.15, 353.15, None]),
    begin=st.floats(255.0, 300.0),
    rise=st.floats(2.0, 30.0),
)
def test_left_alone_on_one_lump_is_not_late(
    gram: float,
    capacity: float,
    coupling: float,
    loss: float,
    source: tuple[float, float],
    limit: float | None,
    begin: float,
    rise: float,
) -> None:
    """With the source stuck on, what a charge comes to in a two-sided body it comes to in one lump, and at most a tenth
    later; both begin as left alone begins, the source at its hottest."""
    path, isochore, mass = HeatPath(capacity, coupling, loss, *source, limit), PATHS[gram], gram / 1e3
    hot = begin if limit is None or source[0] == 0.0 else limit
    start = Lumps(isochore.energy(begin), begin, hot)
    two = seconds_until(start, mass, isochore, two_sided(path), ROOM, True, temperature=begin + rise, horizon=1e5)
    one = seconds_until(start, mass, isochore, path, ROOM, True, temperature=begin + rise, horizon=1e5)
    if two is not None:
        assert one is not None
        assert one <= 1.1 * two + 1.0


def test_only_what_is_heated_has_sides() -> None:
    """The room warms both sides of a body alike, so there one lump is enough; and two sides need a coupling."""
    room = HeatPath(60.0, 0.1, 0.15, 0.0, 0.0, None)
    assert two_sided(room) is room
    assert two_sided(JACKET).far_share == FAR_SHARE
    for share, between in ((0.25, inf), (0.25, 0.0), (1.0, 1.0), (-0.1, 1.0)):
        with pytest.raises(InputUnusable):
            replace(JACKET, far_share=share, between=between)
    assert driven_to(JACKET, False) is None
    assert driven_to(JACKET, True) == 311.15
    assert driven_to(JACKET, 305.15) == 305.15
