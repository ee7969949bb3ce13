"""The picture of the cell: what a class sees through the window, readable without colour."""

from __future__ import annotations

from dataclasses import astuple

import pytest
from hypothesis import given
from hypothesis import strategies as st

from runbook.drawing import ASCII, UNICODE, Cell, Filling, Glyphs, cell_legend, cell_picture

LYING, UPRIGHT = Cell(True, 18, 9), Cell(False, 10, 8)


def test_lying_cylinder_with_a_surface() -> None:
    """A lying cylinder is a disc; the liquid fills its lower part up to the surface."""
    drawn = cell_picture(LYING, Filling(0.5, "liquid"))

    assert drawn == (
        "     ████████     ",
        "  ██          ██  ",
        " ██            ██ ",
        "██              ██",
        "██──────────────██",
        "██▒▒▒▒▒▒▒▒▒▒▒▒▒▒██",
        " ██▒▒▒▒▒▒▒▒▒▒▒▒██ ",
        "  ██▒▒▒▒▒▒▒▒▒▒██  ",
        "     ████████     ",
    )


def test_upright_cylinder_with_solid() -> None:
    """An upright cylinder is a box; solid, liquid and surface differ without colour, in ASCII too."""
    drawn = cell_picture(UPRIGHT, Filling(0.7, "liquid", solid=0.4), ASCII)

    assert drawn == (
        "##########",
        "##      ##",
        "##______##",
        "##======##",
        "##======##",
        "##%%%%%%##",
        "##%%%%%%##",
        "##########",
    )


def test_haze_gathers_about_the_surface() -> None:
    """Near the critical point a haze stands on both sides of the surface, and fills one phase wholly."""
    with_surface = cell_picture(UPRIGHT, Filling(0.5, "liquid", haze=True))
    without = cell_picture(UPRIGHT, Filling(None, "dense", haze=True))

    assert [row[4] for row in with_surface] == list("█ ░▁░▒▒█")
    assert {row[4] for row in without[1:-1]} == {"░"}


@pytest.mark.parametrize("glyphs", [UNICODE, ASCII])
def test_every_material_has_its_own_character(glyphs: Glyphs) -> None:
    """No two things in a picture share a character, whatever the colours do."""
    cell = [glyphs.wall, glyphs.liquid, glyphs.solid, glyphs.haze, glyphs.dense, glyphs.vapour, glyphs.unknown]
    ruler = [glyphs.filled, glyphs.uncertain, glyphs.reach, glyphs.worst, glyphs.free, glyphs.ceiling, glyphs.forbidden]

    assert len(set((*cell, *glyphs.surface))) == len(cell) + 3
    assert len(set(ruler)) == len(ruler)
    assert len({glyphs.yes, glyphs.not_yet, glyphs.blocked, glyphs.warning}) == 4


def test_ascii_is_ascii() -> None:
    """The set for plain consoles has no other character anywhere."""
    texts = [text for field in astuple(ASCII) for text in (field if isinstance(field, tuple) else (field,))]

    assert all(text.isascii() for text in texts if isinstance(text, str))


@given(surface=st.one_of(st.none(), st.floats(0.0, 1.0)), rows=st.integers(3, 20), lying=st.booleans())
def test_the_surface_moves_with_the_height(surface: float | None, rows: int, lying: bool) -> None:
    """Liquid never stands above the surface nor vapour below it, and the surface is there exactly once."""
    drawn = cell_picture(Cell(lying, 20, rows), Filling(surface, "vapour"))
    middle = "".join(row[10] for row in drawn[1:-1])

    assert {len(row) for row in drawn} == {20}
    lines = [i for i, sign in enumerate(middle) if sign in UNICODE.surface]
    assert len(lines) == (0 if surface is None else 1)
    if surface is not None:
        assert set(middle[: lines[0]]) <= {" "}
        assert set(middle[lines[0] + 1 :]) <= {"▒"}
        height = (rows - 2) * (1.0 - surface)
        assert lines[0] <= height <= lines[0] + 1 + 1e-9 or (surface == 1.0 and lines == [0])


def test_unknown_filling_says_so() -> None:
    """What is not known is drawn as question marks, never as an empty cell."""
    filling = Filling(None, "unknown", haze=True)

    assert {row[4] for row in cell_picture(UPRIGHT, filling)[1:-1]} == {"?"}
    assert ("?", "not known") in cell_legend(filling)


@pytest.mark.parametrize(("columns", "rows"), [(4, 9), (18, 2), (0, 0)])
def test_too_small_draws_nothing(columns: int, rows: int) -> None:
    """A frame too small for walls and an inside gives no picture, and no error."""
    assert cell_picture(Cell(True, columns, rows), Filling(0.5, "liquid")) == ()
