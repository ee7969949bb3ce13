"""Make safe walked on paper from every line of a procedure."""

from __future__ import annotations

from dataclasses import replace
from datetime import date
from pathlib import Path

from runbook.assess.bind import bind
from runbook.assess.making_safe import making_safe_findings
from runbook.assess.plan_line import plan_line
from runbook.assess.walk import walk
from tests.assess.scenes import loaded, scene

ISSUED = date(2031, 3, 2)


def messages(folder: Path, procedure: dict[str, str], apparatus: dict[str, str]) -> list[str]:
    """What the rule finds."""
    return [f.message for f in bind(loaded(folder, procedure, apparatus), ISSUED).findings if f.rule == "make safe"]


def test_the_shipped_procedure_comes_to_rest_from_every_line(tmp_path: Path) -> None:
    """Nothing is found: every phase it can be in ends at rest, or with everybody away."""
    assert messages(tmp_path, {}, {}) == []


def test_a_source_that_can_be_stuck_on_and_not_be_taken_away(tmp_path: Path) -> None:
    """With a late cut-out and a jacket that stays, switching off is not enough. (The margins say so first: here they
    are taken away, so that only the walk is left to find it.)"""
    vessel = {
        "cut_out: 38 degC ± 1 K": "cut_out: 45 degC ± 1 K",
        "taken_away_in_one_motion: true": "taken_away_in_one_motion: false",
    }
    there = scene(tmp_path, apparatus=vessel)
    lines = walk(there)
    planned = [replace(plan_line(there, lines, i), ahead=()) for i in range(len(lines))]
    found = making_safe_findings(there, lines, planned, "V2", [(1, 1)] * len(lines))
    assert found
    assert all("RD1" in one.message and "heat stuck on" in one.message for one in found)
