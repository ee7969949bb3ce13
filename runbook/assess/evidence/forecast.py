"""What the instruments would show of a vessel in which one thing is wrong.

The thermometer is taken as read and the others are forecast from it, because every cause is judged by what it
does to the readings beside a temperature. Refuses a state the models do not reach: it raises OutsideValidity.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from math import exp

from runbook.assess.evidence.given import Given
from runbook.assess.evidence.looks import Look

BEFORE = -1.0
"""A leak that was over before the first look."""


@dataclass(frozen=True, slots=True)
class Fault:
    """One thing wrong, or a small shift of a known figure; all zero: as stated."""

    air: float = 0.0
    """Trapped [mol]."""
    fill: float = 0.0
    """Charge over what was stated [1]."""
    leak: float = 0.0
    """Lost by the last look [kg]."""
    leak_from: float = BEFORE
    """When the leak began, as a share of the time from the first to the last look [1]."""
    lag: float = 0.0
    """Time constant beyond the stated one [s]."""
    place: float = 0.0
    """What the thermometer misses of the wall's distance from the room, as a share of what it shows of it [1]."""
    offset: float = 0.0
    """The gauge shows too much [Pa]."""
    factor: float = 1.0
    """The number read is this many times the right one [1]."""
    probe: float = 0.0
    """The wall is hotter than shown [K]."""
    volume: float = 0.0
    """Free volume over the stated one [m3]."""
    charge: float = 0.0
    """Charge over the stated one [kg]."""


NONE = Fault()


def observed(looks: Sequence[Look]) -> list[float]:
    """The readings in the order of forecast() [Pa, m, kg]."""
    return [v for look in looks for v in (look.pressure, look.height, look.mass) if v is not None]


def forecast(given: Given, looks: Sequence[Look], fault: Fault) -> list[float]:
    """What would be read at each look: pressure [Pa, absolute], height [m], mass [kg], those that were read.

    Raises OutsideValidity.
    """
    volume = given.volume + fault.volume
    found: list[float] = []
    for look in looks:
        wall = wall_temperature(given, look, fault)
        mass = charge_then(given, looks, look, fault)
        density = max(mass, 1e-9) / volume
        if look.pressure is not None:
            found.append(shown_pressure(given, wall, density, fault))
        if look.height is not None:
            found.append(liquid_height(given, wall, density))
        if look.mass is not None:
            found.append(mass)
    return found


def wall_temperature(given: Given, look: Look, fault: Fault) -> float:
    """What the wall is at when the thermometer shows what it shows [K].

    A thermometer of first order is behind by time constant x rate; after the wall has come to rest what it
    was behind dies away with the time constant.
    """
    lag = max(0.0, given.lag + fault.lag)
    behind = lag * look.rate
    if look.came_at and lag > 0.0:
        behind += lag * look.came_at * exp(-look.still_s / lag)
    level = look.temperature + behind
    return level + fault.place * (level - given.room) + fault.probe


def charge_then(given: Given, looks: Sequence[Look], look: Look, fault: Fault) -> float:
    """What is in at that look [kg]."""
    mass = given.charge * (1.0 + fault.fill) + fault.charge
    if fault.leak == 0.0:
        return mass
    if fault.leak_from == BEFORE:
        return mass - fault.leak
    first, last = looks[0].at_s, looks[-1].at_s
    begun = first + fault.leak_from * (last - first)
    return mass - fault.leak * min(1.0, max(0.0, (look.at_s - begun) / max(1.0, last - begun)))


def shown_pressure(given: Given, wall: float, density: float, fault: Fault) -> float:
    """What is read from the gauge, absolute [Pa]; wall [K], density [kg/m3]."""
    pressure = given.substance.pressure(wall, density)
    if fault.air:
        pressure += fault.air * given.air_per_mole(wall, density)
    if fault.factor != 1.0:
        pressure = given.barometer + fault.factor * (pressure - given.barometer)
    return pressure + fault.offset


def liquid_height(given: Given, wall: float, density: float) -> float:
    """Where the surface stands [m]: at the top where liquid fills the vessel, at the bottom where it is dry."""
    fluid = given.substance
    if wall < fluid.critical_temperature:
        both = fluid.saturation(wall)
        share = (density - both.vapour_density) / (both.liquid_density - both.vapour_density)
    else:
        # No surface: it left where the charge is denser or thinner than critical.
        share = 1.0 if density > fluid.critical_density else 0.0
    return given.shape.height(min(1.0, max(0.0, share)))
