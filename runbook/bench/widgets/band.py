"""One band of the run screen: rows of text in a place that never moves."""

from __future__ import annotations

from textual.content import Content
from textual.widget import Widget

from runbook.bench.bands import Fit
from runbook.bench.rows import content


class Band(Widget):
    """Paints rows that fit it; pages through them where they do not."""

    DEFAULT_CSS = """
    Band { width: 1fr; height: 1; }
    """

    def __init__(self, name: str) -> None:
        """An empty band."""
        super().__init__(id=f"band-{name}")
        self._fit: Fit | None = None
        self._page = 0

    def show(self, fit: Fit) -> None:
        """Paint what `fit` gives for the size the band has."""
        self._fit = fit
        self.refresh()

    def turn(self, pages: int) -> None:
        """Go on by this many pages; the band comes round by itself."""
        self._page = max(0, self._page + pages)
        self.refresh()

    def first_page(self) -> None:
        """Back to where reading begins, for a new text."""
        self._page = 0

    def render(self) -> Content:
        """The rows as they stand now."""
        if self._fit is None or not self.size.width or not self.size.height:
            return Content("")
        return content(self._fit(self.size.width, self.size.height, self._page))
