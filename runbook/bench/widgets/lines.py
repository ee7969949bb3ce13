"""A block of text rows that takes as many rows as it needs."""

from __future__ import annotations

from collections.abc import Callable

from textual.content import Content
from textual.geometry import Size
from textual.widget import Widget

from runbook.bench.rows import Row, content


class Lines(Widget):
    """Paints rows made for its width; as high as they are."""

    DEFAULT_CSS = """
    Lines { width: 1fr; height: auto; }
    """

    def __init__(self, make: Callable[[int], list[Row]] | None = None, *, id: str | None = None) -> None:
        """`make(width)` gives the rows; None: nothing yet."""
        super().__init__(id=id)
        self._make = make

    def show(self, make: Callable[[int], list[Row]]) -> None:
        """Paint other rows from now on."""
        self._make = make
        self.refresh(layout=True)

    def get_content_height(self, container: Size, viewport: Size, width: int) -> int:
        """As many rows as the text takes."""
        return len(self._make(width)) if self._make is not None else 0

    def render(self) -> Content:
        """The rows as they stand now."""
        return content(self._make(self.size.width) if self._make is not None else [])
