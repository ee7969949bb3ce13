"""A random person at the bench: mostly willing, often wrong.

Purely random acts hardly ever pass a gate, and an interlock that refuses everything would look right. So this
person mostly does what the line asks for, and now and then anything at all: wrong numbers, wrong people, no
numbers, proofs out of order, make safe.
"""

from __future__ import annotations

import math
from random import Random

from runbook.answers import Empty, LineKind, Need, PlanLine
from runbook.run import acts
from runbook.run.clock import Moment
from runbook.run.events import Proved, QuickConfirmed
from tests.interlock.away import acts_left
from tests.interlock.model import Model
from tests.interlock.past import Past
from tests.interlock.plans import ROLES, TAGS, VALVES, number_of, random_value
from tests.interlock.points import PROOFS, count, performed

Step = tuple[float, acts.Act]
"""How long the person waits [s], and what is done then."""


def next_step(r: Random, model: Model, now: Moment) -> Step:
    """What this person does next."""
    past = model.past
    if past.made_safe() and r.random() < 0.8:
        return 0.0, _in_make_safe(r, past)
    if past.gap_open() and r.random() < 0.5:
        return 0.0, _gap_answers(r, past)
    if r.random() < 0.15:
        return 0.0, acts.Tick()
    return _willing(r, model, now) if r.random() < 0.82 else (0.0, _anything(r, past))


def _willing(r: Random, model: Model, now: Moment) -> Step:
    past, line = model.past, model.past.line()
    if past.turned_back():
        return 0.0, _after_turning_back(r, model, now)
    if line is not None and not model.finished(now):
        match line.kind:
            case LineKind.HOLD:
                return 0.0, _at_hold(r, past, line)
            case LineKind.WITNESS if r.random() < 0.5:
                return 0.0, acts.Attend(r.choice(past.opened.people).name)
            case LineKind.WITNESS:
                return 30.0, acts.Tick()
            case LineKind.QUICK if count(past, QuickConfirmed) < len(line.quick):
                return r.choice((0.0, 0.0, 10.0)), acts.QuickDone(count(past, QuickConfirmed))
            case LineKind.EMPTY if line.empty is not None:
                return _towards_empty(r, past, line.empty, now)
            case _:
                return 0.0, _missing(r, model, now, (*line.reads, *line.read_after), past.entry())
    to = past.index() + 1
    if r.random() < 0.03:
        return 0.0, acts.MakeSafe()
    if to < len(model.plan.lines) and r.random() < 0.6:
        return 0.0, _missing(r, model, now, model.plan.lines[to].entry_needs, 0)
    return 0.0, acts.GoOn() if to < len(model.plan.lines) else acts.Finish()


def _after_turning_back(r: Random, model: Model, now: Moment) -> acts.Act:
    line = model.past.line()
    if line is None or r.random() < 0.3:
        return r.choice((acts.GoOn(), acts.SetSource("off"), acts.MakeSafe()))
    act = _missing(r, model, now, line.entry_needs, 0)
    return acts.TakeUp() if isinstance(act, acts.GoOn) else act


def _missing(r: Random, model: Model, now: Moment, needs: tuple[Need, ...], since: int) -> acts.Act:
    """Read what is not there or old; go on where nothing is missing, or without looking."""
    if r.random() < 0.1:
        return acts.GoOn()
    for need in needs:
        taken = model.past.readings(need.tag, since)
        if not taken or now.age(taken[-1][2]) > 0.8 * need.fresh_s or not taken[-1][1].in_range:
            return _read(r, model.past, need.tag, need)
    return acts.GoOn()


def _read(r: Random, past: Past, tag: str, need: Need | None = None, by: str = "", blind: bool = False) -> acts.Read:
    low, high = (need.low, need.high) if need is not None else (None, None)
    value = random_value(r, tag, low, high)
    return acts.Read(tag, value, f"{value}", f"{value}", by or r.choice(past.opened.people).name, blind)


def _at_hold(r: Random, past: Past, line: PlanLine) -> acts.Act:
    assert line.hold is not None
    outside = performed(past, past.index())
    able = [p.name for p in past.opened.people if line.hold.signed_by in p.roles]
    right = [p.name for p in past.opened.people if p.name in able and not outside & set(p.roles)]
    by = r.choice(right or able or [past.opened.people[0].name])
    if line.hold.read is not None and r.random() < 0.7:
        other = r.choice([p.name for p in past.opened.people if p.name != by])
        blind = r.random() < 0.6
        return _read(r, past, line.hold.read.tag, line.hold.read, by if blind else other, blind)
    return acts.Sign(by, number_of(by) if r.random() < 0.95 else "0000")


def _towards_empty(r: Random, past: Past, empty: Empty, now: Moment) -> Step:
    """The next sensible thing on the way through the four proofs, with its waits."""
    done = count(past, Proved)
    match PROOFS[min(done, 3)]:
        case "vent":
            is_open = past.position(empty.vent) == "open"
            return 1.0, acts.Prove("vent") if is_open else acts.SetValve(empty.vent, "open")
        case "wall":
            taken = past.readings(empty.wall, past.entry())
            if taken and now.lasted(taken[0][2]) >= 600.0 and now.age(taken[-1][2]) < 120.0:
                return 0.0, acts.Prove("wall")
            wait = r.choice((599.0, 605.0, 650.0)) if taken and now.age(taken[-1][2]) < 300.0 else 0.0
            return wait, _read(r, past, empty.wall)
        case "low gauge":
            if past.position(empty.isolator) != "open":
                return 0.0, acts.SetValve(empty.isolator, "open")
            if past.position(empty.vent) != "shut":
                return 1.0, acts.SetValve(empty.vent, "shut")
            shut_at = past.events[past.stated(empty.vent)[-1][0]][1]
            taken = past.readings(empty.low_gauge, past.stated(empty.vent)[-1][0])
            if taken and taken[-1][2].lasted(shut_at) >= 600.0:
                return 0.0, acts.Prove("low gauge")
            return r.choice((595.0, 605.0, 660.0)) if taken else 0.0, _read(r, past, empty.low_gauge)
        case _:
            is_open = past.position(empty.vent) == "open"
            return 0.0, acts.Prove("left open") if is_open else acts.SetValve(empty.vent, "open")


def _in_make_safe(r: Random, past: Past) -> acts.Act:
    left = sorted(acts_left(past))
    return acts.SafeActDone(left[0]) if left and r.random() < 0.85 else acts.Finish()


def _gap_answers(r: Random, past: Past) -> acts.GapAnswers:
    here = tuple(p.name for p in past.opened.people)
    source = r.choice(("on", "off", "unplugged", "do not know"))
    vent = r.choice(("open", "shut", "do not know"))
    return acts.GapAnswers(source, vent, r.choice(("no", "yes", "do not know")), here)


def _anything(r: Random, past: Past) -> acts.Act:
    """Any act with any argument, also such as no screen would offer."""
    by = r.choice((*(p.name for p in past.opened.people), "Nobody"))
    item = r.choice((-1, 0, 0, 1, 2, 7))
    tag = r.choice((*TAGS, "X9"))
    value = random_value(r, tag, None, None) if tag in TAGS else math.pi
    choice: acts.Act = r.choice(
        (
            acts.GoOn(),
            acts.GoOn(),
            acts.TakeUp(),
            acts.Read(tag, value, "", "", by, r.random() < 0.5),
            acts.Read(tag, value, "", "", by, False),
            acts.Sign(by, number_of(by) if r.random() < 0.7 else number_of(r.choice(ROLES))),
            acts.Attend(by),
            acts.QuickDone(item),
            acts.Prove(r.choice(PROOFS)),
            acts.SetValve(r.choice((*VALVES, "V9")), r.choice(("open", "shut", "do not know"))),
            acts.SetValve(r.choice(VALVES), r.choice(("open", "shut"))),
            acts.SetSource(r.choice(("on", "off", "unplugged", "do not know"))),
            acts.Note("seen", by),
            acts.MakeSafe(r.choice(("", "relief", "window", "fire"))) if r.random() < 0.2 else acts.Tick(),
            acts.SafeActDone(item),
            _gap_answers(r, past),
            acts.LeaveTool(),
            acts.Finish(),
        )
    )
    return choice
