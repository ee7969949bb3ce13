"""The set-up check: each point confirmed with Enter, before the first step, at the bench and not at the desk."""

from __future__ import annotations

from collections.abc import Iterable
from typing import ClassVar, Final

from textual import events
from textual.containers import VerticalScroll
from textual.widget import Widget

from runbook.bench.place import Keys, Place
from runbook.bench.rows import EMPTY, Row, padded, wrapped
from runbook.bench.widgets.lines import Lines

CHECKS: Final = (
    "Every gauge stands at zero with the vent open, its needle off the pin",
    "Every valve is as the plan says at the start",
    "The outlets of the relief devices are clear",
    "The shield stands between the vessel and every face",
    "The gas meter is on, low and at breathing height; its alarm has been heard",
    "The room is ventilated",
    "This computer is on mains power and will not sleep",
    "The second person is here",
)
"""Common practice of the trade; said of a closed vessel too, where the first is read as: needles move freely."""


class SetUpScreen(Place[bool]):
    """True when every point was confirmed; False: back."""

    HEADING = "BRIEFING: SET-UP CHECK"
    KEYS: ClassVar[Keys] = (("Enter", "it is so"), ("Esc", "back"))

    def __init__(self, bring: tuple[str, ...], closed: bool) -> None:
        """What the procedure asks to bring comes first; of a closed vessel no zero can be read."""
        super().__init__()
        checks = CHECKS if not closed else CHECKS[1:]
        self.points = (*(f"Here: {thing}" for thing in bring), *checks)
        self._done = 0

    def body(self) -> Iterable[Widget]:
        """One row a point."""
        yield VerticalScroll(Lines(self._rows), can_focus=False)

    def _rows(self, width: int) -> list[Row]:
        rows = [EMPTY]
        for i, point in enumerate(self.points):
            mark = "x" if i < self._done else " "
            lines = wrapped(f" [{mark}] {point}", width - 2, "strong" if i == self._done else "plain")
            rows += [padded(one, width - 2, "loud") for one in lines] if i == self._done else lines
        return rows

    def on_key(self, event: events.Key) -> None:
        """Enter confirms the present point."""
        if event.key == "enter":
            event.stop()
            self._done += 1
            if self._done >= len(self.points):
                self.dismiss(True)
                return
            self.query_one(Lines).refresh(layout=True)
            self.query_one(VerticalScroll).scroll_to(y=max(0, self._done - 8), animate=False)
        elif event.key == "escape":
            event.stop()
            self.dismiss(False)
