"""What lies in an open vessel under its own vapour: how much of it leaves for the heat it gets.

Temperature and pressure stand, so energy is a straight line over mass: what leaves is vapour, and vapour has to fill
the room that the solid, or liquid, leaves behind. Refuses nothing; knows no body and no time.
"""

from __future__ import annotations

from dataclasses import dataclass

from runbook.fluids.substance import Substance


@dataclass(frozen=True, slots=True)
class Lying:
    """One substance in one open vessel, at one pressure of the room."""

    temperature: float
    """[K]"""
    vapour_density: float
    """[kg/m3]"""
    vapour_mass: float
    """Of the vapour alone, when the last of what lay there has gone [kg]."""
    enthalpy: float
    """Of the vapour that leaves [J/kg]."""
    slope: float
    """How the energy of all that is in the vessel grows with its mass [J/kg]."""
    offset: float
    """That energy where the line is drawn to no mass at all [J]."""

    def leaving(self, mass: float, energy: float) -> float:
        """What leaves [kg] of a charge [kg] with an energy [J/kg]; none while it is colder than it can lie there."""
        return max(0.0, (mass * energy - self.offset - self.slope * mass) / (self.enthalpy - self.slope))

    def wants(self, mass: float, energy: float) -> float:
        """Heat [J] after which nothing but vapour is left of a charge [kg] with an energy [J/kg]."""
        gone = mass - self.vapour_mass
        return gone * self.enthalpy + self.offset + self.slope * self.vapour_mass - mass * energy


class InTheOpen:
    """Whatever pressure the room has; the last one is kept."""

    def __init__(self, substance: Substance, volume: float) -> None:
        """volume [m3]."""
        self._substance, self._volume = substance, volume
        self._found: tuple[float, Lying] | None = None

    def lying(self, barometer: float) -> Lying:
        """At a pressure of the room [Pa]. Raises OutsideValidity."""
        if self._found is None or self._found[0] != barometer:
            self._found = barometer, self._at(barometer)
        return self._found[1]

    def _at(self, barometer: float) -> Lying:
        fluid = self._substance
        kelvin = fluid.boiling_temperature(barometer)
        if fluid.solid is not None and kelvin < fluid.triple_temperature:
            density = 1.0 / fluid.vapour_beside_solid(kelvin).volume
        else:
            density = fluid.saturation(kelvin).vapour_density
        thin, thick = (fluid.state(kelvin, share * density).internal_energy for share in (2.0, 4.0))
        assert thin is not None, "two phases, and not the plateau"
        assert thick is not None, "as above"
        filled = density * self._volume
        slope = (4.0 * thick - 2.0 * thin) / 2.0
        offset = 2.0 * filled * (thin - slope)
        # At no more than the vapour's own density the line ends in the vapour itself.
        vapour = slope + offset / filled
        return Lying(kelvin, density, filled, vapour + barometer / density, slope, offset)
