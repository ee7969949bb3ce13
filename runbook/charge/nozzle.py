"""How fast a fluid leaves through a hole: homogeneous equilibrium, choked where the pressure behind is low.

The flux is the largest that the fluid reaches anywhere between the pressure before the hole and that behind it, at
constant entropy. For liquid through a short hole it is a lower bound: bubbles come late there.
"""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass
from math import sqrt

from runbook.errors import OutsideValidity
from runbook.fluids.flash import Flash, Flowing

_GOLDEN = 0.6180339887498949
_CLOSE = 1e-4
"""Relative width of the bracket around the throat's pressure [1]: the flux is flat there."""
_SCAN = 12
"""Pressures tried first: the flux may have a kink where boiling or freezing begins."""
_AROUND = 0.03
"""Relative distance of the two pressures tried beside one that was the throat's a moment ago [1]."""
_FOLLOWED = 4
"""How often a throat that has moved on is followed by that much before it is looked for anew [1]."""
_SMOOTH = 1e-5
"""How far the flux may stand off the parabola through three of its points, relative [1]; else it is looked for anew."""


@dataclass(frozen=True, slots=True)
class Throat:
    """What passes the narrowest place."""

    flux: float
    """[kg/m2/s]"""
    pressure: float
    """[Pa]; that behind the hole where the flow is not choked."""
    at: Flowing
    """The fluid there."""


def throat(
    flash: Flash, enthalpy: float, entropy: float, pressure: float, behind: float, near: float | None = None
) -> Throat:
    """From rest at an enthalpy [J/kg], entropy [J/kg/K] and pressure [Pa] to a pressure behind the hole [Pa].

    near: where the throat of nearly the same flow was [Pa]; spares the search where the flux is smooth there. Raises
    OutsideValidity.
    """
    if not behind < pressure:
        at = flash.by_enthalpy(pressure, enthalpy)
        return Throat(0.0, pressure, at)

    def passing(p: float) -> Throat:
        try:
            at = flash.by_entropy(p, entropy)
        except OutsideValidity:
            # Near the upstream pressure rounding may ask for a state just off the curve.
            return Throat(0.0, p, flash.by_enthalpy(pressure, enthalpy))
        return Throat(at.density * sqrt(max(0.0, 2.0 * (enthalpy - at.enthalpy))), p, at)

    found = None if near is None else _around(passing, near, pressure, behind)
    return found if found is not None else _searched(passing, pressure, behind)


def _around(passing: Callable[[float], Throat], near: float, pressure: float, behind: float) -> Throat | None:
    """The throat beside a pressure [Pa]; None where it has moved away, or the flux is not smooth there."""
    if near <= (1.0 + _AROUND) * behind:
        # Not choked a moment ago: it still is not where the flux falls from the outlet's own pressure on.
        here, inside = passing(behind), passing(behind + _AROUND * (pressure - behind))
        return here if here.flux > inside.flux else None
    b = passing(near)
    for _ in range(_FOLLOWED):
        low, high = (1.0 - _AROUND) * near, (1.0 + _AROUND) * near
        if not behind < low or not high < pressure:
            return None
        a, c = passing(low), passing(high)
        if a.flux < b.flux and c.flux < b.flux:
            return _vertex(passing, near, a.flux, b, c.flux)
        near, b = (low, a) if a.flux > c.flux else (high, c)
    return None


def _vertex(passing: Callable[[float], Throat], near: float, low: float, b: Throat, high: float) -> Throat | None:
    """The top of the parabola through three fluxes around a pressure [Pa]; None where the flux is no parabola."""
    bend, slope = low - 2.0 * b.flux + high, 0.5 * (high - low)
    best = passing(near - slope / bend * _AROUND * near)
    foretold = b.flux - 0.5 * slope * slope / bend
    return best if abs(best.flux - foretold) <= _SMOOTH * foretold else None


def _searched(passing: Callable[[float], Throat], pressure: float, behind: float) -> Throat:
    """The throat anywhere between the two pressures [Pa]."""
    places = [behind + (pressure - behind) * k / _SCAN for k in range(_SCAN)]
    tried = [passing(p) for p in places]
    best = max(range(_SCAN), key=lambda k: tried[k].flux)
    low, high = places[max(0, best - 1)], places[best + 1] if best + 1 < _SCAN else pressure
    a, b = high - _GOLDEN * (high - low), low + _GOLDEN * (high - low)
    at_a, at_b = passing(a), passing(b)
    while high - low > _CLOSE * pressure:
        if at_a.flux >= at_b.flux:
            high, b, at_b = b, a, at_a
            a = high - _GOLDEN * (high - low)
            at_a = passing(a)
        else:
            low, a, at_a = a, b, at_b
            b = low + _GOLDEN * (high - low)
            at_b = passing(b)
    return max((tried[best], at_a, at_b), key=lambda one: one.flux)
