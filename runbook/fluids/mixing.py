"""Phases that share a vessel: how much of each, and the energy and entropy of all together."""

from __future__ import annotations

from collections.abc import Sequence

from runbook.fluids.library import Saturation, SaturationSlopes
from runbook.fluids.solids.curves import Solid
from runbook.fluids.solids.gibbs import Phase
from runbook.fluids.state import Region, State


def liquid_and_vapour(temperature: float, density: float, both: Saturation) -> State:
    """The state of liquid beside vapour; temperature [K], density [kg/m3] between those of the phases."""
    liquid = _share(density, both.liquid_density, both.vapour_density)
    heavy, light = liquid * both.liquid_density / density, (1.0 - liquid) * both.vapour_density / density
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
        heavy * both.liquid_energy + light * both.vapour_energy,
        heavy * both.liquid_entropy + light * both.vapour_entropy,
    )


def solid_and_vapour(temperature: float, density: float, solid: Solid, vapour: Phase) -> State:
    """The state of solid beside vapour; temperature [K] up to the triple point, density [kg/m3].

    vapour: on the sublimation curve at that temperature. Raises OutsideValidity.
    """
    pressure = solid.sublimation_pressure(temperature)
    ice = solid.beside_vapour(temperature)
    share = _share(density, 1.0 / ice.volume, 1.0 / vapour.volume)
    energy, entropy = _together(temperature, pressure, density, ((share, ice), (1.0 - share, vapour)))
    return State(
        temperature, density, pressure, Region.SOLID_VAPOUR, share, 0.0, 1.0 - share, None, 1.0 / vapour.volume,
        energy, entropy,
    )  # fmt: skip


def solid_and_liquid(temperature: float, density: float, solid: Solid) -> State:
    """The state of solid beside liquid on the melting curve; temperature [K], density [kg/m3].

    Raises OutsideValidity beyond the curve.
    """
    pressure = solid.melting_pressure(temperature)
    ice, liquid = solid.beside_liquid(temperature)
    share = _share(density, 1.0 / ice.volume, 1.0 / liquid.volume)
    energy, entropy = _together(temperature, pressure, density, ((share, ice), (1.0 - share, liquid)))
    return State(
        temperature, density, pressure, Region.SOLID_LIQUID, share, 1.0 - share, 0.0, 1.0 / liquid.volume, None,
        energy, entropy,
    )  # fmt: skip


def _together(
    temperature: float, pressure: float, density: float, phases: Sequence[tuple[float, Phase]]
) -> tuple[float, float]:
    """Internal energy [J/kg] and entropy [J/kg/K] of phases by their volume fractions [1]."""
    masses = [(fraction / (phase.volume * density), phase) for fraction, phase in phases]
    energy = sum(mass * phase.energy(temperature, pressure) for mass, phase in masses)
    return energy, sum(mass * phase.entropy for mass, phase in masses)


def _share(density: float, one: float, other: float) -> float:
    """Volume fraction [1] of the phase of density one; clamped, since at an edge rounding may pass it."""
    return min(1.0, max(0.0, (density - other) / (one - other)))


def heat_capacity_beside_vapour(density: float, both: Saturation, slopes: SaturationSlopes) -> float:
    """Heat capacity of liquid beside vapour at fixed volume [J/kg/K], from both saturated phases; density [kg/m3].

    How they share the volume changes with temperature; the equation's own figure means nothing there.
    """
    liquid, vapour = 1.0 / both.liquid_density, 1.0 / both.vapour_density
    liquid_slope = -slopes.liquid_density * liquid * liquid
    vapour_slope = -slopes.vapour_density * vapour * vapour
    share = (1.0 / density - liquid) / (vapour - liquid)
    share_slope = -(liquid_slope + share * (vapour_slope - liquid_slope)) / (vapour - liquid)
    return (
        slopes.liquid_energy
        + share * (slopes.vapour_energy - slopes.liquid_energy)
        + (both.vapour_energy - both.liquid_energy) * share_slope
    )
