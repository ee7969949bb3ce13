"""Make safe: per phase the acts that bring the vessel to rest, the first act first.

Built in, because it has to be there when nothing else is: no file, no process, no second person. An author may
add to it, never replace its first act. A fluid that may not be let down takes the vent out of the acts: then the
people go instead. One action an act.
"""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass
from typing import Final

from runbook.answers import Phase, Plan
from runbook.run.state import Ledger

ORDER: Final = (
    Phase.J,
    Phase.F,
    Phase.I,
    Phase.B,
    Phase.K,
    Phase.D,
    Phase.H,
    Phase.G,
    Phase.E,
    Phase.L,
    Phase.C,
    Phase.B_PROVED,
    Phase.A,
)
"""Where several phases are possible the first of these governs."""

SEEN: Final = {"relief": Phase.F, "window": Phase.I, "fire": Phase.J}
"""What a person sees and the tool cannot."""


@dataclass(frozen=True, slots=True)
class SafePhase:
    """What is done in one phase."""

    phase: Phase
    may_wait: str
    """Whether one may wait, as a clause: 'yes ...' or 'no'."""
    acts: tuple[str, ...]
    """One action each, in order, up to rest; never empty."""
    never: str
    """What is never done, as an imperative that starts with 'Never'."""


@dataclass(frozen=True, slots=True)
class Leaves:
    """How the acts of a phase leave the vessel, for whoever proves that it then comes to rest."""

    source_gone: bool
    """The heat source is taken away, where it can be; else it is off and still connected."""
    vent: str
    """'open', 'shut' or 'stays'."""
    away: bool
    """Everybody is out of the room, or back behind the shield and away: it need not be at rest."""


LEAVES: Final = {
    Phase.A: Leaves(False, "open", True),
    Phase.B: Leaves(False, "open", True),
    Phase.B_PROVED: Leaves(False, "stays", False),
    Phase.C: Leaves(False, "stays", False),
    Phase.D: Leaves(True, "stays", True),
    Phase.E: Leaves(True, "stays", False),
    Phase.F: Leaves(False, "open", True),
    Phase.G: Leaves(False, "stays", True),
    Phase.H: Leaves(False, "open", False),
    Phase.I: Leaves(False, "stays", True),
    Phase.J: Leaves(False, "stays", True),
    Phase.K: Leaves(False, "open", True),
    Phase.L: Leaves(False, "stays", False),
}
"""Beside the acts below, which a test holds against it."""


@dataclass(frozen=True, slots=True)
class _At:
    """What of the bench the acts name."""

    vent: str | None
    """None: there is none, or nothing may be let out."""
    source: str | None
    away: bool
    springs_open: bool
    """The vent opens when a hand lets go of it."""
    rest_shut: bool
    """With the vent shut the vessel is at rest."""
    carbon_dioxide: bool

    @property
    def heat_off(self) -> tuple[str, ...]:
        return () if self.source is None else (f"HEAT OFF: switch {self.source} off.",)

    @property
    def let_out(self) -> str:
        return f"LET GO of {self.vent}" if self.springs_open else f"OPEN {self.vent}"

    @property
    def heat_gone(self) -> tuple[str, ...]:
        if self.source is None:
            return ()
        return (*self.heat_off, f"TAKE {self.source} AWAY from the vessel.") if self.away else self.heat_off

    def meter(self, percent: str) -> str:
        return f"{percent} carbon dioxide" if self.carbon_dioxide else "the alarm of the gas meter"


def phase_of(plan: Plan, ledger: Ledger, seen: str) -> Phase:
    """The phase that governs: what was seen, else the worst of those that may be possible.

    While nothing answers for the vessel as it stands, the last answer may be of a vessel that has been closed
    since: so the plan's phases of this line count as well.
    """
    if seen in SEEN:
        return SEEN[seen]
    possible = ledger.last_answer.phases if ledger.last_answer is not None else ()
    if ledger.answer is None or not possible:
        possible = (*possible, *_planned(plan, ledger))
    # Nothing known at all: as if it were closed with solid in it and nobody knew how much.
    return next((phase for phase in ORDER if phase in possible), Phase.B)


def _planned(plan: Plan, ledger: Ledger) -> tuple[Phase, ...]:
    if ledger.present is not None:
        return ledger.present.phases
    if plan.charge is None or not plan.lines:
        return (Phase.A,) if ledger.last_answer is None else ()
    return plan.lines[plan.parts[ledger.part].first].phases


def make_safe(plan: Plan, phase: Phase, rest_shut: bool = False) -> SafePhase:
    """What to do in a phase. rest_shut: shown to be at rest with the vent shut; unknown counts as not."""
    springs = (plan.let_down_valve, "opens") in plan.valve_lets_go
    at = _At(
        vent=None if plan.release_forbidden else plan.let_down_valve,
        source=plan.source_tag,
        away=plan.source_away,
        springs_open=springs,
        rest_shut=rest_shut and not springs,
        carbon_dioxide=any(one.reads == "carbon dioxide" for one in plan.instruments),
    )
    may_wait, acts, never = _TABLE[phase](at)
    also = tuple(f"{text} ({role})" if role else text for text, role in plan.make_safe_also)
    return SafePhase(phase, may_wait, (*acts, *also), never)


def rest_shut(plan: Plan, ledger: Ledger) -> bool:
    """The let-down began at rest, from a proved charge no larger than planned: with less in, it still is."""
    answer = ledger.last_answer
    before = plan.lines[ledger.line - 1] if 0 < ledger.line < len(plan.lines) else None
    if answer is None or answer.charge is None or before is None:
        return False
    charge = answer.charge
    within = charge.proved and not charge.contradiction and charge.high_kg <= plan.planned_kg[1]
    return within and before.left_alone.known and before.left_alone.at_rest


_Row = tuple[str, tuple[str, ...], str]
_OUT: Final = "PEOPLE OUT: everybody leaves the room."
_BACK: Final = "PEOPLE BACK: everybody behind the shield and away from it."
_SHIELD: Final = "SHIELD SHUT: close the shield from behind it."


def _a(at: _At) -> _Row:
    acts = (
        "LID OFF: take every closure off.",
        *at.heat_off,
        "VENTILATE: open doors and windows.",
        f"GO OUT at {at.meter('1.5 %')}.",
    )
    return "for the pressure yes, for the air no", acts, "Never close it to stop the fog."


def _b(at: _At) -> _Row:
    if at.vent is None:
        return "no", (_OUT, *at.heat_off), "Never look for the error first."
    acts = (f"{at.let_out} now.", _BACK, *at.heat_off, f"LEAVE {at.vent} open.")
    return "no", acts, "Never look for the error first."


def _b_proved(at: _At) -> _Row:
    return "yes", (_SHIELD, *at.heat_off), "Never carry it."


def _c(at: _At) -> _Row:
    acts = (*at.heat_off, _SHIELD, "WALK AWAY and let it stand.")
    return "yes", acts, "Never open a vent to be on the safe side."


def _d(at: _At) -> _Row:
    cool = "COLD WATER on the body from behind the shield; only on metal and sapphire."
    vent = () if at.vent is None else (f"{at.let_out} from behind the shield if you cannot cool it.",)
    first = at.heat_gone if at.source is not None or at.vent is not None else (_OUT,)
    acts = (*first, cool, *vent, *(() if first == (_OUT,) else (_OUT,)))
    return "no", acts, "Never stand before the window; never put ice on glass."


def _e(at: _At) -> _Row:
    acts = (*at.heat_gone, _SHIELD, "WAIT until it is cold.")
    return "yes, once the heat is gone", acts, "Never vent fast; never touch it."


def _f(at: _At) -> _Row:
    acts = (
        "ALL OUT: everybody leaves the room at once.",
        "DOORS OPEN behind you.",
        "READ the gas meter at the door.",
        f"BACK only under {at.meter('0.5 %')}.",
        *at.heat_off,
        *(_h(at)[1] if at.vent is not None else ()),
    )
    return "no", acts, "Never tighten anything; never look into the outlet."


def _g(at: _At) -> _Row:
    never = "Never go on letting down below the pause pressure."
    if at.vent is None:
        return "no", (_OUT, *at.heat_off), never
    if at.rest_shut:
        return "yes, with the vent shut", (f"SHUT {at.vent} and let it warm.", *at.heat_off, _SHIELD), never
    cracked = "open" if at.springs_open else "cracked open"
    return "no", (f"LEAVE {at.vent} {cracked}.", _BACK, *at.heat_off), never


def _h(at: _At) -> _Row:
    never = "Never poke; never undo a joint; never shut it for the night."
    if at.vent is None:
        return "not with anything shut", (_OUT, *at.heat_off), never
    acts = (
        f"LEAVE {at.vent} open.",
        *at.heat_off,
        "LUKEWARM WATER or room air on the body.",
        "STAND CLEAR of the outlet.",
    )
    return "not with the vent shut", acts, never


def _i(at: _At) -> _Row:
    acts = (*at.heat_off, "BACK: everybody goes away from it.", "LEAVE IT as it stands.")
    return "no", acts, "Never go near it; never tighten anything."


def _j(at: _At) -> _Row:
    off = () if at.source is None else (f"HEAT OFF if {at.source} is in reach.",)
    acts = (*off, "OUT: everybody leaves the building.", "TELL the fire service what is in there.")
    return "no", acts, "Never go back to finish."


def _k(at: _At) -> _Row:
    acts = ("STOP the pump.", "LET AIR IN slowly from behind the shield.", *at.heat_off)
    return "no", acts, "Never lift or tap it."


def _l(at: _At) -> _Row:
    acts = (*at.heat_off, "LEAVE IT in the water.", _SHIELD)
    return "yes, with the bath off", acts, "Never lift it out warm."


_TABLE: Final[dict[Phase, Callable[[_At], _Row]]] = {
    Phase.A: _a,
    Phase.B: _b,
    Phase.B_PROVED: _b_proved,
    Phase.C: _c,
    Phase.D: _d,
    Phase.E: _e,
    Phase.F: _f,
    Phase.G: _g,
    Phase.H: _h,
    Phase.I: _i,
    Phase.J: _j,
    Phase.K: _k,
    Phase.L: _l,
}
