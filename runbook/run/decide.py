"""The only door: an act becomes an event, or reasons why not.

Pure: plan, ledger, moment and act decide, nothing else. There is no override. Make safe is never refused while
the run is open, whatever else is missing, unknown or broken.
"""

from __future__ import annotations

import math
from typing import Final

from runbook.answers import LineKind, Plan
from runbook.run import acts
from runbook.run import events as ev
from runbook.run.acts import Act
from runbook.run.clock import Moment
from runbook.run.events import Event
from runbook.run.gate import gate, is_blocked, only_lowers, raises, unfinished
from runbook.run.proofs import not_proved
from runbook.run.readings import reading_taken
from runbook.run.reasons import NOT_YET, Code, Reason, Refused, refused
from runbook.run.safe import make_safe, phase_of, rest_shut
from runbook.run.signing import may_not_sign
from runbook.run.state import Ledger

__all__ = ["Reason", "Refused", "decide"]

UNKNOWN_S: Final = 600.0
"""[s] that margins may stay unknown where nothing says how long they last."""
WHILE_MAKING_SAFE: Final = (
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
WHILE_HALTED: Final = (acts.MakeSafe, acts.SafeActDone, acts.LeaveTool)
POSITIONS: Final = ("open", "shut", "do not know")
SOURCES: Final = ("on", "off", "unplugged", "do not know")


def decide(plan: Plan, ledger: Ledger, now: Moment, act: Act) -> Event | Refused | None:
    """What the act becomes: an event, Refused with every reason, or None where there is nothing to do."""
    if isinstance(act, acts.Tick):
        return _tick(plan, ledger, now)
    if ledger.outcome is not None:
        return refused(Code.CLOSED)
    if isinstance(act, acts.MakeSafe):
        return _make_safe(plan, ledger, act)
    if ledger.plan is None:
        return refused(Code.NOT_OPENED)
    if ledger.halted is not None and not isinstance(act, WHILE_HALTED):
        return refused(Code.HALTED, said=ledger.halted)
    if ledger.safe is not None and not isinstance(act, WHILE_MAKING_SAFE):
        return refused(Code.MAKING_SAFE)
    return _asked(plan, ledger, now, act)


def _asked(plan: Plan, ledger: Ledger, now: Moment, act: Act) -> Event | Refused | None:
    match act:
        case acts.GoOn():
            return _go_on(plan, ledger, now)
        case acts.TakeUp():
            return _take_up(plan, ledger, now)
        case acts.Read():
            return reading_taken(plan, ledger, act)
        case acts.Sign():
            return _sign(plan, ledger, act)
        case acts.Attend():
            return _attend(ledger, act)
        case acts.QuickDone():
            return _quick(ledger, now, act)
        case acts.Prove():
            reasons = not_proved(ledger, now, act.proof)
            return Refused(reasons) if reasons else ev.Proved(ledger.line, act.proof)
        case acts.SetValve():
            if act.tag not in _valves(plan, ledger):
                return refused(Code.UNKNOWN_TAG, tag=act.tag)
            if act.position not in POSITIONS:
                return refused(Code.UNKNOWN_WORD, tag=act.tag, said=act.position)
            return ev.ValveStated(act.tag, act.position)
        case acts.SetSource():
            return ev.SourceStated(act.state) if act.state in SOURCES else refused(Code.UNKNOWN_WORD, said=act.state)
        case acts.Note():
            return ev.Noted(act.text, act.by)
        case acts.SafeActDone():
            if ledger.safe is None or not 0 <= act.item < len(ledger.safe.acts):
                return refused(Code.NO_ACT)
            return ev.SafeActConfirmed(act.item)
        case acts.GapAnswers():
            return _gap(plan, ledger, act)
        case acts.LeaveTool():
            return ev.LeftTool()
        case acts.Finish():
            return _finish(plan, ledger, now)
        case _:
            raise AssertionError(f"no rule for {act!r}")


def _go_on(plan: Plan, ledger: Ledger, now: Moment) -> Event | Refused:
    missing = unfinished(plan, ledger, now)
    to = ledger.line + 1
    if to >= len(plan.lines):
        return Refused(missing) if missing else refused(Code.LAST_LINE)
    if missing and not only_lowers(plan.lines[to]):
        return Refused(missing)
    blocked = gate(plan, ledger, now, to)
    return Refused(blocked) if blocked else ev.WentOn(to)


def _take_up(plan: Plan, ledger: Ledger, now: Moment) -> Event | Refused:
    if ledger.entry.turned_back is None:
        return refused(Code.NOT_TURNED)
    blocked = gate(plan, ledger, now, ledger.line)
    return Refused(blocked) if blocked else ev.TakenUp(ledger.line)


def _sign(plan: Plan, ledger: Ledger, act: acts.Sign) -> Event | Refused:
    reasons = may_not_sign(plan, ledger, act.by, act.number)
    line = ledger.present
    if reasons or line is None or line.hold is None:
        return Refused(reasons) if reasons else refused(Code.NO_HOLD)
    return ev.Signed(ledger.line, act.by, line.hold.signed_by)


def _attend(ledger: Ledger, act: acts.Attend) -> Event | Refused:
    line = ledger.present
    if line is None or line.kind is not LineKind.WITNESS or line.witness is None:
        return refused(Code.NO_WITNESS)
    if ledger.entry.witness == "came":
        return refused(Code.CAME_ALREADY)
    person = ledger.person(act.by)
    if person is None:
        return refused(Code.UNKNOWN_PERSON, said=act.by)
    if line.witness.called not in person.roles:
        return refused(Code.WRONG_ROLE, said=line.witness.called)
    return ev.WitnessCame(ledger.line, act.by)


def _quick(ledger: Ledger, now: Moment, act: acts.QuickDone) -> Event | Refused:
    line = ledger.present
    if line is None or line.kind is not LineKind.QUICK:
        return refused(Code.NO_QUICK)
    done = ledger.entry.quick
    if act.item != len(done) or act.item >= len(line.quick):
        wanted = line.quick[len(done)].text if len(done) < len(line.quick) else ""
        return refused(Code.WRONG_ITEM, said=wanted)
    since = done[-1].at if done else ledger.entry.at
    late = now.age(since) > line.quick[act.item].latest_s
    return ev.QuickConfirmed(ledger.line, act.item, late)


def _valves(plan: Plan, ledger: Ledger) -> set[str]:
    known = {tag for tag, _ in (*plan.valves, *plan.valve_lets_go)} | set(ledger.stated) | set(plan.outside_valves)
    return known if plan.let_down_valve is None else known | {plan.let_down_valve}


def _gap(plan: Plan, ledger: Ledger, act: acts.GapAnswers) -> Event | Refused:
    if not ledger.gap_open:
        return refused(Code.NO_GAP)
    # Where nothing heats the vessel nobody is asked, and nothing that is said of it counts.
    source = act.source if plan.source_tag is not None else "none"
    if plan.source_tag is not None and source not in SOURCES:
        return refused(Code.UNKNOWN_WORD, said=act.source)
    if act.vent not in POSITIONS:
        return refused(Code.UNKNOWN_WORD, said=act.vent)
    if act.touched not in ("no", "yes", "do not know"):
        return refused(Code.UNKNOWN_WORD, said=act.touched)
    return ev.GapAnswered(source, act.vent, act.touched, act.here)


def _finish(plan: Plan, ledger: Ledger, now: Moment) -> Event | Refused:
    if ledger.safe is not None:
        if len(ledger.safe_done) >= len(ledger.safe.acts):
            return ev.RunClosed("made safe")
        left = next(text for n, text in enumerate(ledger.safe.acts) if n not in ledger.safe_done)
        return Refused((Reason(NOT_YET, Code.ACTS_LEFT, said=left),))
    if ledger.line < len(plan.lines) - 1:
        return Refused((Reason(NOT_YET, Code.NOT_FINISHED),))
    missing = unfinished(plan, ledger, now)
    return Refused(missing) if missing else ev.RunClosed("completed")


def _make_safe(plan: Plan, ledger: Ledger, act: acts.MakeSafe) -> Event:
    phase = phase_of(plan, ledger, act.seen)
    table = make_safe(plan, phase, rest_shut(plan, ledger))
    return ev.MadeSafe(phase.value, table.acts, table.never, act.seen)


# -- the clock -------------------------------------------------------------------------------------------


def _tick(plan: Plan, ledger: Ledger, now: Moment) -> Event | None:
    """What time alone brings about."""
    line = ledger.present
    if line is None or ledger.outcome is not None or ledger.halted is not None or ledger.safe is not None:
        return None
    entry = ledger.entry
    if line.witness is not None and not entry.witness and now.lasted(entry.at) >= line.witness.wait_s:
        return ev.NotAttended(ledger.line)
    if not raises(line) or entry.turned_back is not None:
        return None
    gone = next((m for m in ledger.answer.now if is_blocked(m)), None) if ledger.answer is not None else None
    if gone is not None:
        return ev.TurnedBack(ledger.line, f"{gone.limit}: no {gone.kind} margin left")
    if unknown_for(ledger, now) > allowed_unknown(ledger):
        return ev.TurnedBack(ledger.line, "margins have been unknown for too long")
    return None


def allowed_unknown(ledger: Ledger) -> float:
    """How long margins may stay unknown during a step that raises a hazard [s]."""
    last = ledger.last_answer
    return UNKNOWN_S if last is None or last.good_for_s is None else last.good_for_s


def unknown_for(ledger: Ledger, now: Moment) -> float:
    """How long the margins have been unknown [s]; zero or less: they are known, and for how long still.

    Unknown is a question without an answer, and a reading asked for at intervals that is overdue.
    """
    found = -math.inf if ledger.unknown_since is None else now.age(ledger.unknown_since)
    last = ledger.last_answer
    good_for = math.inf if last is None or last.good_for_s is None else last.good_for_s
    for need in ledger.present.reads if ledger.present is not None else ():
        if need.every_s is None:
            continue
        taken = ledger.latest.get(need.tag)
        since = taken.at if taken is not None and taken.seq > ledger.entry.seq else ledger.entry.at
        found = max(found, now.age(since) - min(need.fresh_s, need.every_s, good_for))
    return found
