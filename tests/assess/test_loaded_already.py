"""A vessel that comes loaded: what its file states counts until readings say more, and proves nothing."""

from __future__ import annotations

import asyncio
from datetime import date
from pathlib import Path

import pytest

from runbook.answers import ChargeBox, Plan
from runbook.assess.bind import bind
from runbook.assess.scene import open_scene
from runbook.assess.walk import walk
from runbook.procedure.reader import read_procedure
from runbook.rehearsal.headless import rehearse

GOOD = Path(__file__).parents[1] / "procedure" / "good"
ON = date(2031, 3, 2)


def plan(folder: Path, said: str, charge: ChargeBox | None = None) -> Plan:
    """The refrigerant in its tube, with another word on its charge."""
    (folder / "apparatus").mkdir(exist_ok=True)
    vessel = GOOD / "apparatus" / "tall-cell-120.yaml"
    (folder / "apparatus" / vessel.name).write_text(vessel.read_text("utf-8"), "utf-8")
    text = (GOOD / "refrigerant.yaml").read_text("utf-8")
    written = "charge: {mass: 60 g ± 1 g, loaded_as: already loaded}"
    assert written in text
    path = folder / "refrigerant.yaml"
    path.write_text(text.replace(written, said), "utf-8")
    return bind(read_procedure(path), ON, charge=charge)


def test_what_the_file_states_is_judged(tmp_path: Path) -> None:
    """59 to 61 g, unproved: within limits, at rest, and warmed only after its height has been read."""
    found = plan(tmp_path, "charge: {mass: 60 g ± 1 g, loaded_as: already loaded}")
    assert found.charge is not None
    assert (found.charge.low_kg, found.charge.high_kg) == pytest.approx((0.059, 0.061))
    assert (found.charge.proved, found.charge.by) == (False, ("procedure",))
    assert found.verdict == "within limits"
    # Of glass a trace of charge would be a vacuum vessel: that sets no most.
    assert 0.115 < (found.bounds.most_kg or 0.0) < 0.125


def test_too_much_is_outside_limits(tmp_path: Path) -> None:
    """125 g fills the tube with liquid before the source's cut-out."""
    assert plan(tmp_path, "charge: {mass: 125 g ± 1 g, loaded_as: already loaded}").verdict == "outside limits"


def test_where_nobody_states_anything_it_may_be_full_to_the_brim(tmp_path: Path) -> None:
    """Unknown is never within limits."""
    found = plan(tmp_path, "charge: already loaded")
    assert found.charge is None
    assert found.verdict != "within limits"


def test_a_record_says_more_than_the_file(tmp_path: Path) -> None:
    """What was proved of this very vessel counts."""
    record = ChargeBox(0.118, 0.124, True, ("charge record",))
    found = plan(tmp_path, "charge: {mass: 60 g ± 1 g, loaded_as: already loaded}", record)
    assert found.charge == record
    assert found.verdict == "outside limits"


def test_somebody_who_does_not_know_is_believed_before_the_file() -> None:
    """Found closed by a person who cannot say what is in it: brim-full."""
    scene = open_scene(read_procedure(GOOD / "refrigerant.yaml"), None, None, cell_closed=True)
    assert scene.charge is None
    assert walk(scene)[0].before.high_kg == pytest.approx(scene.brim_full)


def test_it_is_rehearsed_to_the_end() -> None:
    """The tube is proved by height, warmed, cooled and unplugged."""
    found = asyncio.run(rehearse(GOOD / "refrigerant.yaml", 1))
    assert found.outcome == "completed"
    assert 13e5 < found.highest_pressure < 18e5
