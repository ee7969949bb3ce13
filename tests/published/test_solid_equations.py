"""The solids' equations against the verification tables of their publications, and ice against IAPWS's own curves."""

from __future__ import annotations

import csv
from math import exp
from pathlib import Path

import pytest

from runbook.fluids.solids.dry_ice import DryIce
from runbook.fluids.solids.ice import Ice
from runbook.fluids.substance import substance


def rows(name: str) -> list[dict[str, str]]:
    """Of a file of published values."""
    with (Path(__file__).parent / "data" / name).open(encoding="utf-8") as file:
        return list(csv.DictReader(file))


@pytest.mark.wiring
@pytest.mark.parametrize("row", rows("jaeger_span_2012_table5.csv"), ids=lambda row: row["T_K"])
def test_jaeger_and_span_2012_table_5(row: dict[str, str]) -> None:
    """Gibbs energy, volume, entropy, heat capacity, expansion and compressibility of dry ice: 1e-9."""
    found = DryIce().molar(float(row["T_K"]), float(row["p_Pa"]))
    for ours, theirs in (
        (found.gibbs, "g_J_mol"),
        (found.volume, "v_m3_mol"),
        (found.entropy, "s_J_molK"),
        (found.heat_capacity, "cp_J_molK"),
        (found.expansion, "alpha_1_K"),
        (found.compressibility, "kappa_1_Pa"),
    ):
        assert ours == pytest.approx(float(row[theirs]), rel=1e-9), theirs


@pytest.mark.wiring
@pytest.mark.parametrize("row", rows("iapws06_ice_table6.csv"), ids=lambda row: row["T_K"])
def test_iapws_r10_06_table_6(row: dict[str, str]) -> None:
    """Gibbs energy, volume and heat capacity of ice: to the twelve printed digits."""
    kelvin, pascal = float(row["T_K"]), float(row["p_Pa"])
    found = Ice().phase(kelvin, pascal)
    assert found.gibbs == pytest.approx(float(row["g_J_kg"]), rel=1e-9)
    assert found.volume == pytest.approx(float(row["v_m3_kg"]), rel=1e-11)
    assert Ice().heat_capacity(kelvin, pascal) == pytest.approx(float(row["cp_J_kgK"]), rel=1e-11)


@pytest.mark.independent
@pytest.mark.parametrize(
    "row", [r for r in rows("iapws_r14_08_check.csv") if "Ih" in r["curve"]], ids=lambda r: r["curve"]
)
def test_iapws_r14_08(row: dict[str, str]) -> None:
    """Sublimation and melting pressure of ice Ih by IAPWS's separate equations for the curves: within 0.02 %."""
    ice = substance("water").solid
    assert ice is not None
    kelvin, pascal = float(row["T_K"]), 1e6 * float(row["p_MPa printed"])
    curve = ice.sublimation_pressure if row["curve"].startswith("sublimation") else ice.melting_pressure
    assert curve(kelvin) == pytest.approx(pascal, rel=2e-4)


@pytest.mark.independent
def test_ice_against_the_package_of_another() -> None:
    """The iapws package's ice Ih, over its range: 1e-9 in Gibbs energy, volume and entropy."""
    iapws = pytest.importorskip("iapws._iapws")
    for kelvin in (190.0, 220.0, 250.0, 272.0):
        for pascal in (1e5, 20e6):
            if kelvin > 251.0 and pascal > 1e6:
                continue
            theirs, ours = iapws._Ice(kelvin, pascal * 1e-6), Ice().phase(kelvin, pascal)
            assert ours.gibbs == pytest.approx(1e3 * theirs["g"], rel=1e-9)
            assert ours.volume == pytest.approx(1.0 / theirs["rho"], rel=1e-9)
            assert ours.entropy == pytest.approx(1e3 * theirs["s"], rel=1e-9)


@pytest.mark.independent
@pytest.mark.parametrize(
    ("name", "joule", "share"),
    [
        ("carbon dioxide", 8870.0, 0.01),
        ("water", 6007.0, 0.002),
        ("nitrogen", 710.0, 0.02),
        ("argon", 1180.0, 0.02),
        ("xenon", 2270.0, 0.01),
        ("sulfur hexafluoride", 5020.0, 0.01),
    ],
)
def test_heats_of_fusion(name: str, joule: float, share: float) -> None:
    """Molar heat of fusion at the triple point: Trusler 2011 for carbon dioxide, IAPWS for water, CRC Handbook else."""
    fluid = substance(name)
    assert fluid.solid is not None
    assert fluid.solid.heat_of_fusion(fluid.triple_temperature) * fluid.molar_mass == pytest.approx(joule, rel=share)


@pytest.mark.independent
def test_sulfur_hexafluoride_sublimes_at_one_atmosphere() -> None:
    """209.41 to 209.74 K: Guder and Wagner 2009 and the general solid; within 2 % in pressure."""
    fluid = substance("SF6")
    assert fluid.solid is not None
    assert fluid.solid.sublimation_pressure(209.6) == pytest.approx(101325.0, rel=0.02)


@pytest.mark.independent
@pytest.mark.parametrize("kelvin", [195.0, 200.0, 205.0, 209.5, 215.0, 222.0])
def test_sulfur_hexafluoride_s_sublimation_curve(kelvin: float) -> None:
    """Guder and Wagner 2009, ln(p/pt) = -11.6942141 ((T/Tt)^-1.07 - 1): within the 6 % that its data file states."""
    fluid = substance("SF6")
    assert fluid.solid is not None
    ratio = exp(-11.6942141 * ((kelvin / fluid.triple_temperature) ** -1.07 - 1.0))
    assert fluid.solid.sublimation_pressure(kelvin) == pytest.approx(fluid.triple_pressure * ratio, rel=0.06)
