"""What each line does to the eight hazards, from its verb, the fluid and the state of the vessel.

An author may add 'raises', never take one away. Lowering the pressure is not the same as safer: letting
down lowers one hazard and raises two.
"""

from __future__ import annotations

from runbook.answers import Effect, Hazard
from runbook.assess.barred import lets_out
from runbook.assess.scene import Scene
from runbook.assess.walk import Walked, by_source
from runbook.procedure.model import CoolTo, DoStep, LetDownTo, Load, OpenContainment, Purge, WarmTo

HOT_TO_TOUCH = 333.15
"""Metal above it burns a hand that rests on it, 60 degC: common practice; ISO 13732-1 gives 51 to 67 [K]."""


def effects(scene: Scene, line: Walked) -> tuple[tuple[Hazard, Effect], ...]:
    """All eight, in the order of Hazard; KEEPS where nothing is done to it."""
    found = {hazard: Effect.KEEPS for hazard in Hazard}
    found |= _of_verb(scene, line)
    found |= _of_valves(scene, line)
    hazards = scene.substance.data.hazards
    if hazards.breathing == "harmless":
        found[Hazard.GAS] = Effect.KEEPS
    if hazards.release_forbidden and lets_out(scene, line):
        found[Hazard.RELEASE] = Effect.RAISES
        if found[Hazard.OVER_PRESSURE] is Effect.LOWERS:
            # What is forbidden is no way of lowering a pressure: the step has to bear every proof of one that raises.
            found[Hazard.OVER_PRESSURE] = Effect.KEEPS
    if isinstance(line.step, DoStep):
        for name in line.step.raises:
            found[Hazard(name)] = Effect.RAISES
    return tuple((hazard, found[hazard]) for hazard in Hazard)


def raises(line_effects: tuple[tuple[Hazard, Effect], ...]) -> bool:
    """Any hazard raised, or unknown, which counts as raised."""
    return any(effect in (Effect.RAISES, Effect.UNKNOWN) for _, effect in line_effects)


def lowers(line_effects: tuple[tuple[Hazard, Effect], ...]) -> bool:
    """Any hazard lowered."""
    return any(effect is Effect.LOWERS for _, effect in line_effects)


def _of_verb(scene: Scene, line: Walked) -> dict[Hazard, Effect]:
    verb = line.verb
    if isinstance(verb, Load):
        return {Hazard.COLD: Effect.RAISES, Hazard.GAS: Effect.RAISES}
    if isinstance(verb, WarmTo):
        if not by_source(scene, verb):
            # The room warms the closed vessel whether or not anybody enters the step.
            return {}
        found = {Hazard.OVER_PRESSURE: Effect.RAISES}
        if line.during.hot > HOT_TO_TOUCH:
            found[Hazard.HOT] = Effect.RAISES
        return found
    if isinstance(verb, CoolTo):
        densest = scene.substance.data.densest_temperature
        if densest is not None and line.during.cold < densest:
            # Ice, and liquid near it, take more room than what they came from.
            return {Hazard.OVER_PRESSURE: Effect.RAISES}
        return {Hazard.OVER_PRESSURE: Effect.LOWERS} if line.before.closed else {}
    if isinstance(verb, LetDownTo):
        return {
            Hazard.OVER_PRESSURE: Effect.LOWERS,
            Hazard.COLD: Effect.RAISES,
            Hazard.GAS: Effect.RAISES,
        }
    if isinstance(verb, Purge):
        return {Hazard.OVER_PRESSURE: Effect.RAISES, Hazard.GAS: Effect.RAISES}
    if isinstance(verb, OpenContainment):
        return {Hazard.CONTAINMENT: Effect.RAISES}
    return {}


def _of_valves(scene: Scene, line: Walked) -> dict[Hazard, Effect]:
    before, after = line.before, line.during
    found: dict[Hazard, Effect] = {}
    if line.seals:
        found[Hazard.OVER_PRESSURE] = Effect.RAISES
        if line.lets_down:
            # It lets go again of what it closes: that takes back nothing of what closing raised.
            return found | {Hazard.COLD: Effect.RAISES, Hazard.GAS: Effect.RAISES}
    opened = {t for t, p in after.valves.items() if p == "open" and before.valves.get(t) != "open"}
    if not opened or not before.loaded:
        return found
    openings = {o.tag for o in scene.apparatus.openings}
    if opened & openings:
        found[Hazard.CONTAINMENT] = Effect.RAISES
    if line.lets_down:
        found |= {
            Hazard.OVER_PRESSURE: Effect.LOWERS,
            Hazard.COLD: Effect.RAISES,
            Hazard.GAS: Effect.RAISES,
        }
    elif before.closed:
        # A closed charge let into another space: its gauge and relief may bear less.
        found[Hazard.OVER_PRESSURE] = Effect.RAISES
    return found
