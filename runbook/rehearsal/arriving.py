"""When an act of the simulated bench has come to its end, by what the instruments show and what is seen.

One home, so that a rehearsal and the timeline before it end a step by the same rule. Says nothing of what may be done.
"""

from __future__ import annotations

from runbook.answers import Plan
from runbook.assess.walk import Walked
from runbook.procedure.model import CoolTo, DoStep, LetDownTo, LetRiseTo, WarmTo
from runbook.rehearsal.world import World

_NEAR_ROOM = 1.5
"""How near the room a vessel that warms or cools by it is waited for [K]: the last kelvin takes for ever."""
_NEAR = 0.15
"""How near a target counts as reached: about what a thermometer resolves [K]."""


def arrived(world: World, plan: Plan, line: Walked) -> bool:
    """The path of a line has come to its end."""
    verb, step = line.verb, line.step
    if isinstance(step, DoStep) and step.see is not None and "solid gone" in step.see.show and world.ice_seen:
        return False
    wall = next((i.tag for i in plan.instruments if i.reads == "temperature"), None)
    shown = None if wall is None else world.read(wall)
    if isinstance(verb, WarmTo) and shown is not None:
        aim = world.room_K - _NEAR_ROOM if isinstance(verb.warm_to, str) else verb.warm_to.value
        return shown >= aim - _NEAR
    if isinstance(verb, CoolTo) and shown is not None:
        aim = world.room_K + _NEAR_ROOM if isinstance(verb.cool_to, str) else verb.cool_to.value
        return shown <= aim + _NEAR
    if isinstance(verb, LetDownTo):
        return world.vessel.mass <= 1e-6
    return True


def let_down(world: World, plan: Plan, path: LetDownTo) -> bool:
    """Where gas is let out by hand to a level: a gauge that shows the vessel has come to it, or none shows it."""
    shown = [world.read(one.tag) for one in plan.instruments if one.reads == "pressure"]
    highest = max((one for one in shown if one is not None), default=None)
    return highest is None or highest <= path.let_down_to.absolute(plan.barometer)


def risen(world: World, path: LetRiseTo, barometer: float) -> bool:
    """Where a vent is held shut by hand: the gauge shows the level, or nothing, or the sight has come.

    barometer [Pa].
    """
    shown = world.read(path.read_on)
    if shown is None or shown >= path.let_rise_to.absolute(barometer):
        return True
    seen = {"liquid seen": world.liquid_seen, "solid gone": not world.ice_seen}
    return path.until is not None and seen[path.until]
