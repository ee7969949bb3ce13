"""The path of a charge in pressure over temperature, with the side that is forbidden and the moving point.

Linear in both directions: on a logarithmic axis the whole way from room temperature to the ceiling would be one
row. A point outside the frame is kept on its edge as an arrow, never dropped.
"""

from __future__ import annotations

import math
from dataclasses import dataclass

from runbook.drawing.braille import BrailleGrid
from runbook.drawing.glyphs import UNICODE, Glyphs

Point = tuple[float, float]
"""(across, up), each in its shown unit."""


@dataclass(frozen=True, slots=True)
class Mark:
    """A landmark: one character in the picture, its name in the legend."""

    at: Point
    sign: str
    """One character."""


@dataclass(frozen=True, slots=True)
class Chart:
    """Everything that is drawn; numbers in the units that are shown."""

    across: tuple[float, float]
    """From, to [shown unit of temperature]."""
    up: tuple[float, float]
    """From, to [shown unit of pressure]."""
    path: tuple[Point, ...] = ()
    """The charge's own path, as a line."""
    trail: tuple[Point, ...] = ()
    """Where it has been, as single dots."""
    now: Point | None = None
    """Where it is."""
    ceiling: float | None = None
    """Nothing may be from here up [shown unit of pressure]."""
    hottest: float | None = None
    """Nothing may be from here to the right [shown unit of temperature]."""
    marks: tuple[Mark, ...] = ()
    unit_across: str = ""
    unit_up: str = ""


def chart_picture(chart: Chart, columns: int, rows: int, glyphs: Glyphs = UNICODE) -> tuple[str, ...]:
    """The chart as `rows` rows of `columns` characters; empty where the frame is too small.

    The first row is the unit of the pressure, whose numbers stand on the left; the last two are the axis of the
    temperature and its numbers.
    """
    numbers = _up_numbers(chart, rows - 3)
    gutter = max((len(text) for text in numbers.values()), default=0)
    width, height = columns - gutter - 1, rows - 3
    if width < 8 or height < 3:
        return ()
    frame = _Frame(chart.across, chart.up, width, height)
    field = _field(chart, frame, glyphs)
    drawn = [chart.unit_up[:columns].ljust(columns)]
    drawn += [numbers.get(i, "").rjust(gutter) + glyphs.upright + "".join(field[i]) for i in range(height)]
    drawn.append(" " * gutter + glyphs.corner + glyphs.across * width)
    drawn.append(_across_numbers(chart, gutter, width))
    return tuple(drawn)


@dataclass(frozen=True, slots=True)
class _Frame:
    """From shown units to dots and characters."""

    across: tuple[float, float]
    up: tuple[float, float]
    width: int
    height: int

    def dots(self, point: Point) -> tuple[int, int]:
        """The dot of a point, which may lie outside the grid."""
        x = _share(point[0], self.across) * (2 * self.width - 1)
        y = (1.0 - _share(point[1], self.up)) * (4 * self.height - 1)
        return round(x), round(y)

    def cell(self, point: Point) -> tuple[int, int]:
        """The character of a point, which may lie outside the grid."""
        x, y = self.dots(point)
        return x // 2, y // 4


def _share(value: float, span: tuple[float, float]) -> float:
    # A span without length is no frame; everything then stands in its middle.
    return (value - span[0]) / (span[1] - span[0]) if span[1] > span[0] else 0.5


def _field(chart: Chart, frame: _Frame, glyphs: Glyphs) -> list[list[str]]:
    grid = BrailleGrid(frame.width, frame.height, braille=glyphs.braille)
    for start, end in zip(chart.path, chart.path[1:], strict=False):
        if all(map(math.isfinite, (*start, *end))):
            grid.line(*frame.dots(start), *frame.dots(end))
    for point in chart.trail:
        if all(map(math.isfinite, point)):
            grid.dot(*frame.dots(point))
    field = [list(row) for row in grid.rows()]
    _hatch(chart, frame, field, glyphs)
    for mark in chart.marks:
        x, y = frame.cell(mark.at)
        if 0 <= x < frame.width and 0 <= y < frame.height:
            field[y][x] = mark.sign
    if chart.now is not None and all(map(math.isfinite, chart.now)):
        _put_point(field, frame.cell(chart.now), glyphs)
    return field


def _hatch(chart: Chart, frame: _Frame, field: list[list[str]], glyphs: Glyphs) -> None:
    """The forbidden side; the path stays visible through it."""
    ceiling = None if chart.ceiling is None else frame.cell((frame.across[0], chart.ceiling))[1]
    hottest = None if chart.hottest is None else frame.cell((chart.hottest, frame.up[0]))[0]
    for y, row in enumerate(field):
        for x, found in enumerate(row):
            above = ceiling is not None and y <= ceiling
            right = hottest is not None and x >= hottest
            if found == " " and (above or right):
                row[x] = glyphs.forbidden


def _put_point(field: list[list[str]], cell: tuple[int, int], glyphs: Glyphs) -> None:
    x, y = cell
    height, width = len(field), len(field[0])
    inside_x, inside_y = min(max(x, 0), width - 1), min(max(y, 0), height - 1)
    above, below, left, right = glyphs.off
    # Above the frame governs: that is the side on which something can burst.
    sign = above if y < 0 else below if y >= height else left if x < 0 else right if x >= width else glyphs.point
    field[inside_y][inside_x] = sign


def _up_numbers(chart: Chart, height: int) -> dict[int, str]:
    """Row -> number at the left: both ends, and the ceiling where it leaves room."""
    if height < 1:
        return {}
    numbers = {height - 1: _number(chart.up[0]), 0: _number(chart.up[1])}
    if chart.ceiling is not None and chart.up[0] <= chart.ceiling <= chart.up[1]:
        row = _Frame(chart.across, chart.up, 1, height).cell((chart.across[0], chart.ceiling))[1]
        numbers = {i: text for i, text in numbers.items() if i != row} | {row: _number(chart.ceiling)}
    return numbers


def _across_numbers(chart: Chart, gutter: int, width: int) -> str:
    left = " " * (gutter + 1) + _number(chart.across[0])
    right = f"{_number(chart.across[1])} {chart.unit_across}".rstrip()
    room = gutter + 1 + width
    return (left + right.rjust(room - len(left)))[:room].ljust(room)


def _number(value: float) -> str:
    return f"{value:.0f}" if abs(value) >= 10.0 or value == round(value) else f"{value:.1f}"
