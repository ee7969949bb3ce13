"""What should be seen, with the figures behind each sentence and how far to trust it."""

from __future__ import annotations

from collections.abc import Iterable
from typing import TYPE_CHECKING, ClassVar

from textual.binding import Binding, BindingType
from textual.containers import VerticalScroll
from textual.widget import Widget

from runbook.bench.place import Keys, Place
from runbook.bench.rows import EMPTY, Row, wrapped
from runbook.bench.widgets.lines import Lines
from runbook.run.sight_words import NOTHING, details

if TYPE_CHECKING:
    from runbook.run.conductor import Conductor


class SightsScreen(Place[None]):
    """Every sight of this moment and of the step's path."""

    HEADING = "WHAT SHOULD BE SEEN"
    KEYS: ClassVar[Keys] = (("PgDn", "more"), ("Esc", "back"))
    BINDINGS: ClassVar[list[BindingType]] = [
        Binding("escape", "back", show=False),
        Binding("enter", "back", show=False),
        Binding("s", "back", show=False),
        Binding("pagedown", "scroll(1)", show=False),
        Binding("pageup", "scroll(-1)", show=False),
    ]

    def __init__(self, desk: Conductor) -> None:
        """Of the run of `desk`."""
        super().__init__()
        self._desk = desk

    def body(self) -> Iterable[Widget]:
        """Sentence, figures, trust, one below the other."""
        yield VerticalScroll(Lines(self._rows, id="sights"), can_focus=False)

    def update_run(self) -> None:
        """As the vessel stands now."""
        self.query_one("#sights", Lines).refresh(layout=True)

    def _rows(self, width: int) -> list[Row]:
        rows: list[Row] = []
        for words, numbers, trust in details(self._desk.plan, self._desk.standing()):
            rows += [EMPTY, *wrapped(f" {words}", width - 1, "strong")]
            rows += wrapped(f"   {'; '.join(numbers)}", width - 1) if numbers else []
            rows += wrapped(f"   {trust}", width - 1, "dim") if trust else []
        return rows or [EMPTY, *wrapped(f" {NOTHING}", width - 1)]

    def action_back(self) -> None:
        """Back to the run."""
        self.dismiss(None)

    def action_scroll(self, pages: int) -> None:
        """A page on or back."""
        scroll = self.query_one(VerticalScroll)
        scroll.scroll_relative(y=pages * max(1, scroll.size.height - 1), animate=False)
