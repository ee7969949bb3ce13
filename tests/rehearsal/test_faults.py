"""Faults on purpose: they are physical, they are noticed, and none leads past a limit. `--every-fault` runs all."""

from __future__ import annotations

import asyncio
import json
from pathlib import Path

import pytest

from runbook.commands.rehearse import main
from runbook.errors import InputUnusable
from runbook.rehearsal.faults import FAULTS, find_fault, parse_fault
from runbook.rehearsal.headless import FaultStory, Outcome, rehearse
from tests.assess.scenes import changed_files


def rehearsed(folder: Path, name: str) -> tuple[Outcome, FaultStory]:
    """A rehearsal of the shipped procedure with one fault."""
    outcome = asyncio.run(rehearse(changed_files(folder), 1, faults=[(find_fault(name), 0.0)]))
    assert outcome.fault is not None
    return outcome, outcome.fault


@pytest.mark.parametrize("name", ["over-loaded", "source stuck on", "operator away"])
def test_a_fault_is_lived_through(tmp_path: Path, name: str) -> None:
    """It begins, the operator makes safe, nothing raising was passed against the readings, 110 % of MAWP is never
    reached in the twelve hours after."""
    outcome, story = rehearsed(tmp_path, name)
    assert story.began_s is not None
    assert outcome.outcome == "made safe"
    assert story.acted_s is not None
    assert story.acted_s > story.began_s
    assert story.wrong == ()


def test_a_scale_that_shows_too_little_stops_the_run_before_it_warms(tmp_path: Path) -> None:
    """A quarter more than shown is found by the height, which pressure could not tell: the lesson is not reached."""
    outcome, story = rehearsed(tmp_path, "over-loaded")
    assert outcome.steps_done < 22
    assert story.highest_after < 95e5


def test_a_source_stuck_on_stays_under_the_ceiling(tmp_path: Path) -> None:
    """The cut-out holds it, as check proved: never above 94.848 bar(g)."""
    _, story = rehearsed(tmp_path, "source stuck on")
    assert 80e5 < story.highest_after < 95.9e5


def test_faults_are_named_or_refused() -> None:
    """A name, a moment, or random by the seed; anything else is told with the nearest name."""
    assert parse_fault("gauge stuck@600", 1) == (find_fault("gauge stuck"), 600.0)
    assert parse_fault("random", 5) == parse_fault("random", 5)
    assert len({parse_fault("random", seed)[0].name for seed in range(60)}) > 8
    with pytest.raises(InputUnusable, match="did you mean 'slow leak'"):
        parse_fault("slow leek", 1)
    with pytest.raises(InputUnusable, match="seconds"):
        parse_fault("slow leak@soon", 1)


def test_the_command_tells_the_story(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    """The documented keys stay, and the fault's own object comes with them; exit 1, for it was not completed."""
    code = main([str(changed_files(tmp_path)), "--headless", "--fault", "operator away", "--json"])
    found = json.loads(capsys.readouterr().out)
    assert code == 1
    assert list(found)[:7] == [
        "outcome", "reason", "steps_done", "duration_s", "highest_pressure_Pa", "least_margin_Pa", "events",
    ]  # fmt: skip
    assert found["fault"]["name"] == "operator away"
    assert found["fault"]["noticed_s"] > found["fault"]["began_s"]
    assert main([str(changed_files(tmp_path)), "--fault", "list"]) == 0
    assert capsys.readouterr().out.count("\n") == len(FAULTS)
