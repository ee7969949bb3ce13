"""How much is in the vessel: the worse governs until something proves otherwise."""

from __future__ import annotations

from pathlib import Path

import pytest

from runbook.answers import ChargeBox, Observation
from runbook.assess.boxes import charge_box
from tests.assess.scenes import observed, scene

WEIGHED = observed("mass", 0.1300, 3, closed=False)
T = observed("temperature", 294.15, 10)


def box(tmp_path: Path, *seen: Observation, closed: bool = True, record: ChargeBox | None = None) -> ChargeBox:
    """The box of these readings."""
    found = charge_box(scene(tmp_path), record, seen, closed)
    assert found is not None
    return found


def test_at_closing_it_is_the_reading_and_the_scales_error(tmp_path: Path) -> None:
    """No loss is assumed between the last reading and the closing; half a division may be misread."""
    found = box(tmp_path, WEIGHED)
    assert found.high_kg == pytest.approx(0.13055, abs=1e-6)
    assert not found.proved


def test_a_closed_vessel_nobody_weighed_is_brim_full(tmp_path: Path) -> None:
    """Unknown counts as full of tamped dry ice, 1.1 kg/L."""
    found = box(tmp_path)
    assert found.high_kg == pytest.approx(1.1 * 0.252, rel=1e-3)
    assert not found.proved


def test_one_persons_measurements_prove_but_do_not_lower_the_most(tmp_path: Path) -> None:
    """The most comes down only on a second measurement by another person."""
    height = observed("liquid height", 0.0285, 11)
    found = box(tmp_path, WEIGHED, T, height)
    assert found.proved
    assert found.high_kg == pytest.approx(0.13055, abs=1e-6)
    again = observed("liquid height", 0.0287, 12, by="R. Amsel")
    assert box(tmp_path, WEIGHED, T, height, again).high_kg == pytest.approx(0.13055, abs=1e-6)


def test_two_peoples_measurements_lower_the_most_to_the_worse_of_them(tmp_path: Path) -> None:
    """Each person counts with their worst reading."""
    first = observed("liquid height", 0.0285, 11)
    second = observed("liquid height", 0.0290, 12, by="T. Okoro")
    found = box(tmp_path, WEIGHED, T, first, second)
    assert found.high_kg < 0.13055
    assert found.high_kg > 0.117


def test_a_height_that_says_more_than_was_weighed_governs(tmp_path: Path) -> None:
    """A contradiction leaves the worse standing, named, and nothing proved."""
    found = box(tmp_path, observed("mass", 0.1170, 3, closed=False), T, observed("liquid height", 0.050, 11))
    assert found.contradiction
    assert not found.proved
    assert found.high_kg > 0.150


def test_a_height_above_critical_proves_nothing(tmp_path: Path) -> None:
    """Without a surface there is no height to lean on."""
    hot = observed("temperature", 306.15, 10)
    assert not box(tmp_path, WEIGHED, hot, observed("liquid height", 0.0285, 11)).proved


def test_a_loaded_vessel_has_to_be_proved_again(tmp_path: Path) -> None:
    """The charge record says how much, and a run proves it anew before it leans on it."""
    record = ChargeBox(0.115, 0.119, True, ("weighing",))
    found = box(tmp_path, record=record)
    assert (found.low_kg, found.high_kg, found.proved) == (0.115, 0.119, False)


def test_an_empty_open_vessel_has_no_charge(tmp_path: Path) -> None:
    """Nothing weighed, nothing recorded, open: nothing is in."""
    assert charge_box(scene(tmp_path), None, (), closed=False) is None
