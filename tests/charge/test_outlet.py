"""Snow at the outlet."""

from __future__ import annotations

import pytest

from runbook.charge.outlet import snow
from runbook.fluids.substance import substance

CO2 = substance("carbon dioxide")
ATM = 101325.0


@pytest.mark.wiring
@pytest.mark.parametrize(("kelvin", "share"), [(293.15, 0.291), (273.15, 0.388), (255.37, 0.460), (216.592, 0.598)])
def test_snow_from_liquid(kelvin: float, share: float) -> None:
    """Saturated liquid let down to 1 atm at constant enthalpy: share of snow in 0.002."""
    found = snow(CO2, kelvin, ATM, liquid=True)
    assert found is not None
    assert found.share == pytest.approx(share, abs=0.002)


@pytest.mark.independent
def test_the_trades_figure_for_a_low_pressure_store() -> None:
    """Liquid at 0 degF and 300 psi gives 46 % of its mass as snow (common practice, from memory): in 1 %."""
    found = snow(CO2, 255.37, ATM, liquid=True)
    assert found is not None
    assert found.share == pytest.approx(0.46, abs=0.01)


@pytest.mark.independent
def test_snow_has_the_temperature_of_dry_ice_in_the_open() -> None:
    """194.686 K at 1 atm (Span and Wagner 1996): in 0.03 K."""
    found = snow(CO2, 293.15, ATM, liquid=False)
    assert found is not None
    assert found.temperature == pytest.approx(194.686, abs=0.03)


@pytest.mark.wiring
@pytest.mark.parametrize(("kelvin", "share"), [(293.15, 0.026), (273.15, 0.0), (216.592, 0.0)])
def test_snow_from_gas(kelvin: float, share: float) -> None:
    """Saturated gas at room temperature brings 3 % of snow; colder gas none, for its enthalpy is higher."""
    found = snow(CO2, kelvin, ATM, liquid=False)
    assert found is not None
    assert found.share == pytest.approx(share, abs=0.002)


@pytest.mark.parametrize("name", ["nitrogen", "water", "ethane", "argon", "xenon"])
def test_no_snow_where_the_triple_point_lies_below_the_room(name: str) -> None:
    """Nothing freezes for want of pressure when the liquid is stable in the open, or when no solid is modelled."""
    fluid = substance(name)
    middle = 0.5 * (fluid.triple_temperature + fluid.critical_temperature)
    assert snow(fluid, middle, ATM, liquid=True) is None


def test_outside_the_dome_nothing_is_said() -> None:
    """Neither above critical nor below the triple point is there saturated liquid."""
    assert snow(CO2, 310.0, ATM, liquid=True) is None
    assert snow(CO2, 200.0, ATM, liquid=False) is None
