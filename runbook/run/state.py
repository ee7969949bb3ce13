"""The ledger: all that the events of a run so far say. Data only; `runbook.run.ledger` folds events into it.

Refuses to hold anything that cannot be folded from events, and to be changed: every event makes a new one.
"""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass, field

from runbook.answers import Answer, Observation, Plan, PlanLine, Unanswered
from runbook.run.clock import Moment
from runbook.run.events import MadeSafe, Person, ReadingTaken
from runbook.run.past import NOTHING, History

START = Moment(0.0, 0.0)
"""Stands for a time before the first event."""


@dataclass(frozen=True, slots=True)
class Taken:
    """A reading with its place in the run."""

    event: ReadingTaken
    at: Moment
    seq: int
    """Number of its event, from 1."""


class Trail:
    """A list that only grows, shared by the ledgers that saw its beginning: appending costs no copy.

    Each trail sees its own first `count` items; one that is appended to twice makes a copy the second time.
    """

    __slots__ = ("_items", "count")

    def __init__(self, items: list[Taken] | None = None, count: int = 0) -> None:
        self._items: list[Taken] = [] if items is None else items
        self.count = count

    def appended(self, item: Taken) -> Trail:
        """One longer; this one stays as it is."""
        items = self._items if len(self._items) == self.count else self._items[: self.count]
        items.append(item)
        return Trail(items, self.count + 1)

    def __iter__(self) -> Iterator[Taken]:
        """Oldest first."""
        return iter(self._items[: self.count])

    def __eq__(self, other: object) -> bool:
        return isinstance(other, Trail) and list(self) == list(other)

    __hash__ = None  # type: ignore[assignment] # it may share a list that grows

    def __repr__(self) -> str:
        return f"Trail({list(self)!r})"


@dataclass(frozen=True, slots=True)
class Stated:
    """The last that was said of a valve's position."""

    position: str
    """'open', 'shut' or 'do not know'."""
    run_seq: int
    """Event from which on nothing else was said."""
    last_seq: int
    """Event that said it last; 0: as the plan starts."""


@dataclass(frozen=True, slots=True)
class QuickMark:
    """A confirmed item of a quick sequence."""

    at: Moment
    late: bool


@dataclass(frozen=True, slots=True)
class Entry:
    """Standing in one line, since it was entered or taken up again."""

    seq: int = 0
    """The event that entered it."""
    at: Moment = START
    signed_by: str = ""
    """Who signed the hold in this entry; empty: nobody."""
    witness: str = ""
    """'came', 'not attended' or nothing yet."""
    quick: tuple[QuickMark, ...] = ()
    """Confirmed items, in order."""
    proofs: tuple[tuple[str, int], ...] = ()
    """Proofs of empty with their events, in order."""
    vent_shut: tuple[Moment, int] | None = None
    """Since when the vent has been stated shut without a break after the proof of the wall; None: it has not."""
    turned_back: str | None = None
    """Why the way back stands on the screen; None: it does not."""
    unconfirmed: tuple[str, ...] = ()
    """Valves this line or its quick sequence moves that nobody has stated since the entry: where they stand counts as
    not known."""


@dataclass(frozen=True, slots=True)
class Carried:
    """A reading that counts in questions, with its uncertainty, which the question leaves to the other side."""

    one: Observation
    U: float
    """Expanded, k = 2 [SI]."""


@dataclass(frozen=True, slots=True)
class Seen:
    """What of the readings counts in a question, and what is needed to go on counting."""

    moving: dict[str, tuple[Carried, ...]] = field(default_factory=dict)
    """Of each thermometer and gauge: the last reading, after those that contradict it."""
    before: dict[str, Observation] = field(default_factory=dict)
    """Of each scale and height: the last read with the vessel open."""
    since: tuple[Observation, ...] = ()
    """Masses and heights since closing, and the temperature beside each height."""
    wants_beside: bool = False
    """A height was read and no temperature yet that belongs beside it."""


@dataclass(frozen=True, slots=True)
class Ledger:
    """Where a run stands. Equal events give equal ledgers, folded one by one or all at once."""

    plan: Plan | None = None
    """None before RunOpened."""
    plan_digest: str = ""
    charge_json: str = "null"
    """The charge record as it stands in every question's digest."""
    people: tuple[Person, ...] = ()
    part: int = 0
    rehearsal: bool = False
    seq: int = 0
    """Events folded so far."""
    opened_at: Moment = START
    last_at: Moment = START
    """Of the last event."""
    line: int = -1
    """Index of the line the run stands in."""
    entry: Entry = field(default_factory=Entry)
    latest: dict[str, Taken] = field(default_factory=dict)
    """The last reading of each instrument."""
    here: Trail = field(default_factory=Trail)
    """Readings since the run came into this line, over all entries of it."""
    before: Trail = field(default_factory=Trail)
    """Readings of the line before."""
    gap_seq: int = 0
    """The last GapOpened; readings up to it are stale. 0: none."""
    gap_open: bool = False
    stated: dict[str, Stated] = field(default_factory=dict)
    source: str = "none"
    seen: Seen = field(default_factory=Seen)
    observations_json: str = ""
    """Those that count, as they stand in the digest."""
    past: History = NOTHING
    """The last readings since closing with their times; they explain, and count for nothing."""
    signed_lines: frozenset[int] = frozenset()
    """Hold lines signed in this run."""
    empty_proved: bool = False
    """All four proofs were made in one entry, and nothing was closed in afterwards."""
    answers: dict[str, Answer | Unanswered] = field(default_factory=dict)
    """The last few, by key."""
    last_answer: Answer | None = None
    """The last of all, to whatever question."""
    key: str = ""
    """Of the question that stands now."""
    unknown_since: Moment | None = START
    """From when on no standing question has had an answer; None: the present one has."""
    safe: MadeSafe | None = None
    """Make safe under way."""
    safe_done: frozenset[int] = frozenset()
    halted: str | None = None
    """Why; None: it is not."""
    left: bool = False
    """The tool was left and nobody has come back since."""
    outcome: str | None = None
    """None while the run is open."""

    @classmethod
    def start(cls) -> Ledger:
        """Before anything has happened."""
        return cls()

    @property
    def answer(self) -> Answer | None:
        """The answer to the question that stands now; None: unknown."""
        found = self.answers.get(self.key)
        return found if isinstance(found, Answer) else None

    @property
    def unanswered(self) -> Unanswered | None:
        """Why the question that stands now has no answer, where that was said."""
        found = self.answers.get(self.key)
        return found if isinstance(found, Unanswered) else None

    @property
    def present(self) -> PlanLine | None:
        """The line the run stands in; None before the first."""
        if self.plan is None or not 0 <= self.line < len(self.plan.lines):
            return None
        return self.plan.lines[self.line]

    def person(self, name: str) -> Person | None:
        """One of the people of this run."""
        return next((p for p in self.people if p.name == name), None)

    def position(self, tag: str) -> str:
        """The last that was said of a valve; 'do not know' where nothing was."""
        said = self.stated.get(tag)
        return "do not know" if said is None else said.position

    def reading(self, tag: str) -> Taken | None:
        """The last reading of an instrument, unless it is older than the last gap."""
        found = self.latest.get(tag)
        return found if found is not None and found.seq > self.gap_seq else None

    def in_entry(self, tag: str) -> tuple[Taken, ...]:
        """Readings of an instrument in this entry and since the last gap, oldest first."""
        after = max(self.entry.seq, self.gap_seq)
        return tuple(t for t in self.here if t.event.tag == tag and t.seq > after)
