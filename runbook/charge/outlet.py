"""Where gas or liquid that is let down to the room ends: cold gas, or snow in it.

Expansion through a valve keeps the enthalpy. Without heat from valve and pipe that is the most snow there can
be. Refuses (None) a fluid without a modelled solid, or whose triple point lies below the room's pressure: there
nothing freezes for want of pressure.
"""

from __future__ import annotations

from dataclasses import dataclass

from runbook.errors import OutsideValidity
from runbook.fluids.roots import bracketed_root
from runbook.fluids.substance import Substance


@dataclass(frozen=True, slots=True)
class Snow:
    """What comes out of the outlet."""

    share: float
    """Mass of snow in what comes out [1]; 0: cold gas alone."""
    temperature: float
    """Of the snow [K]."""


def snow(substance: Substance, temperature: float, pressure: float, liquid: bool) -> Snow | None:
    """Snow from saturated vapour, or liquid, at a temperature [K] let down to a pressure [Pa].

    None where none can form, or where the models do not reach.
    """
    solid = substance.solid
    if solid is None or pressure >= substance.triple_pressure:
        return None
    try:
        cold = _sublimes(substance, pressure)
        vapour = substance.vapour_beside_solid(cold)
        both = substance.saturation(temperature)
    except (OutsideValidity, ValueError):
        return None
    energy, density = (both.liquid_energy, both.liquid_density) if liquid else (both.vapour_energy, both.vapour_density)
    enthalpy = energy + both.pressure / density
    share = (vapour.gibbs + cold * vapour.entropy - enthalpy) / solid.heat_of_sublimation(cold)
    return Snow(max(0.0, share), cold)


def _sublimes(substance: Substance, pressure: float) -> float:
    """Temperature [K] of the solid under its own vapour at a pressure [Pa]."""
    solid = substance.solid
    assert solid is not None, "asked only with a solid"
    ends = substance.min_temperature, substance.triple_temperature
    return bracketed_root(lambda t: solid.sublimation_pressure(t) - pressure, *ends, 1e-4)
