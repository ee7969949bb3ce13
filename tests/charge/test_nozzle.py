"""Flow through a hole and where an expansion ends: textbook examples, and figures worked out beforehand."""

from __future__ import annotations

from math import pi, sqrt

import pytest

from runbook.charge.nozzle import throat
from runbook.fluids.flash import Flash
from runbook.fluids.substance import Substance, substance

CO2 = substance("carbon dioxide")
FLASH = Flash(CO2)
ATMOSPHERE = 101325.0


def saturated(temperature: float, vapour: bool) -> tuple[float, float, float]:
    """Enthalpy [J/kg], entropy [J/kg/K] and pressure [Pa] of one saturated phase."""
    both = CO2.saturation(temperature)
    if vapour:
        return both.vapour_energy + both.pressure / both.vapour_density, both.vapour_entropy, both.pressure
    return both.liquid_energy + both.pressure / both.liquid_density, both.liquid_entropy, both.pressure


def gas(fluid: Substance, temperature: float, pressure: float) -> tuple[float, float, float]:
    """The same of a gas at rest."""
    phase = fluid.equation.fluid_phase(temperature, pressure)
    return phase.gibbs + temperature * phase.entropy, phase.entropy, pressure


@pytest.mark.wiring
@pytest.mark.parametrize(
    ("temperature", "vapour", "flux", "ratio"),
    [(293.15, True, 19806.0, 0.609), (293.15, False, 31699.0, 0.707), (250.0, True, 5752.0, 0.581),
     (250.0, False, 15407.0, 0.796), (217.0, True, 1694.0, 0.588)],
)  # fmt: skip
def test_choked_flux_of_carbon_dioxide(temperature: float, vapour: bool, flux: float, ratio: float) -> None:
    """Homogeneous equilibrium to 1 atm, worked out beforehand with another program: 2 %; throat pressure 1 %."""
    found = throat(FLASH, *saturated(temperature, vapour), ATMOSPHERE)
    assert found.flux == pytest.approx(flux, rel=0.02)
    assert found.pressure == pytest.approx(ratio * saturated(temperature, vapour)[2], rel=0.01)


@pytest.mark.independent
def test_a_textbook_nozzle_of_carbon_dioxide() -> None:
    """Cengel and Cimbala, Fluid Mechanics, examples 12-3 and 12-4: 1400 kPa, 473 K, 3 kg/s; throat 767 kPa and
    9.63 cm2 of an ideal gas with constant heat capacity: the real one within 2 %."""
    found = throat(FLASH, *gas(CO2, 473.0, 1.4e6), ATMOSPHERE)
    assert found.pressure == pytest.approx(767e3, rel=0.02)
    assert 3.0 / found.flux == pytest.approx(9.63e-4, rel=0.02)


@pytest.mark.independent
def test_a_textbook_hole_in_a_nitrogen_line() -> None:
    """Crowl and Louvar, Chemical Process Safety (from memory): 0.1 in hole, 200 psig, 80 degF: 0.038 lb/s, 1.5 %."""
    nitrogen = substance("nitrogen")
    pressure, temperature = (200.0 + 14.696) * 6894.757, (80.0 - 32.0) / 1.8 + 273.15
    found = throat(Flash(nitrogen), *gas(nitrogen, temperature, pressure), ATMOSPHERE)
    assert found.flux * pi * 0.00254**2 / 4.0 == pytest.approx(0.038 * 0.45359, rel=0.015)


@pytest.mark.independent
@pytest.mark.parametrize(("name", "ratio"), [("nitrogen", 0.528), ("argon", 0.487), ("carbon dioxide", 0.548)])
def test_critical_pressure_ratio_of_thin_gas(name: str, ratio: float) -> None:
    """(2/(k+1))^(k/(k-1)) with k 1.4, 1.667 and 1.29 at 300 K and low pressure (API 520): within 1 %."""
    fluid = substance(name)
    found = throat(Flash(fluid), *gas(fluid, 300.0, 2.0e5), 1e3)
    assert found.pressure == pytest.approx(ratio * 2.0e5, rel=0.01)


def test_below_the_critical_ratio_the_pressure_behind_counts() -> None:
    """Not choked: the flux is that of the whole drop, and falls to nothing with it."""
    state = gas(CO2, 300.0, 2.0e5)
    some, less = throat(FLASH, *state, 1.8e5), throat(FLASH, *state, 1.99e5)
    assert some.pressure == pytest.approx(1.8e5, rel=1e-3)
    density = some.at.density
    assert some.flux == pytest.approx(density * sqrt(2.0 * (state[0] - some.at.enthalpy)), rel=1e-6)
    assert 0.0 < less.flux < 0.3 * some.flux
    assert throat(FLASH, *state, 2.0e5).flux == 0.0


@pytest.mark.independent
def test_the_trade_figure_for_snow() -> None:
    """Liquid at 0 degF and 300 psi makes 46 % snow: common practice of dry-ice makers; within 1 %."""
    enthalpy, _, _ = saturated(255.37, False)
    assert FLASH.by_enthalpy(ATMOSPHERE, enthalpy).solid == pytest.approx(0.46, abs=0.01)


@pytest.mark.wiring
@pytest.mark.parametrize(
    ("temperature", "vapour", "throttled", "worked"),
    [(293.15, False, 0.291, 0.410), (273.15, False, 0.388, 0.474), (216.592, False, 0.598, 0.637),
     (293.15, True, 0.026, 0.234), (273.15, True, 0.0, 0.187)],
)  # fmt: skip
def test_where_an_expansion_ends(temperature: float, vapour: bool, throttled: float, worked: float) -> None:
    """Solid by mass at 1 atm at constant enthalpy and at constant entropy, worked out beforehand: 0.005."""
    enthalpy, entropy, _ = saturated(temperature, vapour)
    end = FLASH.by_enthalpy(ATMOSPHERE, enthalpy)
    assert end.solid == pytest.approx(throttled, abs=0.005)
    assert FLASH.by_entropy(ATMOSPHERE, entropy).solid == pytest.approx(worked, abs=0.005)
    assert end.enthalpy == pytest.approx(enthalpy, abs=1.0)


def test_a_throat_looked_for_beside_the_last_one_is_the_same() -> None:
    """Beside one that was found a moment ago, or beside a wrong guess: the flux of the whole search within 1e-5."""
    for temperature in (292.0, 260.0, 225.0):
        before = saturated(temperature, vapour=True)
        searched = throat(FLASH, *before, ATMOSPHERE)
        for near in (0.995 * searched.pressure, 1.3 * searched.pressure):
            assert throat(FLASH, *before, ATMOSPHERE, near).flux == pytest.approx(searched.flux, rel=1e-5)
