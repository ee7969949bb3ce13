"""What a person in gloves types from a dial.

Kinder than a file in two things only: a bare number takes the unit printed on that dial, and one decimal
comma is read. Whatever is read is echoed in full before it counts; what can be read two ways is refused with
both.
"""

from __future__ import annotations

import re
from dataclasses import dataclass
from typing import Final

from runbook.errors import QuantityError
from runbook.quantities.dimension import Dimension
from runbook.quantities.lookup import find, unit
from runbook.quantities.number import comma, refuse, split
from runbook.quantities.single import PLUS_MINUS, level, to_si
from runbook.quantities.table import Unit
from runbook.quantities.values import Level

_LONGEST: Final = 40
"""Characters; no reading is longer, and a cat on the keyboard is."""


@dataclass(frozen=True, slots=True)
class Typed:
    """One reading as typed and understood."""

    value: float | Level
    """[SI]; a Level exactly where the dimension is a pressure."""
    echo: str
    """The number with the digits that were typed, and the unit in full: what the person must recognise."""
    unit: str
    """The unit it was read in: the dial's, or the one that was typed."""


def reading_from_typed(text: str, dial_unit: str, dimension: Dimension) -> Typed:
    """Understand a typed reading.

    Args:
        text: as typed; a bare number takes dial_unit.
        dial_unit: the unit printed on the dial; of a pressure it says gauge or absolute.
        dimension: what the dial measures.

    Raises QuantityError with what to type instead.
    """
    dial = unit(dial_unit)
    if not dial.serves(dimension):
        find(dial_unit, dimension, dial_unit, "1")
    plain = text.strip()
    if not plain:
        refuse(text, "is empty", f"type the number the dial shows, in {dial.shown}")
    if len(plain) > _LONGEST:
        refuse(plain, "is too long for a reading", f"type the number the dial shows, in {dial.shown}")
    if PLUS_MINUS.search(plain):
        refuse(plain, "has a ±", "type what the dial shows; its error is known")
    number, spelling = _split(plain, dial)
    found = find(spelling, dimension, plain, number) if spelling else dial
    si = to_si(number, found, f"{number} {found.symbol}")
    value = level(si, found) if dimension is Dimension.PRESSURE else si
    return Typed(value, f"{number} {found.shown}", found.symbol)


def _split(plain: str, dial: Unit) -> tuple[str, str]:
    """Number and unit, one decimal comma read as a point."""
    readings = comma(plain)
    if readings is not None:
        decimal, thousands = readings
        if thousands is not None:
            refuse(plain, "can be read two ways", f"type {decimal} or {thousands}")
        plain = re.sub(r"^[^,]*,[0-9]+", lambda _: decimal, plain)
    try:
        return split(plain)
    except QuantityError as problem:
        mend = f"type the number the dial shows, in {dial.shown}, for example 29.5"
        raise QuantityError(problem.text, problem.wrong, mend) from None
