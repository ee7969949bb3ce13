"""A quick sequence: a few steps on one screen, Enter for each, a countdown, and the act when its time has passed."""

from __future__ import annotations

import time
from collections.abc import Iterable
from typing import TYPE_CHECKING, ClassVar

from textual import events
from textual.widget import Widget

from runbook.answers import PlanLine
from runbook.bench.acting import do
from runbook.bench.place import Keys, Place
from runbook.bench.rows import EMPTY, Row, padded, row, wrapped
from runbook.bench.style import ARM_S
from runbook.bench.widgets.lines import Lines
from runbook.run.acts import QuickDone
from runbook.run.clock import Moment
from runbook.run.state import Ledger

if TYPE_CHECKING:
    from runbook.run.conductor import Conductor


def seconds_left(ledger: Ledger, line: PlanLine, now: Moment) -> float:
    """Until the present item's latest time [s]; negative when it has passed."""
    done = ledger.entry.quick
    since = done[-1].at if done else ledger.entry.at
    return line.quick[len(done)].latest_s - now.lasted(since)


def countdown(seconds: float) -> str:
    """'1 min 05 s left', or how long ago the latest time passed."""
    whole = int(abs(seconds))
    minutes, rest = divmod(whole, 60)
    words = f"{minutes} min {rest:02d} s" if minutes else f"{rest} s"
    return f"{words} left" if seconds >= 0.0 else f"LATE by {words}"


class QuickScreen(Place[None]):
    """Shown for as long as the run stands in a quick sequence with items to confirm."""

    HEADING = "QUICK SEQUENCE: nothing between these may be missed out or waited for"
    KEYS: ClassVar[Keys] = (("Enter", "done, next"), ("Esc", "leave the tool"))

    def __init__(self, desk: Conductor) -> None:
        """The line in which the run of `desk` stands."""
        super().__init__()
        self._desk = desk
        self._line = desk.ledger.present
        self._said = ""
        self._since = time.monotonic()

    def body(self) -> Iterable[Widget]:
        """All items, the present one large."""
        yield Lines(self._rows, id="items")

    def update_run(self) -> None:
        """The countdown as it is now; gone when all is confirmed or the run is elsewhere."""
        ledger = self._desk.ledger
        if self._line is None or ledger.present is not self._line or len(ledger.entry.quick) >= len(self._line.quick):
            if self.is_current:
                self.dismiss(None)
            return
        self.query_one("#items", Lines).refresh(layout=True)
        self.refresh_lines()

    def _rows(self, width: int) -> list[Row]:
        ledger, line = self._desk.ledger, self._line
        if line is None:
            return []
        done = len(ledger.entry.quick)
        rows: list[Row] = []
        for i, item in enumerate(line.quick):
            rows.append(EMPTY)
            if i < done:
                late = ", late" if ledger.entry.quick[i].late else ""
                rows += wrapped(f" {i + 1}  done{late}: {item.text}", width - 1, "dim")
            elif i > done:
                rows += wrapped(f" {i + 1}  then: {item.text}", width - 1)
            else:
                rows += self._present(i + 1, item.text, item.if_not, seconds_left(ledger, line, self._now()), width)
        return rows + (wrapped(f" {self._said}", width - 1, "blocked") if self._said else [])

    def _present(self, number: int, text: str, if_not: str, left: float, width: int) -> list[Row]:
        late = left < 0.0
        rows = [padded(one, width - 1, "loud") for one in wrapped(f" {number}  {text}", width - 2, "strong")]
        rows.append(row(("    ", "plain"), (countdown(left), "blocked" if late else "strong")))
        words = f"    {'NOW: ' if late else 'If not by then: '}{if_not}"
        return rows + wrapped(words, width - 1, "loud" if late else "plain")

    def _now(self) -> Moment:
        return self._desk.clock.now()

    async def on_key(self, event: events.Key) -> None:
        """Enter confirms the present item, but not in the same press as the one before it."""
        if event.key == "escape":
            event.stop()
            await self.run_action("app.quit")
        elif event.key == "enter":
            event.stop()
            if time.monotonic() - self._since < ARM_S:
                return
            self._since = time.monotonic()
            await self._confirm()

    async def _confirm(self) -> None:
        self._said = await do(self._desk, QuickDone(len(self._desk.ledger.entry.quick)))
        self.update_run()
