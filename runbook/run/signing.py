"""Who may sign a hold point, and which readings a measuring hold still wants.

A signature is attested, not authenticated: the number tells two people at a bench apart, nothing more.
"""

from __future__ import annotations

import hashlib
from collections.abc import Iterator
from math import hypot

from runbook.answers import LineKind, Plan
from runbook.run.reasons import NOT_YET, REFUSED, Code, Reason
from runbook.run.state import Ledger, Taken


def number_sha256(name: str, number: str) -> str:
    """How a signing number stands in the record: SHA-256 of 'name:number'."""
    return hashlib.sha256(f"{name}:{number}".encode(errors="surrogatepass")).hexdigest()


def may_not_sign(plan: Plan, ledger: Ledger, by: str, number: str | None) -> tuple[Reason, ...]:
    """Why `by` may not sign where the run stands; empty: they may. number: None where it is not given yet."""
    line = ledger.present
    if line is None or line.hold is None or line.kind is not LineKind.HOLD:
        return (Reason(REFUSED, Code.NO_HOLD),)
    if ledger.entry.signed_by:
        return (Reason(REFUSED, Code.SIGNED_ALREADY, said=ledger.entry.signed_by),)
    person = ledger.person(by)
    if person is None:
        return (Reason(REFUSED, Code.UNKNOWN_PERSON, said=by),)
    found: list[Reason] = []
    if line.hold.signed_by not in person.roles:
        found.append(Reason(REFUSED, Code.WRONG_ROLE, said=line.hold.signed_by))
    if number is not None and number_sha256(by, number) != person.number_sha256:
        found.append(Reason(REFUSED, Code.WRONG_NUMBER, said=by))
    if performers(plan, ledger.line) & set(person.roles):
        found.append(Reason(REFUSED, Code.PERFORMED, said=by))
    if line.hold.read is not None:
        found += measured(ledger, line.hold.read.tag, by)
    return tuple(found)


def performers(plan: Plan, hold: int) -> frozenset[str]:
    """Roles that did something between the hold point, parked line or part before and this hold."""
    first = max((p.first for p in plan.parts if p.first <= hold), default=0)
    found: set[str] = set()
    for line in reversed(plan.lines[first:hold]):
        if line.kind in (LineKind.HOLD, LineKind.PARKED):
            break
        if line.who is not None:
            found.add(line.who)
        elif line.kind is LineKind.QUICK and plan.roles:
            found.add(plan.roles[0])
    return frozenset(found)


def readings_missing(plan: Plan, ledger: Ledger, signer: str) -> tuple[Reason, ...]:
    """What a measuring hold still wants before `signer` may sign; empty: nothing, also where nothing is measured."""
    line = ledger.present
    if line is None or line.hold is None or line.hold.read is None or ledger.entry.signed_by:
        return ()
    return tuple(measured(ledger, line.hold.read.tag, signer))


def measured(ledger: Ledger, tag: str, by: str) -> Iterator[Reason]:
    """What a measuring hold still wants before `by` may sign it."""
    here = ledger.in_entry(tag)
    own = next((t for t in reversed(here) if t.event.by == by and t.event.blind), None)
    if own is None:
        yield Reason(NOT_YET, Code.OWN_WANTED, tag=tag, said=by)
    elif not own.event.in_range:
        yield Reason(NOT_YET, Code.SIGN_OUTSIDE, tag=tag, value=own.event.value, said=by)
        return
    before = [t for t in ledger.before if t.event.tag == tag and t.event.line == ledger.line - 1]
    near = [t for t in (*before, *(t for t in ledger.here if t.event.tag == tag)) if t.seq > ledger.gap_seq]
    others = [t for t in near if t.event.by != by and (t.event.line == ledger.line - 1 or t in here)]
    if not others:
        yield Reason(NOT_YET, Code.OTHER_WANTED, tag=tag, said=by)
        return
    other = others[-1]
    if not other.event.in_range:
        yield Reason(NOT_YET, Code.SIGN_OUTSIDE, tag=tag, value=other.event.value, said=other.event.by)
        return
    if own is None or _same(own, other) or _third_decides(here, others, own):
        return
    off = abs(own.event.value - other.event.value)
    limit = hypot(own.event.U, other.event.U)
    yield Reason(NOT_YET, Code.DIFFER, tag=tag, value=off, limit=limit)


def _third_decides(here: tuple[Taken, ...], others: list[Taken], own: Taken) -> bool:
    """The last reading came after both and agrees with at least one of them."""
    third = here[-1]
    earlier = [t for t in others if t.seq < third.seq]
    if not earlier or third.seq <= own.seq or not third.event.in_range or not earlier[-1].event.in_range:
        return False
    return _same(third, own) or _same(third, earlier[-1])


def _same(one: Taken, other: Taken) -> bool:
    return abs(one.event.value - other.event.value) <= hypot(one.event.U, other.event.U)
