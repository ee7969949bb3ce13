"""The path chart: linear, its limits hatched, and a point that is never lost."""

from __future__ import annotations

import math
from dataclasses import replace

import pytest

from runbook.drawing import ASCII, UNICODE, BrailleGrid, Chart, Mark, chart_picture

PATH = tuple((20.0 + i, 56.0 + 2.0 * i) for i in range(21))
CHART = Chart((10.0, 50.0), (40.0, 120.0), PATH, now=(25.0, 66.0), ceiling=94.8, unit_across="°C", unit_up="bar(g)")


def test_whole_picture() -> None:
    """The path rises through the frame into the hatched side; the point stands on it; numbers at the ends."""
    drawn = chart_picture(replace(CHART, marks=(Mark((31.0, 78.0), "C"),)), 30, 13)

    assert drawn == (
        "bar(g)                        ",
        "120│//////////////////////////",
        "   │//////////////////////////",
        "   │//////////////////////////",
        " 95│/////////////////⣀⠔⠁//////",
        "   │              ⢀⡠⠊         ",
        "   │           ⢀⠤C⠁           ",
        "   │         ●⠒⠁              ",
        "   │      ⢀⠔⠊                 ",
        "   │                          ",
        " 40│                          ",
        "   └──────────────────────────",
        "    10                   50 °C",
    )


@pytest.mark.parametrize(
    ("now", "arrow", "column", "row"),
    [
        ((30.0, 200.0), "▲", 13, 0),
        ((30.0, -5.0), "▼", 13, -1),
        ((-60.0, 80.0), "◀", 0, 5),
        ((99.0, 80.0), "▶", -1, 5),
        ((99.0, 900.0), "▲", -1, 0),
    ],
)
def test_a_point_outside_stays_on_the_edge(now: tuple[float, float], arrow: str, column: int, row: int) -> None:
    """Outside the frame the point is an arrow at the edge; above the frame governs, there things burst."""
    field = [line[4:] for line in chart_picture(replace(CHART, now=now), 30, 13)[1:-2]]

    assert [(i, line.index(arrow)) for i, line in enumerate(field) if arrow in line] == [(row % 10, column % 26)]
    assert not any("●" in line for line in field)


def test_no_path_of_numbers_without_meaning() -> None:
    """Values that are not finite are left out, and a point that is not known is not drawn."""
    chart = replace(CHART, path=((20.0, math.nan), (math.inf, 60.0), (25.0, 60.0)), now=(math.nan, 60.0))

    drawn = "".join(chart_picture(chart, 30, 13)[1:-2])

    assert not set(drawn) & set("●▲▼◀▶")
    assert not any("\u2801" <= sign <= "\u28ff" for sign in drawn)


def test_hottest_wall_is_hatched_too() -> None:
    """A limit of temperature forbids everything right of it, down to the lowest pressure."""
    field = [line[4:] for line in chart_picture(replace(CHART, ceiling=None, hottest=40.0, path=()), 30, 13)[1:-2]]

    assert {line[19:] for line in field} == {"///////"}
    assert all("/" not in line[:19] for line in field)


def test_ascii_chart_is_ascii() -> None:
    """On a plain console the same chart has no other character."""
    assert all(line.isascii() for line in chart_picture(replace(CHART, unit_across="degC"), 30, 13, ASCII))


@pytest.mark.parametrize(("columns", "rows"), [(0, 0), (11, 13), (30, 5), (30, 0)])
def test_too_small_draws_nothing(columns: int, rows: int) -> None:
    """A frame too small to be read gives no picture, and no error."""
    assert chart_picture(CHART, columns, rows) == ()


def test_every_row_has_the_width_asked_for() -> None:
    """Rows never differ in width, or the band beside them would move."""
    for columns in (14, 25, 40, 77):
        drawn = chart_picture(CHART, columns, 16, UNICODE)
        assert ({len(line) for line in drawn}, len(drawn)) == ({columns}, 16)


def test_dots_as_unicode_numbers_them() -> None:
    """Each dot of a character sets its own bit of the braille block (Unicode chart U2800)."""
    grid = BrailleGrid(1, 1)
    for x, y in ((0, 0), (1, 3)):
        grid.dot(x, y)
    full = BrailleGrid(2, 1)
    full.line(0, 0, 3, 0)

    assert grid.rows() == ["\u2881"]
    assert full.rows() == ["\u2809\u2809"]


def test_dots_outside_are_left_out() -> None:
    """A line that leaves the grid is drawn as far as it goes."""
    grid = BrailleGrid(2, 1)
    grid.line(-10, 0, 1, 0)

    assert grid.rows() == ["\u2809 "]
