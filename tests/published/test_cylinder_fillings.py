"""Filling densities that regulators allow, against the pressure computed for them: independent of the equation.

49 CFR 173.304a table: filling density (per cent of water capacity by mass) with the service pressure; its
paragraph (c): the pressure at 55 degC may not exceed 5/4 of the service pressure.
"""

from __future__ import annotations

import pytest

from runbook.fluids.substance import substance

CO2 = substance("carbon dioxide")
PSI = 6894.757293168
ATMOSPHERE = 101325.0
HOT = 273.15 + 55.0


def ratio(density: float, service_psi: float) -> float:
    """Gauge pressure at 55 degC over what the paragraph allows."""
    return (CO2.pressure(HOT, density) - ATMOSPHERE) / (1.25 * service_psi * PSI)


@pytest.mark.independent
@pytest.mark.parametrize(("density", "service"), [(680.0, 1800.0), (703.0, 2000.0)])
def test_fillings_meet_their_pressure(density: float, service: float) -> None:
    """49 CFR 173.304a: the filling that just fits its service pressure comes within 3 % of 5/4 of it at 55 degC."""
    assert ratio(density, service) == pytest.approx(1.0, abs=0.03)


@pytest.mark.independent
@pytest.mark.parametrize(("density", "service"), [(732.0, 2265.0), (745.0, 2400.0)])
def test_fillings_stay_below_their_pressure(density: float, service: float) -> None:
    """49 CFR 173.304a: these fillings stay below 5/4 of the service pressure at 55 degC, by less than 10 %."""
    assert 0.9 < ratio(density, service) <= 1.0
