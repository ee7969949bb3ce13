"""What can my instruments tell, asked at the desk: each instrument against the faults that happen."""

from __future__ import annotations

from dataclasses import replace
from datetime import date
from pathlib import Path

import pytest

from runbook.answers import Telling
from runbook.assess.bind import bind
from runbook.assess.evidence.desk import what_instruments_tell
from runbook.run.evidence_words import telling_lines
from tests.assess.scenes import loaded, scene

FINE = {"class: 0.6, division: 1 bar": "class: 0.25, division: 0.1 bar"}


def rows(folder: Path, apparatus: dict[str, str] | None = None) -> dict[tuple[str, str], Telling]:
    """By instrument and fault."""
    return {(t.tag, t.fault): t for t in what_instruments_tell(scene(folder, apparatus=apparatus))}


def test_a_class_0_6_gauge_sees_neither_a_bar_of_air_nor_a_slip(tmp_path: Path) -> None:
    """Class 0.25 would see both; 2 K of lag is seen."""
    found = rows(tmp_path)
    for fault in ("trapped air", "gauge/absolute slip"):
        assert not found["PG1", fault].seen
        assert found["PG1", fault].wanted == "0.25"
    assert found["PG1", "thermometer lag"].seen


def test_the_class_that_was_wanted_does_see_them(tmp_path: Path) -> None:
    """What the desk asks for is enough when it is bought."""
    found = rows(tmp_path, FINE)
    assert found["PG1", "trapped air"].seen
    assert found["PG1", "gauge/absolute slip"].seen


def test_a_leak_shows_in_the_height_and_on_the_scale_alone(tmp_path: Path) -> None:
    """2 mm in this cell, 0.33 mm/g and a little more near the axis; no gauge of any class at any size."""
    for apparatus in (None, FINE):
        found = rows(tmp_path, apparatus)
        assert found["HS1", "leak"].seen
        assert found["HS1", "leak"].shift == pytest.approx(0.0021, abs=0.0003)
        assert found["BS1", "leak"].seen
        assert (found["PG1", "leak"].least, found["PG1", "leak"].wanted) == (None, "")


def test_the_smallest_size_seen_moves_the_reading_by_the_band(tmp_path: Path) -> None:
    """Where the reading follows the size evenly, least / size = band / shift."""
    for row in rows(tmp_path).values():
        if row.least is not None:
            assert row.least / row.size == pytest.approx(row.band / row.shift)
            assert row.seen == (row.least < row.size)


def test_a_gauge_that_ends_below_the_pressure_at_rest_tells_nothing(tmp_path: Path) -> None:
    """It is not asked: the pressure at rest is beyond its dial."""
    found = rows(tmp_path, {"dial: 0 bar(g) to 160 bar(g)": "dial: 0 bar(g) to 40 bar(g)"})
    assert not [tag for tag, _ in found if tag == "PG1"]


def test_the_sentences_name_instrument_fault_and_class(tmp_path: Path) -> None:
    """One line an instrument, at most as many as asked for; an older plan without the rows says nothing."""
    plan = bind(loaded(tmp_path), date(2031, 3, 2))
    lines = telling_lines(plan)
    assert lines[0].startswith("PG1 (class 0.6) shows a thermometer 2.0 K behind; does not show 1.0 bar of air or")
    assert "(class 0.25 would)" in lines[0]
    assert lines[0].endswith("says nothing of how much is in it while liquid is in view")
    assert any(line.startswith("HS1 shows a leak of 6.0 g (2.") for line in lines)
    assert telling_lines(plan, 2) == lines[:2]
    assert telling_lines(replace(plan, telling=())) == []
