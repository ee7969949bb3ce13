"""The end of a run: how it ended, where its record lies, and the record itself to read."""

from __future__ import annotations

from collections.abc import Iterable
from typing import ClassVar

from textual.binding import Binding, BindingType
from textual.containers import VerticalScroll
from textual.widget import Widget

from runbook.bench.place import Keys, Place
from runbook.bench.rows import EMPTY, Row, wrapped
from runbook.bench.widgets.lines import Lines


class RecordScreen(Place[None]):
    """Read, then leave."""

    HEADING = "RECORD"
    KEYS: ClassVar[Keys] = (("PgDn PgUp", "turn"), ("Enter", "leave"))
    BINDINGS: ClassVar[list[BindingType]] = [
        Binding("enter", "leave", show=False),
        Binding("escape", "leave", show=False),
        Binding("pagedown", "scroll(1)", show=False),
        Binding("pageup", "scroll(-1)", show=False),
        Binding("down", "scroll_row(1)", show=False),
        Binding("up", "scroll_row(-1)", show=False),
    ]

    def __init__(self, outcome: str, where: str, lines: tuple[str, ...]) -> None:
        """How it ended, the journal, the account."""
        super().__init__()
        self._outcome = outcome
        self._where = where
        self._lines = lines

    def heading(self) -> str:
        """How the run ended."""
        return f"RECORD: {self._outcome.upper()}"

    def body(self) -> Iterable[Widget]:
        """The account."""
        yield VerticalScroll(Lines(self._rows), can_focus=False)

    def _rows(self, width: int) -> list[Row]:
        where = self._where or "No record was kept of this rehearsal."
        rows = [*wrapped(f" {where}", width - 1, "strong"), EMPTY]
        for line in self._lines:
            rows += wrapped(f" {line}", width - 1) or [EMPTY]
        return rows

    def action_scroll(self, pages: int) -> None:
        """A page on or back."""
        scroll = self.query_one(VerticalScroll)
        scroll.scroll_relative(y=pages * max(1, scroll.size.height - 1), animate=False)

    def action_scroll_row(self, rows: int) -> None:
        """A row on or back."""
        self.query_one(VerticalScroll).scroll_relative(y=rows, animate=False)

    def action_leave(self) -> None:
        """Out."""
        self.dismiss(None)
