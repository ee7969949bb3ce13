"""Where a solid meets its vapour and its liquid: curves found from equal Gibbs energies, kept as tables.

A curve is found once, node by node, and read between nodes by cubics that have the exact slope (Clapeyron) at every
node. Raises OutsideValidity beyond the tables; never extrapolates.
"""

from __future__ import annotations

from bisect import bisect_right
from collections.abc import Callable
from dataclasses import dataclass
from functools import cached_property
from math import exp, log
from typing import Final

from runbook.errors import OutsideValidity
from runbook.fluids.solids.gibbs import Phase, Tied

_STEP: Final = 1.5
"""Distance of the nodes [K]; between them the sublimation pressure is then exact to 1e-9 of itself."""
_CLOSE: Final = 1e-13
"""Relative change of the pressure at which a node is found [1]."""

PhaseAt = Callable[[float, float], Phase]
"""The fluid at a temperature [K] and a pressure [Pa]."""


@dataclass(frozen=True, slots=True)
class _Table:
    """A curve: rising places, a value at each, its slope there."""

    places: tuple[float, ...]
    values: tuple[float, ...]
    slopes: tuple[float, ...]

    def read(self, place: float) -> tuple[float, float]:
        """Value and slope at a place inside the table."""
        cell = min(max(bisect_right(self.places, place) - 1, 0), len(self.places) - 2)
        start, width = self.places[cell], self.places[cell + 1] - self.places[cell]
        x = (place - start) / width
        y0, y1, m0, m1 = (
            self.values[cell],
            self.values[cell + 1],
            self.slopes[cell] * width,
            self.slopes[cell + 1] * width,
        )
        c2, c3 = 3.0 * (y1 - y0) - 2.0 * m0 - m1, 2.0 * (y0 - y1) + m0 + m1
        return y0 + x * (m0 + x * (c2 + x * c3)), (m0 + x * (2.0 * c2 + x * 3.0 * c3)) / width


class Solid:
    """A solid beside its vapour below the triple point, and beside its liquid."""

    def __init__(
        self,
        solid: Tied,
        triple: tuple[float, float],
        vapour: PhaseAt,
        liquid: PhaseAt,
        uncertainty: tuple[float, float],
        lowest_temperature: float,
    ) -> None:
        """triple: temperature [K], pressure [Pa]; uncertainty: of sublimation and melting pressure, relative [1]."""
        self._solid, self._vapour, self._liquid = solid, vapour, liquid
        self.triple_temperature, self.triple_pressure = triple
        self._uncertainty = uncertainty
        self.lowest_temperature = lowest_temperature
        """Below it nothing is computed [K]."""
        point = solid.phase(*triple)
        self.melts_downwards = liquid(*triple).volume < point.volume
        """Solid lighter than the liquid, as of water: under pressure it melts below the triple point."""

    # -- beside vapour --------------------------------------------------------------------------------

    def sublimation_pressure(self, temperature: float) -> float:
        """Pressure [Pa] of vapour over the solid at a temperature [K] to the triple point. Raises OutsideValidity."""
        return exp(self._sublimation(temperature)[0])

    def sublimation_slope(self, temperature: float) -> float:
        """Slope [Pa/K] of the sublimation pressure at a temperature [K]. Raises OutsideValidity."""
        value, slope = self._sublimation(temperature)
        return exp(value) * slope

    def sublimation_uncertainty(self, temperature: float) -> float:
        """Bound [Pa] on the error of the sublimation pressure at a temperature [K]."""
        return self._uncertainty[0] * self.sublimation_pressure(temperature)

    def beside_vapour(self, temperature: float) -> Phase:
        """The solid on the sublimation curve at a temperature [K]. Raises OutsideValidity."""
        return self._solid.phase(temperature, self.sublimation_pressure(temperature))

    def heat_of_sublimation(self, temperature: float) -> float:
        """Heat [J/kg] from solid to vapour at a temperature [K] up to the triple point. Raises OutsideValidity."""
        vapour = self._vapour(temperature, min(self.sublimation_pressure(temperature), self.triple_pressure))
        return temperature * (vapour.entropy - self.beside_vapour(temperature).entropy)

    # -- beside liquid --------------------------------------------------------------------------------

    def melts_at(self, temperature: float) -> bool:
        """Whether solid and liquid can stand together at a temperature [K], in what is computed."""
        table = self._melting_table.places
        return table[0] <= temperature <= table[-1]

    def melting_pressure(self, temperature: float) -> float:
        """Pressure [Pa] at which solid and liquid meet at a temperature [K]. Raises OutsideValidity."""
        return self._melting(temperature)[0]

    def melting_slope(self, temperature: float) -> float:
        """Slope [Pa/K] of the melting pressure at a temperature [K]. Raises OutsideValidity."""
        return self._melting(temperature)[1]

    def melting_uncertainty(self, temperature: float) -> float:
        """Bound [Pa] on the error of the melting pressure at a temperature [K]."""
        return self._uncertainty[1] * self.melting_pressure(temperature)

    def beside_liquid(self, temperature: float) -> tuple[Phase, Phase]:
        """Solid and liquid on the melting curve at a temperature [K]. Raises OutsideValidity."""
        pressure = self.melting_pressure(temperature)
        return self._solid.phase(temperature, pressure), self._liquid(temperature, pressure)

    def heat_of_fusion(self, temperature: float) -> float:
        """Heat [J/kg] from solid to liquid at a temperature [K] on the melting curve. Raises OutsideValidity."""
        solid, liquid = self.beside_liquid(temperature)
        return temperature * (liquid.entropy - solid.entropy)

    def freezes(self, temperature: float, pressure: float) -> bool:
        """Whether a fluid denser than the liquid at the triple point would be solid; [K], [Pa].

        Raises OutsideValidity beyond the melting curve that is computed.
        """
        table = self._melting_table
        if self.melts_downwards:
            return temperature < self.triple_temperature and pressure < self.melting_pressure(temperature)
        if temperature > table.places[-1]:
            # Warmer than the curve reaches: fluid up to where it ends, and nobody knows beyond.
            if pressure <= table.values[-1]:
                return False
            raise OutsideValidity(
                f"{pressure / 1e5:.5g} bar at {temperature:.6g} K is beyond the melting curve computed"
            )
        return pressure > self.melting_pressure(temperature)

    # -- finding the curves ---------------------------------------------------------------------------

    def _sublimation(self, temperature: float) -> tuple[float, float]:
        table = self._sublimation_table
        if not (self.lowest_temperature <= temperature <= self.triple_temperature * (1.0 + 1e-9)):
            raise OutsideValidity(
                f"{temperature:.6g} K is outside the sublimation curve, which is used from "
                f"{self.lowest_temperature:.6g} K to the triple point"
            )
        inverse = 1.0 / min(temperature, self.triple_temperature)
        value, slope = table.read(inverse)
        return value, -slope * inverse * inverse

    def _melting(self, temperature: float) -> tuple[float, float]:
        table = self._melting_table
        if not (table.places[0] <= temperature <= table.places[-1]):
            raise OutsideValidity(
                f"{temperature:.6g} K is outside the melting curve, which is used from "
                f"{table.places[0]:.6g} K to {table.places[-1]:.6g} K"
            )
        return table.read(temperature)

    @cached_property
    def _sublimation_table(self) -> _Table:
        """ln of the pressure over the inverse temperature, down from the triple point: almost a straight line."""
        start = self.triple_temperature
        count = int((start - self.lowest_temperature) / _STEP) + 1
        rows: list[tuple[float, float, float]] = []
        for k in range(count + 1):
            t = start - (start - self.lowest_temperature) * k / count
            p = self.triple_pressure
            if rows:
                inverse, value, slope = rows[-1]
                guess = min(exp(value + slope * (1.0 / t - inverse)), self.triple_pressure)
                p = self._meeting(t, guess, self._vapour)
            rows.append((1.0 / t, log(p), -t * t * self._clapeyron(t, p, self._vapour) / p))
        return _table(rows)

    @cached_property
    def _melting_table(self) -> _Table:
        """Pressure over temperature, away from the triple point as far as both equations reach."""
        t, p = self.triple_temperature, self.triple_pressure
        step = -_STEP if self.melts_downwards else _STEP
        slope = self._clapeyron(t, p, self._liquid)
        rows = [(t, p, slope)]
        while len(rows) < 400:
            then = rows[-1][0] + step
            guess = rows[-1][1] + slope * step
            if guess >= self._solid.highest_pressure or then < self.lowest_temperature:
                break
            try:
                p = self._meeting(then, guess, self._liquid)
                slope = self._clapeyron(then, p, self._liquid)
            except OutsideValidity:
                break
            if p > self._solid.highest_pressure or not p > rows[-1][1]:
                break
            rows.append((then, p, slope))
        return _table(rows)

    def _clapeyron(self, temperature: float, pressure: float, other: PhaseAt) -> float:
        """Slope [Pa/K] of the curve through a point of it."""
        solid, fluid = self._solid.phase(temperature, pressure), other(temperature, pressure)
        return (fluid.entropy - solid.entropy) / (fluid.volume - solid.volume)

    def _meeting(self, temperature: float, pressure: float, other: PhaseAt) -> float:
        """Pressure [Pa] at which solid and fluid have one Gibbs energy, from a guess."""
        for _ in range(30):
            solid, fluid = self._solid.phase(temperature, pressure), other(temperature, pressure)
            step = (solid.gibbs - fluid.gibbs) / (fluid.volume - solid.volume)
            # Of a vapour the logarithm is straighter, and keeps the pressure above zero.
            small = abs(step) < 0.3 * pressure
            new = pressure + step if small else pressure * exp(step / pressure)
            if abs(new - pressure) <= _CLOSE * pressure:
                return new
            pressure = new
        return pressure


def _table(rows: list[tuple[float, float, float]]) -> _Table:
    ordered = sorted(rows)
    return _Table(tuple(r[0] for r in ordered), tuple(r[1] for r in ordered), tuple(r[2] for r in ordered))
