"""One linear ruler from zero to a quarter beyond the ceiling: who reads nothing else reads the gap.

Linear on purpose: on a logarithmic one the last third before the ceiling shrinks to nothing.
"""

from __future__ import annotations

import math
from dataclasses import dataclass

from runbook.drawing.glyphs import UNICODE, Glyphs

BEYOND = 1.25
"""[1] the ruler ends here, as a multiple of the ceiling, so that the forbidden side is seen too."""


@dataclass(frozen=True, slots=True)
class Ruler:
    """What stands on the ruler, all in the one unit that is shown."""

    now: float | None
    """The present value [shown unit]; None: not known."""
    uncertainty: float | None
    """Its expanded uncertainty [shown unit]; None: not known, drawn as none."""
    worst: float | None
    """Worst of this step, uncertainty included [shown unit]; None: not known or no step."""
    ceiling: float | None
    """The limit that governs [shown unit]; None: not known, and then nothing can be drawn to scale."""


def ruler_picture(ruler: Ruler, columns: int, glyphs: Glyphs = UNICODE) -> str:
    """The ruler as one row of `columns` characters [1].

    Where the ceiling or the present value is not known the row says so with question marks: an empty ruler
    would look like a cell without pressure.
    """
    ceiling = ruler.ceiling
    if columns <= 0:
        return ""
    if ceiling is None or not math.isfinite(ceiling) or ceiling <= 0.0:
        return glyphs.unknown * columns

    def column(value: float) -> int:
        # A value beyond the end still shows, in the last column.
        return min(columns, max(0, round(value / (BEYOND * ceiling) * columns)))

    wall = min(columns - 1, column(ceiling))
    now = _known(ruler.now)
    row = [glyphs.free] * wall + [glyphs.forbidden] * (columns - wall)
    if now is None:
        row[:wall] = [glyphs.unknown] * wall
    else:
        upper = now + (_known(ruler.uncertainty) or 0.0)
        _fill(row, column(now), column(upper), glyphs.uncertain)
        row[: column(now)] = [glyphs.filled] * column(now)
        if (worst := _known(ruler.worst)) is not None and worst > upper:
            _fill(row, column(upper), column(worst), glyphs.reach)
    if (worst := _known(ruler.worst)) is not None and worst < ceiling:
        # Rounding must not let the worst fall onto the wall while it is still short of it.
        row[min(column(worst), wall - 1) if wall else 0] = glyphs.worst
    elif worst is not None:
        row[min(columns - 1, max(column(worst), wall + 1))] = glyphs.worst
    row[wall] = glyphs.ceiling
    return "".join(row)


def _known(value: float | None) -> float | None:
    return value if value is not None and math.isfinite(value) else None


def _fill(row: list[str], start: int, end: int, glyph: str) -> None:
    row[start:end] = [glyph] * (end - start)
