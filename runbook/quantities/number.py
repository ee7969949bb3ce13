"""A written number, strictly.

Refuses everything that Python's `float` would take and a technician would not write (nan, inf, 1_000), what a
float cannot carry (1e400, 1e-400), and the comma, which half the world reads as a decimal sign and the other
half between thousands.
"""

from __future__ import annotations

import math
import re
from typing import Final, NoReturn

from runbook.errors import QuantityError

_LEADING: Final = re.compile(r"[+\-−]?[0-9]+(?:\.[0-9]+)?(?:[eE][+\-−]?[0-9]+)?")
_COMMA: Final = re.compile(r"([+\-−]?)([0-9]+),([0-9]+)(?![0-9.,])")
_LONGEST: Final = 80
"""Characters of a refused text that a message repeats."""


def refuse(text: str, wrong: str, mend: str) -> NoReturn:
    """Raise QuantityError for a text, clipped and with nothing in it that would move a terminal's cursor."""
    shown = text if len(text) <= _LONGEST else text[:_LONGEST] + "…"
    raise QuantityError(*("".join(c if c.isprintable() else "\ufffd" for c in t) for t in (shown, wrong, mend)))


def short(text: str) -> None:
    """Refuse a text that is longer than any quantity, before anything looks at it closely."""
    if len(text) > 2 * _LONGEST:
        refuse(text, "is too long for a quantity", "write a number and its unit")


def split(text: str) -> tuple[str, str]:
    """The number and the unit of 'number unit', both as written, the unit's inner blanks made single.

    Raises QuantityError where the text does not begin with one plain number, or holds a second one.
    """
    text = text.strip()
    short(text)
    found = _LEADING.match(text)
    if found is None:
        _refuse_start(text)
    number, rest = found.group(), text[found.end() :]
    if rest[:1] == ",":
        _refuse_comma(text)
    if rest[:1] == ":":
        refuse(text, "is a time of day", "write a number and its unit, for example 30 min")
    if rest[:1] in ("_", "'", "’", ".") or re.match(r"[xXoObB][0-9A-Fa-f]", rest):
        refuse(text, "is not a plain number", "write digits with one point at most, for example 1170 or 0.15")
    return number, " ".join(rest.split())


def value(number: str, text: str) -> float:
    """The float of a number that `split` returned; text is the whole, for the message.

    Raises QuantityError where a float cannot carry it.
    """
    result = float(number.replace("−", "-"))
    if not math.isfinite(result):
        refuse(text, "is too large to compute with", "check the exponent")
    if result == 0 and re.search(r"[1-9]", re.split(r"[eE]", number)[0]):
        refuse(text, "is too small to compute with", "check the exponent")
    return result


def comma(text: str) -> tuple[str, str | None] | None:
    """A number with one comma, read both ways: (as decimal sign, as between thousands).

    The second is None where it cannot be; all is None where the text does not begin with such a number.
    """
    found = _COMMA.match(text.strip())
    if found is None:
        return None
    sign, whole, part = found.groups()
    thousands = len(part) == 3 and len(whole) <= 3 and not whole.startswith("0")
    return f"{sign}{whole}.{part}", f"{sign}{whole}{part}" if thousands else None


def _refuse_comma(text: str) -> NoReturn:
    readings = comma(text)
    if readings is None:
        refuse(text, "has a comma", "the decimal sign is a point, and nothing stands between thousands")
    rest = re.sub(r"^[^,]*,[0-9]+", "", text).rstrip()
    decimal, thousands = readings
    if thousands is None:
        refuse(text, "has a comma", f"the decimal sign is a point, write {decimal}{rest}")
    refuse(
        text,
        "has a comma, which can be read two ways",
        f"write {decimal}{rest} or {thousands}{rest}",
    )


def _refuse_start(text: str) -> NoReturn:
    if not text:
        refuse(text, "is empty", "write a number and its unit")
    if re.match(r"[+\-−]?(nan|inf)", text, re.IGNORECASE):
        refuse(text, "is not a number", "write the value, or leave the line out")
    if re.match(r"[+\-−]?\.[0-9]", text):
        refuse(text, "begins with a point", "write a digit before it, for example 0.5")
    refuse(text, "does not begin with a number", "write a number and its unit")
