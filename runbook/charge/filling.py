"""What is in a vessel from how it was filled: trapped air, and the charge that a liquid height means.

Refuses to read a charge from a height where there is no meniscus.
"""

from __future__ import annotations

from dataclasses import dataclass
from itertools import product

from runbook.charge.geometry import Shape
from runbook.errors import InputUnusable, OutsideValidity
from runbook.fluids.substance import Region, Substance

_R = 8.314462618
"""Molar gas constant [J/mol/K], CODATA 2018."""
_NEAR = 1.0
"""How far below the end of the meniscus the vapour space still counts as it stands [K]."""
_DISSOLVED = 1.1
"""Air in one dense phase raises the pressure by no more than this factor over the ideal gas; common
practice."""
_TEMPERATURE_POINTS = 9
"""Between the ends of the temperature box: at one height the charge can be greatest or least inside."""


@dataclass(frozen=True, slots=True)
class ChargeBounds:
    """A charge and the least and greatest it can be."""

    least: float
    """[kg]."""
    nominal: float
    """At the middle of every box [kg]."""
    greatest: float
    """[kg]."""


def liquid_fraction(substance: Substance, temperature: float, density: float) -> float | None:
    """Share of the volume that is liquid [1] at a temperature [K] and density [kg/m3].

    None in supercritical and gas, and at the triple point. Raises OutsideValidity.
    """
    return substance.state(temperature, density).liquid


def air_pressure(substance: Substance, temperature: float, density: float, moles_air: float, volume: float) -> float:
    """What trapped air adds to the pressure [Pa].

    temperature [K], density [kg/m3] of the charge, moles_air [mol], volume [m3] of the vessel. Air is an
    ideal gas in the vapour space; nearer than 1 K to where the meniscus ends, and in one phase, it is 1.1
    times the ideal gas in the whole vessel or what it was 1 K below that end, whichever is more.
    Raises OutsideValidity; InputUnusable for a negative amount.
    """
    if not (moles_air >= 0.0 and volume > 0.0):
        raise InputUnusable(f"air of {moles_air:.6g} mol in {volume:.6g} m3: neither can be negative")
    if moles_air == 0.0:
        return 0.0
    end = meniscus_end(substance, density)
    triple = substance.triple_temperature
    edge = None if end is None else max(end - _NEAR, triple)
    if edge is None and substance.landmarks(density).triple is not None and temperature >= triple:
        raise OutsideValidity(f"{density:.6g} kg/m3 leaves trapped air no room beside solid and liquid")
    if edge is not None and temperature <= edge:
        return moles_air * _R * temperature / _vapour_volume(substance, temperature, density, volume)
    spread = _DISSOLVED * moles_air * _R * temperature / volume
    if edge is None:
        return spread
    return max(spread, moles_air * _R * edge / _vapour_volume(substance, edge, density, volume))


def pressure_with_air(
    substance: Substance, temperature: float, density: float, moles_air: float, volume: float
) -> float:
    """Absolute pressure [Pa] of charge and trapped air together; arguments as air_pressure()."""
    return substance.pressure(temperature, density) + air_pressure(substance, temperature, density, moles_air, volume)


def meniscus_end(substance: Substance, density: float) -> float | None:
    """Temperature [K] above which a charge of that density [kg/m3] shows no meniscus.

    Liquid-full, dry or critical, whichever this charge has; None for one that never shows one.
    """
    marks = substance.landmarks(density)
    if marks.triple is None:
        return None
    return next((t for t in (marks.critical, marks.liquid_full, marks.dry) if t is not None), None)


def mass_from_height(
    substance: Substance,
    shape: Shape,
    height: float,
    temperature: float,
    *,
    height_error: float = 0.0,
    temperature_error: float = 0.0,
    volume_error: float = 0.0,
) -> ChargeBounds:
    """The charge that a meniscus at a height [m] means at a temperature [K].

    The errors are bounds [m], [K], [m3]. Every corner of the box is computed, and the temperatures between
    its ends. Raises OutsideValidity where the box reaches beyond liquid beside vapour; InputUnusable for a
    height outside the vessel or a negative bound.
    """
    if not (height_error >= 0.0 and temperature_error >= 0.0 and 0.0 <= volume_error < shape.volume):
        raise InputUnusable("an error is a bound of zero or more, and that of the volume less than the volume")
    shape.volume_below(height)
    heights = [min(shape.full_height, max(0.0, height + sign * height_error)) for sign in (-1.0, 1.0)]
    fractions = [shape.volume_below(h) for h in heights]
    volumes = [shape.volume - volume_error, shape.volume + volume_error]
    span = range(_TEMPERATURE_POINTS)
    steps = [temperature + temperature_error * (2.0 * k / (_TEMPERATURE_POINTS - 1) - 1.0) for k in span]
    densities = [_mean_density(substance, t, f) for t, f in product(steps, fractions)]
    masses = [volume * density for volume, density in product(volumes, densities)]
    nominal = shape.volume * _mean_density(substance, temperature, shape.volume_below(height))
    return ChargeBounds(min(masses), nominal, max(masses))


def _mean_density(substance: Substance, temperature: float, fraction: float) -> float:
    both = substance.saturation(temperature)
    return fraction * both.liquid_density + (1.0 - fraction) * both.vapour_density


def _vapour_volume(substance: Substance, temperature: float, density: float, volume: float) -> float:
    """Room that the vapour leaves to air [m3]; while solid melts, what the liquid leaves, which is less."""
    state = substance.state(temperature, density)
    if state.region is Region.THREE_PHASE:
        state = substance.plateau_states(density)[1]
    vapour = state.vapour
    if vapour is None or not vapour > 0.0:
        raise OutsideValidity(f"{density:.6g} kg/m3 at {temperature:.6g} K leaves trapped air no room")
    return vapour * volume
