"""An equation by other authors, from other data, in another form: the independent referee for carbon dioxide.

Ely, Magee and Haynes, Thermophysical properties for special high CO2 content mixtures, Gas Processors
Association RR-110 (1987); written here from its coefficients, nothing of the program in it.
"""

from __future__ import annotations

import csv
from math import exp, log
from pathlib import Path

import pytest

from runbook.fluids.substance import Region, substance

CO2 = substance("carbon dioxide")

R = 8.31434
T_REDUCING = 304.13
RHO_REDUCING = 10630.0
MOLAR_MASS = 0.0440098
with (Path(__file__).parent / "data" / "ely_1987_co2.csv").open(encoding="utf-8", newline="") as _file:
    TERMS = [tuple(float(value) for value in row.values()) for row in csv.DictReader(_file)]


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


def slope(function: object, t: float, rho: float) -> float:
    """Numerical slope with density."""
    assert callable(function)
    step = 1e-6 * rho
    return float((function(t, rho + step) - function(t, rho - step)) / (2.0 * step))


def density(t: float, p: float, guess: float) -> float:
    """[kg/m3] at [K], [Pa] on the branch of the guess; Newton's method."""
    rho = guess
    for _ in range(100):
        move = (p - pressure(t, rho)) / slope(pressure, t, rho)
        rho += max(-0.1 * rho, min(0.1 * rho, move))
        if abs(move) < 1e-10 * rho:
            return rho
    raise AssertionError(f"no density at {t} K, {p} Pa")


def saturation(t: float, liquid: float, vapour: float) -> tuple[float, float, float]:
    """[Pa], [kg/m3], [kg/m3] at [K]: equal pressure and potential, Newton's method from guessed densities."""
    for _ in range(200):
        gap_p = pressure(t, liquid) - pressure(t, vapour)
        gap_g = potential(t, liquid) - potential(t, vapour)
        p_l, p_v = slope(pressure, t, liquid), slope(pressure, t, vapour)
        g_l, g_v = slope(potential, t, liquid), slope(potential, t, vapour)
        det = p_v * g_l - p_l * g_v
        d_l, d_v = (gap_p * g_v - p_v * gap_g) / det, (g_l * gap_p - p_l * gap_g) / det
        liquid += max(-0.05 * liquid, min(0.05 * liquid, d_l))
        vapour += max(-0.05 * vapour, min(0.05 * vapour, d_v))
        if abs(d_l) < 1e-9 * liquid and abs(d_v) < 1e-9 * vapour:
            return pressure(t, liquid), liquid, vapour
    raise AssertionError(f"no saturation at {t} K")


@pytest.mark.parametrize(
    ("t", "rho", "megapascal"),
    [(304.0, 254.3587, 7.0), (300.0, 1029.29, 50.0), (800.0, 407.908, 75.0)],
)
def test_the_referee_reproduces_its_printed_states(t: float, rho: float, megapascal: float) -> None:
    """Ely 1987 as written here gives the report's check states within what their digits allow."""
    assert pressure(t, rho) == pytest.approx(megapascal * 1e6, rel=3e-5)


@pytest.mark.independent
@pytest.mark.parametrize(
    "t", [217.0, 220.0, 230.0, 240.0, 250.0, 260.0, 270.0, 280.0, 290.0, 295.0, 300.0, 302.0, 304.0]
)
def test_pressure_in_the_dome(t: float) -> None:
    """Saturation pressure within 0.1 % of Ely 1987 from the triple point to 304 K."""
    both = CO2.saturation(t)
    p, _, _ = saturation(t, both.liquid_density, both.vapour_density)
    assert CO2.pressure(t, 0.5 * (both.liquid_density + both.vapour_density)) == pytest.approx(p, rel=1e-3)


@pytest.mark.independent
@pytest.mark.parametrize("t", [240.0, 250.0, 280.0, 300.0, 310.0, 320.0, 350.0, 400.0])
@pytest.mark.parametrize("rho", [5.0, 10.0, 40.0, 100.0, 150.0, 200.0])
def test_pressure_of_vapour_and_gas(t: float, rho: float) -> None:
    """Pressure of vapour and gas up to 200 kg/m3 within 0.1 % of Ely 1987."""
    if CO2.region(t, rho) is not Region.LIQUID_VAPOUR:
        assert CO2.pressure(t, rho) == pytest.approx(pressure(t, rho), rel=1e-3)


@pytest.mark.independent
@pytest.mark.parametrize("t", [305.0, 307.0, 310.0, 315.0, 320.0, 330.0, 350.0])
@pytest.mark.parametrize("rho", [300.0, 350.0, 400.0, 468.0, 520.0, 560.0, 600.0])
def test_pressure_near_critical(t: float, rho: float) -> None:
    """Pressure at 0.64 to 1.28 times critical density above critical temperature within 0.2 % of Ely 1987."""
    assert CO2.pressure(t, rho) == pytest.approx(pressure(t, rho), rel=2e-3)


@pytest.mark.independent
@pytest.mark.parametrize(
    ("t", "allowed"),
    [(t, 1.1e-3) for t in (220.0, 230.0, 250.0, 270.0, 280.0, 290.0, 295.0, 297.9)]
    + [(t, 4e-3) for t in (299.0, 300.0, 301.0, 302.0)],
)
def test_density_of_saturated_liquid(t: float, allowed: float) -> None:
    """Density of saturated liquid within 0.11 % of Ely 1987 below 298 K, within 0.4 % to 302 K."""
    both = CO2.saturation(t)
    _, liquid, _ = saturation(t, both.liquid_density, both.vapour_density)
    assert both.liquid_density == pytest.approx(liquid, rel=allowed)


@pytest.mark.independent
@pytest.mark.parametrize("t", [250.0, 270.0, 290.0, 297.0])
@pytest.mark.parametrize("rho", [750.0, 800.0, 850.0, 900.0, 950.0, 1000.0, 1050.0, 1100.0])
def test_density_of_a_full_vessel(t: float, rho: float) -> None:
    """Liquid at the pressure computed for it has the density of Ely 1987 within 0.11 % below 298 K.

    By density, not by pressure: in a full vessel 0.1 % in density is up to 1 % in pressure.
    """
    if CO2.region(t, rho) is Region.LIQUID:
        assert rho == pytest.approx(density(t, CO2.pressure(t, rho), rho), rel=1.1e-3)


@pytest.mark.independent
@pytest.mark.parametrize("t", [290.0, 297.0, 301.0, 310.0, 320.0])
@pytest.mark.parametrize("rho", [720.0, 760.0, 850.0, 900.0, 1000.0])
def test_the_stated_uncertainty_covers_the_referee(t: float, rho: float) -> None:
    """The uncertainty given with the pressure of a full vessel is wider than its distance from Ely 1987."""
    if CO2.region(t, rho) is not Region.LIQUID_VAPOUR:
        distance = abs(CO2.pressure(t, rho) - pressure(t, rho))
        assert distance <= CO2.pressure_uncertainty(t, rho)
