"""A reading can be read on its dial, its instrument is good enough for what is asked, and it says what if not."""

from __future__ import annotations

from collections.abc import Iterator
from typing import Final

from runbook.apparatus.dial import Dial
from runbook.apparatus.instruments import permissible_error
from runbook.apparatus.model import Apparatus, Instrument
from runbook.procedure.document import Route
from runbook.procedure.lines import Found, lines_of, readings_of
from runbook.procedure.model import Procedure, ReadStep
from runbook.quantities import Level, say, to_unit

_ATMOSPHERE: Final = 101325.0
"""Brings an absolute and a gauge level together where a file mixes them [Pa]."""
_STEADY_SHARE: Final = 0.75
"""Of full scale: a steady pressure is read below it, EN 837-2."""


def readings(procedure: Procedure, apparatus: Apparatus) -> Iterator[Found]:
    """Rules 'reading outside dial', 'no act outside limits', 'instrument too coarse' and 'high on the dial'."""
    instruments = {i.tag: i for i in apparatus.instruments}
    for line in lines_of(procedure):
        for route, read in readings_of(line):
            one = instruments.get(read.with_)
            if read.accept is None or one is None or one.reads != read.what:
                continue
            if read.if_not is None:
                yield Found(
                    "no act outside limits",
                    route,
                    f"{read.with_} has a range to accept, but not what to do outside it: add if_not",
                )
            yield from _on_dial((*route, "accept"), read, one)


def _on_dial(route: Route, read: ReadStep, one: Instrument) -> Iterator[Found]:
    low, high = _ends(read)
    bottom, top = _number(one.dial.low), _number(one.dial.high)
    for end in (low, high):
        # A zero check accepts what the gauge may be off, which lies below its first mark: half a division is read.
        off = permissible_error(one, bottom) + one.division.value / 2.0
        slack = off * (1.0 + 1e-9) if one.reads == "pressure" else 0.0
        if end is not None and not bottom - slack - 1e-9 * abs(bottom) <= end <= top * (1.0 + 1e-12):
            yield Found(
                "reading outside dial",
                route,
                f"{one.tag} ends at {_said(bottom, one.dial)} and {_said(top, one.dial)}: this cannot be read on it; "
                + _within(end, bottom, slack, one.dial),
            )
            return
    if low is not None and high is not None:
        error = permissible_error(one, 0.5 * (low + high))
        if high - low < 2.0 * error * (1.0 - 1e-9):
            yield Found(
                "instrument too coarse",
                route,
                f"the range is narrower than the permissible error of {one.tag} on both sides: "
                "widen it, or read a better instrument",
            )
    if high is not None and one.reads == "pressure" and high > bottom + _STEADY_SHARE * (top - bottom):
        yield Found("high on the dial", route, f"above three quarters of the scale of {one.tag}", "advice")


def _within(end: float, bottom: float, slack: float, dial: Dial) -> str:
    if end > bottom:
        return "write a range that ends on the dial, or read another gauge"
    lowest = f"begin at {_said(bottom - slack, dial)}" if slack else "begin on the dial"
    return f"{lowest}, or leave that end out: up to ..."


def _ends(read: ReadStep) -> tuple[float | None, float | None]:
    if read.accept is None:
        return None, None
    low, high = read.accept.low, read.accept.high
    return None if low is None else _number(low), None if high is None else _number(high)


def _number(value: float | Level) -> float:
    return value.gauge(_ATMOSPHERE) if isinstance(value, Level) else value


def _said(value: float, dial: Dial) -> str:
    if isinstance(dial.low, Level):
        shift = _ATMOSPHERE if dial.low.reference == "absolute" else 0.0
        return f"{to_unit(value + shift, dial.unit):g} {dial.unit}"
    return say(value, dial.unit)
