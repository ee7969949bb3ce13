"""What every equation of a solid gives: Gibbs energy, volume and entropy at a temperature and a pressure.

Every solid is tied to the equation of state of its fluid at the triple point, so that solid, liquid and vapour meet
there exactly and energies have one zero.
"""

from __future__ import annotations

from dataclasses import dataclass
from typing import Protocol


@dataclass(frozen=True, slots=True)
class Phase:
    """One phase at a temperature and a pressure."""

    gibbs: float
    """[J/kg]"""
    volume: float
    """[m3/kg]"""
    entropy: float
    """[J/kg/K]"""

    def energy(self, temperature: float, pressure: float) -> float:
        """Internal energy [J/kg] at the temperature [K] and pressure [Pa] it was computed for."""
        return self.gibbs + temperature * self.entropy - pressure * self.volume


class SolidEquation(Protocol):
    """The equation of one solid."""

    lowest_temperature: float
    """Below it nothing is computed [K]."""
    highest_pressure: float
    """Above it nothing is computed [Pa]."""

    def phase(self, temperature: float, pressure: float) -> Phase:
        """The solid at a temperature [K] and a pressure [Pa], in the equation's own zeros of energy."""
        ...


class Tied:
    """A solid's equation with its zeros moved to those of the fluid's equation at the triple point."""

    def __init__(
        self,
        equation: SolidEquation,
        triple_temperature: float,
        triple_pressure: float,
        liquid: Phase,
        heat_of_fusion: float | None,
    ) -> None:
        """liquid: at the triple point [K], [Pa]; heat_of_fusion [J/kg], None: the two equations' own difference."""
        self._equation = equation
        self._triple = triple_temperature
        own = equation.phase(triple_temperature, triple_pressure)
        entropy = own.entropy if heat_of_fusion is None else liquid.entropy - heat_of_fusion / triple_temperature
        self._entropy = entropy - own.entropy
        self._gibbs = liquid.gibbs - own.gibbs
        self.lowest_temperature = equation.lowest_temperature
        """Below it nothing is computed [K]."""
        self.highest_pressure = equation.highest_pressure
        """Above it nothing is computed [Pa]."""

    def phase(self, temperature: float, pressure: float) -> Phase:
        """The solid at a temperature [K] and a pressure [Pa], in the fluid's zeros of energy."""
        own = self._equation.phase(temperature, pressure)
        moved = self._gibbs - self._entropy * (temperature - self._triple)
        return Phase(own.gibbs + moved, own.volume, own.entropy + self._entropy)
