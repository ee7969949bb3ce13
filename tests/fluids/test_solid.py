"""Dry ice: its curves meet at the triple point and their slopes are their own."""

from __future__ import annotations

import pytest

from runbook.errors import OutsideValidity
from runbook.fluids.solid import DryIce
from runbook.fluids.substance import substance

CO2 = substance("CO2")
ICE = DryIce(CO2.triple_pressure)
TRIPLE = 216.592


def test_curves_meet_at_the_triple_point() -> None:
    """Sublimation and melting pressure at the triple point are that of the equation of state, exactly."""
    assert ICE.sublimation_pressure(TRIPLE) == pytest.approx(CO2.triple_pressure, rel=1e-12)
    assert ICE.melting_pressure(TRIPLE) == pytest.approx(CO2.triple_pressure, rel=1e-12)


@pytest.mark.parametrize("temperature", [151.0, 170.0, 195.0, 216.0])
def test_sublimation_slope(temperature: float) -> None:
    """The slope of sublimation agrees with differences of its pressure: within 1e-6."""
    by_difference = (ICE.sublimation_pressure(temperature + 1e-3) - ICE.sublimation_pressure(temperature - 1e-3)) / 2e-3
    assert ICE.sublimation_slope(temperature) == pytest.approx(by_difference, rel=1e-6)


@pytest.mark.parametrize("temperature", [218.0, 240.0, 280.0])
def test_melting_slope(temperature: float) -> None:
    """The slope of melting agrees with differences of its pressure: within 1e-6."""
    by_difference = (ICE.melting_pressure(temperature + 1e-3) - ICE.melting_pressure(temperature - 1e-3)) / 2e-3
    assert ICE.melting_slope(temperature) == pytest.approx(by_difference, rel=1e-6)


@pytest.mark.independent
@pytest.mark.parametrize("temperature", [160.0, 180.0, 200.0, 215.0])
def test_clapeyron_ties_heat_and_slope(temperature: float) -> None:
    """Heat of sublimation, taken from calorimetry, over T and the step in volume is the slope of the curve, taken
    from pressures (Clapeyron): within 2 %."""
    slope = ICE.sublimation_slope(temperature)
    vapour = CO2.state(temperature, 480.0).vapour_density
    assert vapour is not None
    step = 1.0 / vapour - 1.0 / ICE.density(temperature)
    assert temperature * step * slope == pytest.approx(ICE.heat_of_sublimation(temperature), rel=0.02)


def test_the_solid_is_denser_colder_and_deeper() -> None:
    """Density falls on warming beside vapour, rises along the melting curve, and does not jump between them."""
    assert ICE.density(180.0) > ICE.density(195.0) > ICE.density(TRIPLE)
    assert ICE.density(TRIPLE + 1e-9) == pytest.approx(ICE.density(TRIPLE), abs=1e-6)
    assert ICE.density(250.0) == pytest.approx(1575.5, rel=1e-3)


@pytest.mark.parametrize("temperature", [149.9, 217.0, -5.0, float("nan")])
def test_sublimation_outside_its_curve_is_refused(temperature: float) -> None:
    """No sublimation pressure is given below 150 K or above the triple point."""
    for ask in (ICE.sublimation_pressure, ICE.sublimation_slope):
        with pytest.raises(OutsideValidity):
            ask(temperature)
