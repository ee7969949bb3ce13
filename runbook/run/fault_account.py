"""How a run took what went wrong in it: when that began, when the run first noticed, what it said, who acted when.

From events alone, for the record of a rehearsal; what counts as noticed is said here once.
"""

from __future__ import annotations

from dataclasses import dataclass, field

from runbook.answers import Need, Plan
from runbook.run import events as ev
from runbook.run.clock import Moment


def make_safe_by(plan: Plan, event: ev.ReadingTaken) -> Need | None:
    """What the reading was taken for, where it lies outside what the author accepts and their word is make safe."""
    if event.in_range or not 0 <= event.line < len(plan.lines):
        return None
    line = plan.lines[event.line]
    asked = (*line.reads, *line.read_after, *(() if line.hold is None else (line.hold.read,)))
    need = next((n for n in asked if n is not None and n.tag == event.tag), None)
    return need if need is not None and need.if_not.lower().startswith("make safe") else None


def noticed(event: ev.Event, plan: Plan | None = None) -> str:
    """What the run says of it, where it blocks, turns back or says that something is wrong; else empty."""
    match event:
        case ev.Answered(answer):
            if answer.agreement.verdict == "disagrees":
                return "gauge and model disagree"
            gone = next((one for one in answer.now if one.margin is not None and one.margin <= 0.0), None)
            return "" if gone is None else f"{gone.limit} {gone.kind}: no margin is left"
        case ev.TurnedBack(_, why):
            return why
        case ev.NoAnswer(unanswered):
            return f"nothing computed: {unanswered.why}"
        case ev.ReadingTaken():
            outside = plan is not None and make_safe_by(plan, event) is not None
            return f"{event.echo} calls for make safe" if outside else ""
        case _:
            return ""


_ACTED = (ev.MadeSafe, ev.SourceStated, ev.ValveStated)
"""By which somebody changes something at the vessel outside the order of the steps."""


@dataclass
class FaultAccount:
    """Of the faults of one rehearsal, each told of by the run's events in their order."""

    _told: list[_Fault] = field(default_factory=list)
    _plan: Plan | None = None

    def hear(self, event: ev.Event, at: Moment) -> None:
        """The next event, and when it was."""
        if isinstance(event, ev.RunOpened):
            self._plan = event.plan
        if isinstance(event, ev.FaultBegan):
            self._told.append(_Fault(event.name, at))
            return
        for one in self._told:
            one.hear(event, at, self._plan)

    def lines(self) -> list[str]:
        """One line a fault; empty where there was none."""
        return [one.words() for one in self._told]


@dataclass
class _Fault:
    name: str
    began: Moment
    noticed: Moment | None = None
    said: str = ""
    acted: Moment | None = None
    least: float | None = None
    """Pressure margin computed from a reading since it began [Pa]."""

    def hear(self, event: ev.Event, at: Moment, plan: Plan | None) -> None:
        if self.noticed is None and (said := noticed(event, plan)):
            self.noticed, self.said = at, said
        if self.acted is None and isinstance(event, _ACTED):
            self.acted = at
        if isinstance(event, ev.Answered):
            for one in event.answer.now:
                if one.kind == "pressure" and one.margin is not None:
                    self.least = one.margin if self.least is None else min(self.least, one.margin)

    def words(self) -> str:
        first = f"first noticed {self._after(self.noticed)}: {self.said}" if self.noticed else "never noticed"
        acted = f"acted on {self._after(self.acted)}" if self.acted else "never acted on"
        least = "not known" if self.least is None else f"{self.least / 1e5:.1f} bar"
        return f"fault {self.name}: {first}; {acted}; least pressure margin since then {least}"

    def _after(self, at: Moment | None) -> str:
        return "never" if at is None else f"after {max(0.0, at.wall - self.began.wall) / 60.0:.1f} min"
