"""Where the heat of a closed charge goes: stepped in energy along its path, and when it passes a level.

Each step is that of charge/lumps, so nothing is made or lost; here its length is fitted to what moves. The couplings
are estimates: times show the trend. Raises OutsideValidity where the charge leaves its modelled path.
"""

from __future__ import annotations

from collections.abc import Iterator
from math import inf

from runbook.charge.isochore import Isochore
from runbook.charge.lumps import Heating, HeatPath, Lumps, driven_to, exchanged
from runbook.errors import InputUnusable, OutsideValidity

__all__ = ["HeatPath", "Heating", "Lumps", "advance", "end_temperature", "seconds_until"]

_FINE = 0.25
"""Most that a lump may change in one step [K]: an hour's warming is then within about 1 %."""
_LONGEST = 30.0
"""Longest step [s]."""
_SHORTEST = 1e-3
"""Shortest step [s]; the steps are stable at any length, so this only bounds their number."""
_SETTLED = 1e-6
"""Change in one longest step below which nothing moves any more [K]."""
_HORIZON = 30.0 * 86400.0
"""Beyond it nobody waits [s]."""


def advance(
    lumps: Lumps, mass: float, isochore: Isochore, path: HeatPath, room_K: float, heating: Heating, dt: float
) -> Lumps:
    """The lumps after dt [s]; mass of the charge [kg], room_K [K]. Raises OutsideValidity."""
    after = lumps
    for _, step in _steps(lumps, mass, isochore, path, room_K, heating, dt):
        after = step
    return after


def end_temperature(path: HeatPath, room_K: float, heating: Heating) -> float:
    """Temperature [K] at which the vessel ends when left like this; infinite where nothing stops it.

    With heat off and no loss to the room it never comes to the room's temperature; then this is not asked.
    """
    limit = driven_to(path, heating)
    if limit is None:
        return room_K
    free = room_K + (path.source_power / path.loss_to_room if path.loss_to_room > 0.0 else inf)
    drop = path.source_power / path.source_coupling if path.source_heat_capacity > 0.0 else 0.0
    if free + drop <= limit or path.source_power == 0.0:
        return free if path.source_power > 0.0 else room_K
    if limit <= room_K:
        return room_K
    if path.source_heat_capacity == 0.0:
        return limit
    coupling = path.source_coupling
    return (coupling * limit + path.loss_to_room * room_K) / (coupling + path.loss_to_room)


def seconds_until(
    lumps: Lumps,
    mass: float,
    isochore: Isochore,
    path: HeatPath,
    room_K: float,
    heating: Heating,
    *,
    pressure: float | None = None,
    temperature: float | None = None,
    horizon: float = _HORIZON,
) -> float | None:
    """Time [s] until the charge passes a pressure [Pa] or a temperature [K], from either side.

    Give exactly one level. None where it never does within horizon [s]. A level is passed upwards when the
    charge exceeds it, so the triple point is passed when the last solid is gone. Raises OutsideValidity where
    the charge leaves the modelled path first.
    """
    if (pressure is None) == (temperature is None):
        raise InputUnusable("ask for one level: a pressure or a temperature")
    level = (
        isochore.energy_of_pressure(pressure)
        if pressure is not None
        else isochore.energy_of_temperature(temperature if temperature is not None else 0.0)
    )
    goal = inf if level is None else level
    above = lumps.fluid_energy > goal
    before, elapsed = lumps, 0.0
    for time, after in _steps(lumps, mass, isochore, path, room_K, heating, horizon):
        if (after.fluid_energy > goal) != above:
            moved = after.fluid_energy - before.fluid_energy
            return elapsed + (time - elapsed) * (goal - before.fluid_energy) / moved
        if time - elapsed >= _LONGEST and _change(isochore, before, after) < _SETTLED:
            return None
        before, elapsed = after, time
    return None


def _steps(
    lumps: Lumps,
    mass: float,
    isochore: Isochore,
    path: HeatPath,
    room_K: float,
    heating: Heating,
    horizon: float,
) -> Iterator[tuple[float, Lumps]]:
    """Time [s] and lumps after each step, its length fitted to what moves, up to the horizon [s]."""
    if not mass > 0.0:
        raise InputUnusable(f"a charge of {mass:.6g} kg holds no heat: it must be above zero")
    limit = driven_to(path, heating)
    time, length = 0.0, min(horizon, 10.0)
    while time < horizon:
        length = min(length, horizon - time)
        try:
            after = _step(lumps, mass, isochore, path, room_K, limit, length)
            change = _change(isochore, lumps, after)
        except OutsideValidity:
            # A long step goes in a straight line and may leave a path that bends.
            if length <= _SHORTEST:
                raise
            length = max(_SHORTEST, 0.1 * length)
            continue
        if change > _FINE and length > _SHORTEST:
            length = max(_SHORTEST, length * max(0.1, 0.8 * _FINE / change))
            continue
        time, lumps = (horizon if length >= horizon - time else time + length), after
        yield time, lumps
        length = min(_LONGEST, length * min(4.0, 0.8 * _FINE / change if change > 0.0 else 4.0))


def _change(isochore: Isochore, before: Lumps, after: Lumps) -> float:
    """The most that any lump has changed [K]; while solid melts a fiftieth of the plateau counts as _FINE."""
    old, new = before.fluid_energy, after.fluid_energy
    fluid = abs(isochore.table_temperature(new)[0] - isochore.table_temperature(old)[0])
    if isochore.plateau is not None:
        begin, end = isochore.plateau
        melted = min(end, max(old, new)) - max(begin, min(old, new))
        fluid = max(fluid, 50.0 * _FINE * melted / (end - begin))
    far = 0.0 if after.far_K is None or before.far_K is None else abs(after.far_K - before.far_K)
    return max(fluid, abs(after.body_K - before.body_K), far, abs(after.source_K - before.source_K))


def _step(
    lumps: Lumps, mass: float, isochore: Isochore, path: HeatPath, room_K: float, limit: float | None, h: float
) -> Lumps:
    """One implicit step of length h [s]; limit: hottest that the source is driven to [K], None where it is off."""
    fluid_K, capacity = isochore.table_temperature(lumps.fluid_energy)
    after = exchanged(lumps, mass, fluid_K, mass * capacity, path, room_K, limit, h)
    if not isochore.energies[0] <= after.fluid_energy <= isochore.energies[-1]:
        raise OutsideValidity(
            f"the charge leaves what is modelled, {isochore.lowest_temperature:.6g} K "
            f"to {isochore.highest_temperature:.6g} K"
        )
    return after
