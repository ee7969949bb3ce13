"""The four proofs of empty: vent open, wall warm, no rise behind a shut vent, left open. None replaces another.

Judged from what was stated and read, never from time alone. The high gauge proves none of them: it cannot tell
nothing from two and a half bar.
"""

from __future__ import annotations

from collections.abc import Iterator
from typing import Final

from runbook.answers import Empty, LineKind
from runbook.run.clock import Moment
from runbook.run.gate import PROOFS
from runbook.run.reasons import NOT_YET, REFUSED, Code, Reason
from runbook.run.state import Ledger, Taken

WARM: Final = 233.15
"""[K] (-40 degC) above it no dry ice lies against an accessible wall for long (common practice)."""
WAIT_S: Final = 600.0
"""[s] that the wall stays warm, and that the vent stays shut."""
FRESH_S: Final = 120.0
"""[s] how old the newest reading of a proof may be, and how soon after shutting the first one comes."""
RISE: Final = 1.0e4
"""[Pa] the low gauge rises by less."""


def not_proved(ledger: Ledger, now: Moment, proof: str) -> tuple[Reason, ...]:
    """Why one of the four proofs cannot be confirmed yet; empty: it can."""
    line = ledger.present
    if line is None or line.kind is not LineKind.EMPTY or line.empty is None:
        return (Reason(REFUSED, Code.NO_EMPTY),)
    made = len(ledger.entry.proofs)
    wanted = PROOFS[made] if made < len(PROOFS) else ""
    if proof != wanted:
        return (Reason(REFUSED, Code.WRONG_PROOF, said=wanted),)
    empty = line.empty
    match proof:
        case "vent":
            return _open(ledger, empty, 0)
        case "wall":
            return tuple(_wall(ledger, now, empty))
        case "low gauge":
            return tuple(_low(ledger, now, empty))
        case _:
            return _open(ledger, empty, dict(ledger.entry.proofs)["low gauge"])


def _open(ledger: Ledger, empty: Empty, since: int) -> tuple[Reason, ...]:
    said = ledger.stated.get(empty.vent)
    if said is None or said.position != "open" or said.last_seq < since:
        return (Reason(NOT_YET, Code.VENT_NOT_STATED_OPEN, tag=empty.vent),)
    return ()


def _wall(ledger: Ledger, now: Moment, empty: Empty) -> Iterator[Reason]:
    warm: list[Taken] = []
    readings = ledger.in_entry(empty.wall)
    for taken in reversed(readings):
        if not taken.event.in_range or not taken.event.value - taken.event.U > WARM:
            break
        warm.append(taken)
    if not readings:
        yield Reason(NOT_YET, Code.WALL_WANTED, tag=empty.wall)
    elif not warm:
        yield Reason(NOT_YET, Code.WALL_COLD, tag=empty.wall, value=readings[-1].event.value, limit=WARM)
    else:
        lasted = now.lasted(warm[-1].at)
        if lasted < WAIT_S:
            yield Reason(NOT_YET, Code.WALL_SHORT, tag=empty.wall, seconds=WAIT_S - lasted, allowed_s=WAIT_S)
        age = now.age(warm[0].at)
        if not age <= FRESH_S:
            yield Reason(NOT_YET, Code.WALL_OLD, tag=empty.wall, seconds=age, allowed_s=FRESH_S)


def _low(ledger: Ledger, now: Moment, empty: Empty) -> Iterator[Reason]:
    shut = ledger.entry.vent_shut
    if shut is None:
        yield Reason(NOT_YET, Code.VENT_NOT_SHUT, tag=empty.vent)
        return
    at, seq = shut
    after = [t for t in ledger.in_entry(empty.low_gauge) if t.seq > seq]
    isolator = ledger.stated.get(empty.isolator)
    # Shut at the first reading, it could have hidden the rise.
    behind = after[0].seq if after else ledger.seq + 1
    shut_off = isolator is None or isolator.position != "open" or isolator.run_seq > behind
    if empty.isolator and shut_off:
        yield Reason(NOT_YET, Code.ISOLATOR_NOT_OPEN, tag=empty.isolator)
    if not after or not after[0].at.age(at) <= FRESH_S or not after[0].event.in_range:
        yield Reason(NOT_YET, Code.FIRST_WANTED, tag=empty.low_gauge, allowed_s=FRESH_S)
        return
    waited = now.lasted(at)
    if waited < WAIT_S:
        yield Reason(NOT_YET, Code.SHUT_SHORT, tag=empty.vent, seconds=WAIT_S - waited, allowed_s=WAIT_S)
        return
    second = after[-1]
    late = second.at.lasted(at) >= WAIT_S and now.age(second.at) <= FRESH_S
    if not late or not second.event.in_range:
        yield Reason(NOT_YET, Code.SECOND_WANTED, tag=empty.low_gauge, allowed_s=FRESH_S)
        return
    rise = second.event.value - after[0].event.value
    if not rise < RISE:
        yield Reason(NOT_YET, Code.GAUGE_RISES, tag=empty.low_gauge, value=rise, limit=RISE)
