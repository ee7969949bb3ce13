"""Which readings are wanted now, and when: an estimate may block, only a reading clears.

Nothing is wanted that nobody leans on. While a margin is narrow, readings are asked for twice as often.
"""

from __future__ import annotations

import math
from collections.abc import Iterator
from dataclasses import dataclass
from typing import Final

from runbook.answers import Judgement, LineKind, Need, Plan
from runbook.run.clock import Moment
from runbook.run.gate import PROOFS, raises
from runbook.run.proofs import FRESH_S
from runbook.run.readings import inside
from runbook.run.state import Ledger

SOON_S: Final = 120.0
"""[s] a reading that the next step leans on is wanted again when it is good for less than this."""


@dataclass(frozen=True, slots=True)
class Wanted:
    """One reading that is wanted."""

    need: Need
    due_s: float
    """When [s from now]; zero or negative: now, and that long overdue."""
    overdue: bool
    """It was due at a time that has passed: READ ... NOW."""
    purpose: str
    """'this step', 'signing', 'proof' or 'next step'."""
    blind: bool = False
    """By the signer, without sight of what is expected."""
    outside: bool = False
    """The last one lay outside the accepted range."""


def wanted(plan: Plan, ledger: Ledger, now: Moment) -> tuple[Wanted, ...]:
    """The most urgent first; each instrument once for each purpose."""
    if ledger.plan is None or ledger.outcome is not None or ledger.halted is not None or ledger.safe is not None:
        return ()
    found = [*_of_line(plan, ledger, now), *_of_next(plan, ledger, now)]
    tags = {w.need.tag for w in found if w.purpose != "next step"}
    kept = [w for w in found if w.purpose != "next step" or w.need.tag not in tags]
    return tuple(sorted(kept, key=lambda w: w.due_s))


def _of_line(plan: Plan, ledger: Ledger, now: Moment) -> Iterator[Wanted]:
    line = ledger.present
    if line is None:
        return
    yield from (w for need in line.reads if (w := _asked(ledger, need, now)) is not None)
    if line.kind is LineKind.QUICK and len(ledger.entry.quick) >= len(line.quick):
        yield from (w for need in line.read_after if (w := _asked(ledger, need, now)) is not None)
    if line.hold is not None and line.hold.read is not None and not ledger.entry.signed_by:
        own = [t for t in ledger.in_entry(line.hold.read.tag) if t.event.blind]
        if not own:
            yield Wanted(line.hold.read, 0.0, False, "signing", blind=True)
    if line.empty is not None and len(ledger.entry.proofs) < len(PROOFS):
        due = {"wall": line.empty.wall, "low gauge": line.empty.low_gauge}.get(PROOFS[len(ledger.entry.proofs)])
        if due is not None and (found := _of_proof(plan, ledger, due, now)) is not None:
            yield found


def _asked(ledger: Ledger, need: Need, now: Moment) -> Wanted | None:
    """A reading the line asks for: once, or again and again."""
    taken = ledger.reading(need.tag)
    here = taken is not None and taken.seq > ledger.entry.seq
    if need.every_s is None:
        if here and taken is not None and taken.event.in_range and now.age(taken.at) <= need.fresh_s:
            return None
        outside = here and taken is not None and not inside(need, taken.event.value)
        return Wanted(need, 0.0, False, "this step", outside=outside)
    allowed = min(need.fresh_s, need.every_s, _good_for(ledger))
    if _narrow(ledger):
        allowed *= 0.5
    since = taken.at if here and taken is not None else ledger.entry.at
    due = allowed - now.age(since)
    outside = here and taken is not None and not taken.event.in_range
    return Wanted(need, due, due < 0.0, "this step", outside=outside)


def _of_next(plan: Plan, ledger: Ledger, now: Moment) -> Iterator[Wanted]:
    """What the next line leans on, where it raises a hazard; of a line turned back, what that line leans on."""
    to = ledger.line if ledger.entry.turned_back is not None else ledger.line + 1
    if not 0 <= to < len(plan.lines) or not raises(plan.lines[to]):
        return
    for need in plan.lines[to].entry_needs:
        taken = ledger.reading(need.tag)
        if taken is None:
            yield Wanted(need, 0.0, False, "next step")
            continue
        left = min(need.fresh_s, _good_for(ledger)) - now.age(taken.at)
        if left < SOON_S:
            yield Wanted(need, left, left < 0.0, "next step")


def _of_proof(plan: Plan, ledger: Ledger, tag: str, now: Moment) -> Wanted | None:
    dial = next((i for i in plan.instruments if i.tag == tag), None)
    if dial is None:
        return None
    taken = ledger.in_entry(tag)
    due = FRESH_S - now.age(taken[-1].at) if taken else 0.0
    return Wanted(Need(tag, dial.reads, dial.unit, every_s=FRESH_S), due, due < 0.0, "proof")


def _good_for(ledger: Ledger) -> float:
    last = ledger.last_answer
    return math.inf if last is None or last.good_for_s is None else last.good_for_s


def _narrow(ledger: Ledger) -> bool:
    return ledger.answer is not None and any(m.judgement is not Judgement.CLEAR for m in ledger.answer.now)
