"""The parts that explanations are made of: arithmetic, which test decides, readings put together."""

from __future__ import annotations

from math import erfc, exp, factorial, log, sqrt

import pytest

from runbook.answers import Past
from runbook.assess.evidence.deciding import TESTS, deciding_test
from runbook.assess.evidence.looks import looks
from runbook.assess.evidence.ranking import Segment, tail
from runbook.assess.evidence.spread import rooted

BAR = 1e5


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
