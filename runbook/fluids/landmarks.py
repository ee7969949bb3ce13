"""Temperatures at which a phase appears or is gone, found on the curves of a fluid and of its solid.

Refuses nothing by itself where a landmark is simply not there: that is None. How near critical density a charge
has to be for other words is the substance's to say.
"""

from __future__ import annotations

from runbook.errors import OutsideValidity
from runbook.fluids.cold import Cold
from runbook.fluids.library import Equation
from runbook.fluids.roots import bracketed_root

NEAR_K = 1e-6
"""[K] how near a landmark is found on its curve."""


def liquid_full(equation: Equation, density: float) -> float | None:
    """Temperature [K] at which liquid fills the vessel on warming, of a charge of that density [kg/m3].

    None for one that is thinner than critical, and for one denser than liquid at the triple point.
    """
    if density <= equation.critical_density or not density <= equation.triple_liquid_density:
        return None
    span = equation.triple_temperature, equation.critical_temperature
    return bracketed_root(lambda t: equation.dome(t)[1] - density, *span, NEAR_K)


def dry(equation: Equation, cold: Cold | None, density: float) -> float | None:
    """Temperature [K] at which the last liquid, or the last solid, has gone on warming; density [kg/m3].

    None for a charge denser than critical, and where it lies below the models' range.
    """
    if not 0.0 < density < equation.critical_density:
        return None
    if density >= equation.triple_vapour_density:
        span = equation.triple_temperature, equation.critical_temperature
        return bracketed_root(lambda t: equation.dome(t)[2] - density, *span, NEAR_K)
    if cold is None or cold.frost_density(cold.solid.lowest_temperature) > density:
        return None
    span = cold.solid.lowest_temperature, equation.triple_temperature
    return bracketed_root(lambda t: cold.frost_density(t) - density, *span, NEAR_K)


def boiling(equation: Equation, cold: Cold | None, pressure: float) -> float:
    """Temperature [K] at which liquid, or else solid, stands beside its vapour at a pressure [Pa].

    Raises OutsideValidity at pressures above critical, below the curves, and where the solid is not modelled.
    """
    if pressure >= equation.triple_pressure:
        if not pressure < equation.critical_pressure:
            raise OutsideValidity(f"nothing boils at {pressure / 1e5:.5g} bar: above the critical pressure")
        span = equation.triple_temperature, equation.critical_temperature
        return bracketed_root(lambda t: equation.dome(t)[0] - pressure, *span, NEAR_K)
    if cold is None:
        raise OutsideValidity(
            f"{pressure:.5g} Pa is below the triple point, {equation.triple_pressure:.5g} Pa, and no solid is modelled"
        )
    ice = cold.solid
    if pressure < ice.sublimation_pressure(ice.lowest_temperature):
        raise OutsideValidity(f"nothing stands beside its vapour at {pressure:.5g} Pa")
    span = ice.lowest_temperature, equation.triple_temperature
    return bracketed_root(lambda t: ice.sublimation_pressure(t) - pressure, *span, NEAR_K)
