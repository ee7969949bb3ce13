"""A sealed charge warmed or cooled at constant density: between energy and temperature, in both directions.

Heat goes in as energy, and at the triple point energy moves while temperature and pressure stand; so what
integrates heat must carry energy, never temperature. A table is built once; answers that are shown are
refined with exact states, and the table alone serves the small steps of a heat balance.
Raises OutsideValidity beyond the table, whose ends are where the models end.
"""

from __future__ import annotations

from bisect import bisect_right
from math import inf

from runbook.errors import OutsideValidity
from runbook.fluids.roots import bracketed_root
from runbook.fluids.substance import Region, State, Substance

_HIGHEST = 600.0
"""Hotter than any source this program plans for can make a charge [K]."""
_TOLERANCE = 1e-7
"""Of a temperature found from an energy [K]."""


class Isochore:
    """One density of one substance, as a path of energy [J/kg], temperature [K] and pressure [Pa]."""

    def __init__(self, substance: Substance, density: float) -> None:
        """density [kg/m3]: mass over free volume. Raises OutsideValidity where no part of it is modelled."""
        self.substance = substance
        self.density = density
        """[kg/m3]."""
        self.plateau = substance.plateau(density)
        """Energies [J/kg] at which melting begins and ends; None for a charge too thin for liquid."""
        rows = _rows(substance, density, self.plateau)
        if len(rows) < 2:
            raise OutsideValidity(f"no charge of {density:.6g} kg/m3 is modelled: denser than the solid, or none")
        self.temperatures = tuple(row[0] for row in rows)
        """Rising [K]; the triple point stands twice, for the plateau."""
        self.energies = tuple(row[1] for row in rows)
        """Rising [J/kg]."""
        self.pressures = tuple(row[2] for row in rows)
        """Level on the plateau; rising, but below the triple point of a fluid whose solid is the lighter [Pa]."""

    @property
    def lowest_temperature(self) -> float:
        """Cold end of the path [K]."""
        return self.temperatures[0]

    @property
    def highest_temperature(self) -> float:
        """Hot end of the path [K]."""
        return self.temperatures[-1]

    def energy(self, temperature: float) -> float:
        """Internal energy [J/kg] at a temperature [K]; at the triple point that at which melting begins."""
        if self.plateau and temperature == self.substance.triple_temperature:
            return self.plateau[0]
        return self._exact(temperature)

    def temperature_of_energy(self, energy: float) -> float:
        """Temperature [K] of the charge at an internal energy [J/kg]. Raises OutsideValidity."""
        cell = self._cell(energy)
        low, high = self.temperatures[cell], self.temperatures[cell + 1]
        if low == high or energy <= self.energies[cell]:
            return low
        if energy >= self.energies[cell + 1]:
            return high
        return bracketed_root(
            lambda t: self._exact(t) - energy,
            low,
            high,
            _TOLERANCE,
            self.energies[cell] - energy,
            self.energies[cell + 1] - energy,
        )

    def table_temperature(self, energy: float) -> tuple[float, float]:
        """As temperature_of_energy(), read from the table within 50 mK, and the heat capacity [J/kg/K] there.

        For the steps of a heat balance, which are many; the heat capacity is infinite while the solid melts.
        """
        cell = self._cell(energy)
        low, high = self.temperatures[cell], self.temperatures[cell + 1]
        if low == high:
            return low, inf
        capacity = (self.energies[cell + 1] - self.energies[cell]) / (high - low)
        return low + (energy - self.energies[cell]) / capacity, capacity

    def pressure(self, temperature: float) -> float:
        """Absolute pressure [Pa] at a temperature [K]. Raises OutsideValidity."""
        return self.substance.pressure(temperature, self.density)

    def pressure_of_energy(self, energy: float) -> float:
        """Absolute pressure [Pa] of the charge at an internal energy [J/kg]. Raises OutsideValidity."""
        return self.pressure(self.temperature_of_energy(energy))

    def energy_of_pressure(self, pressure: float) -> float | None:
        """Internal energy [J/kg] above which the pressure exceeds a level [Pa].

        None where the path ends below the level; minus infinity where it begins above it.
        """
        if pressure >= self.pressures[-1]:
            return None
        # Of a fluid that freezes lighter the cold end is high again: the last way up counts.
        cell = next((k for k in range(len(self.pressures) - 2, -1, -1) if self.pressures[k] <= pressure), None)
        if cell is None:
            return -inf
        temperature = bracketed_root(
            lambda t: self.pressure(t) - pressure,
            self.temperatures[cell],
            self.temperatures[cell + 1],
            _TOLERANCE,
            self.pressures[cell] - pressure,
            self.pressures[cell + 1] - pressure,
        )
        if self.plateau and temperature == self.substance.triple_temperature:
            return self.plateau[1]
        return self._exact(temperature)

    def energy_of_temperature(self, temperature: float) -> float | None:
        """Internal energy [J/kg] above which the charge is warmer than a temperature [K].

        None where the path ends below it; minus infinity where it begins above it.
        """
        if temperature < self.temperatures[0]:
            return -inf
        if temperature >= self.temperatures[-1]:
            return None
        if self.plateau and temperature == self.substance.triple_temperature:
            return self.plateau[1]
        return self._exact(temperature)

    def state_of_energy(self, energy: float) -> State:
        """The whole state at an internal energy [J/kg], volume fractions on the melting plateau included.

        Raises OutsideValidity.
        """
        if self.plateau and self.plateau[0] < energy < self.plateau[1]:
            return self.substance.plateau_state(self.density, energy)
        return self.substance.state(self.temperature_of_energy(energy), self.density)

    def solid_fraction(self, energy: float) -> float:
        """Share of the volume that is solid [1] at an internal energy [J/kg]. Raises OutsideValidity."""
        return self.state_of_energy(energy).solid or 0.0

    def heat_capacity(self, temperature: float) -> float:
        """Heat capacity of the sealed charge [J/kg/K] at a temperature [K], all its phases together.

        Beside solid by difference of energies over 20 mK; infinite at the triple point of a charge that melts
        there. Raises OutsideValidity.
        """
        if self.plateau and temperature == self.substance.triple_temperature:
            return inf
        if self.substance.region(temperature, self.density) in (Region.SOLID_VAPOUR, Region.SOLID_LIQUID):
            triple = self.substance.triple_temperature
            half = min(0.01, 0.5 * abs(temperature - triple)) or 0.01
            return (self._exact(temperature + half) - self._exact(temperature - half)) / (2.0 * half)
        return self.substance.heat_capacity(temperature, self.density)

    def _exact(self, temperature: float) -> float:
        energy = self.substance.state(temperature, self.density).internal_energy
        if energy is not None:
            return energy
        assert self.plateau is not None, "only the melting plateau leaves the energy open"
        return self.plateau[0]

    def _cell(self, energy: float) -> int:
        # The ends themselves are computed, not refused for rounding.
        slack = 1e-9 * (self.energies[-1] - self.energies[0])
        if not self.energies[0] - slack <= energy <= self.energies[-1] + slack:
            raise OutsideValidity(
                f"{energy:.6g} J/kg is outside the path of {self.density:.6g} kg/m3, "
                f"modelled from {self.lowest_temperature:.6g} K to {self.highest_temperature:.6g} K"
            )
        return max(0, min(bisect_right(self.energies, energy) - 1, len(self.energies) - 2))


def _rows(
    substance: Substance, density: float, plateau: tuple[float, float] | None
) -> list[tuple[float, float, float]]:
    """Temperature [K], energy [J/kg], pressure [Pa]; cut at the hot end where the models end."""
    rows: list[tuple[float, float, float]] = []
    triple = substance.triple_temperature
    for temperature in _nodes(substance, density):
        if temperature == triple and plateau is not None:
            rows += [
                (triple, plateau[0], substance.triple_pressure),
                (triple, plateau[1], substance.triple_pressure),
            ]
            continue
        try:
            state = substance.state(temperature, density)
        except OutsideValidity:
            if rows and temperature > triple:
                break
            continue
        if state.internal_energy is not None:
            rows.append((temperature, state.internal_energy, state.pressure))
    return rows


def _nodes(substance: Substance, density: float) -> list[float]:
    """Temperatures [K], closer where the heat capacity turns; every kink of the path is one of them."""
    triple, critical = substance.triple_temperature, substance.critical_temperature
    marks = substance.landmarks(density)
    nodes = {triple, critical, substance.min_temperature}
    nodes |= {mark for mark in (marks.liquid_full, marks.dry) if mark is not None}
    spans = (
        (substance.min_temperature, triple, 3.0),
        (triple, critical - 20.0, 1.0),
        (critical - 20.0, critical - 2.0, 0.25),
        (critical - 2.0, critical + 2.0, 0.1),
        (critical + 2.0, critical + 20.0, 0.5),
        (critical + 20.0, max(_HIGHEST, critical + 200.0), 4.0),
    )
    for low, high, step in spans:
        count = int((high - low) / step)
        nodes |= {low + (high - low) * k / count for k in range(count + 1)} if count > 0 else set()
    ordered = sorted(node for node in nodes if node <= substance.max_temperature)
    # Two nodes nearer than this would make a slope of rounding errors.
    return [t for k, t in enumerate(ordered) if k == 0 or t - ordered[k - 1] > 1e-5 or t in (triple, critical)]
