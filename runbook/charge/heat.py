"""Where the heat goes: charge, body, source and room as lumps, stepped in energy.

Each step is implicit in the temperatures and exact in the energies: what leaves one lump enters the next, so
nothing is made or lost, and no step can overshoot however strong a coupling. The couplings are estimates:
times show the trend. Raises OutsideValidity where the charge leaves its modelled path.
"""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass
from math import inf

from runbook.charge.isochore import Isochore
from runbook.errors import InputUnusable, OutsideValidity

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


@dataclass(frozen=True, slots=True)
class HeatPath:
    """Heat capacities and couplings between the lumps."""

    body_heat_capacity: float
    """Of the vessel [J/K]; zero or more."""
    from_fluid: float
    """Between charge and body [W/K]; positive."""
    loss_to_room: float
    """Between body and room [W/K]; zero or more."""
    source_heat_capacity: float
    """Of the source itself [J/K]; zero: its power goes straight into the body."""
    source_power: float
    """Most that it gives [W]; zero or more."""
    source_limit_K: float | None
    """Its cut-out, or the hottest it can be [K]; None: nothing limits it."""
    source_coupling: float = 5.0
    """Between source and body [W/K]; positive; an estimate where nobody measured."""

    def __post_init__(self) -> None:
        least = (self.body_heat_capacity, self.loss_to_room, self.source_heat_capacity, self.source_power)
        if not (all(0.0 <= x < inf for x in least) and min(self.from_fluid, self.source_coupling) > 0.0):
            raise InputUnusable("heat capacities, losses and power are zero or more, couplings above zero")


@dataclass(frozen=True, slots=True)
class Lumps:
    """Where the heat is now."""

    fluid_energy: float
    """Internal energy of the charge [J/kg]."""
    body_K: float
    """Temperature of the body [K]."""
    source_K: float
    """Temperature of the source [K]; that of the body where the source has no heat capacity."""


Heating = bool | float
"""False: off. True: on, up to the cut-out. A number: on, up to that temperature of the source [K]."""


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
    limit = _limit(path, heating)
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
    time, length = 0.0, min(horizon, 10.0)
    while time < horizon:
        length = min(length, horizon - time)
        try:
            after = _step(lumps, mass, isochore, path, room_K, heating, length)
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
    return max(fluid, abs(after.body_K - before.body_K), abs(after.source_K - before.source_K))


def _limit(path: HeatPath, heating: Heating) -> float | None:
    """Hottest that the source is driven to [K]; None where it is off."""
    if heating is False:
        return None
    asked = inf if heating is True else float(heating)
    return asked if path.source_limit_K is None else min(asked, path.source_limit_K)


def _step(
    lumps: Lumps, mass: float, isochore: Isochore, path: HeatPath, room_K: float, heating: Heating, h: float
) -> Lumps:
    """One implicit step of length h [s]."""
    fluid_K, capacity = isochore.table_temperature(lumps.fluid_energy)
    k = path.from_fluid
    # The charge's own warming within the step weakens the coupling; while solid melts it does not warm.
    k_step = k if capacity == inf else k * mass * capacity / (mass * capacity + h * k)
    limit = _limit(path, heating)
    body, source = _body_and_source(lumps, path, k_step, fluid_K, room_K, limit, h)
    energy = lumps.fluid_energy + h * k_step * (body - fluid_K) / mass
    if not isochore.energies[0] <= energy <= isochore.energies[-1]:
        raise OutsideValidity(
            f"the charge leaves what is modelled, {isochore.lowest_temperature:.6g} K "
            f"to {isochore.highest_temperature:.6g} K"
        )
    return Lumps(energy, body, source)


def _body_and_source(
    lumps: Lumps, path: HeatPath, k: float, fluid_K: float, room_K: float, limit: float | None, h: float
) -> tuple[float, float]:
    """Temperatures [K] of body and source at the end of a step of h [s]; k [W/K] to the charge.

    limit: hottest that the source is driven to [K], None where it is off. Driven past it within the step, the
    source is held at it, unless it is above it already: then it gives nothing.
    """
    stiff = path.body_heat_capacity / h + k + path.loss_to_room
    pull = path.body_heat_capacity / h * lumps.body_K + k * fluid_K + path.loss_to_room * room_K
    power = 0.0 if limit is None else path.source_power
    if path.source_heat_capacity == 0.0:
        cold, hot = pull / stiff, (pull + power) / stiff
        body = hot if limit is None or hot <= limit else max(cold, limit)
        return body, body
    store, coupling = path.source_heat_capacity / h, path.source_coupling
    shared = coupling * store / (store + coupling)

    def free(watt: float) -> tuple[float, float]:
        body = (pull + shared * (lumps.source_K + watt / store)) / (stiff + shared)
        return body, (store * lumps.source_K + watt + coupling * body) / (store + coupling)

    body, source = free(power)
    if limit is None or source <= limit:
        return body, source
    body, source = free(0.0)
    if source >= limit:
        return body, source
    return (pull + coupling * limit) / (stiff + coupling), limit
