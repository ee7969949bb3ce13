"""Solid carbon dioxide by the Gibbs equation of Jaeger and Span 2012, J. Chem. Eng. Data 57, 590.

Valid 80 to 300 K, to 500 MPa. The constants of integration g0 and g1 are the published ones; whoever uses this beside
an equation of state ties it to that one's triple point.
"""

from __future__ import annotations

from dataclasses import dataclass
from math import atan, exp, log
from typing import Final

from runbook.fluids.solids.gibbs import Phase

MOLAR_MASS: Final = 0.0440098
"""[kg/mol], that of Span and Wagner 1996."""
_R: Final = 8.314472
"""[J/mol/K], the equation's own."""
_T0, _P0 = 150.0, 101325.0
"""[K], [Pa]"""
_G: Final = (
    -2.6385478, 4.5088732, -2.0109135, -2.7976237, 0.26427834, 3.8259935, 0.31711996, 0.0022087195, -1.1289668,
    0.0092923982, 3391.4617,
)  # fmt: skip
_A: Final = (
    0.039993365, 0.0023945101, 0.32839467, 0.057918471, 0.0023945101, -0.0026531689, 0.16419734, 0.17594802,
    0.0026531689,
)  # fmt: skip
_K: Final = (0.22690751, -0.07501975, 0.26442913)


@dataclass(frozen=True, slots=True)
class Molar:
    """Gibbs energy and its derivatives, molar."""

    gibbs: float
    """[J/mol]"""
    volume: float
    """[m3/mol]"""
    entropy: float
    """[J/mol/K]"""
    heat_capacity: float
    """At constant pressure [J/mol/K]."""
    expansion: float
    """Isobaric [1/K]."""
    compressibility: float
    """Isothermal [1/Pa]."""


class DryIce:
    """Carbon dioxide's solid, phase I."""

    lowest_temperature = 80.0
    highest_pressure = 500.0e6

    def phase(self, temperature: float, pressure: float) -> Phase:
        """At a temperature [K] and a pressure [Pa], in the published zeros."""
        g, g_t, g_p = _first(temperature / _T0, pressure / _P0)
        scale = _R / MOLAR_MASS
        return Phase(g * scale * _T0, g_p * scale * _T0 / _P0, -g_t * scale)

    def molar(self, temperature: float, pressure: float) -> Molar:
        """All that the published table of verification gives, at a temperature [K] and a pressure [Pa]."""
        t, pi = temperature / _T0, pressure / _P0
        g, g_t, g_p = _first(t, pi)
        g_tt, g_tp, g_pp = _second(t, pi)
        return Molar(
            gibbs=g * _R * _T0,
            volume=g_p * _R * _T0 / _P0,
            entropy=-g_t * _R,
            heat_capacity=-t * g_tt * _R,
            expansion=g_tp / (_T0 * g_p),
            compressibility=-g_pp / (_P0 * g_p),
        )


def _first(t: float, pi: float) -> tuple[float, float, float]:
    """g, dg/dt, dg/dpi, reduced."""
    d, q = t - 1.0, pi - 1.0
    f, f_t, _ = _thermal(t)
    k, k_t = (_K[0] * t + _K[1]) * t + _K[2], 2.0 * _K[0] * t + _K[1]
    spread = exp(f) + k * _G[8]
    power = (pi + _G[10]) ** (6.0 / 7.0) - (1.0 + _G[10]) ** (6.0 / 7.0)
    g = _G[0] + (_G[1] + _G[2] * d) * d + _G[7] * q * spread + _G[9] * k * power
    g_t = _G[1] + 2.0 * _G[2] * d + _G[7] * q * (f_t * exp(f) + k_t * _G[8]) + _G[9] * k_t * power
    for weight, at in ((_G[3], _G[4]), (_G[5], _G[6])):
        turned = atan(t / at) - atan(1.0 / at)
        g += weight * (log((t * t + at * at) / (1.0 + at * at)) - 2.0 * t / at * turned)
        g_t -= weight * 2.0 / at * turned
    g_p = _G[7] * spread + _G[9] * k * (6.0 / 7.0) * (pi + _G[10]) ** (-1.0 / 7.0)
    return g, g_t, g_p


def _second(t: float, pi: float) -> tuple[float, float, float]:
    """d2g/dt2, d2g/dt dpi, d2g/dpi2, reduced."""
    q = pi - 1.0
    f, f_t, f_tt = _thermal(t)
    k, k_t, k_tt = (_K[0] * t + _K[1]) * t + _K[2], 2.0 * _K[0] * t + _K[1], 2.0 * _K[0]
    power = (pi + _G[10]) ** (6.0 / 7.0) - (1.0 + _G[10]) ** (6.0 / 7.0)
    slope = (6.0 / 7.0) * (pi + _G[10]) ** (-1.0 / 7.0)
    g_tt = 2.0 * _G[2] + _G[7] * q * ((f_tt + f_t * f_t) * exp(f) + k_tt * _G[8]) + _G[9] * k_tt * power
    g_tt -= sum(weight * 2.0 / (t * t + at * at) for weight, at in ((_G[3], _G[4]), (_G[5], _G[6])))
    g_tp = _G[7] * (f_t * exp(f) + k_t * _G[8]) + _G[9] * k_t * slope
    g_pp = -_G[9] * k * (6.0 / 49.0) * (pi + _G[10]) ** (-8.0 / 7.0)
    return g_tt, g_tp, g_pp


def _thermal(t: float) -> tuple[float, float, float]:
    """f_alpha of the paper and its first two derivatives."""
    f = _A[0] * (t * t - 1.0)
    f_t, f_tt = 2.0 * _A[0] * t, 2.0 * _A[0]
    for weight, sign in ((_A[1], -1.0), (_A[4], 1.0)):
        at, start, slope = t * t + sign * _A[2] * t + _A[3], 1.0 + sign * _A[2] + _A[3], 2.0 * t + sign * _A[2]
        f += weight * log(at / start)
        f_t += weight * slope / at
        f_tt += weight * (2.0 / at - slope * slope / (at * at))
    for weight, sign in ((_A[5], -1.0), (_A[8], 1.0)):
        off, wide = t + sign * _A[6], _A[7] * _A[7] + (t + sign * _A[6]) ** 2
        f += weight * (atan(off / _A[7]) - atan((1.0 + sign * _A[6]) / _A[7]))
        f_t += weight * _A[7] / wide
        f_tt -= weight * _A[7] * 2.0 * off / (wide * wide)
    return f, f_t, f_tt
