"""Cell and path chart side by side or one above the other, as room allows."""

from __future__ import annotations

from textual.content import Content
from textual.widget import Widget

from runbook.bench.rows import EMPTY, Row, content, row, wrapped
from runbook.bench.view import PictureView
from runbook.drawing import UNICODE, Cell, Glyphs, cell_legend, cell_picture, chart_picture

_LEGEND = 14
"""[columns] beside the cell."""


def picture_rows(view: PictureView, width: int, height: int, glyphs: Glyphs = UNICODE) -> list[Row]:
    """Chart above, cell beneath where the room is high; cell alone where it is not; words below."""
    words = wrapped(view.words, width)
    left = height - len(words)
    chart: list[Row] = []
    if view.chart is not None and left >= 15:
        chart_height = min(left - 7, left * 6 // 10)
        chart = [row(line) for line in chart_picture(view.chart, width, chart_height, glyphs)]
    room = max(0, left - len(chart) - (1 if chart else 0))
    rows = [*chart, *([EMPTY] if chart else []), *_cell(view, width, min(room, 13), glyphs)]
    rows += [EMPTY] * (left - len(rows))
    return [*rows[:left], *words]


def _cell(view: PictureView, width: int, height: int, glyphs: Glyphs) -> list[Row]:
    # Rows are about twice as high as columns are wide.
    columns = min(2 * height, width - _LEGEND)
    picture = cell_picture(Cell(view.lying, columns, height), view.filling, glyphs)
    legend = [f"{sign} {name}" for sign, name in reversed(cell_legend(view.filling, glyphs))]
    top = max(0, (len(picture) - len(legend)) // 2)
    return [
        row(f"{line}  ", (legend[i - top] if 0 <= i - top < len(legend) else "", "dim"))
        for i, line in enumerate(picture)
    ]


class Pictures(Widget):
    """Paints the pictures of one view."""

    DEFAULT_CSS = """
    Pictures { width: 1fr; height: 1fr; padding: 0 0 0 2; }
    """

    def __init__(self, glyphs: Glyphs, *, id: str | None = None) -> None:
        """Nothing yet."""
        super().__init__(id=id)
        self._glyphs = glyphs
        self._view: PictureView | None = None

    def show(self, view: PictureView) -> None:
        """Paint these from now on."""
        if view != self._view:
            self._view = view
            self.refresh()

    def render(self) -> Content:
        """The pictures for the size there is."""
        size = self.content_size
        if self._view is None or not size.width or not size.height:
            return Content("")
        return content(picture_rows(self._view, size.width, size.height, self._glyphs))
