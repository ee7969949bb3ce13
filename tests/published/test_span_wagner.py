"""Carbon dioxide against the printed tables of its own reference equation: the wiring, to the last digit.

Source of every number: Span and Wagner 1996, J. Phys. Chem. Ref. Data 25, 1509, Tables 34 and 35 (data folder).
"""

from __future__ import annotations

import csv
from pathlib import Path

import pytest

from runbook.fluids.library import Equation
from runbook.fluids.substance import substance

CO2 = substance("carbon dioxide")
FLUID = Equation("CarbonDioxide", 1100.0, 800e6, freezes=lambda t, p: False)
"""Without its solid: the first row of an isobar lies on the authors\' own melting curve, 0.1 % from ours."""
DATA = Path(__file__).parent / "data"
Row = dict[str, float]


def rows(name: str) -> list[Row]:
    with (DATA / name).open(encoding="utf-8", newline="") as file:
        return [{key: float(value) for key, value in row.items() if value} for row in csv.DictReader(file)]


SATURATION = rows("span_wagner_1996_saturation.csv")
SINGLE = rows("span_wagner_1996_single_phase.csv")


def half(digit: float) -> float:
    """Half of the last printed digit, and a little for the table's own rounding to even."""
    return 0.5 * digit * 1.001


@pytest.mark.wiring
@pytest.mark.parametrize("row", SATURATION, ids=lambda row: f"{row['T_K']:g} K")
def test_saturation_is_the_printed_table(row: Row) -> None:
    """Pressure and both densities round to the printed digit; Span and Wagner 1996, Table 34."""
    both = CO2.saturation(row["T_K"])
    assert both.pressure == pytest.approx(row["p_Pa"], abs=half(row["p_digit"]), rel=0)
    assert both.liquid_density == pytest.approx(row["rho_liq"], abs=half(row["rho_liq_digit"]), rel=0)
    assert both.vapour_density == pytest.approx(row["rho_vap"], abs=half(row["rho_vap_digit"]), rel=0)


@pytest.mark.wiring
@pytest.mark.parametrize("row", [row for row in SATURATION if "h_liq_J_kg" in row], ids=lambda row: f"{row['T_K']:g} K")
def test_heat_of_vaporisation_is_the_printed_difference(row: Row) -> None:
    """Enthalpy of vapour less that of liquid, within one printed digit; Span and Wagner 1996, Table 34.

    Differences, because the zero of enthalpy differs.
    """
    both = CO2.saturation(row["T_K"])
    heat = (both.vapour_energy + both.pressure / both.vapour_density) - (
        both.liquid_energy + both.pressure / both.liquid_density
    )
    assert heat == pytest.approx(row["h_vap_J_kg"] - row["h_liq_J_kg"], abs=row["h_digit"], rel=0)


@pytest.mark.wiring
@pytest.mark.parametrize("row", [row for row in SATURATION if "s_liq" in row], ids=lambda row: f"{row['T_K']:g} K")
def test_slope_of_saturation_is_clapeyrons(row: Row) -> None:
    """Slope times the step in volume is the printed step in entropy; Span and Wagner 1996, Table 34."""
    both = CO2.saturation(row["T_K"])
    entropy = both.dpdT * (1.0 / both.vapour_density - 1.0 / both.liquid_density)
    assert entropy == pytest.approx(row["s_vap"] - row["s_liq"], abs=row["s_digit"], rel=0)


@pytest.mark.wiring
@pytest.mark.parametrize("row", SINGLE, ids=lambda row: f"{row['T_K']:g} K")
def test_one_phase_is_the_printed_table(row: Row) -> None:
    """Pressure at the printed density is within half a digit of it; Span and Wagner 1996, Table 35."""
    t, rho = row["T_K"], row["rho"]
    allowed = half(row["rho_digit"]) * FLUID.slopes(t, rho)[1]
    assert allowed > 0.0
    assert FLUID.pressure(t, rho) == pytest.approx(row["p_Pa"], abs=allowed, rel=0)


@pytest.mark.wiring
@pytest.mark.parametrize("row", SINGLE, ids=lambda row: f"{row['T_K']:g} K")
def test_one_phase_heat_capacity_is_the_printed_table(row: Row) -> None:
    """Heat capacity at fixed volume within a printed digit; Span and Wagner 1996, Table 35."""
    assert FLUID.slopes(row["T_K"], row["rho"])[2] == pytest.approx(row["cv"], abs=row["cv_digit"], rel=0)


@pytest.mark.wiring
def test_one_phase_energies_differ_as_printed() -> None:
    """Internal energies of any two rows differ as printed, within their digits and that of density.

    Span and Wagner 1996, Table 35.
    """
    base = SINGLE[0]

    def energy(row: Row) -> float:
        return FLUID.caloric(row["T_K"], row["rho"])[1]

    for row in SINGLE[1:]:
        digit = base["u_digit"] + row["u_digit"]
        step = energy(row) - energy(base)
        assert step == pytest.approx(row["u_J_kg"] - base["u_J_kg"], abs=digit, rel=0), row


@pytest.mark.wiring
def test_critical_and_triple_point() -> None:
    """Critical 304.1282 K, 7.3773 MPa, 467.6 kg/m3; triple 216.592 K, 0.51795 MPa; Span and Wagner 1996."""
    assert CO2.critical_temperature == pytest.approx(304.1282, abs=1e-4)
    assert CO2.critical_pressure == pytest.approx(7.3773e6, abs=50.0)
    assert CO2.critical_density == pytest.approx(467.6, abs=0.05)
    assert CO2.triple_temperature == pytest.approx(216.592, abs=1e-3)
    assert CO2.triple_pressure == pytest.approx(517950.0, rel=2e-4)


@pytest.mark.independent
def test_pressure_at_the_metrologists_fixed_point() -> None:
    """Vapour pressure at 273.16 K is 3.48608 MPa ± 0.00017 MPa, a fixed point of pressure metrology.

    The value is from memory (Bignell and Bean 1988, Metrologia 25, 141, citation not confirmed).
    """
    assert CO2.saturation(273.16).pressure == pytest.approx(3.48608e6, abs=170.0)


@pytest.mark.wiring
@pytest.mark.parametrize(
    ("celsius", "megapascal"), [(0.0, 3.4851), (10.0, 4.5022), (20.0, 5.7291), (25.0, 6.4342), (30.0, 7.214)]
)
def test_saturation_at_bench_temperatures(celsius: float, megapascal: float) -> None:
    """Saturation pressure at round Celsius temperatures; computed beforehand from the same equation."""
    assert CO2.saturation(celsius + 273.15).pressure == pytest.approx(megapascal * 1e6, rel=1.5e-4)
