"""A fluid at a pressure and an entropy, or an enthalpy: where an expansion passes and where it ends, snow included.

Equilibrium of all phases, which real jets reach late: fluxes are then a lower bound for liquid through short holes, and
ends are exact. Raises OutsideValidity beyond the models.
"""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass
from math import inf

from runbook.errors import OutsideValidity
from runbook.fluids.library import Equation
from runbook.fluids.roots import bracketed_root
from runbook.fluids.solids.gibbs import Phase
from runbook.fluids.substance import Substance

_HOTTEST = 1000.0
"""[K] up to which a gas is looked for."""


@dataclass(frozen=True, slots=True)
class Flowing:
    """All phases together at one pressure."""

    temperature: float
    """[K]"""
    pressure: float
    """[Pa]"""
    density: float
    """[kg/m3]"""
    enthalpy: float
    """[J/kg]"""
    entropy: float
    """[J/kg/K]"""
    solid: float
    """Mass fraction [1]."""
    liquid: float
    """Mass fraction [1]; 0 in one phase."""


@dataclass(frozen=True, slots=True)
class _Pair:
    """The two phases that can stand together at a pressure; the heavier first."""

    temperature: float
    heavy: Phase
    light: Phase
    solid: bool

    def enthalpy(self, phase: Phase) -> float:
        return phase.gibbs + self.temperature * phase.entropy


class Flash:
    """Questions by pressure, of one substance. Not to be shared between threads."""

    def __init__(self, substance: Substance) -> None:
        self._fluid = substance
        self._equation: Equation = substance.equation
        self._pair: tuple[float, _Pair | None] = (-1.0, None)

    def by_entropy(self, pressure: float, entropy: float) -> Flowing:
        """At a pressure [Pa] and an entropy [J/kg/K]."""
        return self._found(pressure, entropy, lambda _, phase: phase.entropy)

    def by_enthalpy(self, pressure: float, enthalpy: float) -> Flowing:
        """At a pressure [Pa] and an enthalpy [J/kg]."""
        return self._found(pressure, enthalpy, lambda t, phase: phase.gibbs + t * phase.entropy)

    def _found(self, pressure: float, wanted: float, of: Callable[[float, Phase], float]) -> Flowing:
        pair = self._beside(pressure)
        if pair is None:
            return self._single(pressure, wanted, of, self._fluid.triple_temperature, _HOTTEST)
        t = pair.temperature
        heavy, light = of(t, pair.heavy), of(t, pair.light)
        if wanted > light:
            return self._single(pressure, wanted, of, t, _HOTTEST)
        if wanted < heavy:
            if pair.solid:
                raise OutsideValidity(f"solid alone at {pressure:.6g} Pa is not computed")
            return self._single(pressure, wanted, of, self._fluid.triple_temperature, t)
        share = (light - wanted) / (light - heavy)
        volume = share * pair.heavy.volume + (1.0 - share) * pair.light.volume
        enthalpy = share * pair.enthalpy(pair.heavy) + (1.0 - share) * pair.enthalpy(pair.light)
        entropy = share * pair.heavy.entropy + (1.0 - share) * pair.light.entropy
        solid, liquid = (share, 0.0) if pair.solid else (0.0, share)
        return Flowing(t, pressure, 1.0 / volume, enthalpy, entropy, solid, liquid)

    def _beside(self, pressure: float) -> _Pair | None:
        """The phases that meet at a pressure; None at and above the critical one. The last is kept."""
        if self._pair[0] != pressure:
            self._pair = pressure, self._meeting(pressure)
        return self._pair[1]

    def _meeting(self, pressure: float) -> _Pair | None:
        fluid = self._fluid
        if pressure >= fluid.critical_pressure:
            return None
        t = fluid.boiling_temperature(pressure)
        if pressure < fluid.triple_pressure and fluid.solid is not None:
            return _Pair(t, fluid.solid.beside_vapour(t), self._equation.vapour_phase(t, pressure), True)
        both = fluid.saturation(t)
        heavy = _phase(t, both.pressure, both.liquid_density, both.liquid_energy, both.liquid_entropy)
        light = _phase(t, both.pressure, both.vapour_density, both.vapour_energy, both.vapour_entropy)
        return _Pair(t, heavy, light, False)

    def _single(
        self, pressure: float, wanted: float, of: Callable[[float, Phase], float], low: float, high: float
    ) -> Flowing:
        """One phase between two temperatures [K], where what is wanted rises with temperature."""
        high = min(high, self._fluid.max_temperature)

        def excess(temperature: float) -> float:
            try:
                return of(temperature, self._equation.fluid_phase(temperature, pressure)) - wanted
            except OutsideValidity:
                return -inf if temperature < 0.5 * (low + high) else inf

        step = 1e-7 * (high - low)
        try:
            t = bracketed_root(excess, low + step, high - step, 1e-9)
        except ValueError as error:
            raise OutsideValidity(f"no state of {self._fluid.name} at {pressure:.6g} Pa and {wanted:.6g}") from error
        phase = self._equation.fluid_phase(t, pressure)
        return Flowing(t, pressure, 1.0 / phase.volume, phase.gibbs + t * phase.entropy, phase.entropy, 0.0, 0.0)


def _phase(temperature: float, pressure: float, density: float, energy: float, entropy: float) -> Phase:
    volume = 1.0 / density
    return Phase(energy + pressure * volume - temperature * entropy, volume, entropy)
