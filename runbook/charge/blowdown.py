"""How cold a wall becomes when gas that never was liquid is let down to the room.

A liquid that boils away holds a wall at its boiling point for as long as there is any. Gas has no more to take than
the work of driving itself out, about pressure times volume, and what comes through the valve is as cold as expansion
at kept enthalpy makes it: both are bounds from energy alone, whatever the hole. Refuses (None) a charge of which
liquid may form at such a wall.

What it leaves out, and says so: gas in the middle of the vessel is colder than its wall for a minute. The body counts
as one piece of metal.
"""

from __future__ import annotations

from runbook.errors import OutsideValidity
from runbook.fluids.roots import bracketed_root
from runbook.fluids.state import Region
from runbook.fluids.substance import Substance

_ONE_PHASE = (Region.GAS, Region.VAPOUR, Region.SUPERCRITICAL)
_WIDEST = 150.0
"""Deeper than this no throttled gas is looked for [K]."""


def coldest_of_gas(
    substance: Substance, mass: float, volume: float, start: float, room: float, heat_capacity: float
) -> float | None:
    """Coldest temperature [K] of what holds a gas that is let down to the room; None where liquid may form.

    mass [kg] in a volume [m3] at a start temperature [K], down to the pressure of the room [Pa]; heat capacity of the
    body [J/K]. Valid for one phase thinner than critical density.
    """
    density = mass / volume
    try:
        if not 0.0 < density < substance.critical_density or not _is_gas(substance, start, density):
            return None
        wall = start - _heat_taken(substance, mass, density, start, room) / heat_capacity
        if wall <= 0.0 or not _is_gas(substance, wall, density):
            return None
        return _throttled(substance, wall, density, room)
    except OutsideValidity:
        return None


def _is_gas(substance: Substance, temperature: float, density: float) -> bool:
    """No liquid at a temperature [K] and density [kg/m3], nor at any lower density."""
    if substance.region(temperature, density) not in _ONE_PHASE:
        return False
    if temperature >= substance.critical_temperature:
        return True
    return density < substance.saturation(temperature).vapour_density


def _heat_taken(substance: Substance, mass: float, density: float, start: float, room: float) -> float:
    """Most heat [J] that the gas takes on its way out: none of it leaves warmer than the wall was at the start [K]."""
    before = substance.state(start, density)
    assert before.internal_energy is not None, "one phase has an energy"
    leaves = max(_enthalpy(substance, start, density), _enthalpy(substance, start, _in_room(substance, start, room)))
    return max(0.0, mass * (leaves - before.internal_energy))


def _throttled(substance: Substance, wall: float, density: float, room: float) -> float | None:
    """Temperature [K] of gas as warm as the wall [K] behind a valve that lets it into the room; the wall if colder."""
    kept = _enthalpy(substance, wall, density)

    def excess(temperature: float) -> float:
        return _enthalpy(substance, temperature, _in_room(substance, temperature, room)) - kept

    if excess(wall) <= 0.0:
        return wall
    low = max(wall - _WIDEST, substance.boiling_temperature(room) + 1.0)
    return None if low >= wall or excess(low) > 0.0 else bracketed_root(excess, low, wall, 1e-3)


def _in_room(substance: Substance, temperature: float, room: float) -> float:
    density = substance.equation.gas_density(temperature, room)
    if density is None:
        raise OutsideValidity(f"at {temperature:.6g} K and {room:.6g} Pa it is no gas")
    return density


def _enthalpy(substance: Substance, temperature: float, density: float) -> float:
    """[J/kg] of one phase."""
    state = substance.state(temperature, density)
    assert state.internal_energy is not None, "one phase has an energy"
    return state.internal_energy + state.pressure / density
