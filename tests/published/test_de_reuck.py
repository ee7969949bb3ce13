"""An equation by other authors, from other data, in another form: the independent referee for sulfur hexafluoride.

de Reuck, Craven and Cole, IUPAC 1991.
"""

from __future__ import annotations

import pytest

from runbook.fluids.substance import Region, substance
from tests.published.referee import Referee, terms

SF6 = substance("sulfur hexafluoride")
DE_REUCK = Referee(terms("dereuck_1991_sf6.csv"), 8.31448, 318.7232, 5082.32, 0.1460554)


@pytest.mark.independent
@pytest.mark.parametrize("t", [281.0, 285.0, 290.0, 295.0, 300.0, 305.0, 310.0, 313.0])
def test_saturation(t: float) -> None:
    """Saturation pressure within 0.25 % above 280 K, density of the liquid within 0.35 % below 314 K."""
    both = SF6.saturation(t)
    p, liquid, _ = DE_REUCK.saturation(t, both.liquid_density, both.vapour_density)
    assert both.pressure == pytest.approx(p, rel=2.5e-3)
    assert both.liquid_density == pytest.approx(liquid, rel=3.5e-3)


@pytest.mark.independent
@pytest.mark.parametrize("t", [285.0, 300.0, 315.0, 318.9, 320.0, 325.15, 335.0, 350.0])
@pytest.mark.parametrize("share", [0.02, 0.1, 0.3, 0.6, 1.0, 1.2, 1.39])
def test_pressure_of_one_phase(t: float, share: float) -> None:
    """Pressure at a density below 1.4 times critical within 0.25 %, above 280 K."""
    rho = share * SF6.critical_density
    if SF6.region(t, rho) is not Region.LIQUID_VAPOUR:
        assert SF6.pressure(t, rho) == pytest.approx(DE_REUCK.pressure(t, rho), rel=2.5e-3)
