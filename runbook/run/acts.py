"""What a person (or the clock) asks of a run. The only door is decide(plan, ledger, now, act).

An act is a wish; nothing has happened until decide has turned it into an event and the journal has it.
Typing into a field is not an act.
"""

from __future__ import annotations

from dataclasses import dataclass


@dataclass(frozen=True, slots=True)
class GoOn:
    """Finish the line the run stands in and enter the next one (Enter)."""


@dataclass(frozen=True, slots=True)
class TakeUp:
    """Take the same line up again after its instruction was replaced by the way back."""


@dataclass(frozen=True, slots=True)
class Read:
    """Enter a reading."""

    tag: str
    value: float
    """[SI; pressures absolute]"""
    typed: str
    """As typed, verbatim."""
    echo: str
    """As echoed in full before it counted."""
    by: str
    """Name of the person who read it."""
    blind: bool = False
    """Taken by a signer without sight of the other reading or of the expected value."""


@dataclass(frozen=True, slots=True)
class Sign:
    """Sign the hold point the run stands at."""

    by: str
    number: str
    """That person's own number, set at the briefing."""


@dataclass(frozen=True, slots=True)
class Attend:
    """The called witness is here."""

    by: str


@dataclass(frozen=True, slots=True)
class QuickDone:
    """Confirm an item of the quick sequence (one key)."""

    item: int
    """From 0; items are confirmed in order."""


@dataclass(frozen=True, slots=True)
class Prove:
    """Confirm one of the four proofs of empty."""

    proof: str
    """'vent', 'wall', 'low gauge' or 'left open', in this order."""


@dataclass(frozen=True, slots=True)
class SetValve:
    """State a valve's position as found or as just moved."""

    tag: str
    position: str
    """'open', 'shut' or 'do not know'."""


@dataclass(frozen=True, slots=True)
class SetSource:
    """State the heat source as found or as just switched."""

    state: str
    """'on', 'off', 'unplugged' or 'do not know'."""


@dataclass(frozen=True, slots=True)
class Note:
    """Write something down, or record a cause. Never opens a step."""

    text: str
    by: str


@dataclass(frozen=True, slots=True)
class MakeSafe:
    """The acts that bring the vessel to rest. Never refused."""

    seen: str = ""
    """What the person saw that the tool cannot: '', 'relief', 'window', 'fire', each a phase of its own."""


@dataclass(frozen=True, slots=True)
class SafeActDone:
    """Confirm an act of make safe."""

    item: int


@dataclass(frozen=True, slots=True)
class GapAnswers:
    """The four questions after a gap (resume, lost child)."""

    source: str
    """'on', 'off', 'unplugged' or 'do not know'."""
    vent: str
    """'open', 'shut' or 'do not know': of the let-down valve."""
    touched: str
    """'no', 'yes' or 'do not know'."""
    here: tuple[str, ...]
    """Names of the people present."""


@dataclass(frozen=True, slots=True)
class Tick:
    """The clock looked: turns a line whose margin has gone, marks a witness who did not come."""


@dataclass(frozen=True, slots=True)
class LeaveTool:
    """Leave the tool; the record says so."""


@dataclass(frozen=True, slots=True)
class Finish:
    """End the run after its last line, or after make safe has ended."""


Act = (
    GoOn
    | TakeUp
    | Read
    | Sign
    | Attend
    | QuickDone
    | Prove
    | SetValve
    | SetSource
    | Note
    | MakeSafe
    | SafeActDone
    | GapAnswers
    | Tick
    | LeaveTool
    | Finish
)
