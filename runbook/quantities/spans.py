"""A value with its bound, and ranges: '117 g ± 2 g', '105 g to 150 g', 'up to 200 bar(g)'.

Each number carries its own unit. The ± of a temperature is in K and that of a pressure level says neither
gauge nor absolute; it may be a percentage of the value as written, where the value has a true zero.
"""

from __future__ import annotations

import re
from typing import Final

from runbook.quantities.dimension import Dimension
from runbook.quantities.lookup import EXAMPLES
from runbook.quantities.number import refuse, short, split
from runbook.quantities.single import (
    PLUS_MINUS,
    level,
    not_a_level,
    number_and_unit,
    parse,
    parse_level,
    to_si,
)
from runbook.quantities.values import Bounded, BoundedLevel, LevelRange, Range

_DIFFERENCE: Final = {
    Dimension.TEMPERATURE: Dimension.TEMPERATURE_DIFFERENCE,
    Dimension.PRESSURE: Dimension.PRESSURE_DIFFERENCE,
}
"""What the ± of a dimension is; its own where it is not listed."""
_POINTS: Final = (Dimension.FRACTION, Dimension.CONCENTRATION)
"""Dimensions whose ± in % means percentage points, so that '5 % ± 1 %' is 4 % to 6 %."""
_ONE_END: Final = re.compile(r"\s*(up to|at most|at least)\s+(.+)", re.IGNORECASE | re.DOTALL)
_TWO_ENDS: Final = re.compile(r"\s*(?:from\s+)?(.+?)\s+to\s+(.+)", re.IGNORECASE | re.DOTALL)


def parse_bounded(text: str, dimension: Dimension) -> Bounded:
    """The value and its bound, [SI]; without ± the bound is 0. Raises QuantityError."""
    not_a_level(dimension)
    body, plus_minus = _parted(text)
    si = parse(body, dimension)
    return Bounded(si, 0.0 if plus_minus is None else _plus_minus(text, plus_minus, dimension, si))


def parse_bounded_level(text: str) -> BoundedLevel:
    """The level and its bound; without ± the bound is 0. Raises QuantityError."""
    body, plus_minus = _parted(text)
    number, found = number_and_unit(body, Dimension.PRESSURE)
    read = level(to_si(number, found, body), found)
    if plus_minus is None:
        return BoundedLevel(read)
    return BoundedLevel(read, _plus_minus(text, plus_minus, Dimension.PRESSURE, read.pascal))


def parse_range(text: str, dimension: Dimension) -> Range:
    """'A to B', 'from A to B', 'up to B', 'at most B', 'at least A', [SI]. Raises QuantityError."""
    not_a_level(dimension)
    low, high = _ends(text, EXAMPLES[dimension])
    ends = (None if low is None else parse(low, dimension), None if high is None else parse(high, dimension))
    if ends[0] is not None and ends[1] is not None and ends[0] > ends[1]:
        _refuse_order(text)
    return Range(*ends)


def parse_level_range(text: str) -> LevelRange:
    """As parse_range, of pressure levels with one reference. Raises QuantityError."""
    low, high = _ends(text, EXAMPLES[Dimension.PRESSURE])
    least, most = (None if low is None else parse_level(low), None if high is None else parse_level(high))
    if least is not None and most is not None:
        if least.reference != most.reference:
            refuse(text, "mixes gauge and absolute", "write both ends gauge or both absolute")
        if least.pascal > most.pascal:
            _refuse_order(text)
    return LevelRange(least, most)


def _parted(text: str) -> tuple[str, str | None]:
    """The text before and after its ±; None where there is none."""
    body, *rest = PLUS_MINUS.split(text)
    if len(rest) > 1:
        refuse(text, "has more than one ±", "write one value and one ±")
    return body, rest[0] if rest else None


def _plus_minus(text: str, part: str, dimension: Dimension, si: float) -> float:
    """The bound, [SI], of a ± part."""
    if not part.strip():
        refuse(text, "has nothing after its ±", "write the bound with its unit")
    _, spelling = split(part)
    if spelling == "%" and dimension not in _POINTS:
        if dimension is Dimension.TEMPERATURE:
            refuse(text, "has a percentage of a temperature", "write its ± in K")
        bound = parse(part, Dimension.FRACTION) * abs(si)
    else:
        bound = parse(part, _DIFFERENCE.get(dimension, dimension))
    if bound < 0:
        refuse(text, "has a negative ±", "write it without the sign")
    return bound


def _ends(text: str, example: str) -> tuple[str | None, str | None]:
    """The texts of the two ends; None where there is none."""
    short(text.strip())
    if PLUS_MINUS.search(text):
        refuse(text, "has a ± in a range", "write the lowest and the highest value")
    one = _ONE_END.fullmatch(text)
    if one is not None:
        words, end = one.group(1).lower(), one.group(2)
        return (end, None) if words == "at least" else (None, end)
    two = _TWO_ENDS.fullmatch(text)
    if two is None:
        refuse(text, "is no range", f"write 'A to B', 'up to B' or 'at least A', for example up to {example}")
    low, high = two.groups()
    number, spelling = split(low)
    if not spelling:
        unit = split(high)[1]
        refuse(text, "has no unit at its lower end", f"write {number} {unit} to {high.strip()}")
    return low, high


def _refuse_order(text: str) -> None:
    refuse(text, "ends below where it begins", "write the lowest first")
