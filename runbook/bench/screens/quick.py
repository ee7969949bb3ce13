"""A quick sequence: a few steps on one screen, Enter for each, a countdown, and the act when its time has passed."""

from __future__ import annotations

import time
from collections.abc import Iterable
from typing import TYPE_CHECKING, ClassVar

from textual import events
from textual.binding import BindingType
from textual.containers import VerticalScroll
from textual.widget import Widget

from runbook.bench.acting import do
from runbook.bench.pacing import PACE_KEYS, turn_clock
from runbook.bench.place import Keys, Place
from runbook.bench.rows import EMPTY, Row, padded, wrapped
from runbook.bench.style import ARM_S
from runbook.bench.viewing import run_view
from runbook.bench.widgets.lines import Lines
from runbook.bench.widgets.margins import Margins
from runbook.run.acts import QuickDone
from runbook.run.sentences import duration
from runbook.run.sight_words import seen_now
from runbook.run.standing import QuickState

if TYPE_CHECKING:
    from runbook.run.conductor import Conductor


class QuickScreen(Place[None]):
    """Shown for as long as the run stands in a quick sequence with items to confirm."""

    HEADING = "QUICK SEQUENCE: nothing between these may be missed out or waited for"
    KEYS: ClassVar[Keys] = (("Enter", "done, next"), ("Esc", "leave the tool"))
    BINDINGS: ClassVar[list[BindingType]] = [*PACE_KEYS]

    def __init__(self, desk: Conductor) -> None:
        """The line in which the run of `desk` stands."""
        super().__init__()
        self._desk = desk
        self._line = desk.ledger.present
        self._said = ""
        self._since = time.monotonic()

    def body(self) -> Iterable[Widget]:
        """All items, the present one large."""
        yield VerticalScroll(Lines(self._rows, id="items"), can_focus=False)
        yield Margins(self.bench.glyphs)

    def update_run(self) -> None:
        """The countdown as it is now; gone when all is confirmed or the run is elsewhere."""
        ledger = self._desk.ledger
        if self._line is None or ledger.present is not self._line or len(ledger.entry.quick) >= len(self._line.quick):
            if self.is_current:
                self.dismiss(None)
            return
        self.query_one("#items", Lines).refresh(layout=True)
        self.query_one(Margins).show(run_view(self._desk, self.bench.rehearsal_mark))
        self.refresh_lines()

    def _rows(self, width: int) -> list[Row]:
        rows: list[Row] = []
        for i, item in enumerate(self._desk.standing().quick):
            rows.append(EMPTY)
            if item.done:
                rows += wrapped(f" {i + 1}  done{', late' if item.late else ''}: {item.text}", width - 1, "dim")
            elif item.left_s is None:
                rows += wrapped(f" {i + 1}  then: {item.text}", width - 1)
            else:
                rows += _present(i + 1, item, item.left_s, width)
        rows += self._simulated(width)
        rows += wrapped(f" {self._said}", width - 1, "blocked") if self._said else []
        # Last, for it is the first to go where there is no room.
        first = next(iter(seen_now(self._desk.standing())), None)
        return rows + ([EMPTY, *wrapped(f" SEE  {first.words}", width - 1)] if first is not None else [])

    def _simulated(self, width: int) -> list[Row]:
        """What one looks at with hands on the valve: the scale until the vessel is closed, then gauge and sight."""
        pace = self.bench.pace
        if pace is None or self._line is None:
            return []
        done = len(self._desk.ledger.entry.quick)
        closing = not any(item.seals for item in self._line.quick[:done])
        wanted = "mass" if closing else "pressure"
        dials = [one for one in self._desk.plan.instruments if one.reads == wanted]
        shown = [f"{one.tag} shows {dial} {one.unit}" for one in dials if (dial := pace.dial(one.tag)) is not None]
        shown += [f"in the vessel: {pace.seen}"] if pace.seen and not closing else []
        return [EMPTY, *wrapped(" simulated: " + ", ".join(shown), width - 1, "rehearsal")] if shown else []

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

    def action_pace(self, what: str) -> None:
        """The clock of a rehearsal."""
        self._said = turn_clock(self.bench, self._desk, what)
        self.bench.paint_screen(self)

    async def _confirm(self) -> None:
        self._said = await do(self._desk, QuickDone(len(self._desk.ledger.entry.quick)))
        self.bench.paint_screen(self)


def _present(number: int, item: QuickState, left: float, width: int) -> list[Row]:
    late = left < 0.0
    rows = [padded(one, width - 1, "loud") for one in wrapped(f" {number}  {item.text}", width - 2, "strong")]
    rows += wrapped(f"    {f'LATE by {duration(left)}' if late else f'{duration(left)} left'}", width - 1, "strong")
    words = f"    {'NOW: ' if late else 'If not by then: '}{item.if_not}"
    return rows + wrapped(words, width - 1, "loud" if late else "plain")
