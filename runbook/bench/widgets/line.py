"""One row across the screen: the header, a rule, the keys."""

from __future__ import annotations

from collections.abc import Callable

from textual.content import Content
from textual.widget import Widget

from runbook.bench.rows import Row, content, padded


class Line(Widget):
    """Paints one row made for its width."""

    DEFAULT_CSS = """
    Line { width: 1fr; height: 1; }
    """

    def __init__(self, make: Callable[[int], Row], *, id: str | None = None) -> None:
        """`make(width)` gives the row."""
        super().__init__(id=id)
        self._make = make

    def show(self, make: Callable[[int], Row]) -> None:
        """Paint another row from now on."""
        self._make = make
        self.refresh()

    def render(self) -> Content:
        """The row as it stands now."""
        return content([padded(self._make(self.size.width), self.size.width)])
