"""Make safe, and what the clock alone brings about, judged from the list of what has happened.

Part of the second interlock (model.py), apart from it only for length; it refuses to remember anything.
"""

from __future__ import annotations

from runbook.answers import Answer, Judgement, Phase, PlanLine
from runbook.run.clock import Moment
from runbook.run.events import MadeSafe, QuickConfirmed, ReadingTaken, SafeActConfirmed
from tests.interlock.past import Past, raises
from tests.interlock.points import witness_overdue

WORST_FIRST = ("J", "F", "I", "B", "K", "D", "H", "G", "E", "L", "C", "B'", "A")
SEEN = {"relief": "F", "window": "I", "fire": "J"}

Asked = list[tuple[int, str, Moment]]
"""(number of events so far, key of the question then, when), oldest first."""


def phase(past: Past, seen: str, standing: Answer | None) -> str:
    """The phase whose acts are shown: the first of those the vessel may be in.

    standing: the known answer to the question as it stands. Without it the last answer may be of a vessel that
    has been closed since, so the plan's phases of this line are possible too: the worst since then.
    """
    if seen in SEEN:
        return SEEN[seen]
    known, line = past.last_known(), past.line()
    phases: tuple[Phase, ...] = known.phases if known is not None else ()
    if standing is None:
        if line is not None:
            phases = (*phases, *line.phases)
        elif past.plan.charge is not None:
            phases = (*phases, *past.plan.lines[past.first].phases)
        elif not phases:
            phases = (Phase.A,)
    return next(letter for letter in WORST_FIRST if letter in phases)


def begun(past: Past) -> tuple[int, MadeSafe] | None:
    """The last time make safe was begun: (number of the event, event)."""
    found = [(n, e) for n, (e, _) in enumerate(past.events) if isinstance(e, MadeSafe)]
    return found[-1] if found else None


def acts_left(past: Past) -> set[int]:
    """Acts of make safe, as last begun, that are not confirmed."""
    last = begun(past)
    if last is None:
        return set()
    done = {e.item for e, _ in past.events[last[0] :] if isinstance(e, SafeActConfirmed)}
    return set(range(len(last[1].acts))) - done


def late(past: Past, now: Moment) -> bool:
    """Whether the next item of the quick sequence is past its latest time."""
    line = past.line()
    assert line is not None
    done = [at for e, at in past.in_entry() if isinstance(e, QuickConfirmed)]
    before = done[-1] if done else past.events[past.entry()][1]
    return now.age(before) > line.quick[len(done)].latest_s


def tick(past: Past, asked: Asked, now: Moment, answer: Answer | None) -> str | None:
    """What the clock brings about: 'NotAttended', 'TurnedBack' or nothing."""
    line = past.line()
    if line is None or past.made_safe() or past.halted() or past.closed():
        return None
    if witness_overdue(past, now):
        return "NotAttended"
    if not raises(line) or past.turned_back():
        return None
    if answer is not None and any(m.judgement is Judgement.BLOCKED for m in answer.now):
        return "TurnedBack"
    return "TurnedBack" if _unknown_too_long(past, line, asked, now, answer) else None


def _unknown_too_long(past: Past, line: PlanLine, asked: Asked, now: Moment, answer: Answer | None) -> bool:
    """Longer than what was last known lasts: since the answer was lost, or a reading fell due."""
    known = past.last_known()
    good_for = known.good_for_s if known is not None else None
    most = 600.0 if good_for is None else good_for
    lengths = [now.age(_unknown_since(past, asked))] if answer is None else []
    for need in line.reads:
        if need.every_s is None:
            continue
        in_entry = [(e, at) for e, at in past.in_entry() if isinstance(e, ReadingTaken)]
        taken = [at for e, at in in_entry if e.tag == need.tag]
        latest = taken[-1] if taken else past.events[past.entry()][1]
        limits = [need.fresh_s, need.every_s, *([] if good_for is None else [good_for])]
        lengths.append(now.age(latest) - min(limits))
    return any(length > most for length in lengths)


def _unknown_since(past: Past, asked: Asked) -> Moment:
    """When the margins were last known, or the run was opened."""
    since = asked[-1][2]
    for upto, key, at in reversed(asked):
        if past.answer(key, upto) is not None:
            break
        since = at
    return since
