"""How far a closed charge may rise in a few seconds, warmed from a body that stays as warm as it is.

For a vent that is held shut by hand until a gauge shows a level: between that and the hand letting go the room goes on
warming. Nobody knows how much is in by then, so every charge up to the most counts. Refuses a vessel nearly full of
liquid, where the pressure climbs faster than any hand.
"""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass
from functools import partial
from typing import Final

from runbook.errors import OutsideValidity
from runbook.fluids.roots import bracketed_root
from runbook.fluids.state import Region
from runbook.fluids.substance import Substance

NEARLY_FULL: Final = 0.9
"""Share of the liquid's density above which a charge is refused [1]."""
_STEPS: Final = 12
"""Of the warming, each with the slope at its beginning, when body and charge are furthest apart."""
_ABOVE_DRY: Final = (1.0, 1.02, 1.1, 1.3, 2.0, 4.0)
"""Charges with liquid, as multiples of the vapour alone: the fewer grams are to be warmed the faster it goes [1]."""
_TRIPLE_K: Final = 5e-3
"""How near to the triple point counts as it [K]."""
_GAS: Final = (0.75, 0.9, 0.97)
"""Charges without liquid, as multiples of the vapour alone [1]."""


@dataclass(frozen=True, slots=True)
class Warming:
    """From where the charge is warmed, and for how long."""

    body_K: float
    """Hottest that the body may be; it counts as staying so [K]."""
    coupling: float
    """Most between body and charge [W/K]; positive."""
    seconds: float
    """[s]; zero or more."""


def highest_rise(fluid: Substance, volume: float, most_kg: float, level: float, warming: Warming) -> float:
    """Highest pressure [Pa] of any charge up to most_kg [kg] so many seconds after it stood at a level [Pa].

    volume: the least [m3]. At the triple point all solid counts as gone: sooner than it can be. At one temperature heat
    capacity rises with the charge, so beside liquid or solid the least charge is the fastest, and that is where the
    last of it goes; a thinner gas starts warmer and is slower: both sides are walked. Raises OutsideValidity for a
    charge nearly full of liquid, and for levels beyond critical.
    """
    start = fluid.boiling_temperature(level)
    if abs(start - fluid.triple_temperature) < _TRIPLE_K:
        start = fluid.triple_temperature + _TRIPLE_K
    melts = max(start, fluid.triple_temperature + _TRIPLE_K)
    if most_kg > NEARLY_FULL * fluid.saturation(melts).liquid_density * volume:
        raise OutsideValidity(
            f"{most_kg * 1e3:.4g} g would nearly fill {volume * 1e6:.4g} mL with liquid, "
            "and the pressure would climb faster than a hand lets go"
        )
    cold = start < fluid.triple_temperature
    vapour = 1.0 / fluid.vapour_beside_solid(start).volume if cold else fluid.saturation(start).vapour_density
    found = [max(level, fluid.pressure(start, 2.0 * vapour))]
    if warming.body_K <= start:
        return found[0]
    for mass, begin in _charges(fluid, volume, most_kg, vapour, start, found[0], warming.body_K):
        found.append(_after(fluid, mass, volume, begin, warming))
    return max(found)


def _charges(
    fluid: Substance, volume: float, most_kg: float, vapour: float, start: float, level: float, body_K: float
) -> Iterator[tuple[float, float]]:
    """Charges [kg] with the temperature [K] at which each stands at the level [Pa]."""
    dry = vapour * volume * (1.0 + 1e-9)
    for mass in (*(share * dry for share in _ABOVE_DRY), most_kg):
        if mass <= most_kg:
            yield mass, start
    for share in _GAS:
        mass = min(share * dry, most_kg)
        density = mass / volume
        if fluid.pressure(body_K, density) > level:
            yield mass, bracketed_root(partial(_above, fluid, density, level), start, body_K, 1e-4)


def _capacity(fluid: Substance, temperature: float, density: float) -> float:
    """Heat capacity of the closed charge [J/kg/K], from below; beside solid by difference of energies."""
    if fluid.region(temperature, density) is not Region.SOLID_VAPOUR:
        return fluid.heat_capacity(temperature, density)
    cold = fluid.state(temperature - _TRIPLE_K, density).internal_energy
    here = fluid.state(temperature, density).internal_energy
    assert cold is not None, "below the triple point temperature and density fix the energy"
    assert here is not None, "as above"
    return (here - cold) / _TRIPLE_K


def _above(fluid: Substance, density: float, level: float, temperature: float) -> float:
    return fluid.pressure(temperature, density) - level


def _after(fluid: Substance, mass: float, volume: float, begin: float, warming: Warming) -> float:
    """Pressure [Pa] of a charge [kg] that begins at a temperature [K]."""
    density, temperature = mass / volume, begin
    for _ in range(_STEPS):
        watt = warming.coupling * (warming.body_K - temperature)
        rise = watt * warming.seconds / _STEPS / (mass * _capacity(fluid, temperature, density))
        temperature = min(temperature + rise, warming.body_K)
        if abs(temperature - fluid.triple_temperature) < _TRIPLE_K:
            temperature = fluid.triple_temperature + _TRIPLE_K
    return fluid.pressure(temperature, density)
