"""Fluids other than carbon dioxide, bound to the shipped vessel: what their data files say is what counts."""

from __future__ import annotations

from dataclasses import replace
from datetime import date
from pathlib import Path

import pytest

from runbook.answers import Effect, Hazard, Plan
from runbook.assess.assumptions import ALL
from runbook.assess.bind import bind
from runbook.assess.corners import highest_between
from runbook.assess.scene import open_scene
from tests.assess.scenes import loaded

ISSUED = date(2031, 3, 2)


def plan(folder: Path, fluid: str, mass: str = "117 g ± 2 g") -> Plan:
    """The shipped procedure with another fluid in it."""
    files = loaded(folder, {"fluid: carbon dioxide": f"fluid: {fluid}", "mass: 117 g ± 2 g": f"mass: {mass}"})
    return bind(files, ISSUED)


@pytest.mark.parametrize("fluid", ["ethane", "n-butane", "propane"])
def test_what_burns_is_not_proved(tmp_path: Path, fluid: str) -> None:
    """States yes, plans no: the finding stands at the fluid, whatever the margins are."""
    found = plan(tmp_path, fluid)
    (finding,) = (f for f in found.findings if f.rule == "flammable")
    text = (tmp_path / "co2-critical-point.yaml").read_text("utf-8").splitlines()
    assert text[finding.line - 1][finding.column - 1 :].startswith(fluid)
    assert found.verdict != "within limits"


def test_sulfur_hexafluoride_is_never_let_down(tmp_path: Path) -> None:
    """Regulation (EU) 2024/573: the release is forbidden, every step that lets gas out raises that hazard, and make
    safe has no vent."""
    found = plan(tmp_path, "SF6")
    assert found.release_forbidden
    raising = [line.number for line in found.lines if dict(line.effects)[Hazard.RELEASE] is Effect.RAISES]
    assert "4.5" in raising
    assert not plan(tmp_path, "carbon dioxide").release_forbidden


def test_gas_in_the_room_is_judged_by_the_fluids_own_limit(tmp_path: Path) -> None:
    """SF6 1000 ppm (EH40), nitrogen by the oxygen that is left, water vapour not at all."""

    def allowed(fluid: str) -> set[float | None]:
        found = plan(tmp_path, fluid, "20 g ± 1 g")
        return {m.allowed for line in found.lines for m in line.ahead if m.kind == "gas in the room"}

    assert allowed("carbon dioxide") == {5000e-6}
    assert allowed("SF6") == {1000e-6}
    assert allowed("nitrogen") == {0.067}
    assert allowed("water") == set()


def test_a_full_vessel_of_water_bursts_in_the_cold(tmp_path: Path) -> None:
    """Below 4 degC and frozen the coldest wall is the worst corner, not the hottest."""
    files = loaded(tmp_path, {"fluid: carbon dioxide": "fluid: water"})
    scene = open_scene(files, None, None, replace(ALL, air=False))
    full = 0.99 * scene.volume[0] * 999.0
    warm = highest_between(scene, full, 290.0, 293.15)
    cold = highest_between(scene, full, 268.15, 293.15)
    assert warm.value is not None
    assert cold.value is not None
    assert warm.value < 5e5
    assert cold.value > 300e5
    assert cold.at.temperature_K == 268.15
