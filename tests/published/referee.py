"""An equation of state of other authors in the usual form, for the tests that referee ours; nothing of the program.

alpha_r = sum n delta^i tau^j exp(-delta^c), no exponential where c is 0.
"""

from __future__ import annotations

import csv
from collections.abc import Callable
from dataclasses import dataclass
from math import exp, log
from pathlib import Path

Term = tuple[float, ...]
"""Coefficient, exponents of density and temperature, exponent of the damping."""


def terms(name: str) -> list[Term]:
    """Of a file of coefficients; lines that begin with # are passed over."""
    with (Path(__file__).parent / "data" / name).open(encoding="utf-8", newline="") as file:
        lines = [line for line in file if not line.startswith(("#", '"#'))]
    return [tuple(float(value) for value in row.values()) for row in csv.DictReader(lines)]


@dataclass(frozen=True)
class Referee:
    """One equation of one fluid."""

    terms: list[Term]
    gas_constant: float
    """[J/mol/K]"""
    reducing_temperature: float
    """[K]"""
    reducing_density: float
    """[mol/m3]"""
    molar_mass: float
    """[kg/mol]"""

    def residual(self, t: float, rho: float) -> tuple[float, float]:
        """Residual Helmholtz energy over RT [1] and density times its slope [1]; [K], [kg/m3]."""
        delta, tau = rho / self.molar_mass / self.reducing_density, self.reducing_temperature / t
        value = slope = 0.0
        for n, i, j, c in self.terms:
            damped = delta**c if c else 0.0
            term = n * delta**i * tau**j * exp(-damped)
            value += term
            slope += term * (i - c * damped)
        return value, slope

    def pressure(self, t: float, rho: float) -> float:
        """[Pa] of one phase at [K], [kg/m3]."""
        return rho / self.molar_mass * self.gas_constant * t * (1.0 + self.residual(t, rho)[1])

    def potential(self, t: float, rho: float) -> float:
        """Chemical potential over RT [1], but for a function of temperature."""
        value, slope = self.residual(t, rho)
        return log(rho) + value + slope

    def density(self, t: float, p: float, guess: float) -> float:
        """[kg/m3] at [K], [Pa] on the branch of the guess; Newton's method."""
        rho = guess
        for _ in range(100):
            move = (p - self.pressure(t, rho)) / _slope(self.pressure, t, rho)
            rho += max(-0.1 * rho, min(0.1 * rho, move))
            if abs(move) < 1e-10 * rho:
                return rho
        raise AssertionError(f"no density at {t} K, {p} Pa")

    def saturation(self, t: float, liquid: float, vapour: float) -> tuple[float, float, float]:
        """[Pa], [kg/m3], [kg/m3] at [K]: equal pressure and potential, Newton's method from guessed densities."""
        for _ in range(200):
            gap_p = self.pressure(t, liquid) - self.pressure(t, vapour)
            gap_g = self.potential(t, liquid) - self.potential(t, vapour)
            p_l, p_v = _slope(self.pressure, t, liquid), _slope(self.pressure, t, vapour)
            g_l, g_v = _slope(self.potential, t, liquid), _slope(self.potential, t, vapour)
            det = p_v * g_l - p_l * g_v
            d_l, d_v = (gap_p * g_v - p_v * gap_g) / det, (g_l * gap_p - p_l * gap_g) / det
            liquid += max(-0.05 * liquid, min(0.05 * liquid, d_l))
            vapour += max(-0.05 * vapour, min(0.05 * vapour, d_v))
            if abs(d_l) < 1e-9 * liquid and abs(d_v) < 1e-9 * vapour:
                return self.pressure(t, liquid), liquid, vapour
        raise AssertionError(f"no saturation at {t} K")


def _slope(function: Callable[[float, float], float], t: float, rho: float) -> float:
    """Numerical slope with density."""
    step = 1e-6 * rho
    return (function(t, rho + step) - function(t, rho - step)) / (2.0 * step)
