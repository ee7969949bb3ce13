"""Sights of the cold: solid that shrinks and goes, frost on the body, snow at the outlet."""

from __future__ import annotations

from runbook.answers import Sight
from runbook.assess.scene import Scene
from runbook.assess.sights import phrases as say
from runbook.assess.sights.marks import is_seen
from runbook.charge.outlet import snow
from runbook.fluids.state import Region, State

ICE_POINT = 273.15
"""Below it frost grows from the room's air [K]."""
MELTING = 0.3
"""A wall this near the triple point may have a charge that melts behind it [K]."""


def solid_sight(scene: Scene, state: State) -> Sight | None:
    """Solid in the vessel, with the share that is left where the state knows it; None where there is none."""
    fluid = scene.substance
    if abs(state.temperature - fluid.triple_temperature) <= MELTING and melts(scene, state.density):
        return melting_sight(scene, state.density, state.solid if state.region is Region.THREE_PHASE else None)
    if state.solid is None or state.region not in (Region.SOLID_VAPOUR, Region.SOLID_LIQUID):
        return None
    numbers = (("solid, of the volume", state.solid, "1"), ("triple point", fluid.triple_temperature, "K"))
    if state.region is Region.SOLID_LIQUID:
        words = f"Solid stands in liquid and no vapour is left: {say.percent(state.solid)} of the cell."
    else:
        words = f"Solid fills {say.percent(state.solid)} of the cell"
        words += f" and melts at {say.at(fluid.triple_temperature)}." if melts(scene, state.density) else "."
    return Sight(words, True, of="solid", numbers=numbers, trust=say.SOLID_TRUST)


def melts(scene: Scene, density: float) -> bool:
    """Whether a charge of that density [kg/m3] has solid that melts in it, as far as a solid is modelled."""
    return scene.substance.solid is not None and scene.substance.landmarks(density).triple is not None


def melting_sight(scene: Scene, density: float, solid: float | None = None) -> Sight:
    """While solid melts: temperature and pressure stand still. solid: of the volume [1], where it is known.

    Raises OutsideValidity.
    """
    fluid = scene.substance
    begin, end = fluid.plateau_states(density)
    whole, rest = begin.solid or 0.0, end.solid or 0.0
    numbers: tuple[tuple[str, float, str], ...] = (
        ("triple point", fluid.triple_temperature, "K"),
        ("triple pressure", fluid.triple_pressure, "Pa"),
        ("solid at the beginning, of the volume", whole, "1"),
        ("liquid at the end, of the volume", end.liquid or 0.0, "1"),
    )
    words = f"The solid melts: gauge and thermometer stand still at {say.at(fluid.triple_temperature)} till it is gone."
    if solid is not None and whole > rest:
        left = min(1.0, max(0.0, (solid - rest) / (whole - rest)))
        numbers += (("solid left, of what melts", left, "1"), ("solid now, of the volume", solid, "1"))
        words = f"The solid melts and shrinks, {say.percent(left)} of it is left; gauge and thermometer stand still."
    return Sight(words, True, of="solid", numbers=numbers, trust=say.MELT_TRUST)


def frost_sight(scene: Scene, wall: float) -> Sight | None:
    """Frost on the body at a wall temperature [K]; None above the ice point."""
    if wall >= ICE_POINT or scene.room_hottest < ICE_POINT:
        return None
    numbers = (("wall", wall, "K"), ("ice point", ICE_POINT, "K"))
    return Sight("Frost grows on the body where the room's air reaches it.", True, of="frost", numbers=numbers,
                 trust=say.FROST_TRUST)  # fmt: skip


def letting_down(scene: Scene, temperature: float) -> tuple[Sight, ...]:
    """While a way out is open: boiling, what freezes in the vessel, snow at the outlet. temperature [K]."""
    fluid, room = scene.substance, scene.barometer.middle_Pa
    found: list[Sight] = []
    inside = is_seen(scene)
    if inside and fluid.triple_temperature + MELTING < temperature < fluid.critical_temperature:
        found.append(Sight("While liquid is left it boils: bubbles rise all through it and the wall grows cold.", True,
                           of="boiling", numbers=(("wall", temperature, "K"),), trust=say.BOIL_TRUST))  # fmt: skip
    elif inside and fluid.solid is not None and temperature <= fluid.triple_temperature + MELTING:
        found.append(Sight(f"What liquid is left freezes at {say.at(fluid.triple_temperature)} and stays as solid.",
                           True, of="solid", numbers=(("triple point", fluid.triple_temperature, "K"),),
                           trust=say.MELT_TRUST))  # fmt: skip
    if fluid.triple_temperature < temperature < fluid.critical_temperature:
        found += _snow(scene, temperature, room)
    frost = frost_sight(scene, temperature)
    return (*found, frost) if frost is not None else tuple(found)


def _snow(scene: Scene, temperature: float, room: float) -> list[Sight]:
    gas = snow(scene.substance, temperature, room, liquid=False)
    wet = snow(scene.substance, temperature, room, liquid=True)
    if gas is None or wet is None:
        return []
    numbers = (("snow from gas, of the mass", gas.share, "1"), ("snow from liquid, of the mass", wet.share, "1"),
               ("snow", gas.temperature, "K"))  # fmt: skip
    if gas.share > 0.0:
        words = f"Snow in the outlet: {say.percent(gas.share)} of the gas, {say.percent(wet.share)} of any liquid."
    elif wet.share > 0.0:
        words = f"Clear cold gas from the outlet; if liquid comes, {say.percent(wet.share)} of it is snow."
    else:
        return []
    return [Sight(words, True, of="snow", numbers=numbers, trust=say.SNOW_TRUST)]
