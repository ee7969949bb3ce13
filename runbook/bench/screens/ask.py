"""A panel that asks for one line of text and says at once what is wrong with it."""

from __future__ import annotations

from collections.abc import Callable, Iterable
from typing import ClassVar

from textual import on
from textual.binding import Binding, BindingType
from textual.containers import Horizontal
from textual.widget import Widget
from textual.widgets import Input

from runbook.bench.place import Keys, Panel
from runbook.bench.rows import Row, wrapped
from runbook.bench.widgets.field import Field
from runbook.bench.widgets.lines import Lines


class AskPanel(Panel[str | None]):
    """The text, once `wrong` finds nothing wrong with it; None: left."""

    DEFAULT_CSS = """
    AskPanel #entry { height: 1; padding: 0 1; }
    """
    KEYS: ClassVar[Keys] = (("Enter", "take it"), ("Esc", "back"))
    BINDINGS: ClassVar[list[BindingType]] = [Binding("escape", "back", show=False, priority=True)]

    def __init__(self, heading: str, words: str, key: str, wrong: Callable[[str], str]) -> None:
        """`key` names the draft; `wrong(text)` is empty where the text can be taken."""
        super().__init__()
        self._heading = heading
        self._words = words
        self._key = key
        self._wrong = wrong
        self._said = ""

    def body(self) -> Iterable[Widget]:
        """Field and what is asked."""
        yield Horizontal(Field(self.bench.drafts.get(self._key, ""), id="field"), id="entry")
        yield Lines(self._rows)

    def heading(self) -> str:
        """What it is about."""
        return self._heading

    def on_mount(self) -> None:
        """Straight into the field."""
        self.query_one(Field).focus()

    def _rows(self, width: int) -> list[Row]:
        return wrapped(f" {self._said or self._words}", width - 1, "blocked" if self._said else "plain")

    @on(Input.Changed, "#field")
    def _changed(self) -> None:
        self.bench.drafts[self._key] = self.query_one(Field).value
        self._said = ""
        self.query_one(Lines).refresh(layout=True)

    @on(Field.Typed)
    def _typed(self, event: Field.Typed) -> None:
        event.stop()
        self._said = self._wrong(event.text)
        if self._said:
            self.query_one(Lines).refresh(layout=True)
            return
        self.dismiss(event.text)

    def action_back(self) -> None:
        """Back; what was typed is kept."""
        self.dismiss(None)
