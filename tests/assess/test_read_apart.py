"""Gauge and model are compared where both readings are of the same vessel: not across a step that moved it."""

from __future__ import annotations

from dataclasses import replace
from pathlib import Path

from runbook.answers import ChargeBox
from runbook.assess.now import answer
from runbook.assess.walk import walk
from tests.assess.scenes import observed, question, scene

CHARGE = ChargeBox(0.115, 0.119, True, ("plan",))


def _verdict(folder: Path, wall_line: str, gauge_line: str, gauge: float) -> tuple[str, str]:
    place = scene(folder, charge=CHARGE)
    lines = walk(place)
    at = {line.number: i for i, line in enumerate(lines)}
    wall = replace(observed("temperature", 299.15, 9), line=at[wall_line])
    read = replace(observed("pressure", gauge, 8), line=at[gauge_line])
    here = max(at[wall_line], at[gauge_line])
    found = answer(place, lines, question(here, here + 1, (read, wall), charge=CHARGE)).agreement
    return found.verdict, found.proves


def test_a_gauge_read_before_the_cooling_says_nothing_after_it(tmp_path: Path) -> None:
    """76.5 bar at 33 degC and 26 degC after the jacket was filled are both right: no disagreement, and no agreement."""
    assert _verdict(tmp_path, "4.3", "3.4", 77.5e5) == ("cannot tell", "read apart")
    assert _verdict(tmp_path, "4.3", "4.3", 77.5e5)[0] == "disagrees"


def test_lines_that_move_nothing_part_no_readings(tmp_path: Path) -> None:
    """Read in one step at rest and in the next, the two are compared as ever."""
    assert _verdict(tmp_path, "4.3", "4.2", 77.5e5)[0] == "disagrees"


def test_cooling_counts_the_colder_of_target_and_water(tmp_path: Path) -> None:
    """Water at 25 degC in the jacket can bring the wall to 25, though the step ends at 30."""
    lines = {line.number: line for line in walk(scene(tmp_path))}
    assert lines["3.6"].during.cold <= 298.15
