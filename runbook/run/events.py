"""What has happened in a run. Anything that changes what may be done is an event.

The journal holds exactly these; state is their fold; resume is the fold again; nothing here needs physics.
"""

from __future__ import annotations

from dataclasses import dataclass
from typing import Any

from runbook.answers import Answer, BindRequest, Plan, Unanswered
from runbook.codec import from_plain, to_plain


@dataclass(frozen=True, slots=True)
class Person:
    """One person of the run."""

    name: str
    roles: tuple[str, ...]
    number_sha256: str
    """SHA-256 of 'name:number'. Attested, not authenticated: the record says so."""


@dataclass(frozen=True, slots=True)
class RunOpened:
    """First event of every run."""

    plan: Plan
    people: tuple[Person, ...]
    procedure_text: str
    apparatus_text: str
    versions: tuple[tuple[str, str], ...]
    """Of runbook, python, CoolProp."""
    rehearsal: bool
    part: int
    """The part of the day it begins with, from 0."""
    on: str
    """ISO date on which certificates were judged."""
    request: BindRequest | None = None
    """What the plan was bound from, so that a later process can bind the same again from the two texts."""


@dataclass(frozen=True, slots=True)
class WentOn:
    """The line the run stood in is finished, which confirms its valve positions, and `to` is entered."""

    to: int


@dataclass(frozen=True, slots=True)
class TakenUp:
    """The line whose instruction had been replaced is taken up again."""

    line: int


@dataclass(frozen=True, slots=True)
class ReadingTaken:
    """A reading was entered."""

    tag: str
    what: str
    value: float
    """[SI; pressures absolute]"""
    U: float
    """Expanded uncertainty, k = 2 [SI]."""
    typed: str
    echo: str
    by: str
    blind: bool
    line: int
    in_range: bool
    """Inside the dial, and inside the accepted range where the line states one."""


@dataclass(frozen=True, slots=True)
class Signed:
    """A hold point was signed."""

    line: int
    by: str
    role: str


@dataclass(frozen=True, slots=True)
class WitnessCame:
    """The called witness was there."""

    line: int
    by: str


@dataclass(frozen=True, slots=True)
class NotAttended:
    """The wait of a witness point is over and nobody came."""

    line: int


@dataclass(frozen=True, slots=True)
class QuickConfirmed:
    """An item of a quick sequence was confirmed."""

    line: int
    item: int
    late: bool
    """Its latest time had passed."""


@dataclass(frozen=True, slots=True)
class Proved:
    """One of the four proofs of empty was confirmed."""

    line: int
    proof: str


@dataclass(frozen=True, slots=True)
class ValveStated:
    tag: str
    position: str


@dataclass(frozen=True, slots=True)
class SourceStated:
    state: str


@dataclass(frozen=True, slots=True)
class Noted:
    text: str
    by: str


@dataclass(frozen=True, slots=True)
class FaultBegan:
    """Of a rehearsal: what was to go wrong has begun. It is told in the record alone, and changes nothing."""

    name: str
    words: str


@dataclass(frozen=True, slots=True)
class Answered:
    """The child answered; looked up by key, never by time."""

    answer: Answer


@dataclass(frozen=True, slots=True)
class NoAnswer:
    """The child could not answer: unknown."""

    unanswered: Unanswered


@dataclass(frozen=True, slots=True)
class TurnedBack:
    """A margin went, or stayed unknown too long, during a line: the way back replaces its instruction."""

    line: int
    why: str


@dataclass(frozen=True, slots=True)
class MadeSafe:
    """Make safe was begun."""

    phase: str
    """The phase whose acts are shown."""
    acts: tuple[str, ...]
    """As shown, verbatim, the first act first."""
    never: str
    seen: str


@dataclass(frozen=True, slots=True)
class SafeActConfirmed:
    item: int


@dataclass(frozen=True, slots=True)
class GapAnswered:
    """The four questions after a gap were answered; every reading is stale from here."""

    source: str
    vent: str
    touched: str
    here: tuple[str, ...]


@dataclass(frozen=True, slots=True)
class GapOpened:
    """The run was taken up after a gap, or the child was lost and came back: the four questions are open."""

    why: str


@dataclass(frozen=True, slots=True)
class Halted:
    """The run is halted: the record cannot be kept. Only make safe and leaving remain."""

    why: str


@dataclass(frozen=True, slots=True)
class LeftTool:
    """The person left the tool with the run unfinished."""


@dataclass(frozen=True, slots=True)
class RunClosed:
    """Last event."""

    outcome: str
    """'completed', 'made safe' or 'halted'."""


Event = (
    RunOpened
    | WentOn
    | TakenUp
    | ReadingTaken
    | Signed
    | WitnessCame
    | NotAttended
    | QuickConfirmed
    | Proved
    | ValveStated
    | SourceStated
    | Noted
    | FaultBegan
    | Answered
    | NoAnswer
    | TurnedBack
    | MadeSafe
    | SafeActConfirmed
    | GapAnswered
    | GapOpened
    | Halted
    | LeftTool
    | RunClosed
)

KINDS: dict[str, type[Any]] = {kind.__name__: kind for kind in Event.__args__}
"""Name in the journal -> class. A name, once written, is never given another meaning."""


def event_to_plain(event: Event) -> tuple[str, dict[str, Any]]:
    """(kind, data) for the journal."""
    plain: dict[str, Any] = to_plain(event)
    return type(event).__name__, plain


def event_from_plain(kind: str, data: object) -> Event:
    """The event again; KeyError or pydantic.ValidationError where the journal holds something else."""
    made: Event = from_plain(KINDS[kind], data)
    return made
