"""Dry ice against published curves and measurements."""

from __future__ import annotations

import csv
from math import exp
from pathlib import Path

import pytest

from runbook.fluids.roots import bracketed_root
from runbook.fluids.substance import substance

CO2 = substance("carbon dioxide")
ICE = CO2.solid
assert ICE is not None
SOLID_CHARGE = 480.0


def rows(name: str) -> list[dict[str, str]]:
    """Of a file of published values."""
    with (Path(__file__).parent / "data" / name).open(encoding="utf-8") as file:
        return list(csv.DictReader(file))


@pytest.mark.independent
def test_sublimation_temperature_at_one_atmosphere() -> None:
    """Dry ice sublimes at 194.686 K under 101325 Pa; Span and Wagner 1996, equation 3.12: within 30 mK, which is the
    226 Pa by which Jaeger and Span 2012 lie above that curve there."""
    found = bracketed_root(lambda t: CO2.pressure(t, SOLID_CHARGE) - 101325.0, 190.0, 200.0, 1e-6)
    assert found == pytest.approx(194.686, abs=0.03)


@pytest.mark.independent
def test_sublimation_temperature_as_measured() -> None:
    """Meyers and Van Dusen 1933, J. Res. NBS 10, 381: -78.515 degC on the old scale, to 1-2 parts in 1e4."""
    found = bracketed_root(lambda t: CO2.pressure(t, SOLID_CHARGE) - 101325.0, 190.0, 200.0, 1e-6)
    assert found == pytest.approx(273.15 - 78.515, abs=0.06)


@pytest.mark.independent
@pytest.mark.parametrize(
    ("kelvin", "pascal", "allowed"),
    [
        (150.0, 842.65, 50.0), (160.0, 3147.5, 50.0), (170.0, 9960.4, 165.0), (180.0, 27557.0, 165.0),
        (190.0, 68342.0, 250.0), (194.6855, 101325.0, 250.0), (200.0, 155031.3, 250.0), (210.0, 327089.3, 250.0),
    ],
)  # fmt: skip
def test_sublimation_curve(kelvin: float, pascal: float, allowed: float) -> None:
    """Span and Wagner 1996, equation 3.12, which knows no solid's equation: within the uncertainty its authors state,
    250 Pa above 185 K, 50 Pa below 170 K, and 165 Pa between."""
    assert CO2.pressure(kelvin, SOLID_CHARGE) == pytest.approx(pascal, abs=allowed, rel=0)


@pytest.mark.independent
@pytest.mark.parametrize(
    ("kelvin", "pascal"),
    [(155.0, 1662.19), (165.0, 5657.80), (175.0, 16694.77), (180.0, 27389.17), (190.0, 68075.76), (195.0, 103565.14)],
)
def test_sublimation_curve_of_older_measurements(kelvin: float, pascal: float) -> None:
    """Giauque and Egan 1937, J. Chem. Phys. 5, 45, in Antoine's form (154-196 K): within 1.4 %, where published
    curves lie up to 0.8 % to either side of their middle."""
    assert CO2.pressure(kelvin, SOLID_CHARGE) == pytest.approx(pascal, rel=0.014)


@pytest.mark.independent
@pytest.mark.parametrize(("kelvin", "joule", "density"), [(194.67, 572.9e3, 1572.8), (216.592, 552.04e3, 1545.0)])
def test_heat_of_sublimation_and_density(kelvin: float, joule: float, density: float) -> None:
    """Heat of sublimation 572.9 and 552.04 kJ/kg (Jaeger and Span 2012 with Span and Wagner 1996), density
    27.981 cm3/mol at 194.67 K (Trusler 2011, J. Phys. Chem. Ref. Data 40, 043105): within 1 % and 0.7 %."""
    assert ICE is not None
    assert ICE.heat_of_sublimation(kelvin) == pytest.approx(joule, rel=0.01)
    assert 1.0 / ICE.beside_vapour(kelvin).volume == pytest.approx(density, rel=0.007)


@pytest.mark.independent
def test_heat_of_fusion() -> None:
    """Heat of fusion at the triple point 8870 J/mol; Trusler 2011: within 1 %."""
    assert ICE is not None
    assert ICE.heat_of_fusion(216.592) * CO2.molar_mass == pytest.approx(8870.0, rel=0.01)


@pytest.mark.independent
@pytest.mark.parametrize("row", rows("co2_melting.csv"), ids=lambda row: row["T_K"])
def test_melting_curve(row: dict[str, str]) -> None:
    """Solid beside liquid by Span and Wagner 1996, equation 3.10: as a temperature within 0.15 K up to 270 K."""
    kelvin, pascal = float(row["T_K"]), float(row["p_SpanWagner1996_eq3.10_Pa"])
    assert ICE is not None
    if kelvin <= 270.0:
        off = (ICE.melting_pressure(kelvin) - pascal) / ICE.melting_slope(kelvin)
        assert abs(off) < 0.15


@pytest.mark.independent
@pytest.mark.parametrize("kelvin", [160.0, 165.0, 170.0, 180.0, 190.0, 194.6855, 200.0, 205.0, 210.0, 216.0])
def test_where_dry_ice_begins(kelvin: float) -> None:
    """Span and Wagner 1996, equation 3.12: at its pressure our curve lies within 0.05 K, from 160 K up."""
    x = 1.0 - kelvin / 216.592
    exponent = 216.592 / kelvin * (-14.740846 * x + 2.4327015 * x**1.9 - 5.3061778 * x**2.9)
    theirs = 517950.0 * exp(exponent)
    found = bracketed_root(lambda t: CO2.pressure(t, SOLID_CHARGE) - theirs, 155.0, 216.592, 1e-6)
    assert found == pytest.approx(kelvin, abs=0.05)


@pytest.mark.independent
@pytest.mark.parametrize("kelvin", [216.7, 217.0, 218.0, 220.0, 225.0, 230.0, 240.0, 250.0, 260.0, 270.0])
def test_where_dry_ice_melts_under_pressure(kelvin: float) -> None:
    """Span and Wagner 1996, equation 3.10: at its pressure our curve lies within 0.15 K, to 270 K."""
    assert ICE is not None
    ratio = kelvin / 216.592 - 1.0
    theirs = 517950.0 * (1.0 + 1955.5390 * ratio + 2055.4593 * ratio**2)
    slope = ICE.melting_slope(kelvin)
    assert (theirs - ICE.melting_pressure(kelvin)) / slope == pytest.approx(0.0, abs=0.15)
