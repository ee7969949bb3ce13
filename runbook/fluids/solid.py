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
_HEAT_OF_FUSION = 201.66e3
"""[J/kg]; 8875 J/mol, within 0.1 % of Trusler 2011."""
_HEAT_OF_VAPORISATION = 350.38e3
"""At the triple point [J/kg], Span and Wagner 1996, Table 34."""
_HEAT_OF_SUBLIMATION = (1216.04, -13.6470, 0.0812299)
"""What it gains below the triple point [J/kg] per K, K2, K3 of cooling; our fit, within 220 J/kg from
150 K, to the enthalpies of Jaeger and Span 2012 (solid) and Span and Wagner 1996 (vapour)."""
_DENSITY = (1544.965, 1.247705, -0.00207651)
"""[kg/m3] at the triple point and what it gains per K, K2 of cooling beside vapour; our fit, within
0.06 kg/m3 from 150 K, to Jaeger and Span 2012."""
_DENSITY_MELTING = (0.78, 0.0037)
"""What it gains per K, K2 of warming on the melting curve [kg/m3]; our fit, within 0.1 % to 290 K, to
Jaeger and Span 2012."""


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

        Above, the pressure of melting outweighs the warming. Jaeger and Span 2012.
        """
        if temperature <= _T_TRIPLE:
            x = _T_TRIPLE - temperature
            return _DENSITY[0] + (_DENSITY[1] + _DENSITY[2] * x) * x
        x = temperature - _T_TRIPLE
        return _DENSITY[0] + (_DENSITY_MELTING[0] + _DENSITY_MELTING[1] * x) * x

    def heat_of_sublimation(self, temperature: float) -> float:
        """Heat [J/kg] from solid to vapour at a temperature [K] from 150 K to the triple point.

        At the triple point the sum of fusion and vaporisation. Jaeger and Span 2012, Span and Wagner 1996.
        """
        a, b, c = _HEAT_OF_SUBLIMATION
        x = _T_TRIPLE - temperature
        return _HEAT_OF_FUSION + _HEAT_OF_VAPORISATION + (a + (b + c * x) * x) * x

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
