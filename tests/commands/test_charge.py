"""`runbook charge`: the documented object, exit codes, and no recipe for what the vessel does not bear."""

from __future__ import annotations

import json
from pathlib import Path

import pytest

from runbook.__main__ import main
from tests.assess.scenes import changed_files


def said(capsys: pytest.CaptureFixture[str], *words: str) -> tuple[int, str]:
    """Exit code and standard output."""
    code = main(["charge", *words])
    return code, capsys.readouterr().out


def test_the_documented_object(capsys: pytest.CaptureFixture[str]) -> None:
    """Exactly the documented keys."""
    code, out = said(capsys, "view-cell-250", "CO2", "--json")
    found = json.loads(out)
    assert code == 0
    assert list(found) == ["least_kg", "best_kg", "most_kg", "least_reason", "best_reason", "most_reason"]
    assert found["best_kg"] == pytest.approx(0.1169, abs=1e-4)


def test_the_page_says_how_to_load_and_prove_it(capsys: pytest.CaptureFixture[str]) -> None:
    """Scale reading with and without the vessel, solid to bring, height, hottest place; no line beyond 80 columns."""
    code, out = said(capsys, "view-cell-250", "carbon dioxide", "--tare", "5.21 kg", "--source-hottest", "42 degC")
    assert code == 0
    for words in (
        "116.9 g on BS1",
        "5.327 kg with the vessel",
        "450.0 g of solid",
        "29.0 mm",
        "hotter than",
        "42.0 °C",
    ):
        assert words in " ".join(out.split())
    assert max(len(line) for line in out.splitlines() if not line.startswith(("carbon", "assumed"))) <= 90


def test_too_much_is_refused_without_a_recipe(capsys: pytest.CaptureFixture[str]) -> None:
    """180 g: exit 1, TOO MUCH with the limit, and not a word on how to load it."""
    code, out = said(capsys, "view-cell-250", "CO2", "--mass", "180g")
    assert code == 1
    assert "TOO MUCH: RD1" in out
    assert "falling weight" not in out
    assert "bring" not in out


def test_a_fluid_without_a_surface_in_the_room(capsys: pytest.CaptureFixture[str]) -> None:
    """Nitrogen at room temperature: exit 1 and the reason in words."""
    code, out = said(capsys, "view-cell-250", "nitrogen")
    assert code == 1
    assert "there is no surface" in out


@pytest.mark.parametrize(
    ("words", "says"),
    [
        (("view-cell-250", "CO2", "--mass", "117"), "unit"),
        (("view-cell-250", "CO2", "--mass", "117 bar"), "117 bar"),
        (("view-cell-250", "phlogiston"), "write one of"),
        (("no-such-vessel", "CO2"), "view-cell-250"),
        (("view-cell-250", "CO2", "--room-hottest", "10degC"), "colder"),
    ],
)
def test_what_cannot_be_used_is_told(capsys: pytest.CaptureFixture[str], words: tuple[str, ...], says: str) -> None:
    """Exit 2 and a sentence."""
    assert main(["charge", *words]) == 2
    assert says in capsys.readouterr().err


def test_a_bad_file_is_told_with_its_place(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    """file:line:column of a wrong unit in the vessel's file."""
    changed_files(tmp_path, None, {"free: 250 mL ± 2 mL": "free: 250 bar ± 2 mL"})
    assert main(["charge", str(tmp_path / "apparatus" / "view-cell-250.yaml"), "CO2"]) == 2
    assert "view-cell-250.yaml:" in capsys.readouterr().err
