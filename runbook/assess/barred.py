"""What a fluid itself bars, whatever the pressures are: a law against letting it out, fire, and what it softens.

A release that is forbidden is no way of lowering a pressure; what burns has no rules for ignition and ventilation
here; of a part that the fluid softens nothing can be said. All are margins that are gone, so that check, paper and the
gate of a run refuse them alike. What a relief device lets out is not judged here: nobody does it.
"""

from __future__ import annotations

from collections.abc import Iterator, Mapping

from runbook.answers import Finding, Judgement, Margin
from runbook.apparatus.ceiling import ceiling
from runbook.apparatus.model import OUTSIDE
from runbook.apparatus.spaces import joined_spaces
from runbook.assess.scene import Scene
from runbook.assess.walk import Walked
from runbook.procedure.model import DoStep, LetDownTo, Purge, QuickItem, QuickStep
from runbook.quantities import say

FORBIDDEN = "forbidden release"
"""Kind of the margin of a release that the law forbids."""
IGNITION, SOFTENED = "ignition", "softened material"
"""Kinds of the margins of what burns, and of parts of which nothing can be said."""
TOLD_ONCE = (IGNITION, SOFTENED)
"""Kinds that are the same on every line: check tells them by a finding of their own."""
_ATMOSPHERE = 101325.0
"""Only to compare levels with each other [Pa]."""


def lets_out(scene: Scene, line: Walked) -> bool:
    """Whether the line gives the fluid a way to the room that it did not have, at any moment in it.

    A valve that nobody knows counts as open, and a purge is filled from outside and let out each time.
    """
    verb = line.verb
    if isinstance(verb, Purge):
        return _open(scene, dict(line.before.valves) | dict(line.during.valves) | {verb.through: "open"})
    if not (line.before.loaded or line.during.loaded):
        return False
    was_open = line.before.loaded and _open(scene, line.before.valves)
    for valves, letting_down in _moments(line):
        now_open = _open(scene, valves)
        if now_open and (letting_down or not was_open):
            return True
        was_open = now_open
    return False


def barred_margins(scene: Scene, line: Walked, cause: str) -> Iterator[Margin]:
    """Margins that are gone because of the fluid itself; none for most fluids."""
    fluid = scene.substance
    hazards = fluid.data.hazards
    if line.before.loaded or line.during.loaded:
        if fire := _fire(scene):
            yield Margin("room", IGNITION, cause, None, None, None, "m3/m3", Judgement.BLOCKED, None, why=fire)
        for tag, why in softened(scene):
            yield Margin(tag, SOFTENED, cause, None, None, None, "Pa", Judgement.BLOCKED, None, why=why)
    if hazards.release_forbidden and lets_out(scene, line):
        kg = max(line.before.high_kg if line.before.loaded else 0.0, line.during.high_kg, _purged(scene, line))
        why = f"up to {say(kg, 'g', 1)} of {fluid.name} could get out to the room, which is forbidden"
        why += f" ({hazards.release_law}): recover it into a closed space of the apparatus"
        yield Margin("room", FORBIDDEN, cause, kg, 0.0, -kg, "kg", Judgement.BLOCKED, None, why=why)


def barred_findings(scene: Scene) -> tuple[Finding, ...]:
    """What is the same on every line, once: at the fluid of the procedure, and at its apparatus."""
    found = []
    if fire := _fire(scene):
        at = scene.loaded.positions.get(("fluid",), (1, 1))
        found.append(Finding("flammable", "error", *at, f"no procedure with it is proved: {fire}"))
    for tag, why in softened(scene):
        at = scene.loaded.positions.get(("apparatus",), (1, 1))
        found.append(Finding("softened material", "error", *at, f"{tag} cannot be judged: {why}"))
    return tuple(found)


def _fire(scene: Scene) -> str:
    """Why nothing can be proved of what burns or feeds a fire; empty for all else."""
    hazards = scene.substance.data.hazards
    if not (hazards.flammable or hazards.oxidiser):
        return ""
    does = "burns" if hazards.flammable else "feeds a fire"
    return f"{scene.substance.name} {does}, and ignition and ventilation have no rules here"


def softened(scene: Scene) -> Iterator[tuple[str, str]]:
    """Parts of which nothing can be said, and why: softened above a pressure from which nothing keeps them."""
    hazards, name = scene.substance.data.hazards, scene.substance.name
    if hazards.softens_above is None:
        return
    for part in scene.apparatus.components:
        if part.material not in hazards.softens:
            continue
        top = ceiling(scene.apparatus, [part.space])
        if top is None or top.level is None or top.level.gauge(_ATMOSPHERE) > hazards.softens_above:
            most = say(hazards.softens_above, "bar", 0)
            yield part.tag, f"it is {part.material}, and nothing keeps {name} in its space below {most}(g)"


def _open(scene: Scene, valves: Mapping[str, str]) -> bool:
    return OUTSIDE in joined_spaces(scene.apparatus, valves, scene.charge_space)


def _moments(line: Walked) -> Iterator[tuple[Mapping[str, str], bool]]:
    """Positions of the valves, one after the other, and whether gas is let down with them so."""
    valves = dict(line.before.valves)
    items = line.step.quick if isinstance(line.step, QuickStep) else (line.step,)
    for item in items:
        if isinstance(item, DoStep | QuickItem):
            valves |= item.valves
            if isinstance(item.path, LetDownTo):
                yield valves | {item.path.through: "open"}, True
        yield dict(valves), False


def _purged(scene: Scene, line: Walked) -> float:
    """What a purge lets out, as of an ideal gas [kg]."""
    verb, volume = line.verb, scene.gas_volume
    if not isinstance(verb, Purge) or volume is None:
        return 0.0
    filled = verb.up_to.absolute(scene.barometer.high_Pa) / 101325.0
    return float(verb.purge) * filled * scene.volume[1] / volume
