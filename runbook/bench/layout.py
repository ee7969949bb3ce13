"""Which row of the terminal belongs to what: fixed for each size, the same in every state.

The eye learns places, so a change of step alters text and never position. What is not pinned here never gets
a row; and what is too small for all six bands gets one sentence instead.
"""

from __future__ import annotations

from dataclasses import dataclass
from typing import Final

SMALLEST: Final = (60, 20)
"""[columns, rows] below it there is no run screen."""
WIDE: Final = 120
"""[columns] from here on pictures stand beside the bands."""
PICTURE: Final = 40
"""[columns] for the pictures of a wide terminal."""


@dataclass(frozen=True, slots=True)
class Layout:
    """Rows of each band; the header and the keys have one each."""

    do: int
    ask: int
    alone: int
    ceiling: int
    see: int
    agree: int
    rules: frozenset[str]
    """Bands with a rule above them; 'keys' too."""
    pictures: bool

    @property
    def rows(self) -> int:
        """All rows together [1]."""
        return 2 + self.do + self.ask + self.alone + self.ceiling + self.see + self.agree + len(self.rules)


_COMPACT: Final = Layout(4, 4, 2, 2, 2, 2, frozenset({"ask", "ceiling"}), False)
_USUAL: Final = Layout(5, 4, 1, 3, 2, 2, frozenset({"ask", "ceiling", "see", "agree", "keys"}), False)
_TALL: Final = Layout(6, 4, 2, 3, 4, 2, frozenset({"do", "ask", "alone", "ceiling", "see", "agree", "keys"}), False)


def layout(columns: int, rows: int) -> Layout | None:
    """The rows of each band on a terminal of this size; None where it is too small for a run."""
    if columns < SMALLEST[0] or rows < SMALLEST[1]:
        return None
    if columns < 80 or rows < 24:
        return _grown(_COMPACT, rows, False)
    return _grown(_USUAL if rows < 30 else _TALL, rows, columns >= WIDE and rows >= 30)


def _grown(base: Layout, rows: int, pictures: bool) -> Layout:
    """`base` with the rows that are left given to the instruction, then to the sight."""
    left = rows - base.rows
    do = min(left, 4)
    return Layout(
        base.do + do, base.ask, base.alone, base.ceiling, base.see + left - do, base.agree, base.rules, pictures
    )
