"""What has to be known of a fluid besides its equation of state, as data. Every figure keeps where it comes from."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Final

SURE: Final = ("published", "handbook", "computed", "from memory")
"""How sure a figure is: read in its publication, in a handbook, worked out here, or remembered and to be confirmed."""
BREATHING: Final = ("poison", "asphyxiant", "harmless")
"""What the gas does to whoever breathes it."""
RELEASE: Final = ("to the room", "forbidden")
"""Where it may be let out."""


@dataclass(frozen=True, slots=True)
class Figure:
    """A number with where it comes from."""

    value: float
    source: str
    sure: str
    """One of SURE."""


@dataclass(frozen=True, slots=True)
class SolidData:
    """What continues a fluid below its triple point."""

    model: str
    """Name of the solid's equation."""
    heat_of_fusion: float | None
    """At the triple point [J/mol]; None only where the equations of solid and fluid share their zeros."""
    density: float | None
    """Of the constant-volume solid [kg/m3]."""
    heat_capacity: float | None
    """Of the constant-volume solid at the triple point [J/kg/K]."""
    heat_capacity_slope: float | None
    """[J/kg/K2]"""
    lowest_temperature: float
    """Below it nothing is computed [K]."""
    sublimation_uncertainty: float
    """Of the sublimation pressure, relative [1]."""
    melting_uncertainty: float
    """Of the melting pressure, relative [1]."""


@dataclass(frozen=True, slots=True)
class Hazards:
    """What the fluid does to people and to the law."""

    breathing: str
    """One of BREATHING."""
    exposure_limit: float | None
    """Long-term limit in air, volume fraction [1]; None: nobody stated one, or it is harmless."""
    short_limit: float | None
    """Over 15 min, volume fraction [1]."""
    background: float
    """In clean air, volume fraction [1]."""
    flammable: bool
    lower_flammable: float | None
    """Volume fraction in air [1]; None only where it does not burn."""
    upper_flammable: float | None
    """Volume fraction in air [1]; None only where it does not burn."""
    oxidiser: bool
    cold: bool
    """Letting it down can burn by cold."""
    scald: bool
    release_forbidden: bool
    """It may not be let out to the room."""
    release_law: str
    """Which law says so; empty where none does."""
    softens: tuple[str, ...]
    """Materials of parts that nothing can be said of above that pressure."""
    softens_above: float | None
    """[Pa, gauge]; None where it softens nothing known."""


@dataclass(frozen=True, slots=True)
class FluidData:
    """What has to be known of a fluid besides its equation of state."""

    name: str
    """Canonical name, as it is printed and written in records."""
    aliases: tuple[str, ...]
    """Other spellings accepted; compared without regard to case."""
    library_name: str
    """What the property library calls it."""
    source: str
    """Publication of the equation of state."""
    max_temperature: float
    """Upper end of the equation's validity [K]; the library accepts more, in silence."""
    max_pressure: float
    """Upper end of the equation's validity [Pa]."""
    saturation_uncertainty: float
    """Of the saturation pressure, relative [1]; a bound."""
    dense_uncertainty: float
    """Of the density where the vessel is filled by one dense phase, relative [1]; a bound."""
    thin_uncertainty: float
    """Of the density of vapour and gas below critical density, relative [1]."""
    densest_temperature: float | None
    """Below it liquid grows on cooling, so that a full vessel bursts [K]; None: it never does."""
    molar_refractivity: float | None
    """Lorentz-Lorenz, 589 nm [m3/mol]; None: not known."""
    haze: tuple[float, float] | None
    """Amplitudes near the critical point: correlation length [m], compressibility [1]; None: not known."""
    solid: SolidData | None
    """None: below its triple point it is refused."""
    hazards: Hazards
    figures: tuple[tuple[str, Figure], ...]
    """Every figure of the file with its source, by 'table.key'."""
