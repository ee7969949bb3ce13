"""What should be seen, computed where it can be, in one plain sentence each; else the author's words.

Trust: one density for the whole cell is honest to about 1 % only beyond 0.2 K from critical, so within 0.1 K
one sentence says just that.
"""

from __future__ import annotations

from runbook.answers import Sight
from runbook.assess.boxes import viewed_shape
from runbook.assess.scene import Scene
from runbook.errors import RunbookError
from runbook.fluids.state import Region
from runbook.procedure.model import DoStep, Parked, Step

_NEAR_CRITICAL = 0.1
"""Within it one sentence is all that is honest [K]."""
_HAZE = 1.0
"""Side-lit haze is seen from about here, Einstein and Ornstein-Zernike turbidity [K]."""


def written(step: Step | Parked) -> tuple[tuple[Sight, ...], str]:
    """The author's sights of a step, and what to do if they do not come."""
    if not isinstance(step, DoStep):
        return (), ""
    if_not = step.if_not or ""
    if step.see is None or step.see.words is None:
        return (), if_not
    return (Sight(step.see.words, False, if_not),), if_not


def computed(scene: Scene, mass: float, temperature: float, warming: bool | None) -> tuple[Sight, ...]:
    """What a charge [kg] shows at a temperature [K]; warming: True, False, or None where it stands."""
    fluid = scene.substance
    density = mass / scene.apparatus.volume.free.value
    try:
        state = fluid.state(temperature, density)
    except RunbookError:
        return ()
    critical = fluid.is_critical(density)
    if critical and abs(temperature - fluid.critical_temperature) <= _NEAR_CRITICAL:
        return (Sight("The surface is fading where it stands, in thick white haze.", True),)
    if state.region in (Region.SOLID_VAPOUR, Region.THREE_PHASE, Region.SOLID_LIQUID):
        return (Sight("Solid is in view; it shrinks while the cell takes up heat.", True),)
    if state.region is Region.LIQUID_VAPOUR and state.liquid is not None:
        return _surface(scene, density, temperature, state.liquid, warming)
    if critical and temperature - fluid.critical_temperature <= _HAZE:
        return (Sight("No surface; a haze that clears as the cell warms further.", True),)
    words = {
        Region.LIQUID: "No surface: liquid fills the window.",
        Region.VAPOUR: "No surface: vapour only, the last liquid has gone.",
    }
    return (Sight(words.get(state.region, "No surface: one clear fluid."), True),)


def liquid_height(scene: Scene, mass: float, temperature: float) -> float | None:
    """Height of the surface of a charge [kg] above the inside bottom [m]; None where there is none."""
    try:
        state = scene.substance.state(temperature, mass / scene.apparatus.volume.free.value)
        if state.region is not Region.LIQUID_VAPOUR or state.liquid is None:
            return None
        return viewed_shape(scene).height(state.liquid)
    except RunbookError:
        return None


def _surface(
    scene: Scene, density: float, temperature: float, liquid: float, warming: bool | None
) -> tuple[Sight, ...]:
    shape = viewed_shape(scene)
    height = shape.height(liquid)
    window = scene.apparatus.window
    millimetres = f"{height * 1000:.0f} mm"
    if window.low is not None and height < window.low:
        first = f"The surface stands below the window, at {millimetres}."
    elif window.high is not None and height > window.high:
        first = f"The surface stands above the window, at {millimetres}."
    else:
        first = f"The surface stands at {millimetres} on the scale" + _direction(
            scene, density, temperature, liquid, warming
        )
    found = [Sight(first, True)]
    fluid = scene.substance
    if fluid.is_critical(density) and fluid.critical_temperature - temperature <= _HAZE:
        found.append(Sight("A haze; the surface grows faint.", True))
    return tuple(found)


def _direction(scene: Scene, density: float, temperature: float, liquid: float, warming: bool | None) -> str:
    if warming is None:
        return "."
    step = 0.05 if warming else -0.05
    try:
        then = scene.substance.state(temperature + step, density).liquid
    except RunbookError:
        return "."
    if then is None:
        return "."
    # Under 0.02 % of the volume in 0.05 K nobody sees it move.
    if abs(then - liquid) < 2e-4:
        return " and hardly moves."
    return " and rises." if then > liquid else " and falls."
