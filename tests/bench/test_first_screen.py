"""The first screen waits for nothing but the toolkit, and what screens leave behind does not grow."""

from __future__ import annotations

import gc
import subprocess
import sys
from collections import Counter
from pathlib import Path

import pytest

import runbook
from runbook.bench import app as app_module
from runbook.bench.app import BenchApp
from runbook.bench.journey import Session
from runbook.bench.screens.listing import Entry
from runbook.bench.screens.opening import OpeningScreen
from runbook.errors import InputUnusable
from tests.bench.pilot import running
from tests.bench.svgtext import rows_of

CODE = """
import sys
import runbook.__main__, runbook.commands.listing, runbook.bench.launch, runbook.bench.journey
import runbook.bench.screens.opening, runbook.commands.bench, runbook.commands.rehearse
print([name for name in ("pydantic", "yaml", "runbook.answers", "runbook.run") if name in sys.modules])
"""


def test_the_first_screen_imports_no_models() -> None:
    """What stands before the first paint brings in no models, no YAML and nothing of a run: they take 0.3 s."""
    done = subprocess.run(
        [sys.executable, "-c", CODE],
        capture_output=True,
        text=True,
        check=False,
        cwd=Path(runbook.__file__).parents[1],
    )

    assert done.returncode == 0, done.stderr
    assert done.stdout.strip() == "[]"


async def test_closed_screens_leave_nothing_behind() -> None:
    """Thirty screens opened and closed leave no painted rows after tidying up: collecting them would hold up a key."""
    async with running() as bench:

        async def strips_after(rounds: int) -> int:
            for _ in range(rounds):
                await bench.press("f2", "escape")
            app_module._tidy()
            return Counter(type(one).__name__ for one in gc.get_objects())["Strip"]

        before = await strips_after(2)
        assert await strips_after(30) < before + 30


async def test_a_named_file_is_on_the_screen_while_it_is_read() -> None:
    """A procedure named on the command line stands on the first screen, foreign text as it is."""

    async def journey(app: BenchApp) -> int:
        app.push_screen(OpeningScreen(Entry("rehearse", "A [b]name[/b]", "", "[x].yaml")))
        await app.ended.wait()
        return 0

    app = BenchApp(journey, drop_stalled=False)
    async with app.run_test(size=(80, 24)) as pilot:
        await pilot.pause()
        text = "\n".join(rows_of(app.export_screenshot()))
    assert "A [b]name[/b]" in text
    assert "[x].yaml" in text
    assert "F9 MAKE SAFE" in text


async def test_what_cannot_be_used_ends_the_session_with_its_sentence(tmp_path: Path) -> None:
    """A named file that cannot be read ends the screens and is told afterwards, without a traceback."""
    missing = tmp_path / "missing.jsonl"
    session = Session(tmp_path, "2031-03-02", start=Entry("resume", "missing", "", str(missing)))
    app = BenchApp(session, drop_stalled=False)
    async with app.run_test(size=(80, 24)) as pilot:
        for _ in range(2000):
            await pilot.pause()
            if app.failed is not None:
                break
    assert app.failed is not None
    assert "missing.jsonl" in str(app.failed)


async def test_a_session_that_cannot_begin_is_told(tmp_path: Path) -> None:
    """An error of ours in a session becomes its exit code and its sentence."""

    async def journey(app: BenchApp) -> int:
        raise InputUnusable("that is no use")

    app = BenchApp(journey, drop_stalled=False)
    async with app.run_test() as pilot:
        await pilot.pause()
    assert app.return_value == 2
    with pytest.raises(InputUnusable):
        raise app.failed or AssertionError("nothing was kept")
