"""The printable account of one run: what was done, by whom, what was read, and whether it was ever close.

Plain text, from the journal's records alone. It adds nothing up that the journal does not say.
"""

from __future__ import annotations

from collections.abc import Iterable
from textwrap import wrap
from typing import Final

from pydantic import ValidationError

from runbook.answers import Answer, Margin, Plan
from runbook.quantities import pressure_to_unit
from runbook.run import events as ev
from runbook.run.amounts import planned, vessels
from runbook.run.clock import Moment
from runbook.run.fault_account import FaultAccount
from runbook.run.journal import Record
from runbook.run.sentences import agreement_pair, agreement_says

WIDTH: Final = 100
"""Characters of a line."""


def record_lines(records: Iterable[Record]) -> tuple[str, ...]:
    """The account, on lines of a page."""
    return tuple(part for line in account(records) for part in (wrap(line, WIDTH, subsequent_indent=" " * 11) or [""]))


def account(records: Iterable[Record]) -> tuple[str, ...]:
    """The account, one line for each thing to say, however long."""
    lines: list[str] = []
    plan: Plan | None = None
    opened: Moment | None = None
    least: Margin | None = None
    last: Record | None = None
    said = ""
    faults = FaultAccount()
    for record in records:
        last = record
        try:
            event = ev.event_from_plain(record.kind, record.data)
        except (KeyError, ValidationError):
            # Of a newer program: it is said that something stands there, never skipped in silence.
            lines.append(f"{record.at}  {record.kind}: this version cannot read it")
            continue
        faults.hear(event, record.moment)
        if isinstance(event, ev.RunOpened):
            plan, opened = event.plan, record.moment
            lines += _head(event, record.at)
            continue
        if isinstance(event, ev.Answered):
            least = _lesser(least, event.answer)
            said, before = _disagreement(plan, event.answer), said
            if said and said != before:
                lines.append(f"{_elapsed(opened, record.moment)}  {said}")
            continue
        words = _words(event, plan)
        if words:
            lines.append(f"{_elapsed(opened, record.moment)}  {words}")
    return (*lines, *_foot(plan, least, last, faults))


def _head(event: ev.RunOpened, at: str) -> list[str]:
    plan = event.plan
    kind = "REHEARSAL" if event.rehearsal else "RUN"
    lines = [
        f"{kind}: {plan.procedure}",
        f"begun {at} with part {event.part + 1}, {plan.parts[event.part].name}",
        f"vessel {vessels(plan)}; figures approved by {plan.approved}",
        f"fluid {plan.fluid}, planned {planned(plan)}",
        f"verdict {plan.verdict} of the figures in this file, certificates judged on {event.on}",
        f"ceiling {_pressure(plan.ceiling, plan)} by {plan.ceiling_by or 'nothing known'}",
        f"barometer {plan.barometer / 100:.0f} hPa by {plan.barometer_source}",
        f"procedure file SHA-256 {plan.procedure_sha256}",
        f"apparatus file SHA-256 {plan.apparatus_sha256}",
        "versions " + ", ".join(f"{name} {version}" for name, version in event.versions),
    ]
    lines += [f"{person.name}: {', '.join(person.roles)}" for person in event.people]
    lines.append("signatures are attested with a number agreed at the briefing, not authenticated")
    return [*lines, ""]


def _foot(plan: Plan | None, least: Margin | None, last: Record | None, faults: FaultAccount) -> list[str]:
    lines = ["", *faults.lines()]
    if plan is not None and least is not None:
        lines.append(f"least pressure margin computed from a reading: {_margin(least, plan)}")
    if last is not None:
        lines.append(f"{last.n} events; mark of the last {last.mark}")
    return lines


def _words(event: ev.Event, plan: Plan | None) -> str:
    """One event in words; empty where it is no news to a reader."""
    match event:
        case ev.WentOn(to):
            return f"entered {_line(plan, to)}"
        case ev.TakenUp(line):
            return f"took up again {_line(plan, line)}"
        case ev.ReadingTaken():
            blind = ", blind" if event.blind else ""
            outside = "" if event.in_range else "; OUTSIDE its range"
            return f"read {event.echo} by {event.by}{blind}, typed '{event.typed}'{outside}"
        case ev.Signed(line, by, role):
            return f"SIGNED {_line(plan, line)} by {by} as {role}"
        case ev.WitnessCame(line, by):
            return f"witness {by} came to {_line(plan, line)}"
        case ev.NotAttended(line):
            return f"NOT ATTENDED: {_line(plan, line)}"
        case ev.QuickConfirmed(line, item, late):
            return f"done{' LATE' if late else ''}: {_item(plan, line, item)}"
        case ev.Proved(_, proof):
            return f"proved empty, {proof}"
        case ev.ValveStated(tag, position):
            return f"{tag} stated {position}"
        case ev.SourceStated(state):
            return f"heat source stated {state}"
        case ev.Noted(text, by):
            return f"note by {by}: {text}"
        case _:
            return _exceptional(event, plan)


def _exceptional(event: ev.Event, plan: Plan | None) -> str:
    match event:
        case ev.FaultBegan(name, words):
            return f"FAULT of this rehearsal begins: {name}, {words}"
        case ev.NoAnswer(unanswered):
            return f"NOTHING COMPUTED: {unanswered.why}"
        case ev.TurnedBack(line, why):
            return f"TURNED BACK in {_line(plan, line)}: {why}"
        case ev.MadeSafe():
            seen = f", seen: {event.seen}" if event.seen else ""
            return f"MAKE SAFE, phase {event.phase}{seen}: " + " / ".join(event.acts)
        case ev.SafeActConfirmed(item):
            return f"make safe, act {item + 1} done"
        case ev.GapOpened(why):
            return f"GAP: {why}; every reading is stale"
        case ev.GapAnswered():
            here = ", ".join(event.here)
            return f"after the gap: heat {event.source}, vent {event.vent}, touched {event.touched}, here {here}"
        case ev.Halted(why):
            return f"HALTED: {why}"
        case ev.LeftTool():
            return "LEFT THE TOOL with the run unfinished"
        case ev.RunClosed(outcome):
            return f"closed: {outcome}"
        case _:
            return ""


def _disagreement(plan: Plan | None, answer: Answer) -> str:
    """That gauge and model part, by how much, and what it may be; empty where they do not."""
    if plan is None or answer.agreement.verdict != "disagrees":
        return ""
    pair = agreement_pair(plan, answer.agreement).partition(" ")[2]
    return f"{pair}: {agreement_says(plan, answer.agreement, answer.explanations)}"


def _line(plan: Plan | None, index: int) -> str:
    if plan is None or not 0 <= index < len(plan.lines):
        return f"line {index + 1}"
    return f"{plan.lines[index].number} {plan.lines[index].text}"


def _item(plan: Plan | None, line: int, item: int) -> str:
    if plan is None or not 0 <= line < len(plan.lines) or not 0 <= item < len(plan.lines[line].quick):
        return f"item {item + 1}"
    return plan.lines[line].quick[item].text


def _lesser(least: Margin | None, answer: Answer) -> Margin | None:
    for one in answer.now:
        if one.kind == "pressure" and one.margin is not None and (least is None or one.margin < (least.margin or 0.0)):
            least = one
    return least


def _margin(margin: Margin, plan: Plan) -> str:
    left = (margin.margin or 0.0) / 1e5
    return f"{left:.1f} bar to {_pressure(margin.allowed, plan)} by {margin.limit}"


def _pressure(absolute: float | None, plan: Plan) -> str:
    if absolute is None:
        return "not known"
    return f"{pressure_to_unit(absolute, plan.pressure_unit, plan.barometer):.1f} {plan.pressure_unit}"


def _elapsed(opened: Moment | None, at: Moment) -> str:
    """h:mm:ss since the run was opened, by the clock on the wall: a run may last over a restart."""
    seconds = max(0, round(at.wall - opened.wall)) if opened is not None else 0
    return f"{seconds // 3600:3d}:{seconds // 60 % 60:02d}:{seconds % 60:02d}"
