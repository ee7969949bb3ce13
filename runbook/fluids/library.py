"""The one door to the property library: everything else in this program sees plain numbers in SI.

The library answers outside its range without an error, gives numbers without meaning inside the
two-phase dome, and keeps the failed inputs in an instance after an error. So this module

- refuses temperatures and pressures beyond the published validity, and states on the frozen side of
  the melting curve;
- never asks for a heat capacity or a partial derivative of a two-phase state: those come from the two
  saturated phases and the slopes of their curves;
- updates before every read, so that no value is ever read after an error or left over from another call.

An instance is not to be shared between threads: update and read are two calls.
"""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass
from math import isfinite

import CoolProp.CoolProp as cp

from runbook.errors import OutsideValidity
from runbook.fluids.solids.gibbs import Phase

_COLD_ALLOWANCE = 1e-9
"""Relative; the triple point itself is computed, not refused for rounding [1]."""


_THINNEST, _DENSEST = 1e-6, 1e5
"""Beyond these the library's own arithmetic under- or overflows, and slopes come back as no number [kg/m3]."""


class Frozen(OutsideValidity):
    """The fluid would be on the frozen side of its melting curve."""


@dataclass(frozen=True, slots=True)
class Saturation:
    """Liquid and vapour in equilibrium at one temperature."""

    pressure: float
    """Saturation pressure [Pa]."""
    liquid_density: float
    """Of the saturated liquid [kg/m3]; greater than that of the vapour."""
    vapour_density: float
    """Of the saturated vapour [kg/m3]."""
    liquid_energy: float
    """Internal energy of the saturated liquid [J/kg]."""
    vapour_energy: float
    """Internal energy of the saturated vapour [J/kg]."""
    liquid_entropy: float
    """Of the saturated liquid [J/kg/K]."""
    vapour_entropy: float
    """Of the saturated vapour [J/kg/K]."""
    dpdT: float
    """Slope of the saturation pressure [Pa/K]."""


@dataclass(frozen=True, slots=True)
class SaturationSlopes:
    """Slopes along the saturation curve, per kelvin."""

    liquid_density: float
    """[kg/m3/K]; negative."""
    vapour_density: float
    """[kg/m3/K]; positive."""
    liquid_energy: float
    """[J/kg/K]."""
    vapour_energy: float
    """[J/kg/K]."""


def _phase(instance: cp.AbstractState) -> Phase:
    return Phase(instance.gibbsmass(), 1.0 / instance.rhomass(), instance.smass())


class Equation:
    """A fluid's reference equation of state within its published range; own library instances."""

    def __init__(
        self,
        library_name: str,
        max_temperature: float,
        max_pressure: float,
        freezes: Callable[[float, float], bool] | None = None,
    ) -> None:
        """max_temperature [K], max_pressure [Pa]; freezes: whether it would be solid at [K], [Pa], None: unknown."""
        try:
            self._fluid = cp.AbstractState("HEOS", library_name)
            self._cold = cp.AbstractState("HEOS", library_name)
            # Below the triple point the library finds the vapour only when told what to look for.
            self._cold.specify_phase(cp.iphase_gas)
            fluid = self._fluid
            self.triple_temperature: float = fluid.Ttriple()
            self.critical_temperature: float = fluid.T_critical()
            self.critical_pressure: float = fluid.p_critical()
            self.critical_density: float = fluid.rhomass_critical()
            self.molar_mass: float = fluid.molar_mass()
            self.gas_constant: float = fluid.gas_constant()
        except (ValueError, RuntimeError) as error:
            raise OutsideValidity(f"the property library has no equation for {library_name}: {error}") from error
        self.max_temperature = max_temperature
        self.max_pressure = max_pressure
        self.freezes = freezes
        at_triple = self.saturation(self.triple_temperature)
        self.triple_pressure = at_triple.pressure
        self.triple_liquid_density = at_triple.liquid_density
        self.triple_vapour_density = at_triple.vapour_density

    def dome(self, temperature: float) -> tuple[float, float, float]:
        """Saturation pressure [Pa], liquid and vapour density [kg/m3] at a temperature [K].

        Valid from the triple to the critical point. Raises OutsideValidity.
        """
        self._check_saturation(temperature)
        fluid = self._fluid
        try:
            fluid.update(cp.QT_INPUTS, 0.0, temperature)
            pressure: float = fluid.p()
            liquid: float = fluid.rhomass()
            fluid.update(cp.QT_INPUTS, 1.0, temperature)
            vapour: float = fluid.rhomass()
        except (ValueError, RuntimeError) as error:
            raise OutsideValidity(f"no saturation state at {temperature:.6g} K: {error}") from error
        return pressure, liquid, vapour

    def saturation(self, temperature: float) -> Saturation:
        """Both saturated phases at a temperature [K] from triple to critical. Raises OutsideValidity."""
        self._check_saturation(temperature)
        fluid = self._fluid
        try:
            fluid.update(cp.QT_INPUTS, 0.0, temperature)
            pressure, liquid, liquid_energy = fluid.p(), fluid.rhomass(), fluid.umass()
            liquid_entropy = fluid.smass()
            fluid.update(cp.QT_INPUTS, 1.0, temperature)
            vapour, vapour_energy, vapour_entropy = fluid.rhomass(), fluid.umass(), fluid.smass()
            step = 1.0 / vapour - 1.0 / liquid
            # Clapeyron; at the critical point itself 0/0, where the library's own slope is right.
            if step > 1e-9:
                slope = (vapour_entropy - liquid_entropy) / step
            else:
                slope = fluid.first_saturation_deriv(cp.iP, cp.iT)
        except (ValueError, RuntimeError) as error:
            raise OutsideValidity(f"no saturation state at {temperature:.6g} K: {error}") from error
        return Saturation(pressure, liquid, vapour, liquid_energy, vapour_energy, liquid_entropy, vapour_entropy, slope)

    def saturation_slopes(self, temperature: float) -> SaturationSlopes:
        """Slopes of density and energy along the saturation curve at a temperature [K] below critical.

        Raises OutsideValidity.
        """
        self._check_saturation(temperature)
        fluid = self._fluid
        try:
            fluid.update(cp.QT_INPUTS, 0.0, temperature)
            liquid = (
                fluid.first_saturation_deriv(cp.iDmass, cp.iT),
                fluid.first_saturation_deriv(cp.iUmass, cp.iT),
            )
            fluid.update(cp.QT_INPUTS, 1.0, temperature)
            vapour = (
                fluid.first_saturation_deriv(cp.iDmass, cp.iT),
                fluid.first_saturation_deriv(cp.iUmass, cp.iT),
            )
        except (ValueError, RuntimeError) as error:
            raise OutsideValidity(f"no saturation slopes at {temperature:.6g} K: {error}") from error
        return SaturationSlopes(liquid[0], vapour[0], liquid[1], vapour[1])

    def pressure(self, temperature: float, density: float) -> float:
        """Pressure [Pa] of one fluid phase at a temperature [K] and density [kg/m3] outside the dome.

        Raises Frozen beyond the melting curve, OutsideValidity elsewhere outside the range.
        """
        return self._update(temperature, density)

    def caloric(self, temperature: float, density: float) -> tuple[float, float, float]:
        """As pressure(), with the internal energy [J/kg] and the entropy [J/kg/K]."""
        pressure = self._update(temperature, density)
        instance = self._instance(temperature, density)
        return pressure, instance.umass(), instance.smass()

    def slopes(self, temperature: float, density: float) -> tuple[float, float, float]:
        """dp/dT [Pa/K], dp/drho [Pa/(kg/m3)] and heat capacity at fixed volume [J/kg/K] of one fluid phase.

        temperature [K], density [kg/m3] outside the dome. Raises as pressure().
        """
        self._update(temperature, density)
        instance = self._instance(temperature, density)
        try:
            return (
                instance.first_partial_deriv(cp.iP, cp.iT, cp.iDmass),
                instance.first_partial_deriv(cp.iP, cp.iDmass, cp.iT),
                instance.cvmass(),
            )
        except (ValueError, RuntimeError) as error:
            raise OutsideValidity(f"no slopes at {temperature:.6g} K and {density:.6g} kg/m3: {error}") from error

    def vapour_phase(self, temperature: float, pressure: float) -> Phase:
        """Vapour at or below the triple point; temperature [K], pressure [Pa] not above that of sublimation.

        Raises OutsideValidity.
        """
        if not (0.0 < pressure <= self.triple_pressure * (1 + _COLD_ALLOWANCE)):
            raise OutsideValidity(f"no vapour is computed at {temperature:.6g} K and {pressure:.6g} Pa")
        cold = self._cold
        try:
            cold.update(cp.PT_INPUTS, pressure, temperature)
            return _phase(cold)
        except (ValueError, RuntimeError) as error:
            raise OutsideValidity(f"no vapour at {temperature:.6g} K, {pressure:.6g} Pa: {error}") from error

    def fluid_phase(self, temperature: float, pressure: float) -> Phase:
        """One fluid phase at a temperature [K] and pressure [Pa], off the saturation curve. Raises OutsideValidity."""
        if not (0.0 < pressure <= self.max_pressure and 0.0 < temperature <= self.max_temperature):
            raise OutsideValidity(f"no state at {temperature:.6g} K and {pressure:.6g} Pa")
        instance = self._cold if pressure < self.triple_pressure else self._fluid
        try:
            instance.update(cp.PT_INPUTS, pressure, temperature)
            return _phase(instance)
        except (ValueError, RuntimeError) as error:
            raise OutsideValidity(f"no state at {temperature:.6g} K, {pressure:.6g} Pa: {error}") from error

    def gas_density(self, temperature: float, pressure: float) -> float | None:
        """Density [kg/m3] of the gas at a temperature [K] and pressure [Pa]; None where it would condense."""
        if temperature < self.critical_temperature and pressure >= self.dome(temperature)[0]:
            return None
        try:
            self._fluid.update(cp.PT_INPUTS, pressure, temperature)
            found: float = self._fluid.rhomass()
        except (ValueError, RuntimeError) as error:
            raise OutsideValidity(f"no gas at {temperature:.6g} K, {pressure:.6g} Pa: {error}") from error
        return found

    def liquid_phase(self, temperature: float, pressure: float) -> Phase:
        """Liquid at a temperature [K] and pressure [Pa], the melting curve included. Raises OutsideValidity."""
        try:
            if abs(temperature - self.triple_temperature) < 1e-9 and pressure <= self.triple_pressure * (1.0 + 1e-9):
                self._fluid.update(cp.QT_INPUTS, 0.0, self.triple_temperature)
            else:
                self._raw(temperature, self.liquid_density(temperature, pressure))
            return _phase(self._fluid)
        except (ValueError, RuntimeError) as error:
            raise OutsideValidity(f"no liquid at {temperature:.6g} K, {pressure:.6g} Pa: {error}") from error

    def liquid_density(self, temperature: float, pressure: float) -> float:
        """Density [kg/m3] of liquid at a temperature [K] and pressure [Pa] up to the melting curve.

        Raises OutsideValidity.
        """
        if not (0.0 < pressure <= self.max_pressure and temperature <= self.max_temperature):
            raise OutsideValidity(f"no liquid is computed at {temperature:.6g} K and {pressure:.6g} Pa")
        # By hand: on the melting curve itself the library refuses, its own curve differing in the 5th digit.
        low, high = self.triple_liquid_density * 0.5, self.triple_liquid_density * 1.6
        density = 1.01 * self.triple_liquid_density
        for _ in range(100):
            error = self._raw(temperature, density) - pressure
            low, high = (low, density) if error > 0 else (density, high)
            slope = self._fluid.first_partial_deriv(cp.iP, cp.iDmass, cp.iT)
            # Before the bracket is asked: a step of rounding size lands on the bracket's own end, and is an arrival.
            if slope > 0 and abs(error) <= 1e-12 * density * slope:
                return density - error / slope
            trial = density - error / slope if slope > 0 else low
            density = trial if low < trial < high else 0.5 * (low + high)
        raise OutsideValidity(f"no liquid density found at {temperature:.6g} K and {pressure:.6g} Pa")

    def _check_saturation(self, temperature: float) -> None:
        lowest = self.triple_temperature * (1 - _COLD_ALLOWANCE)
        if not (lowest <= temperature <= self.critical_temperature):
            raise OutsideValidity(f"no liquid beside vapour at {temperature:.6g} K")

    def _instance(self, temperature: float, density: float) -> cp.AbstractState:
        """Below the triple point the vapour has an instance of its own; liquid under pressure has not."""
        vapour = temperature < self.triple_temperature and density <= self.triple_vapour_density
        return self._cold if vapour else self._fluid

    def _raw(self, temperature: float, density: float) -> float:
        instance = self._instance(temperature, density)
        try:
            instance.update(cp.DmassT_INPUTS, density, temperature)
            pressure: float = instance.p()
        except (ValueError, RuntimeError) as error:
            raise OutsideValidity(f"no state at {temperature:.6g} K and {density:.6g} kg/m3: {error}") from error
        return pressure

    def _update(self, temperature: float, density: float) -> float:
        if not (_THINNEST <= density < _DENSEST and isfinite(temperature)):
            raise OutsideValidity(f"no state at {temperature:.6g} K and {density:.6g} kg/m3")
        if not (0.0 < temperature <= self.max_temperature):
            raise OutsideValidity(
                f"{temperature:.6g} K is outside the equation of state, which ends at {self.max_temperature:.6g} K"
            )
        cold = temperature < self.triple_temperature * (1.0 - _COLD_ALLOWANCE)
        if cold and self.triple_vapour_density < density <= self.triple_liquid_density:
            raise OutsideValidity(f"below its triple point this is no vapour: {temperature:.6g} K, {density:.6g} kg/m3")
        pressure = self._raw(temperature, density)
        if density > self.triple_liquid_density:
            if self.freezes is None:
                raise OutsideValidity(
                    f"{density:.6g} kg/m3 may be frozen at {temperature:.6g} K: melting curve unknown"
                )
            if self.freezes(temperature, pressure):
                raise Frozen(f"{density:.6g} kg/m3 at {temperature:.6g} K is beyond the melting curve")
        if not (0.0 < pressure <= self.max_pressure):
            raise OutsideValidity(
                f"{density:.6g} kg/m3 at {temperature:.6g} K would be {pressure / 1e5:.5g} bar; "
                f"the equation of state ends at {self.max_pressure / 1e5:.5g} bar"
            )
        return pressure
