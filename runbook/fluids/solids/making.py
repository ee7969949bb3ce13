"""The solid of a fluid from its data file, tied to the equation of state in use."""

from __future__ import annotations

from runbook.fluids.catalogue import SolidData
from runbook.fluids.library import Equation
from runbook.fluids.solids.curves import Solid
from runbook.fluids.solids.dry_ice import DryIce
from runbook.fluids.solids.gibbs import Phase, SolidEquation, Tied
from runbook.fluids.solids.ice import Ice
from runbook.fluids.solids.plain import PlainSolid


def solid_of(data: SolidData, equation: Equation) -> Solid:
    """The solid that the data name, beside this equation of state."""
    triple = equation.triple_temperature, equation.triple_pressure
    heat = None if data.heat_of_fusion is None else data.heat_of_fusion / equation.molar_mass
    tied = Tied(_equation(data, triple), *triple, equation.liquid_phase(*triple), heat)
    return Solid(
        tied,
        triple,
        equation.vapour_phase,
        equation.liquid_phase,
        (data.sublimation_uncertainty, data.melting_uncertainty),
        data.lowest_temperature,
    )


def _equation(data: SolidData, triple: tuple[float, float]) -> SolidEquation:
    if data.model == "Jaeger and Span 2012":
        return DryIce()
    if data.model == "IAPWS R10-06":
        return Ice()
    missing = [data.density, data.heat_capacity, data.heat_capacity_slope]
    if data.density is None or data.heat_capacity is None or data.heat_capacity_slope is None:
        raise ValueError(f"a solid of constant volume needs density, heat capacity and its slope, not {missing}")
    return PlainSolid(*triple, data.density, data.heat_capacity, data.heat_capacity_slope, data.lowest_temperature)


__all__ = ["Phase", "Solid", "solid_of"]
