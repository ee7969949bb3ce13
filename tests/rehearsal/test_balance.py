"""Mass and energy of the simulated vessel: what is in it is what came less what went, over whole rehearsals."""

from __future__ import annotations

import asyncio
from dataclasses import fields, replace
from pathlib import Path

import pytest
from hypothesis import HealthCheck, given, settings
from hypothesis import strategies as st

from runbook.charge.lumps import HeatPath, two_sided
from runbook.errors import OutsideValidity
from runbook.fluids.substance import substance
from runbook.rehearsal import bath, headless
from runbook.rehearsal.faults import parse_fault
from runbook.rehearsal.lesson import Lesson
from runbook.rehearsal.timeline import Asked, opened
from runbook.rehearsal.vessel import Controls, Relieving, Simulation, Tally, Vessel
from runbook.rehearsal.world import World

SHIPPED = Path(__file__).parents[2] / "procedures"
CELL, TUBE = "co2-critical-point", "co2-triple-point"
CLOSE = 1e-6
"""Of what moved in all [1]."""
CO2 = substance("carbon dioxide")
VOLUME = 250e-6
ROOM = 294.15
ATMOSPHERE = 101325.0
PATH = HeatPath(1200.0, 5.0, 0.5, 2500.0, 60.0, 311.15)
MOVED = [
    (CELL, "source stuck on"),
    (CELL, "cooling lost"),
    (CELL, "outlet plugged"),
    (TUBE, ""),
    (TUBE, "slow leak"),
    (TUBE, "relief early"),
    (TUBE, "operator away"),
]
"""Every kind of way in and out, and what becomes of it with each fault that moves mass or energy."""


def held(simulation: Simulation, vessel: Vessel) -> float:
    """All the heat in a vessel [J], but for a constant; worked out here again."""
    path = simulation.path
    far_K = vessel.body_K if vessel.far_K is None else vessel.far_K
    metal = path.body_heat_capacity * ((1.0 - path.far_share) * vessel.body_K + path.far_share * far_K)
    metal += path.source_heat_capacity * vessel.source_K
    return vessel.mass * vessel.energy + metal


def astray(simulation: Simulation, first: Vessel, last: Vessel, tally: Tally | None = None) -> tuple[float, float]:
    """Mass and energy that nobody counted, as shares of what moved [1]."""
    said = last.tally if tally is None else tally
    mass = last.mass - first.mass - said.mass_in + said.mass_out
    energy = held(simulation, last) - held(simulation, first) - said.energy
    moved = max(abs(last.tally.energy_in), abs(last.tally.energy_out), abs(last.tally.from_room), 1.0)
    return mass / max(last.tally.mass_in, first.mass), energy / moved


@pytest.fixture
def worlds(monkeypatch: pytest.MonkeyPatch) -> list[tuple[World, Vessel]]:
    """Every simulated bench of a rehearsal, with its vessel at the start."""
    made: list[tuple[World, Vessel]] = []

    class Watched(World):
        def __init__(self, *given: object) -> None:
            super().__init__(*given)  # type: ignore[arg-type]  # passed on as they came
            made.append((self, self.vessel))

    monkeypatch.setattr(bath, "World", Watched)
    return made


@pytest.mark.parametrize(("procedure", "fault"), MOVED)
def test_nothing_is_lost_over_a_rehearsal(procedure: str, fault: str, worlds: list[tuple[World, Vessel]]) -> None:
    """Every part of a shipped procedure, and with each fault that moves mass or energy: 1e-6 of what moved."""
    faults = [parse_fault(fault, 0)] if fault else []
    asyncio.run(headless.rehearse(SHIPPED / f"{procedure}.yaml", 1, faults=faults))
    world, first = worlds[0]
    assert world.vessel.tally.mass_out > 0.0, "what was loaded in the open has lost something to the room"
    mass, energy = astray(world.simulation, first, world.vessel)
    assert abs(mass) <= CLOSE
    assert abs(energy) <= CLOSE


def test_nothing_is_lost_of_tubes_in_a_bath(worlds: list[tuple[World, Vessel]]) -> None:
    """Each of the others beside the first, its bath filled anew twice: 1e-6 of what moved."""
    asyncio.run(headless.rehearse(SHIPPED / "sf6-three-tubes.yaml", 1))
    assert len(worlds) == 2
    for world, first in worlds:
        told, before = world.vessel.tally, first.tally
        # They come loaded: what they hold at the start has been put in already.
        since = replace(told, mass_in=told.mass_in - before.mass_in, energy_in=told.energy_in - before.energy_in)
        mass, energy = astray(world.simulation, first, world.vessel, since)
        assert abs(mass) <= CLOSE
        assert abs(energy) <= CLOSE


@pytest.mark.parametrize(("procedure", "parts"), [(CELL, 4), (TUBE, 3)])
def test_nothing_is_lost_over_a_timeline(procedure: str, parts: int) -> None:
    """A drawn lot gone through by the clock, part by part, parked between them: 1e-6 of what moved."""
    _, plan, drawn = opened(Asked(SHIPPED / f"{procedure}.yaml", 1, 1, (0,)))
    assert len(plan.parts) == parts
    lesson = Lesson(drawn[1])
    first = lesson.world.vessel
    for part in range(parts):
        assert lesson.go(part).ends_s is not None
    mass, energy = astray(lesson.world.simulation, first, lesson.world.vessel)
    assert abs(mass) <= CLOSE
    assert abs(energy) <= CLOSE


def test_each_term_is_missed(worlds: list[tuple[World, Vessel]]) -> None:
    """Every part of the cell's day keeps mass and energy; the same sum with any one term left out is off by far more:
    the judge sees what it looks for."""
    asyncio.run(headless.rehearse(SHIPPED / f"{CELL}.yaml", 1))
    world, first = worlds[0]
    assert max(map(abs, astray(world.simulation, first, world.vessel))) <= CLOSE
    for term in fields(Tally):
        without = replace(world.vessel.tally, **{term.name: 0.0})
        assert max(map(abs, astray(world.simulation, first, world.vessel, without))) > 0.01, term.name


TURNS = st.lists(
    st.tuples(
        st.builds(
            Controls,
            vent_open=st.booleans(),
            bore=st.sampled_from([0.15e-3, 1e-3, 4e-3]),
            heating=st.sampled_from([False, True, 305.15]),
            room_K=st.sampled_from([291.15, ROOM, 303.15]),
            barometer=st.just(ATMOSPHERE),
            port=st.sampled_from(["top", "bottom"]),
            leak=st.sampled_from([0.0, 0.0, 1e-5]),
            loss=st.sampled_from([1.0, 0.2]),
        ),
        st.floats(0.5, 300.0),
    ),
    min_size=1,
    max_size=4,
)


@settings(max_examples=25, deadline=None, suppress_health_check=[HealthCheck.too_slow], derandomize=True)
@given(
    name=st.sampled_from(["carbon dioxide", "sulfur hexafluoride", "water", "nitrogen"]),
    gram=st.floats(0.2, 140.0),
    capacities=st.sampled_from([(1200.0, 2500.0), (60.0, 200.0), (300.0, 0.0)]),
    coupling=st.sampled_from([0.1, 5.0, 50.0]),
    reseats=st.booleans(),
    sides=st.sampled_from([1, 2]),
    turns=TURNS,
)
def test_nothing_is_lost_whatever_hands_do(
    name: str,
    gram: float,
    capacities: tuple[float, float],
    coupling: float,
    reseats: bool,
    sides: int,
    turns: list[tuple[Controls, float]],
) -> None:
    """Any fluid, vessel and charge; vents, leaks, relief and heat in any order: 1e-6 of what moved."""
    path = HeatPath(capacities[0], coupling, 0.5, capacities[1], 60.0, 311.15)
    simulation = Simulation(substance(name), VOLUME, two_sided(path) if sides == 2 else path, Relieving(70e5, reseats))
    first = Vessel(0.0, 0.0, ROOM, ROOM, False)
    vessel = simulation.loaded(first, gram / 1000.0, ATMOSPHERE)
    for controls, seconds in turns:
        try:
            vessel = simulation.advance(vessel, controls, seconds)
        except OutsideValidity:
            break
        mass, energy = astray(simulation, first, vessel)
        assert abs(mass) <= CLOSE
        assert abs(energy) <= CLOSE
        assert vessel.tally.mass_out <= gram / 1000.0 * (1.0 + CLOSE)


@pytest.mark.independent
def test_dry_ice_in_the_open_takes_its_heat_of_sublimation() -> None:
    """100 g of dry ice gone from an open vessel took 25.23 kJ/mol (Giauque and Egan 1937, at 194.67 K) and what its
    vapour needs to fill the vessel: within 1 %."""
    simulation = Simulation(CO2, VOLUME, PATH)
    first = simulation.loaded(Vessel(0.0, 0.0, ROOM, ROOM, False), 0.1, ATMOSPHERE)
    vessel, seconds = first, 0.0
    controls = Controls(True, 5e-3, False, ROOM, ATMOSPHERE)
    while vessel.mass > 0.0:
        vessel, seconds = simulation.advance(vessel, controls, 60.0), seconds + 60.0
        assert seconds < 1e5
    took = first.body_K * 1200.0 - vessel.body_K * 1200.0 + vessel.tally.from_room - first.tally.from_room
    took += 2500.0 * (first.source_K - vessel.source_K)
    assert took == pytest.approx(0.1 * 25.23e3 / 0.04401, rel=0.01)


def test_what_lies_in_the_open_stays_as_warm_as_it_lies() -> None:
    """Shut after any time in the open the charge stands at its temperature there: 1 mK."""
    simulation = Simulation(CO2, VOLUME, PATH)
    vessel = simulation.loaded(Vessel(0.0, 0.0, ROOM, ROOM, False), 0.1, ATMOSPHERE)
    controls = Controls(True, 5e-3, False, ROOM, ATMOSPHERE)
    for seconds in (1.0, 60.0, 600.0):
        vessel = simulation.advance(vessel, controls, seconds)
        state = simulation.state(replace(vessel, in_the_open=False))
        assert state is not None
        assert state.temperature == pytest.approx(simulation.in_the_open_at(ATMOSPHERE), abs=1e-3)


def test_a_charge_colder_than_what_is_modelled_is_warmed_by_its_body() -> None:
    """Not by nothing: 1e-9 of what is held."""
    simulation = Simulation(CO2, VOLUME, two_sided(replace(PATH, loss_to_room=0.0)))
    closed = simulation.closed_in(Vessel(0.0, 0.0, ROOM, ROOM, False, far_K=290.0), 0.02, ROOM)
    deep = replace(closed, energy=closed.energy - 1e6)
    after = simulation.advance(deep, Controls(False, 0.0, False, ROOM, ATMOSPHERE), 1.0)
    assert held(simulation, after) == pytest.approx(held(simulation, deep), rel=1e-9)


def test_a_source_warms_an_empty_vessel() -> None:
    """With nothing in it the body still comes to where source and room hold it, by Newton's law of both."""
    simulation = Simulation(CO2, VOLUME, PATH)
    controls = Controls(True, 5e-3, True, ROOM, ATMOSPHERE)
    vessel = simulation.advance(Vessel(0.0, 0.0, ROOM, ROOM, False), controls, 86400.0)
    assert vessel.source_K == pytest.approx(311.15, abs=1e-6)
    assert vessel.body_K == pytest.approx((5.0 * 311.15 + 0.5 * ROOM) / 5.5, abs=0.01)


def test_the_last_gas_is_counted() -> None:
    """A vessel that is let down to nothing has given the room everything that was in it."""
    simulation = Simulation(CO2, VOLUME, PATH)
    closed = simulation.closed_in(Vessel(0.0, 0.0, ROOM, ROOM, False), 0.02, ROOM)
    vessel = simulation.advance(closed, Controls(True, 1e-3, False, ROOM, ATMOSPHERE), 600.0)
    assert vessel.mass == 0.0
    assert vessel.released == pytest.approx(0.02, rel=1e-12)
