"""A grid of fine dots, two by four in each character, drawn with braille patterns (Unicode block 2800).

Lines are drawn on it and read off as rows of text. Dots outside the grid are left out: clamping is for the
caller, who knows whether a point must stay visible.
"""

from __future__ import annotations

from typing import Final

_BITS: Final = ((0x01, 0x08), (0x02, 0x10), (0x04, 0x20), (0x40, 0x80))
"""Bit of the dot in row y, column x of one character, as Unicode numbers them."""
_EMPTY: Final = 0x2800


class BrailleGrid:
    """Dots that are off until they are set."""

    def __init__(self, columns: int, rows: int, *, braille: bool = True) -> None:
        """A grid for `columns` x `rows` characters [1]; without `braille` it is read off as ASCII."""
        self.width = 2 * max(columns, 0)
        """[dots]"""
        self.height = 4 * max(rows, 0)
        """[dots]"""
        self._braille = braille
        self._cells = [[0] * max(columns, 0) for _ in range(max(rows, 0))]

    def dot(self, x: int, y: int) -> None:
        """Set the dot at `x` from the left and `y` from the top [dots]."""
        if 0 <= x < self.width and 0 <= y < self.height:
            self._cells[y // 4][x // 2] |= _BITS[y % 4][x % 2]

    def line(self, x0: int, y0: int, x1: int, y1: int) -> None:
        """Set every dot on the way from one point to the other, both included [dots]."""
        steps = max(abs(x1 - x0), abs(y1 - y0), 1)
        for i in range(steps + 1):
            self.dot(x0 + round(i * (x1 - x0) / steps), y0 + round(i * (y1 - y0) / steps))

    def rows(self) -> list[str]:
        """The grid as text; an empty character is a space."""
        read = _pattern if self._braille else _ascii
        return ["".join(read(cell) for cell in row) for row in self._cells]


def _pattern(cell: int) -> str:
    return chr(_EMPTY + cell) if cell else " "


def _ascii(cell: int) -> str:
    """Upper half, lower half or both: what a typewriter can tell apart."""
    upper, lower = cell & 0x1B, cell & 0xE4
    if upper and lower:
        return ":"
    return "'" if upper else "." if lower else " "
