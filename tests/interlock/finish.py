"""Whether the line a run stands in is finished, judged from the list of what has happened.

Part of the second interlock (model.py), apart from it only so that the list can be asked about an earlier moment.
"""

from __future__ import annotations

from runbook.answers import LineKind, Need
from runbook.run.clock import Moment
from runbook.run.events import NotAttended, Proved, QuickConfirmed, Signed, WitnessCame
from tests.interlock.past import Past
from tests.interlock.points import PROOFS, count


def finished(past: Past, now: Moment) -> bool:
    """Nothing of the line is still to be done, and the way back does not stand on the screen."""
    line = past.line()
    if line is None:
        return True
    if past.turned_back():
        return False
    match line.kind:
        case LineKind.DO | LineKind.PARKED:
            return _read(past, line.reads, now)
        case LineKind.HOLD:
            return count(past, Signed) > 0
        case LineKind.WITNESS:
            return count(past, WitnessCame, NotAttended) > 0
        case LineKind.QUICK:
            done = count(past, QuickConfirmed) == len(line.quick)
            return done and _read(past, line.read_after, now)
        case LineKind.EMPTY:
            return count(past, Proved) == len(PROOFS)


def _read(past: Past, needs: tuple[Need, ...], now: Moment) -> bool:
    """Each latest reading was taken in this entry, is accepted and is young enough."""
    for need in needs:
        readings = past.readings(need.tag, past.entry())
        if not readings:
            return False
        _, reading, at = readings[-1]
        limit = need.fresh_s if need.every_s is None else min(need.fresh_s, need.every_s)
        if not reading.in_range or now.age(at) > limit:
            return False
    return True
