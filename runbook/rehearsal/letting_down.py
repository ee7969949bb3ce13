"""The let-down before it is done: opening, pauses, coldest wall, minutes, gas to the room, dry ice that stays.

On the simulated bench, from rest in the room, so that a rehearsal shows the same. No ventilation is counted. Refuses
nothing: a fluid that must not be let down has no plan here.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, replace
from typing import Final

from runbook.answers import Plan
from runbook.apparatus.model import Valve
from runbook.assess.limits import closed_extremes
from runbook.assess.room import gas_margins
from runbook.assess.scene import Scene
from runbook.procedure.model import LetDownTo
from runbook.quantities import Bounded
from runbook.rehearsal.lesson import Lesson
from runbook.rehearsal.lots import Lot, corner, middle

OPENINGS: Final = (0.5, 1.0, 2.0)
"""Of the valve's bore, to show what a smaller and a wider opening would do [1]."""
NO_BORE: Final = (0.15e-3, 0.3e-3, 1.0e-3)
"""Bores that are told where the file states none [m]."""
_TICK: Final = 2.0
"""Between two looks at the gauge [s]."""
_RISES: Final = 1.0e6
"""How far the gauge climbs again before a valve shut for a pause is opened [Pa]."""
_PAUSE_S: Final = 1800.0
"""Longest pause: by then the room has given what it gives soon [s]."""
_LONGEST_S: Final = 12 * 3600.0
_EMPTY: Final = 1.01
"""Of the barometer: the gauge stands at zero [1]."""


@dataclass(frozen=True, slots=True)
class Downward:
    """One way of letting down."""

    opening_m: float
    """Bore that is open [m]."""
    pauses: int
    """How often the valve was shut for liquid."""
    takes_s: float | None
    """Until the gauge stands at zero [s]; None: not within twelve hours."""
    liquid_gone_s: float | None
    """Until no liquid is seen [s]; None: before that all of it had frozen."""
    coldest_K: float
    """Of the wetted wall [K]."""
    solid_kg: float
    """Dry ice, or other solid, that lies in the vessel then [kg]."""
    gas_kg: float
    """To the room until then [kg]."""
    most_kg_s: float
    """The most of it in any minute [kg/s]."""


@dataclass(frozen=True, slots=True)
class LetDownPlan:
    """Of the step that lets down."""

    number: str
    valve: str
    pause_Pa: float | None
    """The step's pause pressure, absolute [Pa]."""
    bore_stated: bool
    """The file says how wide the valve is."""
    ways: tuple[Downward, ...]
    """Without tolerances, one for each opening."""
    bounds: tuple[Downward, Downward] | None
    """At the valve's own bore: the most charge in the coldest room, and the least in the hottest; None: no bore."""
    share: float | None
    """All of the charge in the room's air at once, what was there before included, at the most [m3/m3]."""
    limit: float | None
    """The long-term exposure limit [m3/m3]; None: of this gas there is none to tell."""


def let_down_plan(scene: Scene, plan: Plan, parts: Sequence[int]) -> LetDownPlan | None:
    """Of the first step of some parts, from 0, that lets down; None where none does, or the fluid must not be.

    Raises OutsideValidity.
    """
    at = middle(scene, plan)
    step = _step(at, parts)
    if step is None or plan.release_forbidden:
        return None
    bore = step.valve.bore
    bores = NO_BORE if bore is None else tuple(share * bore.value for share in OPENINGS)
    share, limit = _in_air(scene)
    return LetDownPlan(
        number=at.lines[step.index].number,
        valve=step.valve.tag,
        pause_Pa=step.pause_Pa,
        bore_stated=bore is not None,
        ways=tuple(_down(at, step, wide) for wide in bores),
        bounds=None
        if bore is None
        else (
            _down(corner(scene, plan, most=True), step, bore.value),
            _down(corner(scene, plan, most=False), step, bore.value),
        ),
        share=share,
        limit=limit,
    )


def downward(lot: Lot, parts: Sequence[int]) -> Downward | None:
    """One lot let down through the valve's own bore; None where nothing is let down or nobody knows it.

    Raises OutsideValidity.
    """
    step = _step(lot, parts)
    return None if step is None or step.valve.bore is None else _down(lot, step, step.valve.bore.value)


@dataclass(frozen=True, slots=True)
class _Step:
    """A step that lets down."""

    index: int
    valve: Valve
    pause_Pa: float | None


def _step(lot: Lot, parts: Sequence[int]) -> _Step | None:
    """The first of some parts, from a closed vessel."""
    for index, line in enumerate(lot.lines):
        verb = line.verb
        if isinstance(verb, LetDownTo) and line.part in parts and line.before.closed:
            valve = next((v for v in lot.scene.apparatus.valves if v.tag == verb.through), None)
            pause = None if verb.pause_above is None else verb.pause_above.absolute(lot.plan.barometer)
            return None if valve is None else _Step(index, valve, pause)
    return None


def _in_air(scene: Scene) -> tuple[float | None, float | None]:
    """All of it in the room's air [m3/m3], and the limit."""
    most = scene.planned[1]
    reach = replace(closed_extremes(scene, most, scene.room_hottest, scene.room_coldest), released=most)
    found = next(iter(gas_margins(scene, reach, "let down")), None)
    return (None, None) if found is None else (found.worst, found.allowed)


def _down(lot: Lot, step: _Step, bore: float) -> Downward:
    index, valve, pause = step.index, step.valve, step.pause_Pa
    lesson = Lesson(_bored(lot, valve.tag, bore), lot.lines[index].part)
    world, barometer = lesson.world, lot.plan.barometer
    began, pauses, coldest, most, gone = lesson.clock, 0, world.temperature(), 0.0, None
    minute, given = began, world.vessel.released
    before = world.vessel.mass
    lesson.put(index, valve.tag, "open")
    while world.pressure() > _EMPTY * barometer and world.vessel.mass > 0.0 and lesson.clock - began < _LONGEST_S:
        if pause is not None and world.pressure() <= pause and world.liquid_seen:
            pauses += 1
            lesson.put(index, valve.tag, "shut")
            shut = lesson.clock
            while world.pressure() < pause + _RISES and lesson.clock - shut < _PAUSE_S:
                lesson.wait(_TICK)
            lesson.put(index, valve.tag, "open")
        lesson.wait(_TICK)
        if world.vessel.mass > 0.0 and not world.vessel.in_the_open:
            coldest = min(coldest, world.temperature())
        if gone is None and not world.liquid_seen:
            gone = None if world.ice_seen else lesson.clock - began
        if lesson.clock - minute >= 60.0:
            most = max(most, (world.vessel.released - given) / (lesson.clock - minute))
            minute, given = lesson.clock, world.vessel.released
    took = lesson.clock - began
    solid = world.vessel.mass if world.ice_seen else 0.0
    left = before - solid
    return Downward(
        opening_m=bore,
        pauses=pauses,
        takes_s=None if took >= _LONGEST_S else took,
        liquid_gone_s=gone,
        coldest_K=coldest,
        solid_kg=solid,
        gas_kg=left,
        # Of one that is over within the first minute the whole is its most.
        most_kg_s=max(most, left / 60.0 if took < 60.0 else 0.0),
    )


def _bored(lot: Lot, tag: str, bore: float) -> Lot:
    """The lot with a valve of another bore [m]."""
    vessel = lot.scene.apparatus
    valves = tuple(v.model_copy(update={"bore": Bounded(bore)}) if v.tag == tag else v for v in vessel.valves)
    loaded = replace(lot.scene.loaded, apparatus=vessel.model_copy(update={"valves": valves}))
    return replace(lot, scene=replace(lot.scene, loaded=loaded))
