"""One line of a bound procedure, with everything the run must know of it."""

from __future__ import annotations

from dataclasses import dataclass
from enum import StrEnum

from runbook.answers.margins import Effect, Hazard, LeftAlone, Margin, Phase


class LineKind(StrEnum):
    """What one line of the procedure asks of the person before it."""

    DO = "do"
    HOLD = "hold"
    WITNESS = "witness"
    QUICK = "quick"
    EMPTY = "show empty"
    PARKED = "parked"


@dataclass(frozen=True, slots=True)
class Sight:
    """What should be seen."""

    words: str
    """One plain sentence."""
    computed: bool
    """False: written by the author."""
    if_not: str = ""
    """What to do if it is not seen."""
    of: str = ""
    """What is seen: 'solid', 'solid gone', 'meniscus', 'contrast', 'haze', 'rain', 'boiling', 'beads', 'frost',
    'snow' or 'no liquid'; empty where an author wrote it, and in journals older than this field."""
    at_K: float | None = None
    """Temperature at which it falls on the path of its line [K]; None: it is of the state as it stands."""
    numbers: tuple[tuple[str, float, str], ...] = ()
    """(name, value, unit) behind the words [SI]."""
    trust: str = ""
    """How far to trust it, in one sentence; empty where an author wrote it."""


@dataclass(frozen=True, slots=True)
class Need:
    """One reading that a line asks for."""

    tag: str
    """The instrument."""
    what: str
    """'pressure', 'temperature', 'mass', 'liquid height' or 'carbon dioxide'."""
    unit: str
    """The unit printed on its dial, which a bare number takes."""
    low: float | None = None
    """Lowest accepted value [SI; pressures absolute]; None: no lower bound."""
    high: float | None = None
    """Highest accepted value [SI; pressures absolute]; None: no upper bound."""
    fresh_s: float = 600.0
    """How old it may be when it is leaned on [s]."""
    every_s: float | None = None
    """How often it is asked while the line lasts [s]; None: once, at the end."""
    if_not: str = ""
    """What to do outside the accepted range."""


@dataclass(frozen=True, slots=True)
class SafetyMessage:
    """A warning, shown before its step on the same screen (signal words of ANSI Z535.6)."""

    word: str
    """DANGER, WARNING, CAUTION or NOTICE."""
    hazard: str
    could: str
    avoid: str


@dataclass(frozen=True, slots=True)
class QuickItem:
    """One step of a quick sequence: one key, no typing."""

    text: str
    latest_s: float
    """Latest time after the item before it (the first: after entry) [s]."""
    if_not: str
    """The act when that time has passed."""
    valves: tuple[tuple[str, str], ...] = ()
    """Valve positions ('open', 'shut') that confirming it states."""
    seals: bool = False
    """Confirming it closes the last vent."""


@dataclass(frozen=True, slots=True)
class Hold:
    """No further without the signature of the named role."""

    signed_by: str
    because: str
    read: Need | None
    """A measuring hold needs the signer's own blind reading."""


@dataclass(frozen=True, slots=True)
class Witness:
    """The named role is called; after the wait the run goes on."""

    called: str
    because: str
    wait_s: float


@dataclass(frozen=True, slots=True)
class Empty:
    """The instruments and valves of the four proofs that nothing is left."""

    low_gauge: str
    isolator: str
    """Empty where the gauge is on the vessel itself."""
    wall: str
    vent: str


@dataclass(frozen=True, slots=True)
class PlanLine:
    """One line of the procedure with everything the run must know of it."""

    number: str
    """'part.step' from 1."""
    part: int
    """From 0."""
    kind: LineKind
    text: str
    """The author's imperative sentence, verbatim."""
    who: str | None
    """The role that performs it."""
    warning: SafetyMessage | None
    effects: tuple[tuple[Hazard, Effect], ...]
    """All eight, in the order of Hazard."""
    committing: bool
    """Cannot be taken back at will."""
    leans_on: tuple[str, ...]
    """Of 'temperature', 'pressure', 'charge': where 'cannot tell' is not agreement."""
    entry_needs: tuple[Need, ...]
    """Readings that must be there, fresh and inside their dial before it may be entered."""
    needs_charge_proof: bool
    """It could pass the liquid-full temperature of the largest possible charge."""
    opens_containment: bool
    """Needs all four proofs of empty first."""
    reads: tuple[Need, ...]
    """Readings asked for while it lasts, or at its end."""
    hold: Hold | None
    witness: Witness | None
    quick: tuple[QuickItem, ...]
    read_after: tuple[Need, ...]
    """Readings after a quick sequence, taken at rest."""
    empty: Empty | None
    valves: tuple[tuple[str, str], ...]
    """Valve positions ('open', 'shut') that leaving the line confirms."""
    source: str | None
    """'on', 'off' or 'unplugged': what entering the line does to the heat source; None: nothing."""
    seals: bool
    """The line (or an item of its quick sequence) closes the last vent."""
    ahead: tuple[Margin, ...]
    """Of the plan's box, for the briefing; at the bench the question is asked anew."""
    left_alone: LeftAlone
    """Standing in this line."""
    phases: tuple[Phase, ...]
    """Phases the vessel may be in while standing here, of the plan."""
    way_back: str
    """The instruction that replaces this line's when a margin goes during it."""
    sights: tuple[Sight, ...]
    if_not: str
    """What to do when the sight does not come."""
    lasts_s: float | None
    """Estimated duration [s]; None where nobody knows."""
    falls: bool = False
    """Its path cools, or lets pressure down: a lower reading a minute later is no contradiction."""
