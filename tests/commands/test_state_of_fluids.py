"""`runbook state` of every fluid at six temperatures: an upgrade that moves a figure is seen."""

from __future__ import annotations

import json
import os
from pathlib import Path
from typing import Any

import pytest

from runbook.commands.state import main
from runbook.fluids.catalogue import fluids
from runbook.fluids.substance import substance

GOLDEN = Path(__file__).parent / "goldens" / "states.json"


def places(name: str) -> list[tuple[float, float]]:
    """Six temperatures [K] from the cold end to beyond critical, at 0.9 of critical density [kg/m3]."""
    fluid = substance(name)
    triple, critical = fluid.triple_temperature, fluid.critical_temperature
    cold = fluid.min_temperature + 2.0 if fluid.solid is not None else triple + 0.5
    found = (cold, triple + 1.0, 0.7 * critical, 0.9 * critical, critical - 0.5, critical + 10.0)
    return [(round(t, 2), round(0.9 * fluid.critical_density, 1)) for t in found]


def answered(capsys: pytest.CaptureFixture[str]) -> list[dict[str, Any]]:
    """All answers of the command."""
    found = []
    for data in fluids():
        for kelvin, density in places(data.name):
            code = main([data.name, "--temperature", f"{kelvin}K", "--density", f"{density} kg/m3", "--json"])
            assert code == 0, (data.name, kelvin)
            found.append(json.loads(capsys.readouterr().out))
    return found


def test_ten_fluids_at_six_temperatures(capsys: pytest.CaptureFixture[str]) -> None:
    """Sixty states and their landmarks are the golden ones, 1e-7."""
    found = answered(capsys)
    assert len(found) == 60
    if os.environ.get("RUNBOOK_REWRITE_GOLDENS") and not os.environ.get("CI"):
        GOLDEN.parent.mkdir(exist_ok=True)
        GOLDEN.write_text(json.dumps(found, indent=1) + "\n", "utf-8")
    golden = json.loads(GOLDEN.read_text("utf-8"))
    for ours, then in zip(found, golden, strict=True):
        assert (ours["fluid"], ours["region"]) == (then["fluid"], then["region"])
        assert ours["pressure_Pa"] == pytest.approx(then["pressure_Pa"], rel=1e-7)
        for table in ("volume_fractions", "landmarks"):
            for key, value in then[table].items():
                assert ours[table][key] == (None if value is None else pytest.approx(value, rel=1e-7, abs=1e-9)), then


def test_below_its_triple_point_a_fluid_without_solid_is_refused(capsys: pytest.CaptureFixture[str]) -> None:
    """Exit 2 and a sentence that names the fluid and its triple point."""
    assert main(["propane", "--temperature", "80K", "--density", "300 kg/m3"]) == 2
    assert "triple point of propane" in capsys.readouterr().err
