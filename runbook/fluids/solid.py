"""Solid carbon dioxide: its curves, its density, the heats of its changes.

The equation of state knows no solid. Pressures are given as the ratio to the triple pressure and
multiplied with that of the equation of state in use, so that the curves meet at the triple point exactly.
Refuses temperatures below 150 K.
"""

from __future__ import annotations

from dataclasses import dataclass
from math import exp, fsum, pow

from runbook.errors import OutsideValidity

_T_TRIPLE = 216.592
"""[K], Span and Wagner 1996."""
_SUBLIMATION = ((-14.740846, 1.0), (2.4327015, 1.9), (-5.3061778, 2.9))
"""Span and Wagner 1996, equation 3.12."""
_MELTING = (1955.5390, 2055.4593)
"""Span and Wagner 1996, equation 3.10."""
_T_NORMAL = 194.6855
"""Sublimation temperature at 101325 Pa by equation 3.12 [K]."""
_HEAT_OF_FUSION = 202.0e3
"""[J/kg]; 8875 J/mol, within 0.2 % of Trusler 2011."""
_HEAT_OF_SUBLIMATION = 571.0e3
"""At the normal sublimation temperature [J/kg]; common handbook value, Giauque and Egan 1937."""
_HEAT_OF_VAPORISATION = 350.38e3
"""At the triple point [J/kg], Span and Wagner 1996, Table 34."""
_DENSITY = ((195.0, 1570.9), (_T_TRIPLE, 1545.0))
"""[K], [kg/m3] beside vapour, Jaeger and Span 2012."""


@dataclass(frozen=True, slots=True)
class DryIce:
    """Solid carbon dioxide beside its vapour, or beside its liquid on the melting curve."""

    triple_pressure: float
    """Of the equation of state it continues [Pa]."""

    @property
    def lowest_temperature(self) -> float:
        """Below it nothing is computed [K]."""
        return 150.0

    def sublimation_pressure(self, temperature: float) -> float:
        """Pressure [Pa] of vapour over the solid at a temperature [K], 150 K to the triple point.

        Span and Wagner 1996, equation 3.12. Raises OutsideValidity.
        """
        return self.triple_pressure * exp(self._exponent(temperature))

    def sublimation_slope(self, temperature: float) -> float:
        """Slope [Pa/K] of the sublimation pressure at a temperature [K]. Raises OutsideValidity."""
        x = max(0.0, 1.0 - temperature / _T_TRIPLE)
        ratio = _T_TRIPLE / temperature
        inner = fsum(a * n * pow(x, n - 1.0) for a, n in _SUBLIMATION)
        by_t = -self._exponent(temperature) / temperature - ratio * inner / _T_TRIPLE
        return self.sublimation_pressure(temperature) * by_t

    def sublimation_uncertainty(self, temperature: float) -> float:
        """Uncertainty [Pa] that the authors state for equation 3.12 at a temperature [K]."""
        if temperature > 185.0:
            return 250.0
        return 100.0 if temperature >= 170.0 else 50.0

    def melting_pressure(self, temperature: float) -> float:
        """Pressure [Pa] at which solid and liquid meet at a temperature [K] from the triple point up.

        Span and Wagner 1996, equation 3.10.
        """
        x = temperature / _T_TRIPLE - 1.0
        return self.triple_pressure * (1.0 + _MELTING[0] * x + _MELTING[1] * x * x)

    def melting_slope(self, temperature: float) -> float:
        """Slope [Pa/K] of the melting pressure at a temperature [K]."""
        x = temperature / _T_TRIPLE - 1.0
        return self.triple_pressure * (_MELTING[0] + 2.0 * _MELTING[1] * x) / _T_TRIPLE

    def density(self, temperature: float) -> float:
        """Density [kg/m3] at a temperature [K]: beside vapour to the triple point, beside liquid above.

        Jaeger and Span 2012: below linear between two values, within 0.1 % from 180 K; above, where the
        pressure of melting outweighs the warming, a parabola through the equation's values, within 0.1 %
        up to 290 K.
        """
        if temperature <= _T_TRIPLE:
            (t0, d0), (t1, d1) = _DENSITY
            return d0 + (d1 - d0) * (temperature - t0) / (t1 - t0)
        x = temperature - _T_TRIPLE
        return _DENSITY[1][1] + 0.78 * x + 0.0037 * x * x

    def heat_of_sublimation(self, temperature: float) -> float:
        """Heat [J/kg] from solid to vapour at a temperature [K].

        Linear between the normal sublimation temperature and the triple point, where it is the sum of
        fusion and vaporisation; continued below, within 1.5 % from 150 K.
        """
        top = _HEAT_OF_FUSION + _HEAT_OF_VAPORISATION
        share = (_T_TRIPLE - temperature) / (_T_TRIPLE - _T_NORMAL)
        return top + (_HEAT_OF_SUBLIMATION - top) * share

    def heat_of_fusion(self, temperature: float) -> float:
        """Heat [J/kg] from solid to liquid at a temperature [K] on the melting curve.

        Constant: it changes by less than 3 % up to 290 K (Jaeger and Span 2012).
        """
        return _HEAT_OF_FUSION

    def _exponent(self, temperature: float) -> float:
        if not (self.lowest_temperature <= temperature <= _T_TRIPLE * (1 + 1e-9)):
            raise OutsideValidity(
                f"{temperature:.6g} K is outside the sublimation curve, "
                f"which is used from {self.lowest_temperature:.6g} K to the triple point"
            )
        x = max(0.0, 1.0 - temperature / _T_TRIPLE)
        return _T_TRIPLE / temperature * fsum(a * pow(x, n) for a, n in _SUBLIMATION)
