"""What stands on the screen while a named procedure or run is being opened."""

from __future__ import annotations

from collections.abc import Iterable
from typing import ClassVar

from textual.binding import Binding, BindingType
from textual.widget import Widget

from runbook.bench.place import Keys, Place
from runbook.bench.rows import EMPTY, Row, wrapped
from runbook.bench.screens.listing import Entry
from runbook.bench.widgets.lines import Lines

WORDS = {
    "rehearse": "The procedure is being read; the rehearsal begins with its briefing.",
    "bench": "The procedure is being read; the run begins with its briefing.",
    "resume": "The run's record is being read. What it says about the vessel comes next.",
}
"""Kind of entry -> what happens."""


class OpeningScreen(Place[None]):
    """Title and file; there is nothing to do here but leave."""

    KEYS: ClassVar[Keys] = (("Esc", "leave"),)
    BINDINGS: ClassVar[list[BindingType]] = [Binding("escape", "app.quit", show=False)]

    def __init__(self, entry: Entry) -> None:
        """What is being opened."""
        super().__init__()
        self._entry = entry

    def on_mount(self) -> None:
        """What takes time waits until this stands."""
        self.bench.stands()

    def heading(self) -> str:
        """The procedure's name, or that of the record."""
        return self._entry.title

    def body(self) -> Iterable[Widget]:
        """What happens, and with which file."""
        yield Lines(self._rows)

    def _rows(self, width: int) -> list[Row]:
        return [
            EMPTY,
            *wrapped(f" {WORDS.get(self._entry.kind, '')}", width - 1),
            *wrapped(f" {self._entry.path}", width - 1, "dim"),
        ]
