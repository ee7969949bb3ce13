"""Margins, futures and what is known of a charge: the figures a person is shown before acting."""

from __future__ import annotations

from dataclasses import dataclass
from enum import StrEnum


class Effect(StrEnum):
    """What a line does to one hazard; UNKNOWN counts as RAISES, except in make safe."""

    RAISES = "raises"
    KEEPS = "keeps"
    LOWERS = "lowers"
    UNKNOWN = "unknown"


class Hazard(StrEnum):
    """The eight hazards every line is judged on."""

    OVER_PRESSURE = "over-pressure"
    CONTAINMENT = "broken containment"
    COLD = "cold metal, seal or window"
    SHOCK = "thermal shock"
    UNDER_PRESSURE = "pressure below the room's"
    GAS = "gas in the room"
    RELEASE = "forbidden release"
    HOT = "hot surfaces"


class Judgement(StrEnum):
    """Of one margin; BLOCKED is zero, negative or unknown."""

    CLEAR = "clear"
    NARROW = "narrow"
    BLOCKED = "blocked"


class Phase(StrEnum):
    """States of the vessel that differ in what must be done first when something is wrong.

    A open, dry ice in hand or in the cell; B closed, solid in, charge doubtful; B' the same, charge proved;
    C liquid and vapour near room temperature, proved; D going liquid-full; E one phase, warm; F relief open,
    disc burst or a loud leak; G letting down, liquid in; H gauge at zero, solid or a plugged outlet possible;
    I mark, crack or frost on a window, or a joint weeps; J fire, gas alarm, somebody hurt; K evacuated glass;
    L sealed tube in a bath.
    """

    A = "A"
    B = "B"
    B_PROVED = "B'"
    C = "C"
    D = "D"
    E = "E"
    F = "F"
    G = "G"
    H = "H"
    I = "I"  # noqa: E741 - the trade letters its rows
    J = "J"
    K = "K"
    L = "L"


@dataclass(frozen=True, slots=True)
class Corner:
    """Where in the box of tolerances a worst value stands."""

    charge_kg: float | None
    """Mass sealed in [kg]; None before anything is loaded."""
    volume_m3: float
    """Free volume [m3]."""
    temperature_K: float
    """Temperature of the hottest (for lower limits: coldest) wetted wall [K]."""


@dataclass(frozen=True, slots=True)
class Margin:
    """The distance to one limit at the worst corner, U and equation uncertainty taken off."""

    limit: str
    """Tag of the part, relief device or instrument whose rating this is."""
    kind: str
    """What is limited, in words: 'pressure', 'relieved pressure', 'temperature', 'difference', ..."""
    cause: str
    """What brings it about: 'now', 'this step', 'left alone', 'heat stuck on', or a later line's number."""
    worst: float | None
    """Worst value, uncertainty included [unit]; None where it cannot be computed."""
    allowed: float | None
    """The limit [unit]; None where the rating is not known."""
    margin: float | None
    """Positive inside [unit]; None where unknown."""
    unit: str
    """'Pa' (absolute levels and their differences), 'K', 'kg' or 'm3/m3'."""
    judgement: Judgement
    """BLOCKED whenever margin is None, zero or negative."""
    at: Corner | None
    """The worst corner; None where the limit does not depend on the charge."""
    lasts_s: float | None = None
    """How long it lasts at the worst credible rate [s]; None: for ever, or not worked out."""
    why: str = ""
    """Where unknown what is missing, where a law sets the limit what it forbids, as a clause; else empty."""


@dataclass(frozen=True, slots=True)
class Future:
    """One computed future of the vessel with everybody gone."""

    cause: str
    """'heat off' or 'heat stuck on'; of a vent held shut by hand 'V1 let go' and 'V1 stuck shut'."""
    ends_K: float | None
    """Temperature it ends at, worst corner [K]."""
    ends_Pa: float | None
    """Pressure it ends at, worst corner, absolute [Pa]; None where it cannot be computed."""
    at_rest: bool
    """Every limit holds for ever along this future."""
    limit: str | None
    """Tag of the first limit that falls; None where none does."""
    limit_after_s: float | None
    """When it falls [s]; None: never, or at a time that was not worked out."""
    about: bool = False
    """The time leans on constants for the solid and is shown as 'about'."""


@dataclass(frozen=True, slots=True)
class LeftAlone:
    """What happens if nobody does anything."""

    at_rest: bool
    """All futures hold every limit for ever. False where unknown."""
    known: bool
    """False: nothing could be computed, which is shown and counts as not at rest."""
    futures: tuple[Future, ...]
    """Heat off first, heat stuck on where a source is connected; of a held vent let go first, then stuck."""


@dataclass(frozen=True, slots=True)
class Agreement:
    """Whether what is read agrees with what is computed, and what that proves."""

    verdict: str
    """'agrees', 'disagrees', 'cannot tell' or 'no reading'."""
    tag: str | None
    """The gauge compared."""
    read: float | None
    """Pressure as read [Pa]."""
    read_U: float | None
    """Its expanded uncertainty, k = 2 [Pa]."""
    computed: float | None
    """Pressure computed from charge and temperature [Pa]."""
    computed_U: float | None
    """Its expanded uncertainty from the thermometer, the charge and the equation [Pa]."""
    proves: str
    """'thermometer and gauge' (two phases: says nothing of the charge), 'charge' or 'nothing'; 'read apart' where a
    step moved the vessel between the two readings."""


@dataclass(frozen=True, slots=True)
class ChargeBox:
    """How much is in the vessel, as far as it is known."""

    low_kg: float
    """Least it can be [kg]."""
    high_kg: float
    """Most it can be, no loss assumed since the last weighing [kg]."""
    proved: bool
    """A height at known temperature, or a weighing of the closed vessel, has confirmed it after closing."""
    by: tuple[str, ...]
    """What it rests on: 'plan', 'weighing', 'height', 'charge record', 'brim-full'."""
    contradiction: str = ""
    """Which measurements contradict each other (the worse governs); empty where none do."""


@dataclass(frozen=True, slots=True)
class Distance:
    """How far the vessel is from its ceiling along this charge's own path."""

    pressure: float | None
    """[Pa]; None where unknown."""
    temperature: float | None
    """Kelvin of warming that reach the ceiling [K]; None where unknown or never."""
    seconds: float | None
    """At the worst credible rate [s]; None where never or unknown."""
    rate: float | None
    """That rate [K/s]."""
