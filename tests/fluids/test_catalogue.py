"""Data files of fluids: whole or refused, every figure with its source, and one file is all that a new fluid needs."""

from __future__ import annotations

import subprocess
import sys
from pathlib import Path

import pytest

from runbook.errors import InputUnusable, OutsideValidity
from runbook.fluids import catalogue
from runbook.fluids.catalogue import FluidData, find, fluids
from runbook.fluids.facts import SURE
from runbook.fluids.facts_file import read
from runbook.fluids.library import Equation
from runbook.fluids.substance import Region, Substance

DATA = Path(catalogue.__file__).parent / "data"
XENON = (DATA / "xenon.toml").read_text("utf-8")
PROPANE = (DATA / "propane.toml").read_text("utf-8")
SF6 = (DATA / "sulfur_hexafluoride.toml").read_text("utf-8")
WATER = (DATA / "water.toml").read_text("utf-8")

KRYPTON = """
name = "krypton"
aliases = ["Kr"]
library_name = "Krypton"

[equation]
source = "Lemmon and Span 2006, J. Chem. Eng. Data 51, 785"
max_temperature = { value = 750.0, source = "Lemmon and Span 2006", sure = "from memory" }
max_pressure = { value = 200e6, source = "Lemmon and Span 2006", sure = "from memory" }
saturation_uncertainty = { value = 0.002, source = "Lemmon and Span 2006", sure = "from memory" }
dense_uncertainty = { value = 0.004, source = "Lemmon and Span 2006, wider", sure = "from memory" }
thin_uncertainty = { value = 0.002, source = "Lemmon and Span 2006", sure = "from memory" }

[optics]

[hazards]
breathing = "asphyxiant"
flammable = false
oxidiser = false
cold = true
scald = false
release = "to the room"
"""


def changed(text: str, old: str, new: str) -> str:
    """A data file with words replaced that are there once."""
    assert text.count(old) == 1, old
    return text.replace(old, new)


def test_the_files_of_the_folder_are_the_fluids() -> None:
    """Ten, under their names, all told apart by name and alias without regard to case."""
    assert [one.name for one in fluids()] == [
        "R134a", "argon", "carbon dioxide", "ethane", "n-butane", "nitrogen", "propane", "sulfur hexafluoride",
        "water", "xenon",
    ]  # fmt: skip
    assert len(list(DATA.glob("*.toml"))) == len(fluids())
    for one in fluids():
        for name in (one.name, *one.aliases):
            assert find(f" {name.upper()} ") is one


def test_a_fluid_that_is_not_known_is_refused_with_those_that_are() -> None:
    """A sentence that names every fluid."""
    with pytest.raises(InputUnusable, match="no fluid is known as 'phlogiston'") as refused:
        find("phlogiston")
    assert all(one.name in str(refused.value) for one in fluids())


@pytest.mark.parametrize("data", fluids(), ids=lambda one: one.name)
def test_every_figure_says_where_it_comes_from(data: FluidData) -> None:
    """Source and how sure, for each; the equation's own five at least."""
    assert sum(name.startswith("equation.") for name, _ in data.figures) >= 5
    for name, figure in data.figures:
        assert len(figure.source) > 3, name
        assert figure.sure in SURE, name


@pytest.mark.parametrize("data", fluids(), ids=lambda one: one.name)
def test_the_stated_range_lies_within_the_librarys(data: FluidData) -> None:
    """The equation reaches from its triple point past critical, and the solid ends below the triple point."""
    equation = Equation(data.library_name, data.max_temperature, data.max_pressure)
    assert equation.triple_temperature < equation.critical_temperature < data.max_temperature
    assert equation.critical_pressure < data.max_pressure
    if data.solid is not None:
        assert data.solid.lowest_temperature < equation.triple_temperature


BROKEN = [
    (XENON, '"J. Phys. B 1 (1968) 449, at the critical point, within 0.1e-6"', '" "', "source of optics.molar_refr"),
    (XENON, 'sure = "handbook"', 'sure = "quite"', "'quite' is none of published"),
    (XENON, ', sure = "handbook"', "", "heat_of_fusion has to be a table of value, source and sure"),
    (XENON, "value = 1.05e-05", "value = 10.5", "molar_refractivity: 10.5 does not lie between"),
    (XENON, "value = 1.05e-05", "value = nan", "is no number"),
    (XENON, "value = 1.05e-05", "value = true", "is no number"),
    (XENON, "exposure_limit =", "exposure_limt =", "'hazards.exposure_limt' is no key here"),
    (XENON, "[hazards]", "[hazard]\n[hazards]", "'hazard' is no key here"),
    (XENON, "[hazards]", "[hazards]\nshort_limit = 0.1", "short_limit has to be a table of value, source and sure"),
    (XENON, "flammable = false\n", "", "flammable is missing"),
    (XENON, "flammable = false", 'flammable = "no"', "neither true nor false"),
    (XENON, "flammable = false", "flammable = true", "what burns has both its limits"),
    (XENON, 'breathing = "asphyxiant"', 'breathing = "fine"', "'fine' is none of poison"),
    (XENON, 'breathing = "asphyxiant"', 'breathing = "harmless"', "is not harmless"),
    (XENON, 'release = "to the room"', 'release = "forbidden"', "a forbidden release has its law"),
    (XENON, 'release = "to the room"', 'release = "to the room"\nrelease_law = "x"', "a forbidden release has its law"),
    (XENON, 'model = "constant volume"', 'model = "guess"', "'guess' is none of Jaeger"),
    (XENON, 'model = "constant volume"', 'model = "IAPWS R10-06"', "is not used by IAPWS R10-06"),
    (WATER, 'model = "IAPWS R10-06"', 'model = "constant volume"', "is needed by constant volume"),
    (XENON, "[optics]", "[optics]\ncompressibility = { value = 0.05, source = 'abc', sure = 'published' }", "together"),
    (XENON, 'aliases = ["Xe"]', 'aliases = "Xe"', "aliases have to be a list"),
    (XENON, 'name = "xenon"\n', "", "name is missing"),
    (XENON, "max_temperature =", "max_temp =", "'equation.max_temp' is no key here"),
    (SF6, "value = 0.00125", "value = 0.0005", "short_limit is less than exposure_limit"),
    (PROPANE, "value = 0.109", "value = 0.01", "upper_flammable is less than lower_flammable"),
    (XENON, "[equation]", "[equation", "xenon.toml"),
]


@pytest.mark.parametrize(("text", "old", "new", "says"), BROKEN, ids=[f"{b[1][:18]} -> {b[3][:40]}" for b in BROKEN])
def test_a_file_that_is_not_whole_is_refused(text: str, old: str, new: str, says: str) -> None:
    """A figure without source, a misspelt key, a contradiction: the file is named, and nothing of it counts."""
    with pytest.raises(ValueError, match=r"xenon\.toml: ") as refused:
        read(text.replace(old, new, 1) if text.count(old) > 1 else changed(text, old, new), "xenon.toml")
    assert says in str(refused.value)


def test_two_files_that_answer_to_one_name_are_refused(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    """Nobody chooses between them in silence."""
    folder = tmp_path / "data"
    folder.mkdir()
    (folder / "xenon.toml").write_text(XENON, "utf-8")
    (folder / "other.toml").write_text(changed(KRYPTON, '["Kr"]', '["XENON"]'), "utf-8")
    monkeypatch.setattr(catalogue, "files", lambda package: tmp_path)
    fluids.cache_clear()
    try:
        with pytest.raises(ValueError, match="two data files answer to xenon"):
            fluids()
    finally:
        fluids.cache_clear()


def test_one_file_is_all_that_a_new_fluid_needs(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    """Krypton beside xenon: known by name and alias, with states and landmarks, and no solid without figures."""
    folder = tmp_path / "data"
    folder.mkdir()
    (folder / "xenon.toml").write_text(XENON, "utf-8")
    (folder / "krypton.toml").write_text(KRYPTON, "utf-8")
    monkeypatch.setattr(catalogue, "files", lambda package: tmp_path)
    fluids.cache_clear()
    try:
        krypton = Substance(find("kr"))
    finally:
        fluids.cache_clear()
    assert krypton.state(150.0, krypton.critical_density).region is Region.LIQUID_VAPOUR
    assert krypton.data.hazards.exposure_limit is None
    assert krypton.landmarks(krypton.critical_density).critical == krypton.critical_temperature
    with pytest.raises(OutsideValidity, match="below the triple point of krypton"):
        krypton.pressure(100.0, 500.0)


def test_nothing_is_read_before_somebody_asks() -> None:
    """Importing the catalogue opens no data file and loads no property library."""
    code = (
        "import sys, builtins, io\n"
        "import runbook.fluids.catalogue as c\n"
        "assert c.fluids.cache_info().currsize == 0\n"
        "c.find('xenon')\n"
        "assert not any(name.startswith('CoolProp') for name in sys.modules)\n"
    )
    subprocess.run([sys.executable, "-c", code], check=True, cwd=Path(__file__).parents[2], capture_output=True)
