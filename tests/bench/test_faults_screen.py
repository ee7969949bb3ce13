"""What goes wrong in a rehearsal is chosen from a list, and told in its record, not on its screens."""

from __future__ import annotations

from random import Random

import pytest

from runbook.bench.screens.briefing import BriefingScreen
from runbook.bench.screens.faults import FaultScreen
from runbook.rehearsal.faults import FAULTS, fault_words, parse_fault
from tests.bench import scenes
from tests.bench.pilot import FakePace, running
from tests.bench.svgtext import check_golden


async def test_a_fault_is_chosen_in_a_run() -> None:
    """F in a rehearsal, five rows down, five minutes later: that fault goes to the simulated vessel."""
    pace = FakePace()
    async with running(scenes.plan(scenes.LINES[1:]), pace=pace) as bench:
        await bench.press("f", *["down"] * 6, "m")
        check_golden("faults-80x24", bench.app.export_screenshot())
        await bench.press("enter")

        assert pace.faults == ["gauge stuck@300"]
        assert "gauge stuck" not in bench.text


async def test_nothing_is_chosen_at_the_vessel() -> None:
    """At the vessel the key does nothing."""
    async with running(scenes.plan(scenes.LINES[1:])) as bench:
        await bench.press("f")

        assert not isinstance(bench.screen, FaultScreen)


async def test_what_begins_is_written_down() -> None:
    """The beginning of a fault is an event of the run; no word of it stands on the screen."""
    pace = FakePace()
    async with running(scenes.plan(scenes.LINES[1:]), pace=pace) as bench:
        before = bench.desk.ledger.seq
        pace.begun.append(("gauge stuck", "the high gauge stands still"))
        await bench.app.look()
        await bench.press("f5", "escape")

        assert bench.desk.ledger.seq == before + 1
        assert "stands still" not in bench.text


@pytest.mark.parametrize("one", FAULTS, ids=lambda one: one.name)
def test_every_fault_is_said_in_words(one: object) -> None:
    """Name, what it is, when it begins."""
    assert "5 min after" in fault_words(f"{getattr(one, 'name', '')}@300")


def test_a_drawn_fault_is_not_told() -> None:
    """Whoever rehearses does not know which of them was drawn."""
    fault, _ = parse_fault("random", 3)
    assert fault.name not in fault_words("random")


async def test_the_list_comes_back_to_what_was_chosen() -> None:
    """Opened again it stands at the choice; a drawn moment lies within a quarter of an hour."""
    async with running(pace=FakePace()) as bench:
        chosen: list[str | None] = []
        bench.app.push_screen(FaultScreen("relief early@300", Random(1)), chosen.append)
        await bench.press("m", "m", "m", "enter")

        assert chosen[0] is not None
        fault, after = parse_fault(chosen[0], 0)
        assert fault.name == "relief early"
        assert 0.0 <= after <= 900.0
        assert BriefingScreen.KEYS[0] == ("P C B", "change")
