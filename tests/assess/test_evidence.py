"""Explanations of readings: physics of each cause, strike-outs, what is said to be one, the deciding test."""

from __future__ import annotations

from dataclasses import replace
from math import e, erfc, exp, factorial, log, sqrt
from pathlib import Path

import pytest

from runbook.answers import ChargeBox, Explanation, Past
from runbook.assess.agreement import agreement, computed_pressure
from runbook.assess.boxes import charge_box
from runbook.assess.evidence.deciding import TESTS, deciding_test
from runbook.assess.evidence.faults import causes, moles_per_pascal
from runbook.assess.evidence.forecast import BEFORE, NONE, Fault, forecast, wall_temperature
from runbook.assess.evidence.given import Given, given, stated_charge
from runbook.assess.evidence.looks import Look, looks
from runbook.assess.evidence.ranking import Segment, explanations, tail
from runbook.assess.evidence.spread import rooted
from tests.assess.scenes import observed, scene

BAR = 1e5
WALL = 294.15
FINE = {"class: 0.6, division: 1 bar": "class: 0.25, division: 0.1 bar"}
COARSE = {"class: 0.6, division: 1 bar": "class: 1.6, division: 2 bar"}
CHARGE = observed("mass", 0.117, 1, closed=False)


def known(folder: Path, apparatus: dict[str, str], at: float = WALL) -> Given:
    """The shipped vessel with another gauge, 117 g weighed in."""
    found = given(scene(folder, apparatus=apparatus), (CHARGE,), "PG1", "TT1", at)
    assert found is not None
    return found


def by_cause(found: tuple[Explanation, ...]) -> dict[str, Explanation]:
    return {e.cause: e for e in found}


def at_rest(of: Given, over_bar: float) -> tuple[Look, ...]:
    """One pair at 21 degC, the gauge so much over saturation [bar]."""
    return (Look(0.0, WALL, pressure=of.substance.saturation(WALL).pressure + over_bar * BAR),)


# -- one steady pair -----------------------------------------------------------------------------------------

SHOWN = {"2 bar of air": 2.0, "a 2 K lag": 2.72, "1.013 bar offset": 1.013, "a 6 g leak": 0.0}
"""What each does to the gauge at 21 degC [bar]; the lag is 2 K of the saturation curve, checked below."""


def verdict(folder: Path, apparatus: dict[str, str], over_bar: float) -> str:
    """Of gauge against model, leaned on for no more than what the fault itself would use up."""
    there = scene(folder, apparatus=apparatus)
    wall = observed("temperature", WALL, 2)
    box = charge_box(there, None, (CHARGE, wall), True)
    assert box is not None
    read = observed("pressure", there.substance.saturation(WALL).pressure + over_bar * BAR, 3)
    computed = computed_pressure(there, box, wall, 0.0)
    return agreement(there, computed, box, read, max(over_bar, 0.3) * BAR).verdict


@pytest.mark.parametrize("what", SHOWN)
def test_a_coarse_gauge_cannot_tell_any_of_four_faults(tmp_path: Path, what: str) -> None:
    """Class 1.6 with half-divisions of 1 bar: air, lag, leak and offset all lie inside its band."""
    assert verdict(tmp_path, COARSE, SHOWN[what]) == "cannot tell"


@pytest.mark.parametrize("what", SHOWN)
def test_a_fine_gauge_disagrees_for_all_but_the_leak(tmp_path: Path, what: str) -> None:
    """Class 0.25 read to 0.1 bar; a leak changes no pressure while liquid is beside vapour."""
    assert verdict(tmp_path, FINE, SHOWN[what]) == ("cannot tell" if what == "a 6 g leak" else "disagrees")


@pytest.mark.wiring
def test_two_kelvin_of_the_curve_are_what_the_table_says(tmp_path: Path) -> None:
    """From 21 to 23 degC saturation rises by 2.8 bar, within 0.1."""
    fluid = known(tmp_path, FINE).substance
    rise = fluid.saturation(WALL + 2.0).pressure - fluid.saturation(WALL).pressure
    assert rise / BAR == pytest.approx(SHOWN["a 2 K lag"], abs=0.1)


def test_a_coarse_pair_strikes_nothing_out_that_could_be(tmp_path: Path) -> None:
    """2 bar over saturation on a class 1.6 gauge: nothing wrong stays possible beside air, offset and thermometer."""
    of = known(tmp_path, COARSE)
    found = by_cause(explanations(of, at_rest(of, 2.0)))
    for cause in ("none", "trapped air", "gauge offset", "gauge/absolute slip", "thermometer place"):
        assert not found[cause].struck_out, cause


# -- physics of the causes -----------------------------------------------------------------------------------


def test_a_leak_is_never_taken_from_a_two_phase_pressure(tmp_path: Path) -> None:
    """3 bar under saturation with liquid in view: no leak can do it, nor too little at the start."""
    of = known(tmp_path, FINE)
    pair = at_rest(of, -3.0)[0]
    found = by_cause(explanations(of, (replace(pair, height=0.0285),)))
    for cause in ("leak", "under-filled", "over-filled", "trapped air", "none"):
        assert found[cause].struck_out, cause
    assert not found["gauge offset"].struck_out
    assert not found["thermometer place"].struck_out


def test_leaked_dry_is_possible_where_nobody_has_seen_liquid(tmp_path: Path) -> None:
    """The same pressure without a height: a cell that holds vapour alone may have lost the rest."""
    of = known(tmp_path, FINE)
    found = by_cause(explanations(of, at_rest(of, -3.0)))
    assert not found["leak"].struck_out
    assert abs(found["leak"].size) > 0.06
    assert "under-filled" in found["leak"].one_with


def test_a_leak_shows_nothing_while_pressure_agrees(tmp_path: Path) -> None:
    """At saturation a leak is one with nothing wrong: the readings do not tell."""
    of = known(tmp_path, FINE)
    found = by_cause(explanations(of, at_rest(of, 0.0)))
    assert {"leak", "over-filled", "under-filled"} <= set(found["none"].one_with)


def test_a_loss_between_two_weighings_is_a_leak_and_before_the_first_may_be_either(tmp_path: Path) -> None:
    """Only a second look tells a leak from too little at the start."""
    of = known(tmp_path, FINE)
    psat = of.substance.saturation(WALL).pressure
    lost = (Look(0.0, WALL, pressure=psat, mass=0.117), Look(7200.0, WALL, pressure=psat, mass=0.111))
    first = explanations(of, lost)[0]
    assert first.cause == "leak"
    assert first.size == pytest.approx(0.006, abs=0.0006)
    short = (Look(0.0, WALL, pressure=psat, mass=0.111), Look(7200.0, WALL, pressure=psat, mass=0.111))
    found = explanations(of, short)
    assert found[0].cause == "under-filled"
    assert "leak" in found[0].one_with
    assert found[0].test == "weigh"


def test_an_offset_of_one_atmosphere_is_one_with_the_slip(tmp_path: Path) -> None:
    """No reading tells a gauge that is 1.013 bar off from one read absolute for gauge."""
    of = known(tmp_path, FINE)
    psat = of.substance.saturation
    heated = tuple(Look(600.0 * k, t, pressure=psat(t).pressure + 101325.0) for k, t in enumerate((294.15, 300.15)))
    found = by_cause(explanations(of, heated))
    assert "gauge offset" in found["gauge/absolute slip"].one_with
    assert found["gauge/absolute slip"].test == "dial"


def test_an_offset_is_one_with_the_slip_within_the_uncertainty_and_no_further(tmp_path: Path) -> None:
    """1.1 bar on a gauge with U 0.47 bar is taken for one atmosphere; 1.7 bar is not, though it does not exclude it."""
    of = known(tmp_path, FINE)
    assert "gauge/absolute slip" in by_cause(explanations(of, at_rest(of, 1.1)))["gauge offset"].one_with
    further = by_cause(explanations(of, at_rest(of, 1.7)))
    assert "gauge/absolute slip" not in further["gauge offset"].one_with
    assert not further["gauge/absolute slip"].struck_out


def test_a_wrong_unit_carries_the_gauges_error_along(tmp_path: Path) -> None:
    """0.35 bar of the gauge's 0.4, up and down, are 5 in psi: still that unit, and not struck out."""
    of = known(tmp_path, FINE)
    gauge = of.substance.saturation(WALL).pressure - of.barometer
    shown = [(gauge + off * BAR) * 14.503773773 + of.barometer for off in (0.35, -0.35, 0.35)]
    first = explanations(of, tuple(Look(600.0 * k, WALL, pressure=p) for k, p in enumerate(shown)))[0]
    assert first.cause == "wrong unit"
    assert not first.struck_out


def test_what_a_thermometer_was_behind_dies_away_with_its_time_constant(tmp_path: Path) -> None:
    """2 min behind at 1 K/min is 2 K; 2 min after the wall stopped it is 2/e (a first-order instrument)."""
    of = known(tmp_path, FINE)
    of.lag = 120.0
    moving = Look(0.0, WALL, rate=1 / 60.0, still_s=0.0)
    stopped = Look(0.0, WALL, came_at=1 / 60.0, still_s=120.0)
    assert wall_temperature(of, moving, NONE) - WALL == pytest.approx(2.0)
    assert wall_temperature(of, stopped, NONE) - WALL == pytest.approx(2.0 / e)


def test_a_wrong_unit_is_named_with_both_units(tmp_path: Path) -> None:
    """A dial in psi typed as bar."""
    of = known(tmp_path, FINE)
    gauge = of.substance.saturation(WALL).pressure - of.barometer
    read = gauge * 14.503773773 + of.barometer
    first = explanations(of, (Look(0.0, WALL, pressure=read),))[0]
    assert (first.cause, first.detail, first.test) == ("wrong unit", "psi read as bar", "dial")
    assert first.share > 0.99


def test_waiting_tells_a_lag_from_a_misplaced_thermometer(tmp_path: Path) -> None:
    """What is high while warming and right after 10 min at rest is a lag; what stays high is not."""
    of = known(tmp_path, FINE)
    hot, true = 306.15, 308.15
    p = of.substance.pressure(true, 0.117 / of.volume)
    rest = Look(0.0, WALL, pressure=of.substance.saturation(WALL).pressure)
    rising = Look(3000.0, hot, rate=1 / 60.0, still_s=0.0, pressure=p)
    of.lag, of.lag_bound = 0.0, 0.0
    right = Look(3600.0, true, still_s=600.0, came_at=1 / 60.0, pressure=p)
    assert explanations(of, (rest, rising, right))[0].cause == "thermometer lag"
    still = Look(3600.0, hot, still_s=600.0, came_at=1 / 60.0, pressure=p)
    assert explanations(of, (rest, rising, still))[0].cause == "thermometer place"


def test_air_is_weighed_by_what_it_adds_where_it_was_read(tmp_path: Path) -> None:
    """The amount that adds 1 Pa at the first look adds 1 Pa there, by the same rule as the limits use."""
    of = known(tmp_path, FINE)
    look = at_rest(of, 0.0)
    moles = moles_per_pascal(of, look[0])
    added = forecast(of, look, Fault(air=2e5 * moles))[0] - forecast(of, look, NONE)[0]
    assert added == pytest.approx(2e5, rel=1e-9)


def test_a_leak_before_the_first_look_is_gone_at_every_look(tmp_path: Path) -> None:
    """And one that begins at the first look has lost half of it halfway."""
    of = known(tmp_path, FINE)
    of.charge = 0.117
    three = tuple(Look(3600.0 * k, WALL, mass=0.1) for k in range(3))
    assert forecast(of, three, Fault(leak=0.006, leak_from=BEFORE)) == pytest.approx([0.111] * 3)
    assert forecast(of, three, Fault(leak=0.006, leak_from=0.0)) == pytest.approx([0.117, 0.114, 0.111])


def test_readings_the_models_do_not_reach_explain_nothing(tmp_path: Path) -> None:
    """A thermometer at 1200 K is not explained away."""
    assert explanations(known(tmp_path, FINE), (Look(0.0, 1200.0, pressure=60 * BAR),)) == ()


def test_every_cause_spreads_its_whole_belief(tmp_path: Path) -> None:
    """Weights of a cause's sizes sum to one, so that no cause is favoured by how it is cut up."""
    of = known(tmp_path, FINE)
    look = at_rest(of, 0.0)
    for cause in causes(of, look, moles_per_pascal(of, look[0])):
        assert sum(t.weight for t in cause.tracks) == pytest.approx(1.0), cause.name


def test_the_charge_as_stated_is_the_plans_as_far_as_the_scale_bears_it_out(tmp_path: Path) -> None:
    """Above the plan it had not fallen yet; below it there was never more; without a weighing the plan itself."""
    there = scene(tmp_path)
    error = 0.00055
    for weighed, low, high in ((0.132, 0.115, 0.119), (0.117, 0.115, 0.117), (0.110, 0.110, 0.110)):
        middle, half = stated_charge(there, (observed("mass", weighed, 1, closed=False),))
        assert (middle - half, middle + half) == pytest.approx((low - error, high + error)), weighed
    assert stated_charge(there, ()) == pytest.approx((0.117, 0.002))
    loaded = scene(tmp_path, charge=ChargeBox(0.112, 0.114, True, ("weighing",)))
    assert stated_charge(loaded, ()) == pytest.approx((0.113, 0.001))


# -- arithmetic ----------------------------------------------------------------------------------------------


@pytest.mark.independent
@pytest.mark.parametrize("readings", [2, 4, 10, 16])
def test_the_tail_is_as_rare_as_three_and_a_half_sigma(readings: int) -> None:
    """Never commoner, and rarer by 25 % at most.

    Against chi-square's own distribution function for an even number (Abramowitz and Stegun 26.4.5).
    """
    half = 0.5 * tail(readings)
    beyond = exp(-half) * sum(half**k / factorial(k) for k in range(readings // 2))
    assert 0.75 < beyond / erfc(3.5 / sqrt(2.0)) < 1.02


@pytest.mark.parametrize(
    ("start", "end"),
    [((3.0, -1.0), (-2.0, 4.0)), ((9.0,), (60.0,)), ((-60.0,), (-9.0,)), ((1.0, 2.0), (1.0, 2.0)), ((0.0,), (300.0,))],
)
def test_a_segment_integrates_as_small_steps_do(start: tuple[float, ...], end: tuple[float, ...]) -> None:
    """The closed form against 200,000 midpoints, to 1e-5 of the logarithm."""
    steps = 200_000
    logs = []
    for k in range(steps):
        t = (k + 0.5) / steps
        logs.append(-0.5 * sum((s + t * (e - s)) ** 2 for s, e in zip(start, end, strict=True)))
    top = max(logs)
    total = sum(exp(v - top) for v in logs) / steps
    assert Segment.between(start, end).log_integral() == pytest.approx(top + log(total), abs=1e-5)


def test_whitening_undoes_a_covariance() -> None:
    """Of [[4, 2], [2, 5]] the squares of (2, 3) are 2 by hand and the determinant is 16."""
    root = rooted(((4.0,), (2.0, 5.0)))
    assert sum(z * z for z in root.whitened((2.0, 3.0))) == pytest.approx(2.0)
    assert exp(root.log_det) == pytest.approx(16.0)


# -- tests at the bench --------------------------------------------------------------------------------------


def test_the_deciding_test_would_be_answered_differently_by_the_two() -> None:
    """The quickest that shows one and not the other; weighing where both are about the charge."""
    assert deciding_test("gauge offset", "trapped air", False) == "re-zero"
    assert deciding_test("thermometer place", "thermometer lag", False) == "wait"
    assert deciding_test("gauge/absolute slip", "gauge offset", False) == "dial"
    assert deciding_test("under-filled", "none", False) == "height"
    assert deciding_test("under-filled", "none", True) == "weigh"
    assert deciding_test("under-filled", "leak", False) == "weigh"
    assert deciding_test("none", None, False) == ""


def test_tests_stand_in_the_order_of_how_quick_they_are() -> None:
    """Dial, tap and re-zero, second thermometer, ten minutes, height, scale."""
    assert [name for name, _ in TESTS] == ["dial", "re-zero", "second thermometer", "wait", "height", "weigh"]


# -- looks ---------------------------------------------------------------------------------------------------


def wall(at_s: float, celsius: float) -> Past:
    return Past("TT1", "temperature", celsius + 273.15, at_s)


def gauge(at_s: float, bar: float) -> Past:
    return Past("PG1", "pressure", bar * BAR, at_s)


def test_a_pressure_needs_a_temperature_beside_it() -> None:
    """Two minutes at most; a later one is left out, one of another gauge too."""
    other = Past("PG2", "pressure", 1.0 * BAR, 0.0)
    found = looks((wall(0.0, 21.0), gauge(60.0, 59.0), gauge(900.0, 60.0), other), "PG1", "TT1")
    assert [look.pressure for look in found] == [59.0 * BAR]


def test_beside_a_moving_thermometer_a_later_pressure_is_of_a_later_temperature() -> None:
    """At 1 K a minute, a pressure read a minute later stands beside 1 K more."""
    history = (wall(0.0, 24.0), wall(180.0, 27.0), gauge(240.0, 69.0))
    look = looks(history, "PG1", "TT1")[0]
    assert look.rate == pytest.approx(1 / 60.0)
    assert look.temperature == pytest.approx(301.15)


def test_ten_minutes_without_a_change_stand_still_and_remember_the_rise() -> None:
    """What a thermometer was behind dies away with the time since."""
    history = (wall(0.0, 29.0), wall(240.0, 33.0), wall(840.0, 33.1), gauge(840.0, 77.0))
    look = looks(history, "PG1", "TT1")[0]
    assert (look.rate, look.still_s) == (0.0, 600.0)
    assert look.came_at == pytest.approx(1 / 60.0, rel=0.01)


def test_one_temperature_under_heat_may_be_moving_at_any_rate_up_to_the_fastest() -> None:
    """With nothing to say it the rate is half the fastest, give or take as much; without heat it stands."""
    pair = (wall(0.0, 24.0), gauge(0.0, 63.0))
    moving = looks(pair, "PG1", "TT1", fastest=0.02)[0]
    assert (moving.rate, moving.rate_bound) == (0.01, 0.01)
    assert looks(pair, "PG1", "TT1")[0].rate == 0.0
