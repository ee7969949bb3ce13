"""What can go wrong on purpose: each fault is physical in the simulated vessel, its instruments or its people.

A fault begins when the vessel is first in the situation that it belongs to, or so many seconds later; a random one is
drawn by the seed. It does not know what the run makes of it.
"""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import dataclass, field, replace
from random import Random
from typing import TYPE_CHECKING, Final

from runbook.errors import InputUnusable
from runbook.procedure.problems import nearest

if TYPE_CHECKING:
    # The list of faults is read where no physics may be loaded.
    from runbook.rehearsal.vessel import Controls

CLOSED, HEATING, WARMING, LETTING_DOWN, LOADING = "closed", "heating", "warming", "letting down", "loading"
"""Situations in which a fault may begin; a closed vessel that nothing heats but the room is warming too."""
GAUGE, RELIEF, CLOSED_HERE = "a gauge", "a relief device", "closed here"
"""What has to be there for some of them."""


@dataclass(frozen=True, slots=True)
class Fault:
    """One thing that goes wrong."""

    name: str
    words: str
    """What it is, for the list and the record."""
    begins: str
    """The situation in which it begins."""
    of: str = ""
    """What has to be there for it: a gauge, a relief device, a vessel that is closed here; empty: nothing."""


FAULTS: Final = (
    Fault("trapped air", "three times its fill of air was closed in", CLOSED, CLOSED_HERE),
    Fault("over-loaded", "the scale shows a fifth less than there is", LOADING, CLOSED_HERE),
    Fault("under-loaded", "the scale shows a quarter more than there is", LOADING, CLOSED_HERE),
    Fault("slow leak", "a hole of 0.01 mm leaks, some 5 g an hour", CLOSED),
    Fault("gauge stuck", "the high gauge stands still", WARMING, GAUGE),
    Fault("gauge offset", "the high gauge shows 3 bar too much", CLOSED, GAUGE),
    Fault("gauge in another unit", "the high gauge shows psi divided by ten", CLOSED, GAUGE),
    Fault("gauge isolated", "the line of the high gauge is plugged", CLOSED, GAUGE),
    Fault("thermometer off the wall", "the thermometer hangs half in the air", CLOSED),
    Fault("source stuck on", "the heat stays on up to its cut-out", HEATING),
    Fault("cooling lost", "the room takes a fifth of the heat it took", WARMING),
    Fault("relief early", "it opens at three fifths of its lowest pressure", WARMING, RELIEF),
    Fault("relief never", "the relief device does not open", CLOSED, RELIEF),
    Fault("outlet plugged", "the vent is plugged for ten minutes", LETTING_DOWN),
    Fault("second person leaves", "nobody but the performer is there any more", CLOSED),
    Fault("gas alarm", "the gas meter shows 2 % more than before", LETTING_DOWN),
    Fault("operator away", "the operator is away for half an hour", WARMING),
    Fault("heater left on", "nothing is computed for five minutes, heat on", HEATING),
)
"""In the order of the list on screen."""
AWAY: Final = "operator away"
"""The fault in which nobody does anything for a while."""
AWAY_S: Final = 1800.0
"""[s] for which the operator is away."""
_PLUGGED_S, _LOST_S = 600.0, 300.0
_LEAK = 0.01e-3
"""[m]"""
_AIR = 3.0
"""Fills of the cell."""


def find_fault(name: str) -> Fault:
    """The fault of that name. Raises InputUnusable, naming the nearest and all."""
    wanted = " ".join(name.split()).casefold()
    names = [one.name for one in FAULTS]
    if wanted not in names:
        raise InputUnusable(f"there is no fault '{name}'{nearest(wanted, names)}: {', '.join(names)}")
    return FAULTS[names.index(wanted)]


def parse_fault(text: str, seed: int) -> tuple[Fault, float]:
    """'gauge stuck', 'gauge stuck@600' or 'random': the fault and seconds after its situation. Raises InputUnusable."""
    name, at, late = text.partition("@")
    if name.strip().casefold() == "random":
        draw = Random(f"fault {seed}")
        return draw.choice(FAULTS), draw.uniform(0.0, 900.0)
    try:
        after = float(late) if at else 0.0
    except ValueError:
        raise InputUnusable(f"'{late}' is no number of seconds: write for example 'gauge stuck@600'") from None
    if not 0.0 <= after < 1e6:
        raise InputUnusable(f"a fault begins 0 s or more after its situation, not {late} s")
    return find_fault(name), after


def settled_fault(text: str, seed: int) -> str:
    """The same fault and moment by name, whatever seed it is read with. Raises InputUnusable."""
    fault, after = parse_fault(text, seed)
    return f"{fault.name}@{after:g}"


def fault_words(text: str) -> str:
    """What was chosen, in words; one that is drawn is not told. Raises InputUnusable."""
    if not text:
        return "nothing"
    if text.partition("@")[0].strip().casefold() == "random":
        return "one of all, drawn by the seed, at a moment of its own"
    fault, after = parse_fault(text, 0)
    late = f"{after / 60.0:g} min after the vessel is" if after else "when the vessel is"
    return f"{fault.name}: {fault.words}; {late} {fault.begins}"


@dataclass
class Trouble:
    """A fault of one rehearsal, and when it began."""

    fault: Fault
    after_s: float = 0.0
    """How long after its situation first stood [s]."""
    since: float | None = None
    """When its situation first stood [s of the run's clock]."""
    began: float | None = None
    """[s]; None: not yet."""
    frozen: dict[str, float] = field(default_factory=dict)
    """What an instrument that stands still has been showing [SI], by tag."""
    told: bool = False
    """Its beginning has been told to the record."""

    def look(self, situations: Iterable[str], now: float) -> None:
        """Begin where its situation stands long enough."""
        if self.began is not None:
            return
        there = set(situations)
        if self.since is None and self.fault.begins in there and self.fault.of in (*there, ""):
            self.since = now
        if self.since is not None and now >= self.since + self.after_s:
            self.began = now

    def on(self, name: str) -> bool:
        """It is that fault, and has begun."""
        return self.began is not None and self.fault.name == name

    def lasting(self, name: str, now: float, seconds: float) -> bool:
        """It is that fault and began less than so many seconds ago."""
        return self.on(name) and self.began is not None and now < self.began + seconds


@dataclass
class Troubles:
    """All faults of one rehearsal, as the simulated bench feels them."""

    all: list[Trouble] = field(default_factory=list)

    def look(self, situations: Iterable[str], now: float) -> None:
        """Let those begin whose situation stands."""
        there = set(situations)
        for one in self.all:
            one.look(there, now)

    def news(self) -> list[tuple[str, str]]:
        """Name and words of those that have begun since somebody last asked."""
        fresh = [one for one in self.all if one.began is not None and not one.told]
        for one in fresh:
            one.told = True
        return [(one.fault.name, one.fault.words) for one in fresh]

    def on(self, name: str) -> bool:
        """That fault is one of them and has begun."""
        return any(one.on(name) for one in self.all)

    def began(self, name: str) -> float | None:
        """When that fault began [s]; None: not yet, or it is none of them."""
        return next((one.began for one in self.all if one.fault.name == name), None)

    @property
    def air_fills(self) -> float:
        """Fills of the cell with air that were closed in."""
        return _AIR if self.on("trapped air") else 0.0

    def controls(self, controls: Controls, now: float, connected: bool) -> Controls:
        """What the hands have set, as it really is; connected: the heat source is plugged in."""
        if self.on("source stuck on") and connected:
            controls = replace(controls, heating=True)
        if self.on("slow leak"):
            controls = replace(controls, leak=_LEAK)
        if self.on("cooling lost"):
            controls = replace(controls, loss=0.2)
        if any(one.lasting("outlet plugged", now, _PLUGGED_S) for one in self.all):
            controls = replace(controls, vent_open=False, bore=0.0)
        return controls

    def relief_opens(self, lowest: float, rated: float) -> float:
        """True opening pressure of the relief device, gauge [Pa], between its lowest and its rated one."""
        if self.on("relief never"):
            return float("inf")
        return 0.6 * lowest if self.on("relief early") else rated

    def truth(self, tag: str, reads: str, value: float, room_K: float, high_gauge: str | None) -> float:
        """What an instrument really has before it, by what it reads [SI]."""
        if reads == "temperature" and self.on("thermometer off the wall"):
            return room_K + 0.5 * (value - room_K)
        if reads == "mass" and self.on("over-loaded"):
            return 0.8 * value
        if reads == "mass" and self.on("under-loaded"):
            return 1.25 * value
        if reads == "carbon dioxide" and self.on("gas alarm"):
            return value + 0.02
        return self._gauge(tag, value) if tag == high_gauge else value

    def _gauge(self, tag: str, value: float) -> float:
        for one in self.all:
            if one.on("gauge stuck") or one.on("gauge isolated"):
                return one.frozen.setdefault(tag, value)
        if self.on("gauge offset"):
            return value + 3.0e5
        # 1 bar is 14.504 psi: a tenth of it is read as bar.
        return 1.4504 * (value - 101325.0) + 101325.0 if self.on("gauge in another unit") else value

    def away(self, now: float) -> bool:
        """The operator does nothing."""
        return any(one.lasting(AWAY, now, AWAY_S) for one in self.all)

    def lost(self, now: float) -> bool:
        """Nothing is computed."""
        return any(one.lasting("heater left on", now, _LOST_S) for one in self.all)

    @property
    def alone(self) -> bool:
        """Nobody but the performer is there."""
        return self.on("second person leaves")
