"""Screens that only show: the keys, the pictures at full size."""

from __future__ import annotations

from collections.abc import Iterable
from typing import TYPE_CHECKING, ClassVar

from textual.binding import Binding, BindingType
from textual.containers import VerticalScroll
from textual.widget import Widget

from runbook.bench.place import Keys, Place
from runbook.bench.rows import Row, row, wrapped
from runbook.bench.style import MAKE_SAFE_WORD
from runbook.bench.view import PictureView
from runbook.bench.widgets.lines import Lines
from runbook.bench.widgets.pictures import Pictures

if TYPE_CHECKING:
    from collections.abc import Callable

ALL_KEYS: Keys = (
    ("F9", "make safe: never refused, over everything, also with a half-typed field"),
    (MAKE_SAFE_WORD, "with Enter in any field: the same, where function keys do not arrive"),
    ("Enter", "finish this step and enter the next, where ON? says yes"),
    ("0 - 9", "enter a reading"),
    ("F3", "enter a reading"),
    ("F4", "sign the hold point, or say that the witness is here"),
    ("F5", "write a note"),
    ("F6", "cell and path, at full size"),
    ("F7", "what the readings may mean where they do not agree, and the tests that decide"),
    ("F8", "state a valve or the heat source; confirm a proof; take a step up again"),
    ("S", "what should be seen: the figures behind it, and how far to trust it"),
    ("PgDn", "more of a band that says 'more'"),
    ("space", "stop the bell"),
    ("Esc", "leave the tool, after a question; in a panel: back, and what you typed is kept"),
)
REHEARSAL_KEYS: Keys = (
    ("[ ]", "slower, faster"),
    ("P", "stop the clock, let it go on"),
    ("J", "on to the next moment at which something is asked"),
    ("F", "what goes wrong on purpose: choose from the list"),
)
_BACK: list[BindingType] = [
    Binding("escape", "back", show=False),
    Binding("enter", "back", show=False),
]


class KeysScreen(Place[None]):
    """Every key and what it does."""

    HEADING = "KEYS"
    KEYS: ClassVar[Keys] = (("Esc", "back"),)
    BINDINGS: ClassVar[list[BindingType]] = _BACK

    def body(self) -> Iterable[Widget]:
        """One row a key."""
        yield VerticalScroll(Lines(self._rows))

    def _rows(self, width: int) -> list[Row]:
        keys = ALL_KEYS + (REHEARSAL_KEYS if self.bench.pace is not None else ())
        rows: list[Row] = [row()]
        for key, does in keys:
            for i, line in enumerate(wrapped(does, width - 12)):
                rows.append(Row(((f"  {key if i == 0 else '':<8}", "key"), *line.spans)))
        return rows

    def action_back(self) -> None:
        """Back to where one came from."""
        self.dismiss(None)


class PicturesScreen(Place[None]):
    """Cell and path chart on the whole screen, with the same in words."""

    HEADING = "PICTURES"
    KEYS: ClassVar[Keys] = (("Esc", "back"),)
    BINDINGS: ClassVar[list[BindingType]] = [*_BACK, Binding("f6", "back", show=False)]

    def __init__(self, make: Callable[[], PictureView]) -> None:
        """`make` gives what the run shows now."""
        super().__init__()
        self._make_view = make

    def body(self) -> Iterable[Widget]:
        """The pictures."""
        yield Pictures(self.bench.glyphs, id="pictures")

    def on_mount(self) -> None:
        """The first picture."""
        self.bench.paint_screen(self)

    def update_run(self) -> None:
        """The pictures as they are now."""
        self.query_one(Pictures).show(self._make_view())

    def action_back(self) -> None:
        """Back to the run."""
        self.dismiss(None)
