"""What goes wrong on purpose in a rehearsal: chosen from the list, and when it begins."""

from __future__ import annotations

from collections.abc import Iterable
from random import Random
from typing import ClassVar, Final

from textual import on
from textual.binding import Binding, BindingType
from textual.content import Content
from textual.widget import Widget
from textual.widgets import OptionList
from textual.widgets.option_list import Option

from runbook.bench.place import Keys, Place
from runbook.bench.rows import Row, wrapped
from runbook.bench.widgets.lines import Lines
from runbook.rehearsal.faults import FAULTS, fault_words

_MOMENTS: Final = (("at once", 0.0), ("5 min later", 300.0), ("15 min later", 900.0), ("within 15 min, drawn", None))
"""When it begins after its situation first stands [s]; None: drawn."""


class FaultScreen(Place[str | None]):
    """As --fault names it; empty: nothing; None: left as it was."""

    DEFAULT_CSS = """
    FaultScreen OptionList { height: 1fr; border: none; padding: 0 1; background: $background; }
    FaultScreen OptionList:focus { border: none; }
    """
    HEADING = "WHAT GOES WRONG ON PURPOSE"
    KEYS: ClassVar[Keys] = (("Up Down", "choose"), ("M", "when"), ("Enter", "take it"), ("Esc", "back"))
    BINDINGS: ClassVar[list[BindingType]] = [
        Binding("escape", "back", show=False),
        Binding("m", "moment", show=False),
    ]

    def __init__(self, chosen: str = "", draw: Random | None = None) -> None:
        """Begin at what is `chosen` already; `draw` gives the drawn moment."""
        super().__init__()
        self._chosen = chosen.partition("@")[0]
        self._moment = 0
        self._draw = draw or Random()

    def body(self) -> Iterable[Widget]:
        """When it begins, and the list."""
        yield Lines(self._when, id="when")
        yield OptionList(*self._options(), id="list", markup=False)

    def on_mount(self) -> None:
        """What is chosen already."""
        listed = self.query_one(OptionList)
        listed.focus()
        listed.highlighted = listed.get_option_index(self._chosen or "nothing")

    def _options(self) -> list[Option]:
        found = [("nothing", fault_words("")), ("random", fault_words("random"))]
        plain = [Option(Content.assemble(f"  {words}"), id=name) for name, words in found]
        width = max(len(one.name) for one in FAULTS) + 2
        return plain + [
            Option(Content.assemble(f"  {one.name:<{width}}", (one.words, "dim")), id=one.name) for one in FAULTS
        ]

    def _when(self, width: int) -> list[Row]:
        words = (
            f" It begins when the vessel is first in the situation that it belongs to, {_MOMENTS[self._moment][0]}. "
            "The record says when; the screens do not."
        )
        return wrapped(words, width - 1)

    @on(OptionList.OptionSelected)
    def _taken(self, event: OptionList.OptionSelected) -> None:
        event.stop()
        name = event.option.id or ""
        if name in ("nothing", "random"):
            self.dismiss("" if name == "nothing" else name)
            return
        late = _MOMENTS[self._moment][1]
        seconds = float(self._draw.randint(0, 900)) if late is None else late
        self.dismiss(f"{name}@{seconds:g}" if seconds else name)

    def action_moment(self) -> None:
        """The next of the moments."""
        self._moment = (self._moment + 1) % len(_MOMENTS)
        self.query_one("#when", Lines).refresh(layout=True)

    def action_back(self) -> None:
        """As it was."""
        self.dismiss(None)
