"""Sights of a line of the procedure: of the path it takes, and of the vessel as it stands in it."""

from __future__ import annotations

import contextlib
from typing import get_args

from runbook.answers import ChargeBox, Sight
from runbook.assess.course import Held
from runbook.assess.scene import Scene
from runbook.assess.sights.frozen import letting_down, melting_sight, melts
from runbook.assess.sights.looking import Look, computed, written
from runbook.assess.sights.marks import is_seen
from runbook.assess.sights.path import path_sights
from runbook.assess.walk import VesselState, Walked
from runbook.errors import OutsideValidity
from runbook.fluids.optics import haze_known
from runbook.procedure.model import CoolTo, DoStep, QuickStep, WarmTo
from runbook.procedure.steps import Shown

_KINDS = {"liquid height": "meniscus"}
"""A name that an author may use -> the kind of the computed sight, where they differ."""


def line_sights(scene: Scene, line: Walked) -> tuple[tuple[Sight, ...], str]:
    """The author's words first, then what is computed along the line's path in order; and what if not."""
    said, if_not = written(line.step)
    verb, state = line.verb, line.during
    if line.lets_down and line.before.closed:
        return (*said, *letting_down(scene, 0.5 * (scene.room_coldest + scene.room_hottest))), if_not
    if line.held is not None and line.seals:
        return (*said, *_held(scene, line.held, state)), if_not
    look = Look(state.low_kg, state.high_kg, state.cold)
    if not isinstance(verb, WarmTo | CoolTo) or not state.closed or not look.known:
        return said, if_not
    begin = line.before.cold if isinstance(verb, WarmTo) else line.before.hot
    along = path_sights(scene, begin, _aim(scene, verb), look.mass)
    return (*said, *(sight for _, sight in along)), if_not


def live_sights(
    scene: Scene, line: Walked | None, state: VesselState, box: ChargeBox | None, temperature: float
) -> tuple[Sight, ...]:
    """What is seen of the vessel as it stands, wall at a temperature [K]; line: the one the run stands in."""
    lets_down = state.letting_down and not state.closed
    if box is None or not (state.closed or lets_down):
        return ()
    verb = line.verb if line is not None else None
    heated = state.source == "on"
    warming = True if isinstance(verb, WarmTo) or heated else False if isinstance(verb, CoolTo) else None
    toward = _aim(scene, verb) if isinstance(verb, WarmTo) else None
    found = computed(scene, Look(box.low_kg, box.high_kg, temperature, warming, heated, lets_down, toward))
    # What the author wants the class to look at stands first; the rest is there all the same.
    wanted = {kind for name in asked_for(line) for kind in (_KINDS.get(name, name),)}
    return tuple(sorted(found, key=lambda sight: sight.of not in wanted))


def _held(scene: Scene, held: Held, state: VesselState) -> tuple[Sight, ...]:
    """While a hand lets it rise: the solid melts, if it comes so far; then what the liquid does with the hand gone."""
    if not is_seen(scene):
        return ()
    fluid = scene.substance
    density = state.high_kg / scene.apparatus.volume.free.value
    found: list[Sight] = []
    if held.level.absolute(scene.barometer.low_Pa) > fluid.triple_pressure and melts(scene, density):
        with contextlib.suppress(OutsideValidity):
            found.append(melting_sight(scene, density))
            found += [s for s in letting_down(scene, fluid.triple_temperature) if s.of == "solid"]
    return tuple(found)


def asked_for(line: Walked | None) -> tuple[str, ...]:
    """Sights that the author of a line asks the program to show, by name."""
    step = line.step if line is not None else None
    return step.see.show if isinstance(step, DoStep | QuickStep) and step.see is not None else ()


def not_to_come(scene: Scene, line: Walked) -> tuple[tuple[str, ...], tuple[str, ...]]:
    """(names asked for that do not come on the line's path, names that do); nothing computed: neither.

    A name whose figures are not known for this fluid is in neither: nobody can say that it does not come.
    """
    come = {sight.of for sight in line_sights(scene, line)[0] if sight.computed}
    if not come:
        return (), ()
    unknown = set() if haze_known(scene.substance) else {"haze"}
    missing = tuple(n for n in asked_for(line) if n not in unknown and _KINDS.get(n, n) not in come)
    return missing, tuple(name for name in get_args(Shown) if _KINDS.get(name, name) in come)


def _aim(scene: Scene, verb: WarmTo | CoolTo) -> float:
    """Middle of where a path leads [K]; of the room where it says so."""
    aim = verb.warm_to if isinstance(verb, WarmTo) else verb.cool_to
    return 0.5 * (scene.room_coldest + scene.room_hottest) if isinstance(aim, str) else aim.value
