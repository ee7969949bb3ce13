"""What a set of readings may mean: explanations with numbers, and the charge as a best estimate.

Nothing here permits anything. An explanation only says what to look for; the test that goes with it decides.
"""

from __future__ import annotations

from dataclasses import dataclass


@dataclass(frozen=True, slots=True)
class Past:
    """One reading of the closed vessel, as a question hands it on to those who look for causes."""

    tag: str
    what: str
    """As Observation.what."""
    value: float
    """[SI; pressures absolute]"""
    at_s: float
    """When, on the clock of the run [s]; only differences of it count."""


@dataclass(frozen=True, slots=True)
class Explanation:
    """One cause that would make the readings what they are."""

    cause: str
    """'trapped air', 'over-filled', 'under-filled', 'leak', 'thermometer lag', 'thermometer place',
    'gauge offset', 'gauge/absolute slip', 'wrong unit' or 'none': nothing is wrong."""
    size: float
    """Where it fits best, signed [unit]; 0 for 'none'."""
    unit: str
    """'Pa' (a difference), 'kg', 'K', '1' (a factor) or nothing."""
    share: float
    """How much of the belief falls to it, among all causes, before any test is made [1]; they sum to 1."""
    struck_out: bool
    """No size of it is compatible with the readings."""
    test: str
    """The quickest test that tells it from its nearest rival: 'dial', 're-zero', 'second thermometer', 'wait',
    'height' or 'weigh'; empty for 'none' alone."""
    one_with: tuple[str, ...] = ()
    """Other causes that these readings do not tell from it."""
    detail: str = ""
    """Of a wrong unit: which for which, as 'psi read as bar'; else empty."""


@dataclass(frozen=True, slots=True)
class ChargePart:
    """One way in which the charge was measured."""

    how: str
    """'weighing at closing', 'weighing', 'height' or 'pressure'."""
    kg: float
    U: float
    """Expanded, k = 2 [kg]."""


@dataclass(frozen=True, slots=True)
class ChargeEstimate:
    """The charge as a best estimate from everything read: for people and for evidence, never for a limit."""

    kg: float
    U: float
    """Expanded, k = 2, wider where the parts contradict each other [kg]."""
    parts: tuple[ChargePart, ...]
    blind: tuple[str, ...]
    """Kinds of reading that were there and say nothing of the charge."""


@dataclass(frozen=True, slots=True)
class Telling:
    """Whether one instrument would show one fault, with the vessel at rest as planned."""

    fault: str
    """As Explanation.cause."""
    size: float
    """The size that is asked about [unit]."""
    unit: str
    """'Pa' (a difference), 'kg' or 'K'."""
    tag: str
    """The instrument."""
    reads: str
    """As Observation.what."""
    quality: str
    """Its class, or nothing where the file states an error instead."""
    shift: float
    """How far the fault moves what it shows [SI]."""
    band: float
    """How far it must move to be seen, k = 2 [SI]."""
    seen: bool
    least: float | None
    """The smallest size it would show [unit]; None: none, whatever its size."""
    wanted: str
    """The coarsest class that would show it; empty where it is seen, or no class would."""
