"""A reading on its way into the record: whose, of what, how uncertain, and whether it lies where it should.

A reading outside its range is recorded, never refused: it is what the instrument showed.
"""

from __future__ import annotations

import math
from math import hypot
from typing import Final

from runbook.answers import Instrument, Need, Plan
from runbook.apparatus.instruments import ZERO_CELSIUS, expanded_uncertainty
from runbook.run.acts import Read
from runbook.run.events import ReadingTaken
from runbook.run.reasons import Code, Refused, refused
from runbook.run.state import Ledger

_RECTANGULAR: Final = 2.0 / math.sqrt(3.0)
"""[1] from the half-width of a bound to U at k = 2 (JCGM 100)."""


def reading_taken(plan: Plan, ledger: Ledger, act: Read) -> ReadingTaken | Refused:
    """The event of a reading; Refused where it is no number, or nobody knows the instrument or the person."""
    instrument = next((i for i in plan.instruments if i.tag == act.tag), None)
    if instrument is None:
        return refused(Code.UNKNOWN_TAG, tag=act.tag)
    if not math.isfinite(act.value):
        return refused(Code.NOT_FINITE, tag=act.tag, said=act.typed)
    if ledger.person(act.by) is None:
        return refused(Code.UNKNOWN_PERSON, said=act.by)
    accepted = all(inside(need, act.value) for need in asked_here(ledger) if need.tag == act.tag)
    return ReadingTaken(
        tag=act.tag,
        what=instrument.reads,
        value=act.value,
        U=uncertainty(plan, instrument, act.value),
        typed=act.typed,
        echo=act.echo,
        by=act.by,
        blind=act.blind,
        line=ledger.line,
        in_range=instrument.low <= act.value <= instrument.high and accepted,
    )


def asked_here(ledger: Ledger) -> tuple[Need, ...]:
    """Every reading that the present line asks for."""
    line = ledger.present
    if line is None:
        return ()
    held = () if line.hold is None or line.hold.read is None else (line.hold.read,)
    return (*line.reads, *line.read_after, *held)


def inside(need: Need, value: float) -> bool:
    """Whether a value [SI] lies in the accepted range."""
    return (need.low is None or need.low <= value) and (need.high is None or value <= need.high)


def uncertainty(plan: Plan, instrument: Instrument, value: float) -> float:
    """Expanded uncertainty of a reading, k = 2 [SI]; of a pressure with the barometer's.

    value: as read [SI; pressures absolute].
    """
    error = instrument.error
    if instrument.error_slope:
        error += instrument.error_slope * abs(value - ZERO_CELSIUS)
    U = expanded_uncertainty(error, instrument.half_division)
    return hypot(U, _RECTANGULAR * plan.barometer_bound) if instrument.reads == "pressure" else U
