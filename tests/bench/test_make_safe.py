"""Make safe: one key from everywhere, over everything, never refused, drawn before it is written."""

from __future__ import annotations

import asyncio
from collections.abc import Mapping
from pathlib import Path

import pytest

from runbook.bench.screens.gap import GapScreen
from runbook.bench.screens.hold import HoldScreen
from runbook.bench.screens.leave import LeaveScreen
from runbook.bench.screens.note import NotePanel
from runbook.bench.screens.pages import KeysScreen, PicturesScreen
from runbook.bench.screens.quick import QuickScreen
from runbook.bench.screens.read import ReadPanel
from runbook.bench.screens.safe import SafeScreen
from runbook.bench.screens.state import StatePanel
from runbook.errors import JournalBroken
from runbook.run.clock import Moment
from runbook.run.events import GapOpened, MadeSafe, RunClosed
from runbook.run.journal import JournalWriter, Record
from runbook.run.journal_file import Journal
from tests.bench import scenes
from tests.bench.pilot import Bench, arm_at_once, running
from tests.bench.svgtext import check_golden

OPENERS = {
    "run": (),
    "reading": ("f3",),
    "half-typed reading": ("f3", "6", "2"),
    "echoed reading": ("f3", "6", "2", "enter"),
    "note": ("f5",),
    "half-typed note": ("f5", "a", "b"),
    "pictures": ("f6",),
    "keys": ("f2",),
    "valves": ("f8",),
    "leave": ("escape",),
    "leave by ctrl+q": ("ctrl+q",),
    "hold": ("enter", "f4"),
    "half-typed number": ("enter", "f4", "9"),
}
SCREENS = {
    "reading": ReadPanel, "note": NotePanel, "pictures": PicturesScreen, "keys": KeysScreen, "valves": StatePanel,
    "leave": LeaveScreen, "leave by ctrl+q": LeaveScreen, "hold": HoldScreen,
}  # fmt: skip


@pytest.mark.parametrize("where", OPENERS)
async def test_f9_from_everywhere(where: str) -> None:
    """From every screen, panel and half-typed field one press shows the first act, and the run is making safe."""
    async with running() as bench:
        await bench.press(*OPENERS[where])
        assert isinstance(bench.screen, SCREENS.get(where, type(bench.screen)))
        await bench.pilot.press("f9")
        await bench.pilot.pause()

        assert isinstance(bench.screen, SafeScreen)
        assert "HEAT OFF: switch H1 off." in bench.text
        assert bench.desk.ledger.safe is not None


@pytest.mark.parametrize("opener", [("f3",), ("f5",), ("enter", "f4")], ids=["reading", "note", "hold"])
async def test_the_word_for_it_in_any_field(opener: tuple[str, ...]) -> None:
    """Where function keys do not arrive, the word with Enter in any field does the same."""
    async with running() as bench:
        await bench.press(*opener, *"Safe", "enter")

        assert isinstance(bench.screen, SafeScreen)
        assert bench.desk.ledger.safe is not None


async def test_f9_in_a_gap_and_in_a_quick_sequence() -> None:
    """Also while four questions are open, and between two quick steps."""
    async with running(scenes.plan(scenes.LINES[3:])) as bench:
        await bench.press("enter")
        assert isinstance(bench.screen, QuickScreen)
        await bench.press("f9")
        assert isinstance(bench.screen, SafeScreen)
    async with running() as bench:
        await bench.desk._write(GapOpened("the child was lost"))
        await bench.settle()
        assert isinstance(bench.screen, GapScreen)
        await bench.press("f9")
        assert isinstance(bench.screen, SafeScreen)


async def test_acts_are_confirmed_one_by_one(monkeypatch: pytest.MonkeyPatch) -> None:
    """Enter confirms the first act that is left; after the last it ends the run as made safe."""
    arm_at_once(monkeypatch)
    async with running() as bench:
        await bench.press("f9")
        check_golden("safe-first-80x24", bench.app.export_screenshot())
        acts = bench.desk.ledger.safe.acts if bench.desk.ledger.safe else ()
        for i in range(len(acts)):
            await bench.press("enter")
            assert len(bench.desk.ledger.safe_done) == i + 1
        assert "All acts are confirmed" in bench.text
        await bench.press("enter")

        assert bench.desk.ledger.outcome == "made safe"


async def test_an_enter_meant_for_something_else_confirms_nothing() -> None:
    """An Enter in the same moment as F9 was meant for the screen before: no act is confirmed by it."""
    async with running() as bench:
        await bench.press("f3", "6", "2", "f9", "enter")

        assert bench.desk.ledger.safe is not None
        assert bench.desk.ledger.safe_done == frozenset()


@pytest.mark.parametrize(("key", "phase"), [("g", "F"), ("w", "I"), ("f", "J")])
async def test_what_a_person_sees(key: str, phase: str) -> None:
    """Gas, a mark on a window, fire: one key each brings the acts of that phase."""
    async with running() as bench:
        await bench.press("f9", key)

        assert bench.desk.ledger.safe is not None
        assert bench.desk.ledger.safe.phase == phase


async def test_reading_and_notes_go_on() -> None:
    """While making safe readings and notes are taken as before, and F9 from their panels comes back to the acts."""
    async with running() as bench:
        await bench.press("f9", "2")
        assert isinstance(bench.screen, ReadPanel)
        await bench.press("f9")
        assert isinstance(bench.screen, SafeScreen)
        assert len([s for s in bench.app.screen_stack if isinstance(s, SafeScreen)]) == 1


class _SlowJournal(JournalWriter):
    """A journal whose disk answers when it is told to."""

    def __init__(self, journal: Journal) -> None:
        super().__init__(journal)
        self.slow = asyncio.Event()
        self.slow.set()
        self.fails = False

    async def append(self, kind: str, data: Mapping[str, object], now: Moment, version: int = 1) -> Record:
        """Wait, then write or fail."""
        await self.slow.wait()
        if self.fails:
            raise JournalBroken("the disk is full")
        return await super().append(kind, data, now, version)


async def _with_journal(bench: Bench, folder: Path) -> _SlowJournal:
    journal = _SlowJournal(Journal.create(folder / "run.jsonl"))
    bench.desk.journal = journal
    return journal


async def test_drawn_first_and_written_when_it_can_be(tmp_path: Path) -> None:
    """With a disk that hangs the acts stand there at once, NOT RECORDED beside them until they are written."""
    async with running() as bench:
        journal = await _with_journal(bench, tmp_path)
        journal.slow.clear()
        await bench.pilot.press("f9")
        await bench.pilot.pause()
        assert "HEAT OFF: switch H1 off." in bench.text
        assert "NOT RECORDED" in bench.rows[0]
        journal.slow.set()
        await bench.settle()

        assert "NOT RECORDED" not in bench.text
        assert "recorded" in bench.rows[0]


async def test_a_broken_disk_does_not_block_it(tmp_path: Path) -> None:
    """When nothing can be written any more the acts stay, and it is said that the run is halted."""
    async with running() as bench:
        journal = await _with_journal(bench, tmp_path)
        journal.fails = True
        await bench.press("f9")

        assert "HEAT OFF: switch H1 off." in bench.text
        assert "NOT RECORDED" in bench.rows[0]
        assert "THE RUN IS HALTED" in bench.text


async def test_without_a_run_it_says_what_can_be_said() -> None:
    """After the end of a run F9 changes nothing in it and does not fail."""
    async with running() as bench:
        await bench.desk._write(MadeSafe("C", (), "", ""))
        await bench.desk._write(RunClosed("made safe"))
        await bench.settle()
        await bench.press("f9")

        assert bench.desk.ledger.outcome == "made safe"


async def test_what_a_person_may_see_is_not_scrolled_away() -> None:
    """On 24 rows every act and every key for what one sees stands on the screen at once."""
    async with running() as bench:
        await bench.press("enter", "f9")
        for word in ("HEAT OFF", "WALK AWAY", "G  if you see", "W  if you see", "F  if you see", "CEILING"):
            assert word in bench.text, word
