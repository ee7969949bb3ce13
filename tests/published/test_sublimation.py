"""Dry ice against published curves and measurements."""

from __future__ import annotations

import pytest

from runbook.fluids.roots import bracketed_root
from runbook.fluids.solid import DryIce
from runbook.fluids.substance import substance

CO2 = substance("carbon dioxide")
ICE = DryIce(CO2.triple_pressure)
SOLID_CHARGE = 480.0


@pytest.mark.wiring
def test_sublimation_temperature_at_one_atmosphere() -> None:
    """Dry ice sublimes at 194.686 K under 101325 Pa; Span and Wagner 1996, equation 3.12: within 5 mK."""
    found = bracketed_root(lambda t: CO2.pressure(t, SOLID_CHARGE) - 101325.0, 190.0, 200.0, 1e-6)
    assert found == pytest.approx(194.686, abs=0.005)


@pytest.mark.independent
def test_sublimation_temperature_as_measured() -> None:
    """Meyers and Van Dusen 1933, J. Res. NBS 10, 381: -78.515 degC on the old scale, to 1-2 parts in 1e4."""
    found = bracketed_root(lambda t: CO2.pressure(t, SOLID_CHARGE) - 101325.0, 190.0, 200.0, 1e-6)
    assert found == pytest.approx(273.15 - 78.515, abs=0.06)


@pytest.mark.wiring
@pytest.mark.parametrize(
    ("kelvin", "pascal"),
    [(180.0, 27557.0), (190.0, 68342.0), (194.6855, 101325.0), (200.0, 155030.0), (210.0, 327090.0)],
)
def test_sublimation_curve(kelvin: float, pascal: float) -> None:
    """Pressure over the solid by Span and Wagner 1996, equation 3.12, evaluated beforehand: within 0.05 %."""
    assert CO2.pressure(kelvin, SOLID_CHARGE) == pytest.approx(pascal, rel=5e-4)


@pytest.mark.independent
@pytest.mark.parametrize(
    ("kelvin", "pascal", "allowed"),
    [
        (155.0, 1662.19, 50.0),
        (165.0, 5657.80, 50.0),
        (175.0, 16694.77, 165.0),
        (180.0, 27389.17, 170.0),
        (190.0, 68075.76, 300.0),
        (195.0, 103565.14, 450.0),
    ],
)
def test_sublimation_curve_of_older_measurements(kelvin: float, pascal: float, allowed: float) -> None:
    """Giauque and Egan 1937, J. Chem. Phys. 5, 45, in Antoine's form (154-196 K): within 0.8 %, the spread
    between published curves; at the cold end within 50 Pa."""
    assert CO2.pressure(kelvin, SOLID_CHARGE) == pytest.approx(pascal, abs=allowed, rel=0)


@pytest.mark.independent
@pytest.mark.parametrize(("kelvin", "joule", "density"), [(194.67, 572.9e3, 1572.8), (216.592, 552.04e3, 1545.0)])
def test_heat_of_sublimation_and_density(kelvin: float, joule: float, density: float) -> None:
    """Heat of sublimation 572.9 and 552.04 kJ/kg (Jaeger and Span 2012 with Span and Wagner 1996), density
    27.981 cm3/mol at 194.67 K (Trusler 2011, J. Phys. Chem. Ref. Data 40, 043105): within 1 % and 0.7 %."""
    assert ICE.heat_of_sublimation(kelvin) == pytest.approx(joule, rel=0.01)
    assert ICE.density(kelvin) == pytest.approx(density, rel=0.007)


@pytest.mark.independent
def test_heat_of_fusion() -> None:
    """Heat of fusion at the triple point 8870 J/mol; Trusler 2011: within 1 %."""
    assert ICE.heat_of_fusion(216.592) * CO2.molar_mass == pytest.approx(8870.0, rel=0.01)


@pytest.mark.wiring
@pytest.mark.parametrize(("kelvin", "pascal"), [(217.0, 2.430e6), (220.0, 16.72e6), (230.0, 67.30e6)])
def test_melting_curve(kelvin: float, pascal: float) -> None:
    """Pressure of solid beside liquid by Span and Wagner 1996, equation 3.10: within 0.1 %."""
    assert CO2.pressure(kelvin, 1400.0) == pytest.approx(pascal, rel=1e-3)
