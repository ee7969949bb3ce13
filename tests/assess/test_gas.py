"""A charge that comes as gas: as warm as the room, under its pressure from the moment it is filled."""

from __future__ import annotations

from dataclasses import replace
from pathlib import Path

import pytest

from runbook.answers import Observation
from runbook.assess.ahead import look
from runbook.assess.boxes import charge_box
from runbook.assess.needs import entry_needs
from runbook.assess.plan_line import plan_line
from runbook.assess.scene import Scene, open_scene
from runbook.assess.walk import Walked, walk
from runbook.procedure.model import Charge, LetDownTo, Load
from runbook.procedure.reader import read_procedure

GOOD = Path(__file__).parents[1] / "procedure" / "good"


@pytest.fixture(scope="module")
def argon() -> tuple[Scene, tuple[Walked, ...]]:
    """Of the good procedure with 100 g of argon in a litre."""
    scene = open_scene(read_procedure(GOOD / "argon.yaml"), 101325.0, None)
    return scene, walk(scene)


def line_of(lines: tuple[Walked, ...], verb: type) -> int:
    """The first line with such a path."""
    return next(i for i, line in enumerate(lines) if isinstance(line.verb, verb))


def test_gas_is_filled_at_the_temperature_of_the_room(argon: tuple[Scene, tuple[Walked, ...]]) -> None:
    """No wall is as cold as the boiling liquid; loaded as liquid it is."""
    scene, lines = argon
    assert lines[line_of(lines, Load)].during.cold == scene.room_coldest
    loaded = scene.loaded
    charge = loaded.procedure.charge
    assert isinstance(charge, Charge)
    liquid = loaded.procedure.model_copy(update={"charge": charge.model_copy(update={"loaded_as": "liquid"})})
    other = open_scene(replace(loaded, procedure=liquid), 101325.0, None)
    assert walk(other)[line_of(lines, Load)].during.cold == pytest.approx(87.0, abs=1.0)


def test_filling_bears_the_pressure_of_the_charge(argon: tuple[Scene, tuple[Walked, ...]]) -> None:
    """The open way leads to a cylinder, not to the room: limits are judged at the full pressure, also left alone."""
    scene, lines = argon
    found = look(scene, lines, line_of(lines, Load), with_times=False)
    disc = next(m for m in found.margins if m.limit == "RD1" and m.kind == "pressure")
    assert disc.worst is not None
    assert disc.worst > 60e5
    assert all(f.ends_Pa is not None and f.ends_Pa > 60e5 for f in found.left_alone.futures)


def test_its_let_down_is_no_colder_than_gas_can_make_it(argon: tuple[Scene, tuple[Walked, ...]]) -> None:
    """Some tens of kelvin below the room, far above where argon is liquid."""
    scene, lines = argon
    cold = lines[line_of(lines, LetDownTo)].during.cold
    assert scene.room_coldest - 45.0 < cold < scene.room_coldest - 15.0


def test_boiling_liquid_stays_as_cold_as_it_was() -> None:
    """A charge with liquid is let down to the solid in the open, as before."""
    shipped = Path(__file__).parents[2] / "procedures" / "co2-critical-point.yaml"
    scene = open_scene(read_procedure(shipped), 101325.0, None)
    lines = walk(scene)
    assert lines[line_of(lines, LetDownTo)].during.cold == scene.coldest_in_the_open


def seen(tag: str, what: str, value: float, sequence: int, by: str = "You", closed: bool = True) -> Observation:
    """One reading [SI]."""
    return Observation(tag, what, value, sequence, by, closed)


def test_gas_is_measured_by_what_it_presses(argon: tuple[Scene, tuple[Walked, ...]]) -> None:
    """58.5 bar(g) at 293 K is 101 g in a litre, proved; the plan's most counts until two people said less.

    The ideal gas law would say 97 g: argon is 3 % denser there (compressibility factor 0.96, handbook, from memory).
    """
    scene, _ = argon
    taken = (
        seen("PG2", "pressure", 101325.0, 1, closed=False),
        seen("PG1", "pressure", 151325.0, 2, closed=False),
        seen("TT1", "temperature", 293.15, 3),
        seen("PG1", "pressure", 59.5e5, 4),
    )
    box = charge_box(scene, None, taken, closed=True)
    assert box is not None
    assert box.proved
    assert box.low_kg == pytest.approx(0.1015, rel=0.05)
    assert box.high_kg == pytest.approx(0.106, abs=1e-9)
    other = (*taken, seen("PG1", "pressure", 59.5e5, 5, by="second"))
    both = charge_box(scene, None, other, closed=True)
    assert both is not None
    assert both.high_kg < box.high_kg
    assert both.high_kg == pytest.approx(0.1015, rel=0.05)


def test_without_a_thermometer_nothing_is_known(argon: tuple[Scene, tuple[Walked, ...]]) -> None:
    """A gauge alone, or the low one behind its isolator, proves no charge: the vessel counts as brim-full."""
    scene, _ = argon
    for taken in (
        (seen("PG1", "pressure", 59.5e5, 1),),
        (seen("PG2", "pressure", 1.0e5, 1), seen("TT1", "temperature", 293.15, 2)),
    ):
        box = charge_box(scene, None, taken, closed=True)
        assert box is not None
        assert box.high_kg == scene.brim_full
        assert not box.proved


def test_closing_gas_leans_on_gauge_and_thermometer(argon: tuple[Scene, tuple[Walked, ...]]) -> None:
    """It is not weighed in: what is asked for before the valve is shut is what measures it."""
    scene, lines = argon
    sealing = next(i for i, line in enumerate(lines) if line.seals)
    assert [need.what for need in entry_needs(scene, lines, sealing)] == ["temperature", "pressure"]


def test_a_tube_no_gauge_can_read_leans_on_its_height() -> None:
    """Sealed for good, without a valve: temperature and a proved height. Where a gauge could be, none means blocked."""
    loaded = read_procedure(GOOD / "sf6.yaml")
    tube = open_scene(loaded, 101325.0, None)
    lines = walk(tube)
    warming = next(i for i, line in enumerate(lines) if line.warms)
    plan = plan_line(tube, lines, warming)
    assert [need.what for need in plan.entry_needs] == ["temperature"]
    assert plan.leans_on == ()
    assert plan.needs_charge_proof
    valve = read_procedure(GOOD / "xenon.yaml").apparatus.valves[0].model_copy(update={"joins": ("tube", "outside")})
    procedure = loaded.procedure.model_copy(update={"at_start": loaded.procedure.at_start | {"V1": "shut"}})
    changed = loaded.apparatus.model_copy(update={"valves": (valve,)})
    other = open_scene(replace(loaded, procedure=procedure, apparatus=changed), 101325.0, None)
    blocked = plan_line(other, walk(other), warming)
    assert [need.tag for need in blocked.entry_needs] == ["TT1", "no pressure instrument"]
    assert blocked.leans_on == ("temperature", "charge")


def test_gas_left_by_a_let_down_leans_on_no_agreement(argon: tuple[Scene, tuple[Walked, ...]]) -> None:
    """Before the first let-down gauge and charge have to agree; of what it leaves nobody knows how much there is."""
    scene, lines = argon
    downs = [i for i, line in enumerate(lines) if line.lets_down and line.before.closed]
    assert len(downs) == 2
    leans = [plan_line(scene, lines, i).leans_on for i in downs]
    assert leans[-1] == ()
    needs = [need.what for need in entry_needs(scene, lines, downs[-1])]
    assert needs == ["temperature", "pressure"]
