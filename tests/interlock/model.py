"""A second interlock, written from the rules alone, that the engine is compared with.

Slow and plain on purpose: every question is answered by scanning the list of all events (past.py), and each
rule stands once, in the words in which it was laid down. It shares no line of code with the engine, only the
vocabulary of acts and events. It refuses to hold state that could go stale.
"""

from __future__ import annotations

import math
from dataclasses import dataclass

from runbook.answers import Answer, Judgement, LineKind, Need
from runbook.run import acts
from runbook.run.clock import Moment
from runbook.run.events import (
    Event,
    QuickConfirmed,
    RunOpened,
    Signed,
)
from tests.interlock import away, points
from tests.interlock.finish import finished
from tests.interlock.past import Past, lowers, raises
from tests.interlock.points import count

Verdict = tuple[bool, str]
"""Permitted, and why not."""

YES: Verdict = (True, "")
IN_MAKE_SAFE = (
    acts.Read,
    acts.Note,
    acts.SetValve,
    acts.SetSource,
    acts.SafeActDone,
    acts.MakeSafe,
    acts.GapAnswers,
    acts.LeaveTool,
    acts.Finish,
)
WHEN_HALTED = (acts.MakeSafe, acts.SafeActDone, acts.LeaveTool)


@dataclass(frozen=True)
class Facts:
    """What a question carries besides readings."""

    line: int
    to: int
    closed: str
    valves: tuple[tuple[str, str], ...]
    source: str


class Model:
    """The list of what has happened, and the rules."""

    def __init__(self, opened: RunOpened, at: Moment) -> None:
        """A run that has just been opened."""
        self.past = Past(opened, at)
        self.past.judge = finished
        self.plan = opened.plan
        self.asked: away.Asked = []

    def happened(self, event: Event, at: Moment) -> None:
        """An event is in the journal."""
        self.past.events.append((event, at))

    def question_is(self, key: str, at: Moment) -> None:
        """After the latest event, at this moment, the question has this key."""
        self.asked.append((len(self.past.events), key, at))

    def facts(self) -> Facts:
        """Worked out from the list alone."""
        here = self.past.index()
        last = here >= len(self.plan.lines) - 1
        to = here if last or self.past.turned_back() else here + 1
        valves = tuple((tag, self.past.position_asked(tag)) for tag, _ in self.plan.valves)
        return Facts(here, to, self.past.vessel(), valves, self.past.source())

    # The door.

    def permits(self, act: acts.Act, now: Moment, answer: Answer | None) -> Verdict:
        """Whether the act is permitted now, given the answer to the current question (None: unknown).

        A Tick counts as permitted where it brings an event about.
        """
        if self.past.closed():
            return False, "closed"
        if self.past.halted() and not isinstance(act, WHEN_HALTED):
            return False, "halted"
        if self.past.made_safe() and not isinstance(act, IN_MAKE_SAFE):
            return False, "in make safe"
        match act:
            case acts.GoOn():
                return self._go_on(now, answer)
            case acts.TakeUp() if not self.past.turned_back():
                return False, "not turned back"
            case acts.TakeUp():
                return self._enter(self.past.index(), now, answer)
            case acts.Tick():
                return self.tick(now, answer) is not None, "tick"
            case acts.Finish() if self.past.made_safe():
                return not away.acts_left(self.past), "acts of make safe"
            case acts.Finish():
                last = self.past.index() == len(self.plan.lines) - 1
                return last and self.finished(now), "not yet: unfinished"
            case _:
                return self._point(act, now)

    def _point(self, act: acts.Act, now: Moment) -> Verdict:
        """Acts that do not move the run to another line."""
        match act:
            case acts.Read():
                there = self.past.instrument(act.tag) is not None and self.past.person(act.by) is not None
                return there and math.isfinite(act.value), "reading"
            case acts.Sign():
                return points.may_sign(self.past, act.by, act.number)
            case acts.Attend():
                return points.may_attend(self.past, act.by)
            case acts.QuickDone():
                line = self.past.line()
                quick = line is not None and line.kind is LineKind.QUICK and act.item < len(line.quick)
                return quick and act.item == count(self.past, QuickConfirmed), "quick"
            case acts.Prove():
                return points.may_prove(self.past, act.proof, now)
            case acts.SetValve():
                return any(tag == act.tag for tag, _ in self.plan.valves), "valve"
            case acts.SafeActDone():
                begun = away.begun(self.past)
                return begun is not None and 0 <= act.item < len(begun[1].acts), "act of make safe"
            case acts.GapAnswers():
                return self.past.gap_open(), "gap"
            case _:
                return YES

    def make_safe_reachable(self, now: Moment, answer: Answer | None) -> bool:
        """Make safe is open now, whatever the person saw."""
        return all(self.permits(acts.MakeSafe(s), now, answer)[0] for s in ("", *away.SEEN))

    def tick(self, now: Moment, answer: Answer | None) -> str | None:
        """What the clock alone brings about now: 'NotAttended', 'TurnedBack' or nothing."""
        return away.tick(self.past, self.asked, now, answer)

    # Going on.

    def _go_on(self, now: Moment, answer: Answer | None) -> Verdict:
        to = self.past.index() + 1
        if to >= len(self.plan.lines):
            return False, "not yet: last line"
        line = self.plan.lines[to]
        only_lowers = lowers(line) and not raises(line)
        if not only_lowers and not self.finished(now):
            return False, "not yet: unfinished"
        return self._enter(to, now, answer)

    def _enter(self, to: int, now: Moment, answer: Answer | None) -> Verdict:
        line = self.plan.lines[to]
        if line.opens_containment and not points.empty_proved(self.past):
            return False, "blocked: not proved empty"
        if not raises(line):
            return YES
        if lowers(line) and not (answer is not None and answer.left_alone.at_rest):
            return YES
        return self._gate(to, now, answer)

    def _gate(self, to: int, now: Moment, answer: Answer | None) -> Verdict:
        line = self.plan.lines[to]
        if answer is None:
            return False, "blocked: no answer"
        if not answer.valid:
            return False, "blocked: not valid"
        if any(m.judgement is Judgement.BLOCKED for m in (*answer.now, *answer.ahead)):
            return False, "blocked: margin"
        if any(not self._fresh(need, now, answer) for need in line.entry_needs):
            return False, "blocked: reading"
        verdict = answer.agreement.verdict
        if verdict == "disagrees" or (line.leans_on and verdict != "agrees"):
            return False, "blocked: agreement"
        if line.needs_charge_proof and not answer.charge_proved:
            return False, "blocked: charge"
        holds = [i for i in range(self.past.first, to) if self.plan.lines[i].kind is LineKind.HOLD]
        signed = [e.line for e, _ in self.past.events if isinstance(e, Signed)]
        if any(i not in signed for i in holds):
            return False, "blocked: unsigned"
        if line.committing and any(c.state != "valid" for c in self.plan.certificates):
            return False, "blocked: certificate"
        return (False, "blocked: gap") if self.past.gap_open() else YES

    def _fresh(self, need: Need, now: Moment, answer: Answer) -> bool:
        """The latest reading is there, inside its dial, and young enough for the step and for the margin."""
        readings = self.past.readings(need.tag)
        instrument = self.past.instrument(need.tag)
        if not readings or instrument is None:
            return False
        _, reading, at = readings[-1]
        limit = need.fresh_s if answer.good_for_s is None else min(need.fresh_s, answer.good_for_s)
        return instrument.low <= reading.value <= instrument.high and now.age(at) <= limit

    # Finished.

    def finished(self, now: Moment) -> bool:
        """Whether the line the run stands in is finished."""
        return finished(self.past, now)
