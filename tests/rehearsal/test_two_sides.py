"""What a thermometer of the simulated vessel has before it, by where its file puts it; what the colder side shows."""

from __future__ import annotations

from pathlib import Path

import pytest

from runbook.assess.bind import plan_of
from runbook.assess.scene import open_scene
from runbook.procedure.reader import read_procedure
from runbook.rehearsal.lesson import Lesson
from runbook.rehearsal.lots import middle
from tests.assess.scenes import changed_files

LESSON = 2
"""The part of the shipped procedure that warms with the jacket."""
WARMING_S = 720.0
"""Into it [s]: the jacket has been on for some ten minutes."""


def warming(folder: Path, apparatus: dict[str, str] | None = None) -> Lesson:
    """The shipped lesson while the jacket warms the cell."""
    loaded = read_procedure(changed_files(folder, {}, apparatus))
    scene = open_scene(loaded, 101325.0, None)
    plan = plan_of(scene, loaded.procedure.issue.date)
    lesson = Lesson(middle(scene, plan), LESSON)
    line = next(i for i, x in enumerate(plan.lines) if x.part == LESSON and "Warm the cell" in x.text)
    lesson.put(line, "V2", "shut")
    lesson.wait(WARMING_S)
    return lesson


@pytest.mark.parametrize("place", ["wall", "fluid", "bath", "room air"])
def test_a_thermometer_has_before_it_what_its_file_says(tmp_path: Path, place: str) -> None:
    """On the wall it is on the side that is heated, and ahead of the charge; in the fluid it is the charge's."""
    world = warming(tmp_path, {"reads: temperature, of: wall": f"reads: temperature, of: {place}"}).world
    shown, vessel = world.truth()["TT1"], world.vessel
    assert vessel.far_K is not None
    assert vessel.far_K < world.temperature() < vessel.body_K < vessel.source_K
    wanted = {"wall": vessel.body_K, "fluid": world.temperature(), "bath": vessel.source_K, "room air": world.room_K}
    assert shown == wanted[place]
    assert world.wall() == (vessel.far_K, vessel.body_K)


def test_while_it_warms_drops_run_down_the_windows(tmp_path: Path) -> None:
    """The windows are behind the charge: its vapour condenses there, until there is no vapour beside liquid."""
    lesson = warming(tmp_path)
    assert lesson.world.drops_seen
    assert lesson.world.seen.endswith("of it, drops on the windows")
    while lesson.world.liquid_seen and lesson.clock < 7200.0:
        lesson.wait(30.0)
    assert not lesson.world.drops_seen


def test_a_bath_is_all_around(tmp_path: Path) -> None:
    """What stands in a bath of water has no side that it does not touch."""
    world = warming(tmp_path, {"kind: water jacket": "kind: water bath"}).world
    assert world.vessel.far_K is None
    assert world.wall() == (world.temperature(), world.vessel.body_K)
    assert not world.drops_seen
