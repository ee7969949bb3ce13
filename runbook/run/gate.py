"""The interlock of one step: whether the present line is finished, and whether another may be entered.

There is no override here and no way round: each rule that fails is a reason, and none is left out because
another failed. Unknown counts against a step that raises a hazard, never against one that only lowers.
"""

from __future__ import annotations

import math
from collections.abc import Iterator

from runbook.answers import Answer, Effect, Judgement, LineKind, Margin, Need, Plan, PlanLine
from runbook.run.clock import Moment
from runbook.run.questions import UNKNOWN
from runbook.run.reasons import BLOCKED, NOT_YET, Code, Reason
from runbook.run.state import Ledger, Taken

PROOFS = ("vent", "wall", "low gauge", "left open")
"""The four proofs of empty, in their order."""


def raises(line: PlanLine) -> bool:
    """The line raises a hazard, or nobody knows."""
    return any(effect in (Effect.RAISES, Effect.UNKNOWN) for _, effect in line.effects)


def lowers(line: PlanLine) -> bool:
    """The line lowers a hazard."""
    return any(effect is Effect.LOWERS for _, effect in line.effects)


def only_lowers(line: PlanLine) -> bool:
    """It may always be entered."""
    return lowers(line) and not raises(line)


def is_blocked(margin: Margin) -> bool:
    """Zero, negative or unknown, whatever its judgement says."""
    good = margin.margin is not None and margin.margin > 0.0
    return margin.judgement is Judgement.BLOCKED or not good


# -- the present line ------------------------------------------------------------------------------------


def unfinished(plan: Plan, ledger: Ledger, now: Moment) -> tuple[Reason, ...]:
    """What is not yet done in the present line; empty: it is finished."""
    line = ledger.present
    if line is None:
        return ()
    entry = ledger.entry
    found: list[Reason] = []
    if entry.turned_back is not None:
        found.append(Reason(NOT_YET, Code.TURNED_BACK, said=entry.turned_back))
    match line.kind:
        case LineKind.DO | LineKind.PARKED:
            found += _wanted(ledger, line.reads, now)
        case LineKind.HOLD:
            if not entry.signed_by:
                role = line.hold.signed_by if line.hold is not None else ""
                found.append(Reason(NOT_YET, Code.NOT_SIGNED, said=role))
        case LineKind.WITNESS:
            if not entry.witness:
                wait = line.witness.wait_s if line.witness is not None else 0.0
                called = line.witness.called if line.witness is not None else ""
                left = max(0.0, wait - now.lasted(entry.at))
                found.append(Reason(NOT_YET, Code.WITNESS_WAITED, seconds=left, said=called))
        case LineKind.QUICK:
            if len(entry.quick) < len(line.quick):
                found.append(Reason(NOT_YET, Code.QUICK_NOT_DONE, said=line.quick[len(entry.quick)].text))
            found += _wanted(ledger, line.read_after, now)
        case LineKind.EMPTY:
            if len(entry.proofs) < len(PROOFS):
                found.append(Reason(NOT_YET, Code.PROOF_NOT_MADE, said=PROOFS[len(entry.proofs)]))
    return tuple(found)


def _wanted(ledger: Ledger, needs: tuple[Need, ...], now: Moment) -> Iterator[Reason]:
    for need in needs:
        taken = _latest_here(ledger, need.tag)
        if taken is None:
            yield Reason(NOT_YET, Code.READING_WANTED, tag=need.tag, need=need)
            continue
        if not taken.event.in_range:
            yield Reason(NOT_YET, Code.READING_OUTSIDE, tag=need.tag, need=need, value=taken.event.value)
        allowed = min(need.fresh_s, math.inf if need.every_s is None else need.every_s)
        age = now.age(taken.at)
        if not age <= allowed:
            yield Reason(NOT_YET, Code.READING_OLD, tag=need.tag, need=need, seconds=age, allowed_s=allowed)


def _latest_here(ledger: Ledger, tag: str) -> Taken | None:
    """The last reading, where it was taken in this entry and since the last gap."""
    taken = ledger.reading(tag)
    return taken if taken is not None and taken.seq > ledger.entry.seq else None


# -- another line ----------------------------------------------------------------------------------------


def gate(plan: Plan, ledger: Ledger, now: Moment, to: int) -> tuple[Reason, ...]:
    """What blocks entering line `to`; empty: nothing."""
    line = plan.lines[to]
    answer = ledger.answer
    found: list[Reason] = list(_containment(plan, ledger, now)) if line.opens_containment else []
    if not raises(line):
        return tuple(found)
    if lowers(line) and not (answer is not None and answer.left_alone.at_rest):
        # It lowers one hazard where the vessel is not at rest: to wait would be worse.
        return tuple(found)
    if ledger.gap_open:
        found.append(Reason(BLOCKED, Code.GAP_OPEN))
    found += _needs(plan, ledger, now, line, answer)
    found += _answered(ledger, line, answer)
    found += _passed_holds(plan, ledger, to)
    if line.committing:
        found += [
            Reason(BLOCKED, Code.CERTIFICATE, tag=c.tag, said=f"{c.what}: {c.state}")
            for c in plan.certificates
            if c.state != "valid"
        ]
    return tuple(found)


def _containment(plan: Plan, ledger: Ledger, now: Moment) -> Iterator[Reason]:
    vent = plan.let_down_valve
    if not ledger.empty_proved:
        yield Reason(BLOCKED, Code.NOT_PROVED_EMPTY)
    if vent is None or _position_after_leaving(plan, ledger, now, vent) != "open":
        yield Reason(BLOCKED, Code.VENT_NOT_OPEN, tag=vent or "")


def _position_after_leaving(plan: Plan, ledger: Ledger, now: Moment, tag: str) -> str:
    """Of a valve, once going on has confirmed what the present line does to it, if that line is finished.

    What an unfinished line moves to another position is not known: taking it up confirms nothing.
    """
    line = ledger.present
    moves = dict(line.valves) if line is not None else {}
    if tag in moves and not unfinished(plan, ledger, now):
        return moves[tag]
    stands = ledger.position(tag)
    return stands if moves.get(tag, stands) == stands else UNKNOWN


def _needs(plan: Plan, ledger: Ledger, now: Moment, line: PlanLine, answer: Answer | None) -> Iterator[Reason]:
    dials = {i.tag: i for i in plan.instruments}
    for need in line.entry_needs:
        taken = ledger.reading(need.tag)
        if taken is None or not math.isfinite(taken.event.value):
            yield Reason(BLOCKED, Code.NEED_MISSING, tag=need.tag, need=need)
            continue
        dial = dials.get(need.tag)
        if dial is None or not dial.low <= taken.event.value <= dial.high:
            yield Reason(BLOCKED, Code.NEED_OUTSIDE, tag=need.tag, need=need, value=taken.event.value)
        good_for = answer.good_for_s if answer is not None else None
        allowed = need.fresh_s if good_for is None else min(need.fresh_s, good_for)
        age = now.age(taken.at)
        if not age <= allowed:
            yield Reason(BLOCKED, Code.NEED_OLD, tag=need.tag, need=need, seconds=age, allowed_s=allowed)


def _answered(ledger: Ledger, line: PlanLine, answer: Answer | None) -> Iterator[Reason]:
    if answer is None:
        why = ledger.unanswered
        yield Reason(BLOCKED, Code.NO_ANSWER, said="" if why is None else why.why)
        return
    if not answer.valid:
        yield Reason(BLOCKED, Code.NOT_VALID)
    for margin in answer.now:
        if is_blocked(margin):
            yield Reason(BLOCKED, Code.MARGIN_NOW, tag=margin.limit, margin=margin)
    for margin in answer.ahead:
        if is_blocked(margin):
            yield Reason(BLOCKED, Code.MARGIN_AHEAD, tag=margin.limit, margin=margin)
    agreement = answer.agreement
    if agreement.verdict == "disagrees":
        yield Reason(BLOCKED, Code.DISAGREES, tag=agreement.tag or "")
    elif line.leans_on and agreement.verdict != "agrees":
        # The lean is named, because the way on differs: another thermometer, another gauge, a height.
        yield Reason(BLOCKED, Code.CANNOT_TELL, tag=agreement.tag or "", said=", ".join(line.leans_on))
    if line.needs_charge_proof and not answer.charge_proved:
        said = answer.charge.contradiction if answer.charge is not None else ""
        yield Reason(BLOCKED, Code.CHARGE_NOT_PROVED, said=said)


def _passed_holds(plan: Plan, ledger: Ledger, to: int) -> Iterator[Reason]:
    for index in range(plan.parts[ledger.part].first if plan.parts else 0, to):
        line = plan.lines[index]
        if line.kind is LineKind.HOLD and index not in ledger.signed_lines:
            role = line.hold.signed_by if line.hold is not None else ""
            yield Reason(BLOCKED, Code.HOLD_PASSED, line=index, said=role)
