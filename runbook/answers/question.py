"""What the run asks while it is open, and what it is answered."""

from __future__ import annotations

from dataclasses import dataclass

from runbook.answers.explanation import ChargeEstimate, Explanation, Past
from runbook.answers.lines import Sight
from runbook.answers.margins import Agreement, ChargeBox, Distance, LeftAlone, Margin, Phase


@dataclass(frozen=True, slots=True)
class Observation:
    """One reading as a question carries it."""

    tag: str
    what: str
    value: float
    """[SI; pressures absolute]"""
    sequence: int
    """Number of the event that brought it: newer is larger."""
    by: str
    """Who read it."""
    closed: bool
    """The vessel was closed when it was read."""
    beside: bool = False
    """A temperature kept only because a height was read beside it: it says nothing of how warm the wall is now."""
    line: int = -1
    """The line in which it was read; -1: nobody says."""


@dataclass(frozen=True, slots=True)
class Question:
    """Everything an answer depends on; times are left out, so that the key changes only with facts."""

    key: str
    """Digest of all other fields but the history."""
    line: int
    """The line the run stands in."""
    to: int
    """The line that would be entered next; equal to `line` at the end, or when taking a line up again."""
    closed: str
    """'open', 'closed' or 'do not know'."""
    valves: tuple[tuple[str, str], ...]
    """Positions: 'open', 'shut' or 'do not know'."""
    source: str
    """'on', 'off', 'unplugged', 'do not know' or 'none'."""
    charge: ChargeBox | None
    """From the charge record when the run was opened; None: nothing was in."""
    observations: tuple[Observation, ...]
    """The readings that count: of mass and liquid height (with the temperature read beside it) all since
    closing and the last before it; of temperature and pressure the last, and any that contradicts it."""
    history: tuple[Past, ...] = ()
    """The last readings of the closed vessel with their times, for explanations alone. Not in the key: the numbers of
    the observations say already which readings have been taken."""


@dataclass(frozen=True, slots=True)
class Answer:
    """Everything the interlock leans on at one question."""

    key: str
    now: tuple[Margin, ...]
    """Of the state the vessel is in, worse of measured and computed plus U; smallest share first."""
    ahead: tuple[Margin, ...]
    """Of entering `to`: its path, everything that follows a committing step, left alone, heat stuck on."""
    left_alone: LeftAlone
    """From the state it is in."""
    agreement: Agreement
    charge: ChargeBox | None
    """None: nothing is in."""
    charge_proved: bool
    """Enough for a step with needs_charge_proof."""
    valid: bool
    """The state lies inside the models' validity."""
    good_for_s: float | None
    """Half of what the smallest margin lasts at the worst credible rate: how old a reading may be [s];
    None: it lasts for ever."""
    phases: tuple[Phase, ...]
    """Phases the vessel may be in."""
    pressure: float | None
    """Computed from charge and temperature [Pa]."""
    pressure_U: float | None
    """[Pa]"""
    region: str | None
    liquid_height: float | None
    """Above the inside bottom [m]; None where there is no surface."""
    distance: Distance
    sights: tuple[Sight, ...]
    explanations: tuple[Explanation, ...] = ()
    """What would make gauge and model differ, the most likely first; empty where they agree. Permits nothing."""
    estimate: ChargeEstimate | None = None
    """The charge as a best estimate, for people; limits are judged with `charge`."""


@dataclass(frozen=True, slots=True)
class Unanswered:
    """The question stays unknown."""

    key: str
    why: str
