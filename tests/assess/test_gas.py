"""A charge that comes as gas: as warm as the room, under its pressure from the moment it is filled."""

from __future__ import annotations

from dataclasses import replace
from pathlib import Path

import pytest

from runbook.assess.ahead import look
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
