"""What has happened in a run, as a plain list that is scanned anew for every question.

It exists so that the second interlock (model.py) and the search for unsafe passes (unsafe.py) share nothing
with the engine but the vocabulary of events: no state is carried along, so none can be carried wrongly.
It refuses to judge; it only finds things in the list.
"""

from __future__ import annotations

from collections.abc import Callable

from runbook.answers import Answer, Effect, Instrument, Need, PlanLine
from runbook.run.clock import Moment
from runbook.run.events import (
    Answered,
    Event,
    GapAnswered,
    GapOpened,
    Halted,
    MadeSafe,
    NoAnswer,
    Person,
    QuickConfirmed,
    ReadingTaken,
    RunClosed,
    RunOpened,
    SourceStated,
    TakenUp,
    TurnedBack,
    ValveStated,
    WentOn,
)

Dated = tuple[Event, Moment]


def raises(line: PlanLine) -> bool:
    """An unknown effect counts as one that raises."""
    return any(effect in (Effect.RAISES, Effect.UNKNOWN) for _, effect in line.effects)


def lowers(line: PlanLine) -> bool:
    """Any hazard at all is enough."""
    return any(effect is Effect.LOWERS for _, effect in line.effects)


def moved(line: PlanLine) -> set[str]:
    """Valves that a line moves, by itself or by an item of its quick sequence."""
    return {tag for tag, _ in line.valves} | {tag for item in line.quick for tag, _ in item.valves}


class Past:
    """The list, and questions that are answered by reading it from one end to the other."""

    def __init__(self, opened: RunOpened, at: Moment) -> None:
        """A run that has just been opened."""
        self.opened = opened
        self.plan = opened.plan
        self.events: list[Dated] = [(opened, at)]
        self.first = opened.plan.parts[opened.part].first
        """Index of the run's first line."""
        self.judge: Callable[[Past, Moment], bool] = lambda past, now: False
        """Whether the line a run stands in is finished: the model's own notion, which lives apart (finish.py)."""
        self._done: dict[int, bool] = {}

    def left_finished(self, n: int) -> bool:
        """Whether the line that event number n went on from was finished then, by what had happened before it."""
        if n not in self._done:
            before = Past(self.opened, self.events[0][1])
            before.events = self.events[:n]
            self._done[n] = self.judge(before, self.events[n][1])
        return self._done[n]

    # Where the run stands.

    @staticmethod
    def enters(event: Event) -> bool:
        """Whether the event enters a line; taking one up again enters it anew."""
        return isinstance(event, RunOpened | WentOn | TakenUp)

    def entry(self) -> int:
        """Number of the event that entered the line the run stands in."""
        return max(n for n, (e, _) in enumerate(self.events) if self.enters(e))

    def index(self) -> int:
        """Index of the line the run stands in; -1 before the first."""
        where = self.first - 1
        for event, _ in self.events:
            if isinstance(event, WentOn):
                where = event.to
        return where

    def line(self) -> PlanLine | None:
        """The line the run stands in; None before the first."""
        return self.plan.lines[self.index()] if self.index() >= 0 else None

    def in_entry(self) -> list[Dated]:
        """What has happened since the line was entered, oldest first."""
        return self.events[self.entry() + 1 :]

    def turned_back(self) -> bool:
        """The way back has replaced this line's instruction."""
        return any(isinstance(e, TurnedBack) for e, _ in self.in_entry())

    def has(self, kind: type[Event]) -> bool:
        """Whether such an event is anywhere in the list."""
        return any(isinstance(e, kind) for e, _ in self.events)

    def closed(self) -> bool:
        """Nothing may happen any more."""
        return self.has(RunClosed)

    def halted(self) -> bool:
        """The record cannot be kept."""
        return self.has(Halted)

    def made_safe(self) -> bool:
        """Make safe has been begun; nothing but the end of the run ends it."""
        return self.has(MadeSafe)

    def gap_open(self) -> bool:
        """The four questions stand unanswered."""
        is_open = False
        for event, _ in self.events:
            if isinstance(event, GapOpened):
                is_open = True
            if isinstance(event, GapAnswered):
                is_open = False
        return is_open

    # What is known of valves, source and answers.

    def stated(self, tag: str) -> list[tuple[int, str]]:
        """Everything said of one valve's position: (number of the event, position), oldest first."""
        said = [(0, position) for name, position in self.plan.valves if name == tag]
        where, entered = self.first - 1, 0
        for n, (event, _) in enumerate(self.events):
            pairs: tuple[tuple[str, str], ...] = ()
            if isinstance(event, ValveStated):
                pairs = ((event.tag, event.position),)
            elif isinstance(event, QuickConfirmed):
                pairs = self.plan.lines[event.line].quick[event.item].valves
            elif isinstance(event, GapAnswered):
                pairs = self._after_gap(event)
            elif isinstance(event, WentOn):
                since = any(m > entered and position != "do not know" for m, position in said)
                pairs = self._left(where, n, tag, since)
                where = event.to
            if self.enters(event):
                entered = n
            said += [(n, position) for name, position in pairs if name == tag]
        return said

    def _after_gap(self, event: GapAnswered) -> tuple[tuple[str, str], ...]:
        """The vent is where it is said to be; where something may have been touched, nobody knows the others."""
        vent = self.plan.let_down_valve
        others = [] if event.touched == "no" else [(t, "do not know") for t, _ in self.plan.valves if t != vent]
        return (*others, *([] if vent is None else [(vent, event.vent)]))

    def _left(self, where: int, n: int, tag: str, since: bool) -> tuple[tuple[str, str], ...]:
        """What going on (event number n) says of one valve: a finished line was done, of another nobody knows.

        since: somebody has said where it stands since the line was entered.
        """
        if where < 0:
            return ()
        line = self.plan.lines[where]
        if self.left_finished(n):
            return line.valves
        return ((tag, "do not know"),) if tag in moved(line) and not since else ()

    def position(self, tag: str) -> str:
        """The last that was said of a valve's position."""
        said = self.stated(tag)
        return said[-1][1] if said else "do not know"

    def position_asked(self, tag: str) -> str:
        """The position a question carries: while a line moves a valve it is unknown until somebody says so."""
        if self.gap_open():
            return "do not know"
        line = self.line()
        if line is not None and tag in moved(line):
            said = [position for n, position in self.stated(tag) if n > self.entry()]
            return said[-1] if said else "do not know"
        return self.position(tag)

    def vessel(self) -> str:
        """Whether the charge's space is closed: 'open', 'closed' or 'do not know'."""
        line = self.line()
        confirmed = sum(isinstance(e, QuickConfirmed) for e, _ in self.events[self.entry() + 1 :])
        if line is not None and line.seals and not (line.quick and confirmed == len(line.quick)):
            # Closed at once; a quick sequence that was gone through has said itself where its valves stand.
            return "closed"
        positions = [self.position_asked(tag) for tag in self.plan.outside_valves]
        if "open" in positions:
            return "open"
        return "closed" if all(position == "shut" for position in positions) else "do not know"

    def source(self) -> str:
        """State of the heat source; entering a line that switches it counts at once."""
        state = self.plan.source
        for event, _ in self.events:
            if isinstance(event, SourceStated):
                state = event.state
            elif isinstance(event, GapAnswered):
                state = event.source
            elif isinstance(event, WentOn | TakenUp):
                line = self.plan.lines[event.to if isinstance(event, WentOn) else event.line]
                state = line.source if line.source is not None else state
        # In an open gap nobody knows, unless there is nothing to know.
        return "do not know" if self.gap_open() and self.plan.source != "none" else state

    def answer(self, key: str, upto: int | None = None) -> Answer | None:
        """The latest word on a question, among the first `upto` events; None is unknown."""
        latest: Answer | None = None
        for event, _ in self.events[:upto]:
            if isinstance(event, Answered) and event.answer.key == key:
                latest = event.answer
            if isinstance(event, NoAnswer) and event.unanswered.key == key:
                latest = None
        return latest

    def last_known(self) -> Answer | None:
        """The last answer to any question."""
        known = [e.answer for e, _ in self.events if isinstance(e, Answered)]
        return known[-1] if known else None

    # Readings, instruments, people.

    def readings(self, tag: str, since: int = 0) -> list[tuple[int, ReadingTaken, Moment]]:
        """Readings of one instrument after event number `since` that no gap has made stale, oldest first.

        After a gap every reading is stale: nobody watched the vessel in between.
        """
        gaps = [n for n, (e, _) in enumerate(self.events) if isinstance(e, GapOpened)]
        after = max([since, *gaps])
        return [
            (n, e, at)
            for n, (e, at) in enumerate(self.events)
            if n > after and isinstance(e, ReadingTaken) and e.tag == tag
        ]

    def instrument(self, tag: str) -> Instrument | None:
        """The plan's instrument of that tag."""
        return next((i for i in self.plan.instruments if i.tag == tag), None)

    def person(self, name: str) -> Person | None:
        """The person of the run with that name."""
        return next((p for p in self.opened.people if p.name == name), None)

    def accepted(self, tag: str, value: float) -> bool:
        """Inside the dial, and inside every range that the line states for this instrument."""
        instrument = self.instrument(tag)
        if instrument is None or not instrument.low <= value <= instrument.high:
            return False
        line = self.line()
        if line is None:
            return True
        asked = [*line.reads, *line.read_after]
        if line.hold is not None and line.hold.read is not None:
            asked.append(line.hold.read)
        return all(_inside(need, value) for need in asked if need.tag == tag)


def _inside(need: Need, value: float) -> bool:
    return (need.low is None or value >= need.low) and (need.high is None or value <= need.high)
