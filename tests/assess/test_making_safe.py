"""Make safe walked on paper from every line of a procedure."""

from __future__ import annotations

from datetime import date
from pathlib import Path

from runbook.assess.bind import bind
from tests.assess.scenes import loaded

ISSUED = date(2031, 3, 2)


def messages(folder: Path, procedure: dict[str, str], apparatus: dict[str, str]) -> list[str]:
    """What the rule finds."""
    return [f.message for f in bind(loaded(folder, procedure, apparatus), ISSUED).findings if f.rule == "make safe"]


def test_the_shipped_procedure_comes_to_rest_from_every_line(tmp_path: Path) -> None:
    """Nothing is found: every phase it can be in ends at rest, or with everybody away."""
    assert messages(tmp_path, {}, {}) == []


def test_a_source_that_can_be_stuck_on_and_not_be_taken_away(tmp_path: Path) -> None:
    """With a late cut-out and a jacket that stays, switching off is not enough."""
    vessel = {
        "cut_out: 38 degC ± 1 K": "cut_out: 45 degC ± 1 K",
        "taken_away_in_one_motion: true": "taken_away_in_one_motion: false",
    }
    found = messages(tmp_path, {}, vessel)
    assert found
    assert all("RD1" in message and "heat stuck on" in message for message in found)
    assert messages(tmp_path, {}, {"cut_out: 38 degC ± 1 K": "cut_out: 38 degC ± 0.5 K"}) == []
