"""A fluid at and below its triple point: which phases are there, and what they hold.

Solid lies beside vapour below; beside liquid where pressure keeps one: above the triple point for most fluids, below
it for water, whose solid is the lighter. Compressed solid, which no vessel here is closed on, is refused.
"""

from __future__ import annotations

from functools import cached_property

from runbook.errors import OutsideValidity
from runbook.fluids.library import Equation
from runbook.fluids.mixing import liquid_and_vapour, solid_and_liquid, solid_and_vapour
from runbook.fluids.solids.curves import Solid
from runbook.fluids.solids.gibbs import Phase
from runbook.fluids.state import Region, State


class Cold:
    """A fluid and its solid."""

    def __init__(self, equation: Equation, solid: Solid) -> None:
        self._equation = equation
        self.solid = solid
        self._triple = equation.triple_temperature

    def plateau(self, density: float) -> tuple[float, float] | None:
        """Internal energies [J/kg] at which melting begins and ends for a charge of that density [kg/m3].

        Between them temperature and pressure stand at the triple point. None for a charge that is never all three,
        and where no solid is modelled.
        """
        if not self._equation.triple_vapour_density < density < self._densest_plateau:
            return None
        begin, end = (state.internal_energy for state in self.plateau_states(density))
        return None if begin is None or end is None else (begin, end)

    def plateau_states(self, density: float) -> tuple[State, State]:
        """At the triple point the state of least and that of most energy: one phase is missing in each.

        density [kg/m3]. The three phases span a triangle in volume and energy; at one density the plateau runs from
        one of its edges to another. Raises OutsideValidity where no solid is modelled, or it is too dense.
        """
        triple = self._triple
        ice = self.solid
        if not self._equation.triple_vapour_density <= density <= self._densest_plateau:
            raise OutsideValidity(f"{density:.6g} kg/m3 is denser than the fluid is at its triple point")
        both = self._equation.saturation(triple)
        solid = 1.0 / ice.beside_vapour(triple).volume
        edges = []
        if density <= solid:
            edges.append(solid_and_vapour(triple, density, ice, self._triple_vapour))
        if density <= both.liquid_density:
            edges.append(liquid_and_vapour(triple, density, both))
        if min(solid, both.liquid_density) < density:
            edges.append(solid_and_liquid(triple, density, ice))
        edges.sort(key=lambda state: state.internal_energy or 0.0)
        return edges[0], edges[-1]

    def plateau_state(self, density: float, energy: float) -> State:
        """All three phases at an energy [J/kg] between the ends of the plateau: fractions go in a straight line."""
        begin, end = self.plateau_states(density)
        low, high = begin.internal_energy or 0.0, end.internal_energy or 0.0
        share = (energy - low) / (high - low)

        def mixed(one: float | None, other: float | None) -> float:
            return (one or 0.0) + share * ((other or 0.0) - (one or 0.0))

        both = self._equation.saturation(self._triple)
        return State(
            self._triple, density, begin.pressure, Region.THREE_PHASE, mixed(begin.solid, end.solid),
            mixed(begin.liquid, end.liquid), mixed(begin.vapour, end.vapour), both.liquid_density,
            both.vapour_density, energy, mixed(begin.entropy, end.entropy),
        )  # fmt: skip

    @cached_property
    def _triple_vapour(self) -> Phase:
        return self._equation.vapour_phase(self._triple, self._equation.triple_pressure)

    @cached_property
    def _densest_plateau(self) -> float:
        """Density of the denser of solid and liquid at the triple point [kg/m3]."""
        solid = 1.0 / self.solid.beside_vapour(self._triple).volume
        return max(solid, self._equation.triple_liquid_density)

    def region(self, temperature: float, density: float) -> Region:
        """At or below the triple point. Raises OutsideValidity for compressed solid, and below the models' range."""
        ice = self.solid
        pressure = ice.sublimation_pressure(temperature)
        # Far from the curve the ideal gas decides: real vapour on the curve is at most 1.2 times as dense.
        ideal = pressure * self._equation.molar_mass / (self._equation.gas_constant * temperature)
        if not density > 0.0:
            raise OutsideValidity(f"no state at {temperature:.6g} K and {density:.6g} kg/m3")
        if density <= ideal or (density <= 1.2 * ideal and density <= self.frost_density(temperature)):
            return Region.VAPOUR
        if density <= 1.0 / ice.beside_vapour(temperature).volume:
            return Region.THREE_PHASE if temperature == self._triple else Region.SOLID_VAPOUR
        if ice.melts_downwards:
            return self._under_ice(temperature, density, ice)
        if temperature == self._triple and density <= self._densest_plateau:
            return Region.THREE_PHASE
        raise OutsideValidity(f"{density:.6g} kg/m3 at {temperature:.6g} K is compressed solid")

    def _under_ice(self, temperature: float, density: float, ice: Solid) -> Region:
        """Of a fluid whose solid is the lighter: liquid and solid under pressure, below the triple point."""
        if temperature == self._triple:
            return Region.THREE_PHASE if density <= self._densest_plateau else Region.LIQUID
        if not ice.melts_at(temperature):
            raise OutsideValidity(f"{density:.6g} kg/m3 at {temperature:.6g} K: beyond the melting curve computed")
        solid, liquid = ice.beside_liquid(temperature)
        if density >= 1.0 / liquid.volume:
            return Region.LIQUID
        if density > 1.0 / solid.volume:
            return Region.SOLID_LIQUID
        raise OutsideValidity(f"{density:.6g} kg/m3 at {temperature:.6g} K is compressed solid")

    def frost_density(self, temperature: float) -> float:
        """Density [kg/m3] of vapour over the solid at a temperature [K]."""
        return 1.0 / self.vapour(temperature).volume

    def vapour(self, temperature: float) -> Phase:
        """Vapour on the sublimation curve at a temperature [K]."""
        pressure = self.solid.sublimation_pressure(temperature)
        return self._equation.vapour_phase(temperature, min(pressure, self._equation.triple_pressure))

    def melting(self, temperature: float, density: float) -> float:
        """Pressure [Pa] of a fluid found to be frozen, above the triple point."""
        ice = self.solid
        solid, _ = ice.beside_liquid(temperature)
        if density > 1.0 / solid.volume:
            raise OutsideValidity(f"{density:.6g} kg/m3 at {temperature:.6g} K is compressed solid")
        return ice.melting_pressure(temperature)

    def state(self, temperature: float, density: float, region: Region) -> State:
        """Everything in a region with solid, as region() found it. Raises OutsideValidity."""
        ice = self.solid
        if region is Region.SOLID_VAPOUR:
            return solid_and_vapour(temperature, density, ice, self.vapour(temperature))
        if region is Region.SOLID_LIQUID:
            return solid_and_liquid(temperature, density, ice)
        pressure = self._equation.triple_pressure
        return State(temperature, density, pressure, Region.THREE_PHASE, *(None,) * 7)
