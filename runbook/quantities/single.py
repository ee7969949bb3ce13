"""One quantity from a text: `number unit`, nothing else.

A pressure level is read by `parse_level` and never becomes a bare number, because a number alone has lost its
reference.
"""

from __future__ import annotations

import math
import re
from typing import Final

from runbook.quantities.dimension import Dimension
from runbook.quantities.lookup import find, unit
from runbook.quantities.number import refuse, split, value
from runbook.quantities.table import UNITS, Unit
from runbook.quantities.values import Level

PLUS_MINUS: Final = re.compile(r"±|\+-|\+/-")
_RANGE: Final = re.compile(r"(^\s*(up to|at least|at most|from)\b)|\bto\b", re.IGNORECASE)
_LOWEST_GAUGE_PA: Final = -1.1e5
"""Below any room's pressure: no gauge can be lower, [Pa]."""
_ROOM_PA: Final = (3e4, 1.1e5)
"""Room pressures from the highest peak to the heaviest weather at sea level, [Pa]."""


def parse(text: str, dimension: Dimension) -> float:
    """The value of `text`, [SI]. Raises QuantityError; ValueError for PRESSURE (use parse_level)."""
    not_a_level(dimension)
    number, found = number_and_unit(text, dimension)
    return to_si(number, found, text)


def parse_level(text: str) -> Level:
    """The pressure level of `text`, whose unit says gauge or absolute. Raises QuantityError."""
    number, found = number_and_unit(text, Dimension.PRESSURE)
    return level(to_si(number, found, text), found)


def parse_barometer(text: str) -> float:
    """The room's absolute pressure, [Pa]. A barometer's unit need not say absolute; it may not say gauge.

    Raises QuantityError, also for what no room has (below 300 or above 1100 hPa).
    """
    one_value(text)
    number, spelling = split(text)
    found = UNITS.get(spelling)
    if found is None or not (found.dimension is Dimension.PRESSURE_DIFFERENCE or found.reference == "absolute"):
        if found is not None and found.dimension is Dimension.PRESSURE:
            refuse(text, "is not an absolute pressure", "a barometer reads absolute, for example 1013 hPa")
        if not spelling:
            refuse(text, "has no unit", f"write for example {number} hPa (or mbar, kPa, mmHg, inHg)")
        found = find(spelling, Dimension.PRESSURE_DIFFERENCE, text, number)
    pascal = to_si(number, found, text)
    if not _ROOM_PA[0] <= pascal <= _ROOM_PA[1]:
        refuse(text, "is the pressure of no room", "between 300 hPa and 1100 hPa, read in the room itself")
    return pascal


def number_and_unit(text: str, dimension: Dimension) -> tuple[str, Unit]:
    """The number as written and the unit of a text that holds one value. Raises QuantityError."""
    one_value(text)
    number, spelling = split(text)
    return number, find(spelling, dimension, text.strip(), number)


def unit_in(text: str) -> Unit:
    """The unit of the first quantity in a text such as '0 bar(g) to 160 bar(g)'. Raises QuantityError."""
    first = re.sub(r"^\s*(up to|at least|at most|from)\s+", "", text, flags=re.IGNORECASE)
    first = re.split(r"\s+to\s+", PLUS_MINUS.split(first)[0])[0]
    number, spelling = split(first)
    if not spelling:
        refuse(text, "has no unit", f"write the unit after {number}")
    return unit(spelling)


def one_value(text: str) -> None:
    """Refuse a range and a ±, where one value is wanted."""
    if PLUS_MINUS.search(text):
        refuse(text, "has a ±", "one value without ± is wanted here")
    if _RANGE.search(text):
        refuse(text, "is a range", "one value is wanted here")


def to_si(number: str, found: Unit, text: str) -> float:
    """SI value of a number written in a unit, within what nature allows. Raises QuantityError."""
    result = value(number, text) * found.factor + found.offset
    if not math.isfinite(result):
        refuse(text, "is too large to compute with", "check the exponent")
    if found.dimension is Dimension.TEMPERATURE and result < 0:
        refuse(text, "is below absolute zero", "check the sign and the unit")
    if found.reference == "absolute" and result < 0:
        refuse(text, "is an absolute pressure below zero", "check the sign, or write a gauge pressure")
    if found.reference in ("gauge", "vacuum") and result < _LOWEST_GAUGE_PA:
        refuse(text, "is lower than an empty vessel", "write -1 bar(g), or leave that end out: up to ...")
    return result


def level(pascal: float, found: Unit) -> Level:
    """The level of an SI value written in a pressure unit; a vacuum is a gauge level."""
    return Level(pascal, "absolute" if found.reference == "absolute" else "gauge")


def not_a_level(dimension: Dimension) -> None:
    """Raise ValueError for PRESSURE: the caller took the function that would lose the reference."""
    if dimension is Dimension.PRESSURE:
        raise ValueError("a pressure level keeps its reference: use the functions whose names say level")
