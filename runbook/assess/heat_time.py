"""When a limit falls: the two-lump heat balance of this vessel, started where the state stands.

Couplings are the apparatus file's; times are estimates. Whether a limit falls is never decided here.
"""

from __future__ import annotations

from runbook.assess.corners import temperature_at_pressure
from runbook.assess.scene import Scene
from runbook.assess.walk import VesselState
from runbook.charge.heat import HeatPath, Lumps, seconds_until
from runbook.charge.isochore import Isochore
from runbook.errors import OutsideValidity


def heat_path(scene: Scene, source_limit_K: float | None) -> HeatPath:
    """Heat capacities and couplings of this vessel; source_limit_K: hottest the source can be [K]."""
    body, source = scene.apparatus.body, scene.apparatus.heat_source
    return HeatPath(
        body_heat_capacity=body.heat_capacity.value,
        from_fluid=body.from_fluid.value,
        loss_to_room=body.loss_to_room.value,
        source_heat_capacity=source.heat_capacity.value if source is not None else 0.0,
        source_power=source.power.high if source is not None else 0.0,
        source_limit_K=source_limit_K,
    )


def seconds_to_pressure(
    scene: Scene, state: VesselState, pressure: float, heating: bool, ends_K: float
) -> float | None:
    """Seconds until the worst corner reaches a pressure [Pa]; 0.0 where it has; None where it never does.

    ends_K: where this future ends [K].
    """
    start = _fluid_start(scene, state)
    reached = temperature_at_pressure(scene, state.high_kg, pressure, start)
    if reached is None:
        return 0.0
    return seconds_to_temperature(scene, state, reached, heating, ends_K)


def seconds_to_temperature(
    scene: Scene, state: VesselState, temperature: float, heating: bool, ends_K: float
) -> float | None:
    """Seconds until the charge reaches a temperature [K]; 0.0 where it has; None where it never does."""
    start = _fluid_start(scene, state)
    if start >= temperature:
        return 0.0
    try:
        isochore = Isochore(scene.substance, state.high_kg / scene.volume[0])
        path = heat_path(scene, ends_K if heating else None)
        lumps = Lumps(isochore.energy(start), state.hot, ends_K if heating else state.hot)
        return seconds_until(lumps, state.high_kg, isochore, path, scene.room_hottest, heating, temperature=temperature)
    except OutsideValidity:
        return None


def _fluid_start(scene: Scene, state: VesselState) -> float:
    """Where the charge begins [K]: at its solid while solid may be in, else as hot as the wall may be."""
    solid = state.cold < scene.substance.triple_temperature
    return max(state.cold, scene.coldest_in_the_open) if solid else state.hot
