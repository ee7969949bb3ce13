"""A screen that is painted before its rows are there: nothing is lost, and nobody meets a traceback."""

from __future__ import annotations

import pytest
from textual.css.query import NoMatches

from runbook.bench.screens.safe import SafeScreen
from tests.bench.pilot import running


async def test_painting_before_the_rows_are_there(monkeypatch: pytest.MonkeyPatch) -> None:
    """The first paint fails for want of rows, the next one shows the acts."""
    tries = []
    paint = SafeScreen.update_run

    def too_early(self: SafeScreen) -> None:
        tries.append(1)
        if len(tries) == 1:
            raise NoMatches("no rows yet")
        paint(self)

    monkeypatch.setattr(SafeScreen, "update_run", too_early)
    async with running() as bench:
        await bench.press("f9")
        assert isinstance(bench.screen, SafeScreen)
        assert len(tries) > 1
        assert "HEAT OFF: switch H1 off." in bench.text
