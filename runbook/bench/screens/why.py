"""The page of what the readings may mean: every explanation with its share and the test that decides.

It only shows. Nothing on it clears anything; a new reading does.
"""

from __future__ import annotations

from collections.abc import Iterable
from typing import TYPE_CHECKING, ClassVar

from textual.binding import Binding, BindingType
from textual.containers import VerticalScroll
from textual.widget import Widget

from runbook.bench.place import Keys, Place
from runbook.bench.rows import EMPTY, Row, wrapped
from runbook.bench.widgets.lines import Lines
from runbook.run.sentences import why_lines

if TYPE_CHECKING:
    from runbook.run.conductor import Conductor

_TEST = "test: "


class WhyScreen(Place[None]):
    """What the readings of the run of `desk` may mean."""

    HEADING = "WHAT THE READINGS MAY MEAN"
    KEYS: ClassVar[Keys] = (("PgDn", "more"), ("Esc", "back"))
    BINDINGS: ClassVar[list[BindingType]] = [
        Binding("escape", "back", show=False),
        Binding("enter", "back", show=False),
        Binding("f7", "back", show=False),
        Binding("pagedown", "scroll(1)", show=False),
        Binding("pageup", "scroll(-1)", show=False),
    ]

    def __init__(self, desk: Conductor) -> None:
        """Of the run of `desk`."""
        super().__init__()
        self._desk = desk

    def body(self) -> Iterable[Widget]:
        """An explanation and its test after the other."""
        yield VerticalScroll(Lines(self._rows))

    def update_run(self) -> None:
        """As the readings are now."""
        self.query_one(Lines).refresh(layout=True)

    def _rows(self, width: int) -> list[Row]:
        rows: list[Row] = [EMPTY]
        for words, test in why_lines(self._desk.plan, self._desk.standing()):
            rows += wrapped(f" {words}", width - 1, "strong" if test else "plain")
            for index, one in enumerate(wrapped(test, width - 18)) if test else ():
                lead = (" " * 9 + _TEST) if index == 0 else " " * (9 + len(_TEST))
                rows.append(Row(((lead, "dim"), *one.spans)))
        return rows

    def action_scroll(self, pages: int) -> None:
        """Further down, or up."""
        scroll = self.query_one(VerticalScroll)
        scroll.scroll_relative(y=pages * max(1, scroll.size.height - 1), animate=False)

    def action_back(self) -> None:
        """Back to the run."""
        self.dismiss(None)
