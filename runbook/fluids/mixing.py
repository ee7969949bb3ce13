"""Two phases that share a vessel: how much of each, and the energy of both together."""

from __future__ import annotations

from runbook.fluids.library import Equation, Saturation
from runbook.fluids.solid import DryIce
from runbook.fluids.state import Region, State


def liquid_and_vapour(temperature: float, density: float, both: Saturation) -> State:
    """The state of liquid beside vapour; temperature [K], density [kg/m3] between those of the phases."""
    liquid = _share(density, both.liquid_density, both.vapour_density)
    heavy, light = both.liquid_density * both.liquid_energy, both.vapour_density * both.vapour_energy
    return State(
        temperature,
        density,
        both.pressure,
        Region.LIQUID_VAPOUR,
        0.0,
        liquid,
        1.0 - liquid,
        both.liquid_density,
        both.vapour_density,
        (liquid * heavy + (1.0 - liquid) * light) / density,
    )


def solid_and_vapour(temperature: float, density: float, ice: DryIce, equation: Equation) -> State:
    """The state of solid beside vapour; temperature [K] up to the triple point, density [kg/m3].

    The solid's enthalpy is that of the vapour less the heat of sublimation. Raises OutsideValidity.
    """
    pressure = ice.sublimation_pressure(temperature)
    vapour_density, vapour_energy = equation.cold_vapour(temperature, pressure)
    solid_density = ice.density(temperature)
    enthalpy = vapour_energy + pressure / vapour_density - ice.heat_of_sublimation(temperature)
    solid = _share(density, solid_density, vapour_density)
    heavy, light = solid_density * enthalpy - pressure, vapour_density * vapour_energy
    energy = (solid * heavy + (1.0 - solid) * light) / density
    return State(
        temperature,
        density,
        pressure,
        Region.SOLID_VAPOUR,
        solid,
        0.0,
        1.0 - solid,
        None,
        vapour_density,
        energy,
    )


def solid_and_liquid(temperature: float, density: float, ice: DryIce, equation: Equation) -> State:
    """The state of solid beside liquid; temperature [K] from the triple point up, density [kg/m3].

    The solid's enthalpy is that of the liquid less the heat of fusion. Raises OutsideValidity.
    """
    pressure = ice.melting_pressure(temperature)
    liquid_density = equation.liquid_density(temperature, pressure)
    liquid_energy = equation.liquid_energy(temperature, liquid_density)
    solid_density = ice.density(temperature)
    enthalpy = liquid_energy + pressure / liquid_density - ice.heat_of_fusion(temperature)
    solid = _share(density, solid_density, liquid_density)
    heavy, light = solid_density * enthalpy - pressure, liquid_density * liquid_energy
    energy = (solid * heavy + (1.0 - solid) * light) / density
    return State(
        temperature,
        density,
        pressure,
        Region.SOLID_LIQUID,
        solid,
        1.0 - solid,
        0.0,
        liquid_density,
        None,
        energy,
    )


def _share(density: float, heavy: float, light: float) -> float:
    """Volume fraction [1] of the heavier phase; clamped, since at an edge rounding may pass it."""
    return min(1.0, max(0.0, (density - light) / (heavy - light)))
