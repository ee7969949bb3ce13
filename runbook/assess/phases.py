"""Which phases the vessel may be in, for the first act when something is wrong: several where unknown."""

from __future__ import annotations

from runbook.answers import Phase
from runbook.assess.scene import Scene
from runbook.assess.walk import outside_tags
from runbook.errors import OutsideValidity


def phases(
    scene: Scene,
    *,
    loaded: bool,
    closed: bool,
    letting_down: bool,
    high_kg: float,
    proved: bool,
    hot: float,
    cold: float,
    pressure: float | None,
    by_hand: bool = False,
) -> tuple[Phase, ...]:
    """Phases of a state: most charge [kg], wall between cold and hot [K], highest pressure read or computed
    [Pa] (None: not known); by_hand: a vent that springs open is held shut, and to let go of it comes first."""
    if not loaded:
        return (Phase.A,)
    if by_hand and closed:
        return (Phase.B,)
    if letting_down:
        return _letting_down(scene, pressure)
    if not closed:
        return (Phase.A,)
    if _sealed_in_a_bath(scene):
        # Whatever is in it: nothing can be let out, and to take the heat away would be to lift it out warm.
        return (Phase.L,)
    found: list[Phase] = []
    fluid = scene.substance
    if cold < fluid.triple_temperature:
        found.append(Phase.B_PROVED if proved else Phase.B)
    if hot < fluid.triple_temperature:
        return tuple(found)
    density = high_kg / scene.volume[0]
    full = _full_at(scene, density)
    # What the room alone makes liquid-full is on its way there with nobody near it.
    if full is not None and max(hot, scene.room_hottest) >= full:
        found.append(Phase.D)
    if hot >= fluid.critical_temperature:
        found.append(Phase.E)
    if cold < fluid.critical_temperature and Phase.D not in found:
        found.append(Phase.C)
    return tuple(found)


def _sealed_in_a_bath(scene: Scene) -> bool:
    """A tube without any way out that stands in a bath of water."""
    source = scene.apparatus.heat_source
    return source is not None and source.kind == "water bath" and not outside_tags(scene)


def _letting_down(scene: Scene, pressure: float | None) -> tuple[Phase, ...]:
    if pressure is None:
        return (Phase.H, Phase.G)
    # At the room's pressure, or below the triple point, what is left is solid or gone.
    return (Phase.H,) if pressure < scene.substance.triple_pressure else (Phase.G,)


def _full_at(scene: Scene, density: float) -> float | None:
    fluid = scene.substance
    try:
        if density > fluid.saturation(fluid.triple_temperature).liquid_density:
            return fluid.triple_temperature
        return fluid.liquid_full_temperature(density)
    except OutsideValidity:
        return fluid.triple_temperature
