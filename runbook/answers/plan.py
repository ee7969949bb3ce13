"""A procedure bound to its vessel, this room and this charge."""

from __future__ import annotations

from dataclasses import dataclass

from runbook.answers.explanation import Telling
from runbook.answers.lines import PlanLine
from runbook.answers.margins import ChargeBox


@dataclass(frozen=True, slots=True)
class Instrument:
    """What the run must know of an instrument to take a reading from it."""

    tag: str
    reads: str
    """As Need.what."""
    of: str
    """The space, or 'wall', 'scale', 'window', 'room air'."""
    unit: str
    """Printed on the dial."""
    low: float
    """Lower end of the dial [SI; pressures absolute at the run's barometer]."""
    high: float
    """Upper end of the dial [as low]."""
    error: float
    """Permissible error at 0 degC, for others at any point, half-width [SI]."""
    error_slope: float
    """Growth of the permissible error with |t| from 0 degC [K/K]; 0 for all but resistance thermometers."""
    half_division: float
    """How far a careful reading may miss [SI]."""
    lag_s: float
    """Time constant [s]."""
    read_from: str
    """Where the person stands."""


@dataclass(frozen=True, slots=True)
class PlanPart:
    """One part of the day."""

    name: str
    first: int
    """Index of its first line in Plan.lines."""
    repeatable: bool
    fits_s: float | None
    """Time it must fit into [s]."""
    lead_s: float | None
    """How long before the lesson it begins [s]."""


@dataclass(frozen=True, slots=True)
class Certificate:
    """One dated proof."""

    tag: str
    what: str
    state: str
    """'valid', 'expired', 'not yet valid' or 'not known'."""
    until: str
    """ISO date, or 'not known'."""


@dataclass(frozen=True, slots=True)
class ChargeBounds:
    """What may be loaded."""

    least_kg: float | None
    best_kg: float | None
    most_kg: float | None
    least_reason: str
    best_reason: str
    most_reason: str


@dataclass(frozen=True, slots=True)
class Finding:
    """One finding of check; as errors.Problem without its source line."""

    rule: str
    severity: str
    line: int
    column: int
    message: str
    file: str = ""
    """Where it stands, if not in the procedure file."""


@dataclass(frozen=True, slots=True)
class VesselBeside:
    """A further vessel in the same bath; its margins, readings and limits stand among the plan's own."""

    vessel: str
    """Its tag."""
    apparatus: str
    """What people call it."""
    planned_kg: tuple[float, float]
    """Least and most that is in it by the file [kg]."""


@dataclass(frozen=True, slots=True)
class Plan:
    """A procedure bound to its vessel, this room and this charge."""

    procedure: str
    apparatus: str
    vessel: str
    """The vessel's tag: the key of charge, margins, readings, valves and limits."""
    fluid: str
    procedure_sha256: str
    apparatus_sha256: str
    verdict: str
    """'within limits', 'outside limits' or 'not proved'."""
    approved: str
    """Name, role and date of who approved the apparatus file's figures."""
    findings: tuple[Finding, ...]
    barometer: float
    """[Pa]"""
    barometer_bound: float
    """Half-width [Pa]."""
    barometer_source: str
    room_hottest: float
    """[K]"""
    room_coldest: float
    """[K]"""
    charge: ChargeBox | None
    """At the start: None where the cell is empty; else what the charge record says."""
    planned_kg: tuple[float, float]
    """Least and most that the procedure's tolerance allows [kg]."""
    free_volume: tuple[float, float]
    """Least and most [m3]."""
    ceiling: float | None
    """Lowest pressure limit of the closed vessel, isolators as at rest, of several the lowest [Pa]; None: not known."""
    ceiling_by: str
    """Tag that governs it."""
    pressure_unit: str
    """Of the high gauge's dial: the one pressure unit of the run screen."""
    bounds: ChargeBounds
    certificates: tuple[Certificate, ...]
    instruments: tuple[Instrument, ...]
    roles: tuple[str, ...]
    bring: tuple[str, ...]
    valves: tuple[tuple[str, str], ...]
    """Positions at the start."""
    valve_lets_go: tuple[tuple[str, str], ...]
    """What each valve does when let go: 'stays', 'opens' or 'shuts'."""
    outside_valves: tuple[str, ...]
    """Valves and openings that join the charge's space to the room."""
    source_tag: str | None
    source: str
    """At the start: 'on', 'off', 'unplugged' or 'none'."""
    source_away: bool
    """It can be taken away in one motion."""
    let_down_valve: str | None
    """The vent that make safe opens."""
    release_forbidden: bool
    """The fluid may not be let down to the room."""
    parts: tuple[PlanPart, ...]
    lines: tuple[PlanLine, ...]
    make_safe_also: tuple[tuple[str, str], ...]
    """Author's additions: (text, role)."""
    path: tuple[tuple[float, float], ...] = ()
    """The planned charge at fixed density, cold to hot: temperature [K], pressure [Pa]. For pictures only."""
    telling: tuple[Telling, ...] = ()
    """What each instrument would show of the faults that happen, at rest as planned. For words only."""
    beside: tuple[VesselBeside, ...] = ()
    """Further vessels in the bath of the first; but for the ceiling what is of one vessel is the first one's."""
