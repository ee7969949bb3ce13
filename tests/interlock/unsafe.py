"""Why an event that the engine let through must never have been let through.

A third look, apart from the permissions of model.py: it knows no act and no order of rules, only what must be
true of the vessel and the people at the moment something has happened. It reads the raw list of events itself.
"""

from __future__ import annotations

import math
from collections.abc import Iterator
from hashlib import sha256

from runbook.answers import Answer, Effect, LineKind, PlanLine
from runbook.run.clock import Moment
from runbook.run.events import (
    Event,
    GapAnswered,
    GapOpened,
    Halted,
    MadeSafe,
    NotAttended,
    Proved,
    QuickConfirmed,
    ReadingTaken,
    RunClosed,
    RunOpened,
    SafeActConfirmed,
    Signed,
    TakenUp,
    TurnedBack,
    WentOn,
)
from tests.interlock.past import Past


def unsafe(past: Past, event: Event, now: Moment, answer: Answer | None) -> str | None:
    """What is wrong with this event after the list `past`; None where nothing is.

    `answer` is the known answer to the question before the event; None: unknown.
    """
    return next(_reasons(past, event, now, answer), None)


def _reasons(past: Past, event: Event, now: Moment, answer: Answer | None) -> Iterator[str]:
    seen = [e for e, _ in past.events]
    if any(isinstance(e, RunClosed) for e in seen):
        yield f"{event} after the run was closed"
    if any(isinstance(e, Halted) for e in seen) and isinstance(event, WentOn | TakenUp | Signed | Proved):
        yield f"{event} while halted"
    if any(isinstance(e, MadeSafe) for e in seen) and isinstance(event, WentOn | TakenUp | Signed | Proved):
        yield f"{event} in make safe"
    match event:
        case WentOn(to):
            here = _line_index(past, seen)
            if to != here + 1:
                yield f"from line {here} to {to}"
            yield from _left(past, seen, here, past.plan.lines[to])
            yield from _entered(past, to, now, answer)
        case TakenUp(line):
            if not isinstance(_last(seen, WentOn, TakenUp, TurnedBack), TurnedBack):
                yield "taken up without having been turned back"
            yield from _entered(past, line, now, answer)
        case ReadingTaken():
            if not (math.isfinite(event.value) and math.isfinite(event.U) and event.U >= 0.0):
                yield f"reading {event.value} ± {event.U}"
        case Signed():
            yield from _signed(past, seen, event)
        case NotAttended(line):
            witness, entered = past.plan.lines[line].witness, _entry(past)[1]
            if witness is None or now.boot - entered.boot < witness.wait_s:
                yield "a witness was not waited for"
        case Proved():
            order = ("vent", "wall", "low gauge", "left open")
            before = [e.proof for e in _since_entry(past) if isinstance(e, Proved)]
            if order[: len(before) + 1] != (*before, event.proof):
                yield f"proof {event.proof} after {before}"
        case QuickConfirmed():
            items = [e.item for e in _since_entry(past) if isinstance(e, QuickConfirmed)]
            if event.item != len(items):
                yield f"item {event.item} after {items}"
        case RunClosed():
            yield from _ended(past, seen, event)


def _last(seen: list[Event], *kinds: type[Event]) -> Event | None:
    return next((e for e in reversed(seen) if isinstance(e, kinds)), None)


def _line_index(past: Past, seen: list[Event]) -> int:
    went = _last(seen, WentOn)
    return went.to if isinstance(went, WentOn) else past.plan.parts[past.opened.part].first - 1


def _entry(past: Past) -> tuple[int, Moment]:
    n = len(past.events) - 1
    while not isinstance(past.events[n][0], RunOpened | WentOn | TakenUp):
        n -= 1
    return n, past.events[n][1]


def _since_entry(past: Past) -> list[Event]:
    return [e for e, _ in past.events[_entry(past)[0] + 1 :]]


def _effects(line: PlanLine) -> set[Effect]:
    return {effect for _, effect in line.effects}


def _left(past: Past, seen: list[Event], here: int, to: PlanLine) -> Iterator[str]:
    """Only what lowers and raises nothing may begin over an unfinished line."""
    way_down = Effect.LOWERS in _effects(to) and not _effects(to) & {Effect.RAISES, Effect.UNKNOWN}
    if here < past.plan.parts[past.opened.part].first or way_down:
        return
    done = _since_entry(past)
    if any(isinstance(e, TurnedBack) for e in done):
        yield "went on from a line that was turned back"
    line = past.plan.lines[here]
    if line.kind is LineKind.HOLD and not any(isinstance(e, Signed) for e in done):
        yield "an unsigned hold point was left"
    if line.kind is LineKind.EMPTY and sum(isinstance(e, Proved) for e in done) < 4:
        yield "empty was not proved"
    if line.kind is LineKind.QUICK and sum(isinstance(e, QuickConfirmed) for e in done) < len(line.quick):
        yield "a quick sequence was left half done"
    for need in (*line.reads, *line.read_after):
        if not any(isinstance(e, ReadingTaken) and e.tag == need.tag for e in done):
            yield f"{need.tag} was never read in the line"


def _entered(past: Past, to: int, now: Moment, answer: Answer | None) -> Iterator[str]:
    line = past.plan.lines[to]
    if line.opens_containment:
        yield from _opened(past)
    harm = _effects(line) & {Effect.RAISES, Effect.UNKNOWN}
    gentler = Effect.LOWERS in _effects(line) and (answer is None or not answer.left_alone.at_rest)
    if not harm or gentler:
        return
    if answer is None:
        yield "raised without an answer"
        return
    for margin in (*answer.now, *answer.ahead):
        if margin.margin is None or not margin.margin > 0.0:
            yield f"raised with margin {margin.margin}"
    if not answer.valid:
        yield "raised outside the models' validity"
    if answer.agreement.verdict == "disagrees":
        yield "raised although reading and model disagree"
    if line.leans_on and answer.agreement.verdict != "agrees":
        yield f"leaned on {line.leans_on} with '{answer.agreement.verdict}'"
    if line.needs_charge_proof and not answer.charge_proved:
        yield "raised with the charge not proved"
    if line.committing and {c.state for c in past.plan.certificates} - {"valid"}:
        yield "committed on a certificate that is not valid"
    yield from _blind(past, line, now, answer)
    for i in range(past.first, to):
        signed = any(isinstance(e, Signed) and e.line == i for e, _ in past.events)
        if past.plan.lines[i].kind is LineKind.HOLD and not signed:
            yield f"raised over the unsigned hold point in line {i}"


def _blind(past: Past, line: PlanLine, now: Moment, answer: Answer) -> Iterator[str]:
    """Readings that are missing, stale, off the dial or from before a gap."""
    gap = _last([e for e, _ in past.events], GapOpened, GapAnswered)
    if isinstance(gap, GapOpened):
        yield "raised over an open gap"
    for need in line.entry_needs:
        latest: tuple[ReadingTaken, Moment] | None = None
        for event, at in past.events:
            if isinstance(event, GapOpened):
                latest = None
            if isinstance(event, ReadingTaken) and event.tag == need.tag:
                latest = event, at
        if latest is None:
            yield f"raised without a reading of {need.tag}"
            continue
        old = max(now.boot - latest[1].boot, now.wall - latest[1].wall)
        if not old <= min(need.fresh_s, math.inf if answer.good_for_s is None else answer.good_for_s):
            yield f"raised on a reading of {need.tag} that is {old} s old"
        dial = next(i for i in past.plan.instruments if i.tag == need.tag)
        if not dial.low <= latest[0].value <= dial.high:
            yield f"raised on a reading of {need.tag} off its dial"


def _opened(past: Past) -> Iterator[str]:
    proofs = {e.proof for e, _ in past.events if isinstance(e, Proved)}
    if len(proofs) < 4:
        yield f"containment opened with only {sorted(proofs)} proved"
    vent, line = past.plan.let_down_valve, past.line()
    confirms = dict(line.valves) if line is not None else {}
    if vent is None or confirms.get(vent, past.position(vent)) != "open":
        yield "containment opened with the let-down valve not open"


def _signed(past: Past, seen: list[Event], event: Signed) -> Iterator[str]:
    here = _line_index(past, seen)
    hold = past.plan.lines[here].hold
    people = [p for p in past.opened.people if p.name == event.by]
    if hold is None or event.line != here or not people:
        yield f"{event} in line {here}"
        return
    if event.role != hold.signed_by or hold.signed_by not in people[0].roles:
        yield f"{event.by} signed as {event.role} for {hold.signed_by}"
    i = here - 1
    while i >= past.plan.parts[past.plan.lines[here].part].first:
        line = past.plan.lines[i]
        if line.kind in (LineKind.HOLD, LineKind.PARKED):
            break
        if (line.who or (past.plan.roles[0] if line.quick else None)) in people[0].roles:
            yield f"{event.by} performed line {i} and signed for it"
        i -= 1
    own = [e for e in _since_entry(past) if isinstance(e, ReadingTaken) and e.by == event.by and e.blind]
    if hold.read is not None and hold.read.tag not in {e.tag for e in own}:
        yield "a measuring hold point without the signer's own blind reading"


def number_fits(past: Past, by: str, number: str) -> bool:
    """Whether this is the number set at the briefing, as it is kept."""
    kept = [p.number_sha256 for p in past.opened.people if p.name == by]
    return kept == [sha256(f"{by}:{number}".encode()).hexdigest()]


def _ended(past: Past, seen: list[Event], event: RunClosed) -> Iterator[str]:
    if event.outcome == "completed" and _line_index(past, seen) != len(past.plan.lines) - 1:
        yield "completed before the last line"
    if event.outcome == "completed" and any(isinstance(e, MadeSafe) for e in seen):
        yield "completed although made safe"
    if event.outcome == "made safe":
        begun = _last(seen, MadeSafe)
        done = {e.item for e in seen[_number(seen, begun) :] if isinstance(e, SafeActConfirmed)}
        if not isinstance(begun, MadeSafe) or done != set(range(len(begun.acts))):
            yield "made safe with acts unconfirmed"


def _number(seen: list[Event], event: Event | None) -> int:
    """Where this very event stands; an equal one may stand before it."""
    return next((n for n, e in enumerate(seen) if e is event), 0)
