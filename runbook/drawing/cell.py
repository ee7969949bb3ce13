"""The cell as one sees it through the window: what fills it, from the bottom up.

A lying cylinder is seen through its end, as a disc; an upright one from the side. Each material has its own
character and the surface is a line of its own, three steps fine in each row, because its movement is what a
class watches.
"""

from __future__ import annotations

import math
from dataclasses import dataclass

from runbook.drawing.glyphs import UNICODE, Glyphs


@dataclass(frozen=True, slots=True)
class Cell:
    """The frame of the picture."""

    lying: bool
    """A lying cylinder; False: an upright one."""
    columns: int
    """Width, walls included [1]."""
    rows: int
    """Height, walls included [1]."""


@dataclass(frozen=True, slots=True)
class Filling:
    """What is in it; heights are shares of the inside height, from 0 at the bottom to 1."""

    surface: float | None
    """Where the liquid's surface stands [1]; None: there is none."""
    below: str
    """What fills it below the surface, or all of it where there is none: 'liquid', 'vapour', 'dense' or
    'unknown'."""
    solid: float = 0.0
    """How high the solid lies [1]."""
    haze: bool = False
    """A haze on both sides of the surface, or everywhere where there is none."""


def cell_picture(cell: Cell, filling: Filling, glyphs: Glyphs = UNICODE) -> tuple[str, ...]:
    """The cell as rows of text, all of `cell.columns` characters; empty where the frame is too small."""
    if cell.columns < 5 or cell.rows < 3:
        return ()
    inside = cell.rows - 2
    rows = []
    for row in range(cell.rows):
        left = _edge(cell, row)
        width = cell.columns - 2 * left
        wall = 2 if width >= 6 else 1
        if row in (0, cell.rows - 1):
            rows.append(" " * left + glyphs.wall * width + " " * left)
            continue
        content = _content(filling, inside, row - 1, glyphs) * (width - 2 * wall)
        rows.append(" " * left + glyphs.wall * wall + content + glyphs.wall * wall + " " * left)
    return tuple(rows)


def cell_legend(filling: Filling, glyphs: Glyphs = UNICODE) -> tuple[tuple[str, str], ...]:
    """(character, what it stands for) of everything the picture of this filling shows, from the bottom up."""
    names = []
    if filling.solid > 0.0:
        names.append((glyphs.solid, "solid"))
    if filling.surface is not None:
        names += [(glyphs.liquid, "liquid"), (glyphs.surface[1], "surface")]
    elif filling.below == "liquid":
        names.append((glyphs.liquid, "liquid"))
    elif filling.below == "dense" and not filling.haze:
        names.append((glyphs.dense, "one phase"))
    elif filling.below == "unknown":
        names.append((glyphs.unknown, "not known"))
    if filling.haze:
        names.append((glyphs.haze, "haze"))
    return tuple(names)


def _edge(cell: Cell, row: int) -> int:
    """Columns left of the wall in this row [1]."""
    if not cell.lying:
        return 0
    # The disc, with the row's middle as height over the axis; rows are twice as high as columns are wide,
    # which the caller has reckoned into the frame.
    height = (2.0 * row + 1.0) / cell.rows - 1.0
    half = math.sqrt(max(0.0, 1.0 - height * height))
    return min(cell.columns // 2 - 2, round((1.0 - half) * cell.columns / 2.0))


def _content(filling: Filling, inside: int, row: int, glyphs: Glyphs) -> str:
    """The character that fills one row of the inside, `row` from the top."""
    bottom = (inside - 1 - row) / inside
    top = (inside - row) / inside
    if filling.solid > bottom + 0.5 / inside or (filling.solid > 0.0 and bottom == 0.0):
        return glyphs.solid
    surface = filling.surface
    if surface is None:
        if filling.haze and filling.below != "unknown":
            return glyphs.haze
        return {"liquid": glyphs.liquid, "vapour": glyphs.vapour, "dense": glyphs.dense}.get(
            filling.below, glyphs.unknown
        )
    surface = min(max(surface, 0.0), 1.0)
    if bottom <= surface < top or (row == 0 and surface == 1.0):
        return glyphs.surface[min(2, int((surface - bottom) / (top - bottom) * 3.0))]
    if filling.haze and bottom - 1.0 / inside <= surface < top + 1.0 / inside:
        return glyphs.haze
    return glyphs.liquid if top <= surface else glyphs.vapour
