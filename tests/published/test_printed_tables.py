"""Every shipped fluid against the tables that its equation's authors printed, to the printed digit.

Sources stand in the rows of `data/saturation.csv` and `data/single_phase.csv`. Trailing zeros are lost in them, which
only widens what is allowed. Nitrogen was printed per mole. Energies and entropies have zeros of their own, so their
differences are compared.
"""

from __future__ import annotations

import csv
from functools import cache
from pathlib import Path

import pytest

from runbook.errors import InputUnusable
from runbook.fluids.catalogue import find, fluids
from runbook.fluids.library import Equation
from runbook.fluids.substance import substance

pytestmark = pytest.mark.wiring

Row = dict[str, str]
MOLAR = {"Nitrogen": 28.01348}
"""[g/mol] of tables that were printed per mole."""


def rows(name: str) -> list[Row]:
    """Of a table, those whose fluid is shipped."""
    with (Path(__file__).parent / "data" / name).open(encoding="utf-8", newline="") as file:
        return [row for row in csv.DictReader(file) if _shipped(row["fluid"])]


def _shipped(name: str) -> bool:
    try:
        return bool(find(name))
    except InputUnusable:
        return False


@cache
def equation(name: str) -> Equation:
    """The equation of a fluid with the limits of its tables, not ours, and without its solid: a row may lie on the
    authors' own melting curve."""
    return Equation(find(name).library_name, 2000.0, 1.2e9, freezes=lambda t, p: False)


def half(row: Row, key: str) -> float:
    """Half of the last printed digit of a value."""
    text = row[key]
    molar = MOLAR.get(row["fluid"])
    if molar is not None and key not in ("p_Pa", "T_K", "w", "w_liq", "w_vap"):
        # Of a density mol/dm3 was printed, of an energy J/mol.
        scale = 1.0 / molar if key.startswith("rho") else molar / 1000.0
        value = float(text) * scale
        digits = next(d for d in range(8) if abs(round(value, d) - value) <= 2e-9 * abs(value) + 1e-12)
        return 0.5 * 10.0**-digits / scale
    mantissa = text.partition("e")[0]
    if "." in mantissa:
        whole, _, rest = mantissa.partition(".")
        rest = rest.rstrip("0")
        if rest:
            return 0.5 * 10.0 ** -len(rest)
        text = whole
    stripped = text.rstrip("0")
    return 0.5 * 10.0 ** (len(text) - len(stripped))


def heats_and_sound(one: Equation, kelvin: float, rho: float) -> tuple[float, float, float]:
    """Heat capacities at constant volume and pressure [J/kg/K], speed of sound [m/s], from our slopes of pressure."""
    by_temperature, by_density, cv = one.slopes(kelvin, rho)
    cp = cv + kelvin * by_temperature**2 / (rho**2 * by_density)
    return cv, cp, (by_density * cp / cv) ** 0.5


def label(row: Row) -> str:
    """Of a test."""
    return f"{row['fluid']} {row['T_K']} K {row['p_Pa']} Pa"


def test_every_shipped_fluid_has_its_rows() -> None:
    """No table is left out because a name was not understood; of xenon no printed table was at hand."""
    for name in ("saturation.csv", "single_phase.csv"):
        assert {find(row["fluid"]).name for row in rows(name)} == {one.name for one in fluids()} - {"xenon"}
    assert (len(rows("saturation.csv")), len(rows("single_phase.csv"))) == (30, 56)


# -- saturation -------------------------------------------------------------------------------------------


@pytest.mark.parametrize("row", rows("saturation.csv"), ids=label)
def test_saturation(row: Row) -> None:
    """Pressure and both densities of saturation."""
    one = equation(row["fluid"])
    pascal = float(row["p_Pa"])
    asked = float(row["T_K"]) if row["T_K"] else substance(row["fluid"]).boiling_temperature(pascal)
    # Argon's triple point is printed 0.2 mK lower than the library has it.
    kelvin = max(asked, one.triple_temperature)
    both = one.saturation(kelvin)
    if row["T_K"]:
        assert both.pressure + (asked - kelvin) * both.dpdT == pytest.approx(
            pascal, abs=half(row, "p_Pa") * 1.001, rel=0
        )
    slopes, step = one.saturation_slopes(kelvin), asked - kelvin
    for ours, slope, key in (
        (both.liquid_density, slopes.liquid_density, "rho_liq"),
        (both.vapour_density, slopes.vapour_density, "rho_vap"),
    ):
        assert ours + step * slope == pytest.approx(float(row[key]), abs=half(row, key) * 1.001, rel=0), key


@pytest.mark.parametrize("row", rows("saturation.csv"), ids=label)
def test_slopes_beside_the_dome(row: Row) -> None:
    """Heat capacities and speed of sound of both saturated phases: what every slope of one phase is made of."""
    one = equation(row["fluid"])
    asked = float(row["T_K"]) if row["T_K"] else substance(row["fluid"]).boiling_temperature(float(row["p_Pa"]))
    kelvin = max(asked, one.triple_temperature)
    both = one.saturation(kelvin)
    # A hair outside the dome: within it the library's figures mean nothing.
    for phase, rho in (("liq", both.liquid_density * (1.0 + 1e-10)), ("vap", both.vapour_density * (1.0 - 1e-10))):
        for key, ours in zip(("cv", "cp", "w"), heats_and_sound(one, kelvin, rho), strict=True):
            printed = row[f"{key}_{phase}"]
            if printed:
                assert ours == pytest.approx(float(printed), abs=half(row, f"{key}_{phase}") * 1.001, rel=0), key


@pytest.mark.parametrize("name", sorted({row["fluid"] for row in rows("saturation.csv")}))
def test_saturated_energies_differ_as_printed(name: str) -> None:
    """Enthalpy and entropy of vaporisation, and of the liquids between temperatures: to the printed digits."""
    one = equation(name)
    base: tuple[Row, float, float] | None = None
    for row in (r for r in rows("saturation.csv") if r["fluid"] == name):
        kelvin = float(row["T_K"]) if row["T_K"] else substance(name).boiling_temperature(float(row["p_Pa"]))
        both = one.saturation(max(kelvin, one.triple_temperature))
        liquid = both.liquid_energy + both.pressure / both.liquid_density
        vapour = both.vapour_energy + both.pressure / both.vapour_density
        step = float(row["h_vap_J_kg"]) - float(row["h_liq_J_kg"])
        digit = 1.001 * (half(row, "h_vap_J_kg") + half(row, "h_liq_J_kg"))
        assert vapour - liquid == pytest.approx(step, abs=digit, rel=0), row
        step = float(row["s_vap"]) - float(row["s_liq"])
        digit = 1.001 * (half(row, "s_vap") + half(row, "s_liq"))
        assert both.vapour_entropy - both.liquid_entropy == pytest.approx(step, abs=digit, rel=0), row
        if base is not None:
            first, h, s = base
            digit = 1.001 * (half(row, "h_liq_J_kg") + half(first, "h_liq_J_kg"))
            assert liquid - h == pytest.approx(float(row["h_liq_J_kg"]) - float(first["h_liq_J_kg"]), abs=digit, rel=0)
            digit = 1.001 * (half(row, "s_liq") + half(first, "s_liq"))
            assert both.liquid_entropy - s == pytest.approx(
                float(row["s_liq"]) - float(first["s_liq"]), abs=digit, rel=0
            )
        base = base or (row, liquid, both.liquid_entropy)


# -- one phase --------------------------------------------------------------------------------------------

SINGLE = [row for row in rows("single_phase.csv") if row["rho"]]
BY_PRESSURE = [row for row in rows("single_phase.csv") if not row["rho"]]


def density(row: Row) -> float:
    """Density [kg/m3] at the row's temperature and pressure; Newton's method from the printed one."""
    one, kelvin, pascal, rho = equation(row["fluid"]), float(row["T_K"]), float(row["p_Pa"]), float(row["rho"])
    for _ in range(20):
        move = (pascal - one.pressure(kelvin, rho)) / one.slopes(kelvin, rho)[1]
        rho += move
        if abs(move) < 1e-11 * rho:
            return rho
    raise AssertionError(label(row))


@pytest.mark.parametrize("row", SINGLE, ids=label)
def test_one_phase(row: Row) -> None:
    """Density at the printed temperature and pressure; heat capacities and speed of sound there."""
    rho = density(row)
    assert rho == pytest.approx(float(row["rho"]), abs=half(row, "rho") * 1.001, rel=0)
    found = heats_and_sound(equation(row["fluid"]), float(row["T_K"]), rho)
    for key, ours in zip(("cv", "cp", "w"), found, strict=True):
        if row[key]:
            assert ours == pytest.approx(float(row[key]), abs=half(row, key) * 1.001, rel=0), key


@pytest.mark.parametrize("name", sorted({row["fluid"] for row in SINGLE}))
def test_energies_of_one_phase_differ_as_printed(name: str) -> None:
    """Internal energy, enthalpy and entropy of any row less those of the first, to the printed digits."""
    base: tuple[Row, dict[str, float]] | None = None
    for row in (r for r in SINGLE if r["fluid"] == name):
        rho, pascal = density(row), float(row["p_Pa"])
        _, energy, entropy = equation(name).caloric(float(row["T_K"]), rho)
        ours = {"u": energy, "h": energy + pascal / rho, "s": entropy}
        if base is None:
            base = row, ours
            continue
        first, at_first = base
        for key in ("u", "h", "s"):
            if not row[key] or not first[key]:
                continue
            step = float(row[key]) - float(first[key])
            digit = 1.001 * (half(row, key) + half(first, key))
            assert ours[key] - at_first[key] == pytest.approx(step, abs=digit, rel=0), (key, row)


@pytest.mark.parametrize("row", BY_PRESSURE, ids=label)
def test_check_values_of_propane(row: Row) -> None:
    """Lemmon, McLinden and Wagner 2009: heat capacities and speed of sound of propane, 1e-6."""
    one, kelvin = equation(row["fluid"]), float(row["T_K"])
    rho = one.gas_density(kelvin, float(row["p_Pa"]))
    assert rho is not None
    for key, ours in zip(("cv", "cp", "w"), heats_and_sound(one, kelvin, rho), strict=True):
        assert ours == pytest.approx(float(row[key]), rel=1e-6), key


# -- water ------------------------------------------------------------------------------------------------


def iapws() -> list[Row]:
    """IAPWS R6-95(2018), Table 7."""
    with (Path(__file__).parent / "data" / "iapws95_table7.csv").open(encoding="utf-8", newline="") as file:
        return list(csv.DictReader(file))


@pytest.mark.parametrize("row", iapws(), ids=lambda row: f"{row['T_K']} K {row['rho']}")
def test_iapws_95_table_7(row: Row) -> None:
    """Pressure, heat capacity, speed of sound and entropy of water at the eleven states for checking programs: 1e-8."""
    kelvin, rho = float(row["T_K"]), float(row["rho"])
    pressure, _, entropy = equation("Water").caloric(kelvin, rho)
    # At 996.556 kg/m3 the pressure hangs on the ninth digit of the density.
    assert pressure == pytest.approx(1e6 * float(row["p_MPa"]), rel=1e-8 if rho != 996.556 else 1e-6)
    cv, _, sound = heats_and_sound(equation("Water"), kelvin, rho)
    assert cv == pytest.approx(1e3 * float(row["cv_kJ_kgK"]), rel=1e-8)
    assert sound == pytest.approx(float(row["w_m_s"]), rel=1e-8)
    assert entropy == pytest.approx(1e3 * float(row["s_kJ_kgK"]), rel=1e-8)
