"""One substance at a temperature and a density: solid, liquid, vapour and beyond the critical point.

A sealed vessel fixes the density, so temperature and density are the inputs everywhere. Raises
OutsideValidity where the models do not reach; never extrapolates in silence.
"""

from __future__ import annotations

from functools import cache

from runbook.errors import OutsideValidity
from runbook.fluids import landmarks
from runbook.fluids.catalogue import FluidData, find
from runbook.fluids.cold import Cold
from runbook.fluids.library import Equation, Frozen, Saturation, SaturationSlopes
from runbook.fluids.mixing import heat_capacity_beside_vapour, liquid_and_vapour, solid_and_liquid
from runbook.fluids.solids.curves import Solid
from runbook.fluids.solids.gibbs import Phase
from runbook.fluids.solids.making import solid_of
from runbook.fluids.state import Landmarks, Region, State

CRITICAL_BAND = 0.05
"""Relative distance from critical density within which the landmark is *critical* [1]."""


class Substance:
    """A fluid and its solid. Not to be shared between threads."""

    def __init__(self, data: FluidData) -> None:
        self._data = data
        self._equation = equation = Equation(data.library_name, data.max_temperature, data.max_pressure)
        self._cold = None if data.solid is None else Cold(equation, solid_of(data.solid, equation))
        equation.freezes = None if self._cold is None else self._cold.solid.freezes
        self.name = data.name
        """Canonical name."""
        self.source = data.source
        """Publication of the equation of state."""
        self.triple_temperature = equation.triple_temperature
        """[K]."""
        self.triple_pressure = equation.triple_pressure
        """[Pa]."""
        self.critical_temperature = equation.critical_temperature
        """[K]."""
        self.critical_pressure = equation.critical_pressure
        """[Pa]."""
        self.critical_density = equation.critical_density
        """[kg/m3]."""
        self.molar_mass = equation.molar_mass
        """[kg/mol]."""
        self.max_temperature = data.max_temperature
        """[K]."""
        self.min_temperature = self._cold.solid.lowest_temperature if self._cold else equation.triple_temperature
        """[K]; below it nothing is computed."""

    @property
    def data(self) -> FluidData:
        """What its data file states: hazards, optics, uncertainties."""
        return self._data

    @property
    def equation(self) -> Equation:
        """The equation of state, for questions by pressure."""
        return self._equation

    @property
    def solid(self) -> Solid | None:
        """What it freezes to; None: not modelled."""
        return None if self._cold is None else self._cold.solid

    def vapour_beside_solid(self, temperature: float) -> Phase:
        """Vapour on the sublimation curve at a temperature [K] up to the triple point. Raises OutsideValidity."""
        return self._frozen(temperature).vapour(temperature)

    # -- states ---------------------------------------------------------------------------------------

    def pressure(self, temperature: float, density: float) -> float:
        """Absolute pressure [Pa] at a temperature [K] and density [kg/m3]. Raises OutsideValidity."""
        equation = self._equation
        if not self._is_cold(temperature):
            if temperature < self.critical_temperature:
                pressure, liquid, vapour = equation.dome(temperature)
                if vapour <= density <= liquid:
                    return pressure
            try:
                return equation.pressure(temperature, density)
            except Frozen:
                return self._frozen(temperature).melting(temperature, density)
        match self._frozen(temperature).region(temperature, density):
            case Region.SOLID_VAPOUR | Region.THREE_PHASE:
                return self._ice(temperature).sublimation_pressure(temperature)
            case Region.SOLID_LIQUID:
                return self._ice(temperature).melting_pressure(temperature)
        return equation.pressure(temperature, density)

    def state(self, temperature: float, density: float) -> State:
        """Everything at a temperature [K] and density [kg/m3]. Raises OutsideValidity."""
        equation = self._equation
        if self._is_cold(temperature):
            region = self._frozen(temperature).region(temperature, density)
            if region in _SEVERAL:
                return self._frozen(temperature).state(temperature, density, region)
        elif temperature < self.critical_temperature:
            saturation = equation.saturation(temperature)
            if saturation.vapour_density <= density <= saturation.liquid_density:
                return liquid_and_vapour(temperature, density, saturation)
        try:
            pressure, energy, entropy = equation.caloric(temperature, density)
        except Frozen:
            self._frozen(temperature).melting(temperature, density)
            return solid_and_liquid(temperature, density, self._ice(temperature))
        return self._single_state(temperature, density, pressure, energy, entropy)

    def saturation(self, temperature: float) -> Saturation:
        """Liquid beside vapour at a temperature [K] from triple to critical. Raises OutsideValidity."""
        return self._equation.saturation(temperature)

    def gas_volume(self, temperature: float, pressure: float) -> float | None:
        """Volume of the gas [m3/kg] at a temperature [K] and pressure [Pa]; None where it condenses."""
        density = self._equation.gas_density(temperature, pressure)
        return None if density is None else 1.0 / density

    def boiling_temperature(self, pressure: float) -> float:
        """Temperature [K] at which liquid, or else solid, stands beside its vapour at a pressure [Pa].

        Raises OutsideValidity at pressures above critical and below the curves.
        """
        return landmarks.boiling(self._equation, self._cold, pressure)

    def saturation_slopes(self, temperature: float) -> SaturationSlopes:
        """Slopes along the saturation curve at a temperature [K] below critical. Raises OutsideValidity."""
        return self._equation.saturation_slopes(temperature)

    # -- slopes ---------------------------------------------------------------------------------------

    def dp_dT(self, temperature: float, density: float) -> float:
        """Slope [Pa/K] of pressure with temperature at fixed density; temperature [K], density [kg/m3].

        With two phases, that of the curve they lie on; at the triple point the steeper of those that meet
        there. Raises OutsideValidity.
        """
        region = self.region(temperature, density)
        if region is Region.LIQUID_VAPOUR:
            return self._equation.saturation(temperature).dpdT
        if region is Region.SOLID_VAPOUR:
            return self._ice(temperature).sublimation_slope(temperature)
        if region is Region.SOLID_LIQUID:
            return self._ice(temperature).melting_slope(temperature)
        if region is Region.THREE_PHASE:
            ice = self._ice(temperature)
            dense = density > min(self._equation.triple_liquid_density, 1.0 / ice.beside_vapour(temperature).volume)
            return max(ice.sublimation_slope(temperature), ice.melting_slope(temperature) if dense else 0.0, key=abs)
        return self._equation.slopes(temperature, density)[0]

    def dp_ddensity(self, temperature: float, density: float) -> float:
        """Slope [Pa/(kg/m3)] of pressure with density at fixed temperature; temperature [K], density [kg/m3].

        Zero where two or three phases are together. Raises OutsideValidity.
        """
        if self.region(temperature, density) in _SEVERAL:
            return 0.0
        return self._equation.slopes(temperature, density)[1]

    def heat_capacity(self, temperature: float, density: float) -> float:
        """Heat capacity of one phase or of liquid beside vapour at fixed volume [J/kg/K].

        temperature [K], density [kg/m3]. Beside vapour it is taken from both saturated phases and how they
        share the volume; the equation's own figure means nothing there. With solid, and where the models
        do not reach: OutsideValidity.
        """
        region = self.region(temperature, density)
        if region is Region.LIQUID_VAPOUR:
            both = self._equation.saturation(temperature)
            return heat_capacity_beside_vapour(density, both, self._equation.saturation_slopes(temperature))
        if region in _SEVERAL:
            raise OutsideValidity(f"no heat capacity of {region} at {temperature:.6g} K: use energies")
        return self._equation.slopes(temperature, density)[2]

    def pressure_uncertainty(self, temperature: float, density: float) -> float:
        """Bound [Pa] on the equation's own error at a temperature [K] and density [kg/m3].

        Beside vapour that of the saturation or sublimation pressure. In one phase that of the density, times
        the slope; from 5 % below critical density up, the dense figure; never less than the saturation
        pressure's share. Solid beside liquid that of the melting pressure. Raises OutsideValidity.
        """
        region = self.region(temperature, density)
        if region is Region.LIQUID_VAPOUR:
            return self._data.saturation_uncertainty * self.pressure(temperature, density)
        if region in (Region.SOLID_VAPOUR, Region.THREE_PHASE):
            return self._ice(temperature).sublimation_uncertainty(temperature)
        if region is Region.SOLID_LIQUID:
            return self._ice(temperature).melting_uncertainty(temperature)
        dense = density > (1.0 - CRITICAL_BAND) * self.critical_density
        share = self._data.dense_uncertainty if dense else self._data.thin_uncertainty
        by_density = share * density * abs(self._equation.slopes(temperature, density)[1])
        return max(by_density, self._data.saturation_uncertainty * self.pressure(temperature, density))

    # -- landmarks ------------------------------------------------------------------------------------

    def region(self, temperature: float, density: float) -> Region:
        """Which phases are there at a temperature [K] and density [kg/m3]. Raises OutsideValidity."""
        equation = self._equation
        if self._is_cold(temperature):
            cold = self._frozen(temperature).region(temperature, density)
            if cold in _SEVERAL:
                return cold
        elif temperature < self.critical_temperature:
            _, liquid, vapour = equation.dome(temperature)
            if vapour <= density <= liquid:
                return Region.LIQUID_VAPOUR
        try:
            pressure = equation.pressure(temperature, density)
        except Frozen:
            self._frozen(temperature).melting(temperature, density)
            return Region.SOLID_LIQUID
        return self._single_region(temperature, density, pressure)

    def is_critical(self, density: float) -> bool:
        """Whether a charge of that density [kg/m3] passes near enough to the critical point."""
        return abs(density / self.critical_density - 1.0) <= CRITICAL_BAND

    def liquid_full_temperature(self, density: float) -> float | None:
        """Temperature [K] at which liquid of a charge of that density [kg/m3] fills the vessel, on warming.

        None where it never does: near critical density (the landmark is critical), thinner, and at densities
        above that of liquid at the triple point, which are full of solid and liquid once the vapour goes.
        """
        return None if self.is_critical(density) else landmarks.liquid_full(self._equation, density)

    def dry_temperature(self, density: float) -> float | None:
        """Temperature [K] at which the last liquid of a charge has gone on warming, or the last solid.

        density [kg/m3]; solid where it is too thin for liquid.
        None near critical density and denser, and where it lies below the models' range.
        """
        return None if self.is_critical(density) else landmarks.dry(self._equation, self._cold, density)

    def landmarks(self, density: float) -> Landmarks:
        """All landmarks of a charge of that density [kg/m3]."""
        return Landmarks(
            triple=self.triple_temperature if self.plateau(density) is not None else None,
            liquid_full=self.liquid_full_temperature(density),
            dry=self.dry_temperature(density),
            critical=self.critical_temperature if self.is_critical(density) else None,
        )

    def plateau(self, density: float) -> tuple[float, float] | None:
        """Internal energies [J/kg] at which melting begins and ends for a charge of that density [kg/m3].

        Between them temperature and pressure stand at the triple point. None for a charge that is never all three,
        and where no solid is modelled.
        """
        return None if self._cold is None else self._cold.plateau(density)

    def plateau_states(self, density: float) -> tuple[State, State]:
        """At the triple point the state of least and that of most energy: one phase is missing in each.

        density [kg/m3]. Raises OutsideValidity where no solid is modelled, or it is too dense.
        """
        return self._frozen(self.triple_temperature).plateau_states(density)

    def plateau_state(self, density: float, energy: float) -> State:
        """All three phases at a density [kg/m3] and an energy [J/kg] between the ends of the plateau.

        Raises OutsideValidity where no solid is modelled, or it is too dense.
        """
        return self._frozen(self.triple_temperature).plateau_state(density, energy)

    def _is_cold(self, temperature: float) -> bool:
        """Where solid may be; no number at all counts as cold, and is refused there."""
        above = temperature > self.triple_temperature
        return not (above or (self._cold is None and temperature == self.triple_temperature))

    def _frozen(self, temperature: float) -> Cold:
        if self._cold is None:
            raise OutsideValidity(
                f"{temperature:.6g} K is below the triple point of {self.name}, {self.triple_temperature:.6g} K, "
                "and its solid is not modelled"
            )
        return self._cold

    def _ice(self, temperature: float) -> Solid:
        return self._frozen(temperature).solid

    # -- one phase ------------------------------------------------------------------------------------

    def _single_region(self, temperature: float, density: float, pressure: float) -> Region:
        if temperature < self.critical_temperature:
            return Region.LIQUID if density > self.critical_density else Region.VAPOUR
        return Region.SUPERCRITICAL if pressure >= self.critical_pressure else Region.GAS

    def _single_state(
        self, temperature: float, density: float, pressure: float, energy: float, entropy: float
    ) -> State:
        region = self._single_region(temperature, density, pressure)
        solid, liquid, vapour = _ALONE.get(region, (None, None, None))
        return State(temperature, density, pressure, region, solid, liquid, vapour, None, None, energy, entropy)


_SEVERAL = (Region.LIQUID_VAPOUR, Region.SOLID_VAPOUR, Region.SOLID_LIQUID, Region.THREE_PHASE)
_ALONE = {Region.LIQUID: (0.0, 1.0, 0.0), Region.VAPOUR: (0.0, 0.0, 1.0)}


def substance(name: str) -> Substance:
    """The substance of that name or alias; the same object each time.

    Raises InputUnusable, naming the known fluids.
    """
    return _cached(find(name).name)


@cache
def _cached(canonical: str) -> Substance:
    return Substance(find(canonical))


__all__ = [
    "CRITICAL_BAND",
    "Landmarks",
    "Region",
    "Saturation",
    "State",
    "Substance",
    "substance",
]
