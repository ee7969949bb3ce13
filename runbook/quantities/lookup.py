"""Finds a unit, or says which good one was meant.

Nothing is guessed: a near miss is refused with the spelling to write.
"""

from __future__ import annotations

import difflib
import re
from typing import Final, NoReturn

from runbook.quantities.dimension import Dimension
from runbook.quantities.number import refuse
from runbook.quantities.table import UNITS, Unit, symbols

_OTHER_WORDS: Final[dict[str, str]] = {
    "c": "degC", "celsius": "degC", "celcius": "degC", "centigrade": "degC", "grad": "degC", "deg": "degC",
    "°": "degC", "f": "degF", "fahrenheit": "degF", "kelvin": "K", "degk": "K", "°k": "K", "gr": "g",
    "gm": "g", "gms": "g", "gram": "g", "grams": "g", "gramme": "g", "kilo": "kg", "kilos": "kg",
    "kgs": "kg", "kilogram": "kg", "kilograms": "kg", "lbs": "lb", "pound": "lb", "pounds": "lb",
    "ounce": "oz", "ltr": "L", "litre": "L", "litres": "L", "liter": "L", "liters": "L", "m^3": "m3",
    "cbm": "m3", "cm^3": "cm3", "ccm": "cm3", "millilitre": "mL", "milliliter": "mL", "millilitres": "mL",
    "milliliters": "mL", "sec": "s", "secs": "s", "second": "s", "seconds": "s", "mins": "min",
    "minute": "min", "minutes": "min", "hr": "h", "hrs": "h", "hour": "h", "hours": "h", "day": "d",
    "days": "d", "metre": "m", "meter": "m", "metres": "m", "meters": "m", "inch": "in", "inches": "in",
    '"': "in", "feet": "ft", "foot": "ft", "watt": "W", "watts": "W", "percent": "%", "per cent": "%",
    "pct": "%", "ach": "per h", "degc/min": "K/min", "°c/min": "K/min", "c/min": "K/min", "degc/h": "K/h",
    "°c/h": "K/h", "kelvin/min": "K/min", "k per min": "K/min", "k a minute": "K/min", "cfm": "m3/h",
    "ata": "bar(a)", "atu": "bar(g)", "atü": "bar(g)", "kp/cm2": "kgf/cm2", "kg/cm2": "kgf/cm2",
    "at": "kgf/cm2", "pascal": "Pa", "bars": "bar", "torr": "Torr", "mm hg": "mmHg", "in hg": "inHg",
    "ft-lb": "lbf·ft", "ft lb": "lbf·ft", "ft·lb": "lbf·ft", "newton metre": "N·m", "newton meter": "N·m",
}  # fmt: skip
"""Words people write for a unit, in lower case: what to propose. None of them is read."""

_TAKEN: Final[dict[str, str]] = {"C": "coulomb", "F": "farad", "gr": "grain", "M": "mega"}
"""What a symbol already stands for elsewhere."""
_LONGEST: Final = 24
"""Longer than any unit: beyond it nothing near is looked for, which would take long."""
EXAMPLES: Final[dict[Dimension, str]] = {
    Dimension.MASS: "117 g", Dimension.VOLUME: "250 mL", Dimension.TEMPERATURE: "33 degC",
    Dimension.TEMPERATURE_DIFFERENCE: "2 K", Dimension.PRESSURE: "160 bar(g)",
    Dimension.PRESSURE_DIFFERENCE: "3 bar", Dimension.LENGTH: "60 mm", Dimension.TIME: "10 min",
    Dimension.POWER: "60 W", Dimension.HEAT_CAPACITY: "1.2 kJ/K", Dimension.CONDUCTANCE: "5 W/K",
    Dimension.DENSITY: "468 kg/m3", Dimension.FRACTION: "5 %", Dimension.CONCENTRATION: "0.5 %",
    Dimension.TEMPERATURE_RATE: "1 K/min", Dimension.PRESSURE_RATE: "1 bar/min", Dimension.TORQUE: "12 N·m",
    Dimension.FLOW: "10 L/min", Dimension.MASS_FLOW: "2 g/s", Dimension.AIR_CHANGES: "2 per h",
    Dimension.AREA: "3 mm2", Dimension.VELOCITY: "1 m/s",
}  # fmt: skip
"""One good text of each dimension."""


def unit(symbol: str) -> Unit:
    """The unit with this spelling. Raises QuantityError naming the nearest good one."""
    try:
        return UNITS[symbol]
    except KeyError:
        _unknown(symbol, symbol, None)


def find(spelling: str, dimension: Dimension, text: str, number: str) -> Unit:
    """The unit of a text for a dimension.

    Args:
        spelling: the unit as written, may be empty.
        dimension: what is wanted.
        text: the whole text, for the message.
        number: the number as written, for the proposal.

    Raises QuantityError where it is missing, unknown or of another dimension.
    """
    if not spelling:
        names = symbols(dimension)
        refuse(
            text,
            "has no unit",
            f"write for example {number} {names[0]} ({dimension.named} is in {_or(names)})",
        )
    found = UNITS.get(spelling)
    # '1' is a unit to say a ratio in; after a written number it is a second number.
    if found is None or spelling == "1":
        _unknown(spelling, text, dimension)
    if not found.serves(dimension):
        _refuse_dimension(found, dimension, text, number)
    return found


def _refuse_dimension(found: Unit, wanted: Dimension, text: str, number: str) -> NoReturn:
    if wanted is Dimension.PRESSURE and found.dimension is Dimension.PRESSURE_DIFFERENCE:
        refuse(text, "does not say gauge or absolute", f"say gauge or absolute: {_levels(found)}")
    wrong = f"is {found.dimension.named} where {wanted.named} is wanted"
    if wanted is Dimension.TEMPERATURE_DIFFERENCE and found.dimension is Dimension.TEMPERATURE:
        refuse(text, wrong, f"a temperature difference is in K, for example {number} K")
    if wanted is Dimension.PRESSURE_DIFFERENCE and found.dimension is Dimension.PRESSURE:
        refuse(text, wrong, "a pressure difference says neither gauge nor absolute, for example 3 bar")
    refuse(text, wrong, f"write for example {EXAMPLES[wanted]}")


def _levels(bare: Unit) -> str:
    if bare.symbol == "psi":
        return "psig or psia"
    return f"{bare.symbol}(g) or {bare.symbol}(a)"


def _unknown(spelling: str, text: str, dimension: Dimension | None) -> NoReturn:
    """Refuse an unknown spelling with the nearest good one."""
    if re.search(r"(^|\s|[-–—+])[0-9]", spelling):
        refuse(text, "holds more than one number", "write one number and its unit; a range is written 'A to B'")
    wrong = f"has an unknown unit, '{spelling[:_LONGEST]}'"
    near = _nearest(spelling, dimension)
    if near is not None:
        taken = f" ({spelling} alone is {_TAKEN[spelling]})" if spelling in _TAKEN else ""
        refuse(text, wrong, f"did you mean {near}?{taken}")
    refuse(text, wrong, "" if dimension is None else f"{dimension.named} is in {_or(symbols(dimension))}")


def _nearest(spelling: str, dimension: Dimension | None) -> str | None:
    """What to propose for a spelling: a good unit of the dimension, or of any where none is wanted."""
    if len(spelling) > _LONGEST:
        return None
    word = spelling.casefold()
    folded: dict[str, list[Unit]] = {}
    for name, known in UNITS.items():
        folded.setdefault(name.casefold(), []).append(known)
    close = [UNITS[_OTHER_WORDS[word]]] if word in _OTHER_WORDS else []
    for name in difflib.get_close_matches(word, folded, n=20, cutoff=0.6):
        close += folded[name]
    proposals = (_proposal(u, dimension) for u in close)
    return next((p for p in proposals if p is not None), None)


def _proposal(near: Unit, dimension: Dimension | None) -> str | None:
    """How to propose a unit where this dimension is wanted; None where it cannot be written there."""
    if dimension is None or near.serves(dimension):
        return near.symbol
    if dimension is Dimension.PRESSURE and near.dimension is Dimension.PRESSURE_DIFFERENCE:
        return _levels(near)
    return None


def _or(names: tuple[str, ...]) -> str:
    """'a, b or c'."""
    return names[0] if len(names) == 1 else f"{', '.join(names[:-1])} or {names[-1]}"
