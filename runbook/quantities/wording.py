"""SI into text, in the unit somebody asked for.

Never decides on a unit, never drops the reference of a pressure, and never prints a number for something
unknown.
"""

from __future__ import annotations

import math
from typing import Final

from runbook.quantities.lookup import unit
from runbook.quantities.number import refuse
from runbook.quantities.table import Unit
from runbook.quantities.values import NOT_KNOWN, Level

UNKNOWN: Final[str] = NOT_KNOWN.value
_FIGURES: Final = 4
"""Significant figures where the caller asks for no decimals; whole digits are never rounded away."""


def to_unit(value: float, symbol: str) -> float:
    """An SI value in this unit; a pressure level keeps the reference it had. Raises QuantityError."""
    return _in(value, unit(symbol))


def pressure_to_unit(absolute_Pa: float, symbol: str, barometer_Pa: float) -> float:
    """An absolute pressure, [Pa], in this unit and its reference, at this room pressure, [Pa].

    Raises QuantityError where the unit says neither gauge nor absolute.
    """
    found = unit(symbol)
    if found.reference is None:
        refuse(symbol, "does not say gauge or absolute", "for example bar(g) or bar(a)")
    return _in(absolute_Pa if found.reference == "absolute" else absolute_Pa - barometer_Pa, found)


def say(value: float, symbol: str, digits: int | None = None) -> str:
    """'62.6 bar' from an SI value; digits: decimals, or None for four significant figures.

    A value that is not finite gives 'not known'. Raises QuantityError for an unknown unit.
    """
    return _text(to_unit(value, symbol), symbol, digits)


def say_level(level: Level | float, symbol: str, barometer_Pa: float, digits: int | None = None) -> str:
    """'62.6 bar(g)' from a Level or an absolute pressure, [Pa], at this room pressure, [Pa]."""
    absolute = level.absolute(barometer_Pa) if isinstance(level, Level) else level
    return _text(pressure_to_unit(absolute, symbol, barometer_Pa), symbol, digits)


def _in(value: float, found: Unit) -> float:
    return (value - found.offset) / found.factor


def _text(number: float, symbol: str, digits: int | None) -> str:
    if not math.isfinite(number):
        return UNKNOWN
    if digits is not None:
        body = f"{number:.{digits}f}"
    else:
        decimals = _FIGURES if number == 0 else max(0, _FIGURES - 1 - math.floor(math.log10(abs(number))))
        body = f"{number:.{decimals}f}"
        body = body.rstrip("0").rstrip(".") if "." in body else body
    if float(body) == 0:
        body = body.lstrip("-")
    return f"{body} {unit(symbol).shown}"
