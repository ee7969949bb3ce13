"""The note panel. A note never opens a step, so nothing here asks for a judgement."""

from __future__ import annotations

from collections.abc import Iterable
from typing import TYPE_CHECKING, ClassVar

from textual import on
from textual.binding import Binding, BindingType
from textual.containers import Horizontal
from textual.widget import Widget
from textual.widgets import Input

from runbook.bench.acting import do
from runbook.bench.people import next_name, performer
from runbook.bench.place import Keys, Panel
from runbook.bench.rows import Row, last_beside, row, wrapped
from runbook.bench.widgets.field import Field
from runbook.bench.widgets.lines import Lines
from runbook.run.acts import Note

if TYPE_CHECKING:
    from runbook.run.conductor import Conductor

_DRAFT = "note"


class NotePanel(Panel[bool]):
    """True when the note was recorded."""

    DEFAULT_CSS = """
    NotePanel #entry { height: 1; padding: 0 1; }
    """
    HEADING = "NOTE"
    KEYS: ClassVar[Keys] = (("Enter", "record it"), ("F4", "who"), ("Esc", "back"))
    BINDINGS: ClassVar[list[BindingType]] = [
        Binding("escape", "back", show=False, priority=True),
        Binding("f4", "who", show=False, priority=True),
    ]

    def __init__(self, desk: Conductor) -> None:
        """A note in the run of `desk`."""
        super().__init__()
        self._desk = desk
        self._by = performer(desk.ledger)
        self._said = ""

    def body(self) -> Iterable[Widget]:
        """Field, who."""
        yield Horizontal(Field(self.bench.drafts.get(_DRAFT, ""), id="field"), id="entry")
        yield Lines(self._rows)

    def on_mount(self) -> None:
        """Straight into the field."""
        self.query_one(Field).focus()

    def _rows(self, width: int) -> list[Row]:
        words = self._said or "What you saw or did. It goes into the record as it stands and opens no step."
        return last_beside(wrapped(f" {words}", width - 1), row((f"written by {self._by} ", "dim")), width)

    @on(Input.Changed, "#field")
    def _changed(self) -> None:
        self.bench.drafts[_DRAFT] = self.query_one(Field).value

    @on(Field.Typed)
    async def _typed(self, event: Field.Typed) -> None:
        event.stop()
        text = event.text.strip()
        if not text:
            self.dismiss(False)
            return
        self._said = await do(self._desk, Note(text, self._by))
        if self._said:
            self.query_one(Lines).refresh(layout=True)
            return
        self.bench.drafts.pop(_DRAFT, None)
        self.dismiss(True)

    def action_who(self) -> None:
        """Somebody else writes."""
        self._by = next_name(self._desk.ledger, self._by)
        self.query_one(Lines).refresh()

    def action_back(self) -> None:
        """Back to the run; what was typed is kept."""
        if self.query_one(Field).value:
            self.bench.say("What you typed is kept.")
        self.dismiss(False)
