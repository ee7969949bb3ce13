"""The charge as a best estimate: every way of measuring it, with its U; it never moves a limit."""

from __future__ import annotations

from pathlib import Path

import pytest

from runbook.answers import ChargeBox, ChargeEstimate, Observation
from runbook.assess.boxes import charge_box
from runbook.assess.evidence.estimate import charge_estimate
from tests.assess.scenes import observed, scene

WEIGHED = observed("mass", 0.1170, 3, closed=False)
CLOSED = observed("mass", 0.1170, 4)
COOL = observed("temperature", 294.15, 10)


def estimate(folder: Path, *seen: Observation, record: ChargeBox | None = None) -> ChargeEstimate:
    found = charge_estimate(scene(folder), record, seen)
    assert found is not None
    return found


def parts(found: ChargeEstimate) -> dict[str, tuple[float, float]]:
    return {p.how: (p.kg, p.U) for p in found.parts}


def test_a_weighing_of_the_closed_vessel_is_as_good_as_the_scale(tmp_path: Path) -> None:
    """0.5 g and half a division of 0.1 g, both rectangular: U = 2 x sqrt(0.5^2 + 0.05^2)/sqrt 3 = 0.58 g."""
    found = estimate(tmp_path, CLOSED)
    assert found.kg == pytest.approx(0.117)
    # sqrt(0.5^2 + 0.05^2) x 2 / sqrt 3, by hand.
    assert abs(found.U - 0.00058) < 1e-5


def test_a_weighing_before_closing_may_have_lost_what_the_plan_allows(tmp_path: Path) -> None:
    """Closed on the falling weight: from the plan's least, 115 g, to the reading, with the scale's error on both."""
    found = estimate(tmp_path, observed("mass", 0.1300, 3, closed=False))
    assert found.kg == pytest.approx((0.115 + 0.130) / 2.0)
    assert abs(found.U - (0.130 - 0.115 + 2 * 0.00055) / 3.0**0.5) < 1e-9


def test_a_height_is_worth_about_four_grams_in_the_lying_cell(tmp_path: Path) -> None:
    """0.33 mm/g: 1 mm and half a division of 1 mm are U 3.9 g, and 2 mL of volume makes it 4.0 g."""
    found = parts(estimate(tmp_path, WEIGHED, COOL, observed("liquid height", 0.0285, 11)))
    kg, U = found["height"]
    assert kg == pytest.approx(0.117, abs=0.003)
    assert 0.0033 < U < 0.0045


def test_pressure_is_blind_with_two_phases_and_near_critical(tmp_path: Path) -> None:
    """It says nothing of the charge while liquid is in view, nor a class 0.6 gauge just beyond."""
    assert estimate(tmp_path, WEIGHED, COOL, observed("pressure", 58.7e5, 12)).blind == ("pressure",)
    hot = observed("temperature", 306.15, 10)
    assert estimate(tmp_path, WEIGHED, hot, observed("pressure", 77.0e5, 12)).blind == ("pressure",)


def test_pressure_measures_an_over_filled_vessel(tmp_path: Path) -> None:
    """At 200 g and 25 degC the gauge gives the charge within 2 g: one phase, and steep."""
    there = scene(tmp_path)
    read = there.substance.pressure(298.15, 0.200 / 250e-6)
    seen = (
        observed("mass", 0.2000, 3),
        observed("temperature", 298.15, 10),
        observed("pressure", read, 12),
    )
    found = charge_estimate(there, None, seen)
    assert found is not None
    kg, U = parts(found)["pressure"]
    assert kg == pytest.approx(0.200, abs=1e-4)
    assert U < 0.004


def test_parts_that_agree_narrow_and_parts_that_contradict_widen(tmp_path: Path) -> None:
    """117 g weighed and the height of 117 g are better than either; the height of 140 g makes U wider than both."""
    alone = estimate(tmp_path, CLOSED)
    agreeing = estimate(tmp_path, CLOSED, COOL, observed("liquid height", 0.0285, 11))
    assert agreeing.U <= alone.U
    contradicting = estimate(tmp_path, CLOSED, COOL, observed("liquid height", 0.0370, 11))
    assert contradicting.U > alone.U


def test_the_charge_record_counts_where_nothing_was_weighed(tmp_path: Path) -> None:
    """Its bounds are rectangular."""
    found = estimate(tmp_path, record=ChargeBox(0.115, 0.119, True, ("weighing",)))
    assert found.kg == pytest.approx(0.117)
    assert abs(found.U - 0.00231) < 1e-5


def test_nothing_read_is_no_estimate(tmp_path: Path) -> None:
    """It never falls back on the plan."""
    assert charge_estimate(scene(tmp_path), None, ()) is None


def test_the_estimate_never_lowers_what_limits_are_judged_with(tmp_path: Path) -> None:
    """Best estimate and charge box are two things: the box stays at the heavier weighing at closing."""
    there = scene(tmp_path)
    seen = (observed("mass", 0.1300, 3, closed=False), observed("mass", 0.1170, 5), COOL)
    found, box = charge_estimate(there, None, seen), charge_box(there, None, seen, True)
    assert found is not None
    assert box is not None
    assert found.kg == pytest.approx(0.117, abs=0.0005)
    assert box.high_kg == pytest.approx(0.13055, abs=1e-6)
