"""The ruler: who reads nothing else reads the gap, so no rounding may close it or open it."""

from __future__ import annotations

import math

import pytest
from hypothesis import given
from hypothesis import strategies as st

from runbook.drawing import ASCII, UNICODE, Glyphs, Ruler, ruler_picture

PRESSURES = st.floats(min_value=0.0, max_value=400.0)


def test_a_warming_cell() -> None:
    """Now, its uncertainty, the reach of this step, the gap, the wall and the forbidden side, all to one scale."""
    drawn = ruler_picture(Ruler(62.6, 1.2, 83.8, 94.8), 70)

    # 118.5 bar over 70 columns: 62.6 -> 37, 63.8 -> 38, 83.8 -> 50, 94.8 -> 56.
    assert drawn == "█" * 37 + "▒" + "░" * 12 + "╎" + "·" * 5 + "┃" + "/" * 13


def test_ascii_says_the_same() -> None:
    """The picture for a plain console differs in characters only."""
    drawn = ruler_picture(Ruler(62.6, 1.2, 83.8, 94.8), 70, ASCII)

    assert drawn == "#" * 37 + "=" + "-" * 12 + "!" + "." * 5 + "|" + "/" * 13


def test_unknown_is_never_an_empty_cell() -> None:
    """An unknown value fills its place with question marks, and an unknown ceiling the whole ruler."""
    assert ruler_picture(Ruler(None, None, None, 100.0), 25) == "?" * 20 + "┃" + "////"
    assert ruler_picture(Ruler(math.nan, 1.0, None, 100.0), 25) == "?" * 20 + "┃" + "////"
    assert ruler_picture(Ruler(50.0, 1.0, 60.0, None), 25) == "?" * 25
    assert ruler_picture(Ruler(50.0, 1.0, 60.0, math.nan), 25) == "?" * 25


def test_over_the_wall() -> None:
    """A value over the ceiling is drawn over the hatching, and one beyond the end stays in the last column."""
    assert ruler_picture(Ruler(110.0, 0.0, None, 100.0), 25) == "█" * 20 + "┃" + "█" + "///"
    assert ruler_picture(Ruler(999.0, 0.0, 9999.0, 100.0), 25) == "█" * 20 + "┃" + "███╎"


@given(now=PRESSURES, u=st.floats(0.0, 5.0), worst=PRESSURES, ceiling=st.floats(1.0, 400.0))
def test_worst_stands_on_its_own_side_of_the_wall(now: float, u: float, worst: float, ceiling: float) -> None:
    """However near, the worst is drawn before the wall exactly while it is below the ceiling; the wall stays."""
    drawn = ruler_picture(Ruler(now, u, worst, ceiling), 70)

    assert len(drawn) == 70
    assert drawn.count("┃") == 1
    assert drawn.count("╎") == 1
    assert (drawn.index("╎") < drawn.index("┃")) == (worst < ceiling)


@pytest.mark.parametrize("glyphs", [UNICODE, ASCII])
@pytest.mark.parametrize("columns", [0, 1, 2, 5, 200])
def test_any_width(glyphs: Glyphs, columns: int) -> None:
    """The row is as wide as asked for, however small."""
    for now, worst in ((None, None), (5.0, 4.0), (5.0, 500.0)):
        assert len(ruler_picture(Ruler(now, 1.0, worst, 100.0), columns, glyphs)) == columns
