"""Filling rules of cylinders, written by regulators from measurements, against pressure at temperature and density.

ADR packing instruction P200, table 2 (from memory): a full cylinder at 65 degC stays at its test pressure.
"""

from __future__ import annotations

import pytest

from runbook.fluids.substance import substance
from tests.published.referee import Referee, terms

ATMOSPHERE = 101325.0


@pytest.mark.independent
@pytest.mark.parametrize(
    ("name", "density", "bar"),
    [
        ("carbon dioxide", 680.0, 190.0),
        ("carbon dioxide", 760.0, 250.0),
        ("sulfur hexafluoride", 1060.0, 70.0),
        ("sulfur hexafluoride", 1340.0, 140.0),
        ("sulfur hexafluoride", 1380.0, 160.0),
        ("ethane", 250.0, 95.0),
        ("ethane", 300.0, 120.0),
        ("ethane", 400.0, 300.0),
        ("xenon", 1280.0, 130.0),
    ],
)
def test_a_full_cylinder_at_65_degrees(name: str, density: float, bar: float) -> None:
    """Gauge pressure at 65 degC within 3 % of the test pressure of the cylinder."""
    gauge = substance(name).pressure(338.15, density) - ATMOSPHERE
    assert gauge == pytest.approx(bar * 1e5, rel=0.03)


@pytest.mark.independent
@pytest.mark.parametrize(("kelvin", "kilopascal"), [(90.0, 134.0), (100.0, 324.0), (120.0, 1214.0), (140.0, 3170.0)])
def test_vapour_pressure_of_argon(kelvin: float, kilopascal: float) -> None:
    """CRC Handbook, vapour pressure of fluids at temperatures below 300 K: within 0.5 %."""
    assert substance("argon").saturation(kelvin).pressure == pytest.approx(kilopascal * 1e3, rel=5e-3)


@pytest.mark.independent
@pytest.mark.parametrize(("kelvin", "megapascal"), [(300.0, 3.53658941e-3), (500.0, 2.63889776), (600.0, 12.3443146)])
def test_vapour_pressure_of_water(kelvin: float, megapascal: float) -> None:
    """IAPWS-IF97, table 35, an equation of its own for the curve: within 0.02 %."""
    assert substance("water").saturation(kelvin).pressure == pytest.approx(megapascal * 1e6, rel=2e-4)


@pytest.mark.independent
@pytest.mark.parametrize(
    ("name", "kelvin"), [("water", 273.16), ("argon", 83.8058), ("sulfur hexafluoride", 223.555), ("xenon", 161.4)]
)
def test_triple_points(name: str, kelvin: float) -> None:
    """ITS-90 fixed points of water and argon (0.3 mK); -49.595 degC of SF6 (Metrologia); xenon 161.4 K (5 mK)."""
    allowed = {"xenon": 0.01, "sulfur hexafluoride": 0.005}.get(name, 3e-4)
    assert substance(name).triple_temperature == pytest.approx(kelvin, abs=allowed)


@pytest.mark.wiring
def test_half_full_at_critical_filling() -> None:
    """A cell at critical density looks 47.2 % full of liquid at 20 degC, by the densities of Span and Wagner 1996."""
    fluid = substance("carbon dioxide")
    assert fluid.state(293.15, fluid.critical_density).liquid == pytest.approx(0.472, abs=0.0005)


@pytest.mark.independent
def test_half_full_by_other_authors() -> None:
    """The same share by the saturated densities of Ely, Magee and Haynes 1987: within 0.001."""
    fluid = substance("carbon dioxide")
    both, filling = fluid.saturation(293.15), fluid.critical_density
    ely = Referee(terms("ely_1987_co2.csv"), 8.31434, 304.13, 10630.0, 0.0440098)
    _, liquid, vapour = ely.saturation(293.15, both.liquid_density, both.vapour_density)
    assert fluid.state(293.15, filling).liquid == pytest.approx((filling - vapour) / (liquid - vapour), abs=0.001)
