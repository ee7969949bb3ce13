"""The fold: events, one after the other, into the ledger. State is nothing but this fold, so resume is the fold again.

Incremental: one event costs the same at the start of a run and after ten thousand, and folding all of them at
once gives an equal ledger. Refuses nothing: what is in the journal has happened.
"""

from __future__ import annotations

from collections.abc import Callable, Iterable
from dataclasses import replace
from typing import Any, Final

from runbook.answers import Answer, LineKind, Unanswered
from runbook.codec import to_plain
from runbook.run import events as ev
from runbook.run.clock import Moment
from runbook.run.events import Event
from runbook.run.gate import PROOFS, unfinished
from runbook.run.past import NOTHING, with_past
from runbook.run.questions import (
    UNKNOWN,
    after_gap,
    canonical,
    closed,
    key_of,
    observations_json,
    plan_digest,
    read_closed,
    with_reading,
)
from runbook.run.state import Entry, Ledger, QuickMark, Stated, Taken, Trail

__all__ = ["Ledger", "fold", "fold_all"]

REMEMBERED: Final = 32
"""Answers kept by key: the facts behind older ones do not come back."""


def fold(ledger: Ledger, event: Event, at: Moment) -> Ledger:
    """The ledger after one more event, which happened at `at`."""
    was_open = ledger.plan is not None and closed(ledger) == "open"
    ledger = replace(ledger, seq=ledger.seq + 1, last_at=at)
    ledger = _HANDLERS[type(event)](ledger, event, at)
    if type(event) in _NO_FACTS:
        return ledger
    key = ledger.key
    if type(event) not in _ANSWERS:
        if was_open and ledger.past.readings and closed(ledger) != "open":
            ledger = replace(ledger, past=NOTHING)
        if was_open and ledger.seen.since and closed(ledger) != "open":
            # Closed anew: what was measured after an earlier closing was of another charge.
            seen = replace(ledger.seen, since=(), wants_beside=False)
            ledger = replace(ledger, seen=seen, observations_json=observations_json(seen))
        key = key_of(ledger)
    known = isinstance(ledger.answers.get(key), Answer)
    unknown_since = None if known else at if ledger.unknown_since is None else ledger.unknown_since
    if key == ledger.key and unknown_since == ledger.unknown_since:
        return ledger
    return replace(ledger, key=key, unknown_since=unknown_since)


def fold_all(pairs: Iterable[tuple[Event, Moment]]) -> Ledger:
    """The ledger of a whole run."""
    ledger = Ledger.start()
    for event, at in pairs:
        ledger = fold(ledger, event, at)
    return ledger


def _opened(ledger: Ledger, event: ev.RunOpened, at: Moment) -> Ledger:
    plan = event.plan
    line = plan.parts[event.part].first - 1 if event.part else -1
    ledger = replace(
        Ledger.start(),
        plan=plan,
        plan_digest=plan_digest(plan),
        charge_json=canonical(None if plan.charge is None else to_plain(plan.charge)),
        people=event.people,
        part=event.part,
        rehearsal=event.rehearsal,
        seq=ledger.seq,
        opened_at=at,
        last_at=at,
        line=line,
        stated={tag: Stated(position, 0, 0) for tag, position in plan.valves},
        source=plan.source,
        unknown_since=at,
    )
    return replace(ledger, entry=_entry(ledger, at))


def _entry(ledger: Ledger, at: Moment) -> Entry:
    """Standing in the ledger's line from now on."""
    line = ledger.present
    pairs = () if line is None else (*line.valves, *(pair for item in line.quick for pair in item.valves))
    return Entry(seq=ledger.seq, at=at, unconfirmed=tuple(dict.fromkeys(tag for tag, _ in pairs)))


def _went_on(ledger: Ledger, event: ev.WentOn, at: Moment) -> Ledger:
    left, plan = ledger.present, ledger.plan
    if left is not None and plan is not None:
        # Going on says that a finished line was done. Of one that was left undone nobody knows where its valves stand.
        done = not unfinished(plan, ledger, at)
        doubtful = tuple((tag, UNKNOWN) for tag in ledger.entry.unconfirmed)
        for tag, position in left.valves if done else doubtful:
            ledger = _state(ledger, tag, position, at)
    ledger = replace(ledger, line=event.to, before=ledger.here, here=Trail())
    return _enter(ledger, at)


def _taken_up(ledger: Ledger, event: ev.TakenUp, at: Moment) -> Ledger:
    return _enter(ledger, at)


def _enter(ledger: Ledger, at: Moment) -> Ledger:
    ledger = replace(ledger, entry=_entry(ledger, at))
    line = ledger.present
    if line is None:
        return ledger
    return replace(
        ledger,
        source=ledger.source if line.source is None else line.source,
        # What is closed in now has not been shown to be gone.
        empty_proved=ledger.empty_proved and not line.seals,
    )


def _reading(ledger: Ledger, event: ev.ReadingTaken, at: Moment) -> Ledger:
    taken = Taken(event, at, ledger.seq)
    seen = with_reading(ledger, event, at, ledger.seq)
    past = with_past(ledger.past, event, at) if read_closed(ledger) else ledger.past
    return replace(
        ledger,
        past=past,
        latest=ledger.latest | {event.tag: taken},
        here=ledger.here.appended(taken),
        seen=seen,
        observations_json=ledger.observations_json if seen is ledger.seen else observations_json(seen),
    )


def _signed(ledger: Ledger, event: ev.Signed, at: Moment) -> Ledger:
    entry = replace(ledger.entry, signed_by=event.by)
    return replace(ledger, entry=entry, signed_lines=ledger.signed_lines | {event.line})


def _came(ledger: Ledger, event: ev.WitnessCame, at: Moment) -> Ledger:
    return replace(ledger, entry=replace(ledger.entry, witness="came"))


def _not_attended(ledger: Ledger, event: ev.NotAttended, at: Moment) -> Ledger:
    return replace(ledger, entry=replace(ledger.entry, witness=ledger.entry.witness or "not attended"))


def _quick(ledger: Ledger, event: ev.QuickConfirmed, at: Moment) -> Ledger:
    entry = replace(ledger.entry, quick=(*ledger.entry.quick, QuickMark(at, event.late)))
    ledger = replace(ledger, entry=entry)
    line = ledger.present
    for tag, position in line.quick[event.item].valves if line is not None else ():
        ledger = _state(ledger, tag, position, at)
    return ledger


def _proved(ledger: Ledger, event: ev.Proved, at: Moment) -> Ledger:
    entry = replace(ledger.entry, proofs=(*ledger.entry.proofs, (event.proof, ledger.seq)))
    if event.proof == "wall":
        entry = replace(entry, vent_shut=None)
    made = {proof for proof, _ in entry.proofs}
    return replace(ledger, entry=entry, empty_proved=ledger.empty_proved or made >= set(PROOFS))


def _valve(ledger: Ledger, event: ev.ValveStated, at: Moment) -> Ledger:
    return _state(ledger, event.tag, event.position, at)


def _state(ledger: Ledger, tag: str, position: str, at: Moment) -> Ledger:
    """Somebody said, or leaving a line confirmed, where a valve stands."""
    said = ledger.stated.get(tag)
    begun = said.run_seq if said is not None and said.position == position else ledger.seq
    entry = ledger.entry
    if tag in entry.unconfirmed:
        entry = replace(entry, unconfirmed=tuple(t for t in entry.unconfirmed if t != tag))
    line = ledger.present
    if line is not None and line.kind is LineKind.EMPTY and line.empty is not None and tag == line.empty.vent:
        wall_proved = any(proof == "wall" for proof, _ in entry.proofs)
        if position != "shut" or not wall_proved:
            entry = replace(entry, vent_shut=None)
        elif entry.vent_shut is None:
            entry = replace(entry, vent_shut=(at, ledger.seq))
    stated = ledger.stated | {tag: Stated(position, begun, ledger.seq)}
    return replace(ledger, stated=stated, entry=entry)


def _source(ledger: Ledger, event: ev.SourceStated, at: Moment) -> Ledger:
    return replace(ledger, source=event.state)


def _answered(ledger: Ledger, event: ev.Answered, at: Moment) -> Ledger:
    return replace(ledger, last_answer=event.answer, answers=_with(ledger, event.answer))


def _no_answer(ledger: Ledger, event: ev.NoAnswer, at: Moment) -> Ledger:
    return replace(ledger, answers=_with(ledger, event.unanswered))


def _with(ledger: Ledger, found: Answer | Unanswered) -> dict[str, Answer | Unanswered]:
    """The answers that are remembered with a new one."""
    answers = {key: value for key, value in ledger.answers.items() if key != found.key}
    while len(answers) >= REMEMBERED:
        del answers[next(iter(answers))]
    answers[found.key] = found
    return answers


def _turned(ledger: Ledger, event: ev.TurnedBack, at: Moment) -> Ledger:
    return replace(ledger, entry=replace(ledger.entry, turned_back=event.why))


def _made_safe(ledger: Ledger, event: ev.MadeSafe, at: Moment) -> Ledger:
    return replace(ledger, safe=event, safe_done=frozenset())


def _safe_done(ledger: Ledger, event: ev.SafeActConfirmed, at: Moment) -> Ledger:
    return replace(ledger, safe_done=ledger.safe_done | {event.item})


def _gap(ledger: Ledger, event: ev.GapOpened, at: Moment) -> Ledger:
    seen = after_gap(ledger.seen)
    return replace(
        ledger, gap_open=True, gap_seq=ledger.seq, left=False, seen=seen, observations_json=observations_json(seen)
    )


def _gap_answered(ledger: Ledger, event: ev.GapAnswered, at: Moment) -> Ledger:
    ledger = replace(ledger, gap_open=False, source=event.source)
    plan = ledger.plan
    vent = plan.let_down_valve if plan is not None else None
    if plan is not None and event.touched != "no":
        for tag, _ in plan.valves:
            ledger = ledger if tag == vent else _state(ledger, tag, UNKNOWN, at)
    return ledger if vent is None else _state(ledger, vent, event.vent, at)


def _halted(ledger: Ledger, event: ev.Halted, at: Moment) -> Ledger:
    return replace(ledger, halted=event.why)


def _left(ledger: Ledger, event: ev.LeftTool, at: Moment) -> Ledger:
    return replace(ledger, left=True)


def _closed(ledger: Ledger, event: ev.RunClosed, at: Moment) -> Ledger:
    return replace(ledger, outcome=event.outcome)


def _told(ledger: Ledger, event: ev.Noted | ev.FaultBegan, at: Moment) -> Ledger:
    """What is for the record alone."""
    return ledger


_HANDLERS: Final[dict[type[Any], Callable[[Ledger, Any, Moment], Ledger]]] = {
    ev.RunOpened: _opened,
    ev.WentOn: _went_on,
    ev.TakenUp: _taken_up,
    ev.ReadingTaken: _reading,
    ev.Signed: _signed,
    ev.WitnessCame: _came,
    ev.NotAttended: _not_attended,
    ev.QuickConfirmed: _quick,
    ev.Proved: _proved,
    ev.ValveStated: _valve,
    ev.SourceStated: _source,
    ev.Noted: _told,
    ev.FaultBegan: _told,
    ev.Answered: _answered,
    ev.NoAnswer: _no_answer,
    ev.TurnedBack: _turned,
    ev.MadeSafe: _made_safe,
    ev.SafeActConfirmed: _safe_done,
    ev.GapAnswered: _gap_answered,
    ev.GapOpened: _gap,
    ev.Halted: _halted,
    ev.LeftTool: _left,
    ev.RunClosed: _closed,
}

_ANSWERS: Final = (ev.Answered, ev.NoAnswer)
_NO_FACTS: Final = (
    ev.Noted,
    ev.FaultBegan,
    ev.Signed,
    ev.WitnessCame,
    ev.NotAttended,
    ev.Proved,
    ev.MadeSafe,
    ev.SafeActConfirmed,
    ev.Halted,
    ev.LeftTool,
    ev.RunClosed,
)
"""Events that change no question: no key is worked out after them."""
