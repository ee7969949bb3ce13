"""The simulated bench does what the run says was done, however seldom it looks."""

from __future__ import annotations

from dataclasses import replace
from datetime import date
from pathlib import Path

from runbook.assess.bind import plan_of
from runbook.assess.walk import walk
from runbook.procedure.model import Load
from runbook.rehearsal.world import World
from runbook.run.clock import Moment
from runbook.run.state import Ledger, Stated
from tests.assess.scenes import scene


def test_a_load_passed_between_two_looks_is_in_the_vessel(tmp_path: Path) -> None:
    """Two quick presses of Enter take the run past the line that loads; the dry ice is in all the same."""
    there = scene(tmp_path)
    lines = walk(there)
    world = World(there, lines, plan_of(there, date(2031, 3, 2), lines), 1, Moment(0.0, 0.0))
    loading = next(i for i, line in enumerate(lines) if isinstance(line.verb, Load))
    stated = {tag: Stated(position, 0, 0) for tag, position in lines[loading + 2].before.valves.items()}
    world.follow(replace(Ledger.start(), line=loading + 2, source="unplugged", stated=stated))
    world.move_to(Moment(1.0, 1.0))
    shown = world.read("BS1")
    assert shown is not None
    assert 0.135 < shown < 0.145
