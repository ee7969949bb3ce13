"""An equation by other authors, from other data, in another form: the independent referee for sulfur hexafluoride.

de Reuck, Craven and Cole, IUPAC 1991; written here from its coefficients, nothing of the program in it.
"""

from __future__ import annotations

import csv
from math import exp, log
from pathlib import Path

import pytest

from runbook.fluids.substance import Region, substance

SF6 = substance("sulfur hexafluoride")
R, T_REDUCING, RHO_REDUCING, MOLAR_MASS = 8.31448, 318.7232, 5082.32, 0.1460554


def terms() -> list[tuple[float, int, float, int]]:
    """Coefficient and exponents of density, temperature and damping."""
    with (Path(__file__).parent / "data" / "dereuck_1991_sf6.csv").open(encoding="utf-8", newline="") as file:
        lines = [line for line in file if not line.startswith(("#", '"#'))]
    found = csv.DictReader(lines)
    return [(float(r["n"]), int(r["i_density"]), float(r["j_temperature"]), int(r["c_exponent"])) for r in found]


TERMS = terms()


def residual(t: float, rho: float) -> tuple[float, float]:
    """Residual Helmholtz energy over RT [1] and density times its slope [1]; [K], [kg/m3]."""
    delta, tau = rho / MOLAR_MASS / RHO_REDUCING, T_REDUCING / t
    value = slope = 0.0
    for n, i, j, c in TERMS:
        damped = delta**c if c else 0.0
        term = n * delta**i * tau**j * exp(-damped)
        value += term
        slope += term * (i - c * damped)
    return value, slope


def pressure(t: float, rho: float) -> float:
    """[Pa] of one phase at [K], [kg/m3]."""
    return rho / MOLAR_MASS * R * t * (1.0 + residual(t, rho)[1])


def potential(t: float, rho: float) -> float:
    """Chemical potential over RT [1], but for a function of temperature."""
    value, slope = residual(t, rho)
    return log(rho) + value + slope


def saturation(t: float, liquid: float, vapour: float) -> tuple[float, float, float]:
    """[Pa], [kg/m3], [kg/m3] at [K]: equal pressure and potential, Newton's method from guessed densities."""
    for _ in range(200):
        gap_p = pressure(t, liquid) - pressure(t, vapour)
        gap_g = potential(t, liquid) - potential(t, vapour)
        h_l, h_v = 1e-6 * liquid, 1e-6 * vapour
        p_l = (pressure(t, liquid + h_l) - pressure(t, liquid - h_l)) / (2 * h_l)
        p_v = (pressure(t, vapour + h_v) - pressure(t, vapour - h_v)) / (2 * h_v)
        g_l = (potential(t, liquid + h_l) - potential(t, liquid - h_l)) / (2 * h_l)
        g_v = (potential(t, vapour + h_v) - potential(t, vapour - h_v)) / (2 * h_v)
        det = p_v * g_l - p_l * g_v
        d_l, d_v = (gap_p * g_v - p_v * gap_g) / det, (g_l * gap_p - p_l * gap_g) / det
        liquid += max(-0.05 * liquid, min(0.05 * liquid, d_l))
        vapour += max(-0.05 * vapour, min(0.05 * vapour, d_v))
        if abs(d_l) < 1e-9 * liquid and abs(d_v) < 1e-9 * vapour:
            return pressure(t, liquid), liquid, vapour
    raise AssertionError(f"no saturation at {t} K")


@pytest.mark.independent
@pytest.mark.parametrize("t", [281.0, 285.0, 290.0, 295.0, 300.0, 305.0, 310.0, 313.0])
def test_saturation(t: float) -> None:
    """Saturation pressure within 0.25 % above 280 K, density of the liquid within 0.35 % below 314 K."""
    both = SF6.saturation(t)
    p, liquid, _ = saturation(t, both.liquid_density, both.vapour_density)
    assert both.pressure == pytest.approx(p, rel=2.5e-3)
    assert both.liquid_density == pytest.approx(liquid, rel=3.5e-3)


@pytest.mark.independent
@pytest.mark.parametrize("t", [285.0, 300.0, 315.0, 318.9, 320.0, 325.15, 335.0, 350.0])
@pytest.mark.parametrize("share", [0.02, 0.1, 0.3, 0.6, 1.0, 1.2, 1.39])
def test_pressure_of_one_phase(t: float, share: float) -> None:
    """Pressure at a density below 1.4 times critical within 0.25 %, above 280 K."""
    rho = share * SF6.critical_density
    if SF6.region(t, rho) is not Region.LIQUID_VAPOUR:
        assert SF6.pressure(t, rho) == pytest.approx(pressure(t, rho), rel=2.5e-3)
