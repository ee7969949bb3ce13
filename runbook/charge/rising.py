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
from runbook.fluids.substance import Substance

NEARLY_FULL: Final = 0.9
"""Share of the liquid's density above which a charge is refused [1]."""
_STEPS: Final = 12
"""Of the warming, each with the slope at its beginning, when body and charge are furthest apart."""
_ABOVE_DRY: Final = (1.0, 1.02, 1.1, 1.3, 2.0, 4.0)
"""Charges with liquid, as multiples of the vapour alone: the fewer grams are to be warmed the faster it goes [1]."""
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

    volume: the least [m3]. A level below the triple point counts as the triple point with all solid gone: sooner than
    it can be. At one temperature heat capacity rises with the charge, so with liquid in the least charge is the
    fastest, and that is where the last liquid goes; a thinner gas starts warmer and is slower: both sides are walked.
    Raises OutsideValidity for a charge nearly full of liquid, and for levels beyond critical.
    """
    start = max(fluid.boiling_temperature(max(level, fluid.triple_pressure)), fluid.triple_temperature + 1e-3)
    both = fluid.saturation(start)
    if most_kg > NEARLY_FULL * both.liquid_density * volume:
        raise OutsideValidity(
            f"{most_kg * 1e3:.4g} g would nearly fill {volume * 1e6:.4g} mL with liquid, "
            "and the pressure would climb faster than a hand lets go"
        )
    if warming.body_K <= start:
        return max(level, both.pressure)
    found = [max(level, both.pressure)]
    for mass, begin in _charges(fluid, volume, most_kg, both.vapour_density, start, found[0], warming.body_K):
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


def _above(fluid: Substance, density: float, level: float, temperature: float) -> float:
    return fluid.pressure(temperature, density) - level


def _after(fluid: Substance, mass: float, volume: float, begin: float, warming: Warming) -> float:
    """Pressure [Pa] of a charge [kg] that begins at a temperature [K]."""
    density, temperature = mass / volume, begin
    for _ in range(_STEPS):
        watt = warming.coupling * (warming.body_K - temperature)
        rise = watt * warming.seconds / _STEPS / (mass * fluid.heat_capacity(temperature, density))
        temperature = min(temperature + rise, warming.body_K)
    return fluid.pressure(temperature, density)
