"""A solid of constant volume whose heat capacity is a straight line in temperature: good near its triple point.

Tied at the triple point by the heat of fusion it gives the sublimation and melting curves to the shares that the
fluid's data file states, found by comparison with published curves. A solid that yields to no pressure melts too
easily, the more the higher; so it ends at 40 MPa, where that has grown to 11 % for the worst of them.
"""

from __future__ import annotations

from math import log

from runbook.fluids.solids.gibbs import Phase


class PlainSolid:
    """One such solid, with zeros of energy and entropy at the triple point."""

    def __init__(
        self,
        triple_temperature: float,
        triple_pressure: float,
        density: float,
        heat_capacity: float,
        heat_capacity_slope: float,
        lowest_temperature: float,
    ) -> None:
        """triple point [K], [Pa]; density [kg/m3]; heat capacity [J/kg/K] there and its slope [J/kg/K2]."""
        self._t, self._p = triple_temperature, triple_pressure
        self._v, self._c, self._slope = 1.0 / density, heat_capacity, heat_capacity_slope
        self.lowest_temperature = lowest_temperature
        self.highest_pressure = 40.0e6

    def phase(self, temperature: float, pressure: float) -> Phase:
        """At a temperature [K] and a pressure [Pa]."""
        d = temperature - self._t
        enthalpy = (self._c + 0.5 * self._slope * d) * d + self._v * (pressure - self._p)
        ratio = log(temperature / self._t)
        entropy = self._c * ratio + self._slope * (d - self._t * ratio)
        return Phase(enthalpy - temperature * entropy, self._v, entropy)
