"""Make safe: the first act big, one key to confirm each, what never to do, and whether it is recorded."""

from __future__ import annotations

import time
from collections.abc import Iterable
from typing import TYPE_CHECKING, ClassVar

from textual import events
from textual.containers import VerticalScroll
from textual.widget import Widget

from runbook.bench.acting import do
from runbook.bench.place import Keys
from runbook.bench.rows import EMPTY, Row, beside, padded, row, wrapped
from runbook.bench.run_place import RunPlace
from runbook.bench.style import ARM_S
from runbook.bench.viewing import run_view
from runbook.bench.widgets.lines import Lines
from runbook.bench.widgets.margins import Margins
from runbook.run.acts import Act, Finish, MakeSafe, SafeActDone

if TYPE_CHECKING:
    from runbook.run.conductor import Conductor

_SEEN = {"g": "relief", "w": "window", "f": "fire"}
"""Key -> what a person sees that the tool cannot."""
_SEES = (
    ("G", "gas escaping, relief open, disc burst"),
    ("W", "a mark, a crack or frost on a window; a joint that weeps"),
    ("F", "fire, a gas alarm, somebody hurt"),
)


class SafeScreen(RunPlace):
    """Over everything until the vessel is at rest or everybody is away."""

    HEADING = "MAKE SAFE"
    KEYS: ClassVar[Keys] = (("Enter", "this is done"), ("F3", "read"), ("F5", "note"), ("F8", "valves"))

    def __init__(self, desk: Conductor) -> None:
        """The acts of the run of `desk`."""
        super().__init__(desk)
        self._desk = desk
        self._said = ""
        self._since = time.monotonic()

    def body(self) -> Iterable[Widget]:
        """The acts, then what never to do."""
        yield VerticalScroll(Lines(self._rows, id="acts"), can_focus=False)
        yield Margins(self.bench.glyphs)

    def update_run(self) -> None:
        """The acts as they stand now."""
        self.query_one("#acts", Lines).refresh(layout=True)
        self.query_one(Margins).show(run_view(self._desk, self.bench.rehearsal_mark))
        self.refresh_lines()

    @property
    def undone(self) -> list[int]:
        """Items not yet confirmed, in order."""
        ledger = self._desk.ledger
        return [] if ledger.safe is None else [i for i in range(len(ledger.safe.acts)) if i not in ledger.safe_done]

    def header_row(self, width: int) -> Row:
        """MAKE SAFE, and NOT RECORDED for as long as it is not on the disk."""
        mark = self.bench.rehearsal_mark
        right = row(("NOT RECORDED ", "loud")) if self._desk.not_recorded else row(("recorded ", "dim"))
        return beside(row((f" {mark} " if mark else "", "rehearsal"), " ", (" MAKE SAFE ", "make safe")), right, width)

    def _rows(self, width: int) -> list[Row]:
        ledger = self._desk.ledger
        safe = ledger.safe
        if safe is None:
            return [EMPTY, *wrapped(" The acts are on their way.", width - 1)]
        undone = self.undone
        rows: list[Row] = []
        for i, act in enumerate(safe.acts):
            if undone and i == undone[0]:
                rows += _big(f"{i + 1}  {act}", width)
            elif i in undone:
                rows += [EMPTY, *wrapped(f"   {i + 1}  then: {act}", width - 1, "strong")]
            else:
                rows += wrapped(f"   {i + 1}  done: {act}", width - 1, "dim")
        if safe.never:
            rows += [EMPTY, *wrapped(f" {safe.never}", width - 1, "blocked")]
        may_wait = self._desk.standing().safe.may_wait
        if may_wait:
            rows += wrapped(f" May one wait? {may_wait.capitalize()}.", width - 1)
        if not undone:
            rows += [EMPTY, *_big("All acts are confirmed. Enter ends the run.", width)]
        if ledger.halted:
            rows += [EMPTY, *wrapped(f" THE RUN IS HALTED: {ledger.halted}", width - 1, "blocked")]
        rows.append(EMPTY)
        for key, words in _SEES:
            rows.append(row(" ", (key, "key"), f"  if you see {words}"))
        rows += wrapped(f" {self._said}", width - 1, "blocked") if self._said else []
        return _closer(rows, self.query_one(VerticalScroll).size.height)

    async def on_key(self, event: events.Key) -> None:
        """One key an act; nothing to type. Digits open the reading field as everywhere."""
        if event.key == "enter":
            event.stop()
            if time.monotonic() - self._since < ARM_S:
                # Meant for what stood here before.
                return
            await self._do(SafeActDone(self.undone[0]) if self.undone else Finish())
        elif (seen := _SEEN.get((event.character or "").lower())) is not None:
            event.stop()
            await self._do(MakeSafe(seen))

    async def _do(self, act: Act) -> None:
        self._said = await do(self._desk, act)
        self.bench.paint_screen(self)


def _closer(rows: list[Row], height: int) -> list[Row]:
    """`rows` without as many blank rows, the last first, as it takes to show all of them at once."""
    kept = list(rows)
    for i in range(len(rows) - 1, -1, -1):
        if len(kept) <= height:
            break
        if rows[i] is EMPTY:
            del kept[i]
    return kept


def _big(text: str, width: int) -> list[Row]:
    """Reversed, with a blank row above and below, so that it is read from across the room."""
    blank = padded(EMPTY, width - 2, "loud")
    lines = [padded(one, width - 2, "loud") for one in wrapped(f"  {text}", width - 4, "loud")]
    return [EMPTY, *(Row(((" ", "plain"), *one.spans)) for one in (blank, *lines, blank))]
