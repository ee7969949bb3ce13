"""`runbook state`: the documented object on stdout, a sentence on stderr."""

from __future__ import annotations

import json

import pytest

from runbook.commands.state import main

CHARGE = ["--mass", "117 g", "--volume", "250 mL"]


def test_the_documented_object(capsys: pytest.CaptureFixture[str]) -> None:
    """The JSON document has exactly the documented keys, SI values, the canonical name, null for no landmark."""
    assert main(["CO2", "--temperature", "20degC", "--mass", "117g", "--volume", "250mL", "--json"]) == 0
    out, err = capsys.readouterr()
    assert err == ""
    answer = json.loads(out)
    assert list(answer) == [
        "fluid",
        "temperature_K",
        "density_kg_m3",
        "pressure_Pa",
        "region",
        "volume_fractions",
        "landmarks",
    ]
    assert answer["fluid"] == "carbon dioxide"
    assert answer["temperature_K"] == pytest.approx(293.15)
    assert answer["density_kg_m3"] == pytest.approx(468.0)
    assert answer["pressure_Pa"] == pytest.approx(5.72905e6, rel=2e-4)
    assert answer["region"] == "liquid+vapour"
    assert answer["volume_fractions"]["liquid"] == pytest.approx(0.4727, abs=5e-4)
    assert sum(answer["volume_fractions"].values()) == pytest.approx(1.0)
    marks = answer["landmarks"]
    assert list(marks) == ["triple_K", "liquid_full_K", "dry_K", "critical_K"]
    assert marks["critical_K"] == pytest.approx(304.128, abs=0.005)
    assert (marks["liquid_full_K"], marks["dry_K"]) == (None, None)


def test_density_and_a_negative_temperature(capsys: pytest.CaptureFixture[str]) -> None:
    """A density serves as well as mass and volume, and a temperature below zero is no option."""
    assert main(["carbon dioxide", "--temperature", "-70 degC", "--density", "480 kg/m3", "--json"]) == 0
    answer = json.loads(capsys.readouterr().out)
    assert answer["region"] == "solid+vapour"
    assert answer["volume_fractions"]["solid"] > 0.0


def test_fractions_are_null_beyond_critical(capsys: pytest.CaptureFixture[str]) -> None:
    """In supercritical fluid the volume is not divided: all three are null."""
    assert main(["CO2", "--temperature", "40 degC", *CHARGE, "--json"]) == 0
    answer = json.loads(capsys.readouterr().out)
    assert answer["region"] == "supercritical"
    assert answer["volume_fractions"] == {"solid": None, "liquid": None, "vapour": None}


def test_the_text_for_people(capsys: pytest.CaptureFixture[str]) -> None:
    """Without --json the answer is text with degC and absolute bar."""
    assert main(["CO2", "--temperature", "20 degC", *CHARGE]) == 0
    out = capsys.readouterr().out
    assert "57.29 bar(a)" in out
    assert "liquid 47.3 %" in out
    assert "critical" in out
    assert "dry" not in out


@pytest.mark.parametrize(
    ("arguments", "says"),
    [
        (["CO3", "--temperature", "20degC", *CHARGE], "carbon dioxide"),
        (["CO2", "--temperature", "20", *CHARGE], "unit"),
        (["CO2", "--temperature", "20degC"], "--density"),
        (["CO2", "--temperature", "20degC", "--mass", "117g"], "--volume"),
        (["CO2", "--temperature", "20degC", "--density", "468 kg/m3", *CHARGE], "--density"),
        (["CO2", "--temperature", "20degC", "--mass", "117g", "--volume", "0mL"], "above zero"),
        (["CO2", "--temperature", "20degC", "--mass", "-117g", "--volume", "250mL"], "above zero"),
        (["CO2", "--temperature", "2000degC", *CHARGE], "1100 K"),
        (["CO2", "--temperature", "-300degC", *CHARGE], "absolute zero"),
        (["CO2", "--nonsense", *CHARGE], "--temperature"),
        ([], "FLUID"),
    ],
)
def test_what_cannot_be_used_is_said(arguments: list[str], says: str, capsys: pytest.CaptureFixture[str]) -> None:
    """Exit 2, nothing on stdout, one sentence on stderr that names what to write; never a traceback."""
    assert main([*arguments, "--json"]) == 2
    out, err = capsys.readouterr()
    assert out == ""
    assert says in err
    assert "Traceback" not in err
    assert err.startswith("runbook state: ")
    assert len(err.splitlines()) == 1
