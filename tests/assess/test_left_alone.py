"""Left alone: end states, what refuses an over-filled vessel, and when."""

from __future__ import annotations

from pathlib import Path

import pytest

from runbook.assess.ahead import look
from runbook.assess.assumptions import Assumptions
from runbook.assess.bounds import sealing_line
from runbook.assess.corners import highest_pressure, nominal_pressure
from runbook.assess.walk import walk
from tests.assess.scenes import scene

NOMINAL = Assumptions(volume_corner=False, equation_uncertainty=False, air=False)
BAR = 1e5


@pytest.mark.wiring
@pytest.mark.parametrize(
    ("grams", "celsius", "bar"),
    [(117.0, 21.0, 58.648), (180.0, 30.0, 83.570), (225.0, 21.0, 151.78), (32.5, 20.0, 47.907)],
)
def test_end_states_at_the_nominal_volume(tmp_path: Path, grams: float, celsius: float, bar: float) -> None:
    """End states in nominal 250.0 mL, no air, no uncertainty: Span and Wagner 1996 through CoolProp, 0.02 %."""
    found = nominal_pressure(scene(tmp_path), grams / 1000, celsius + 273.15)
    assert found == pytest.approx(bar * BAR, rel=2e-4)


def test_180_g_is_at_rest_with_heat_off_and_refused_with_heat_stuck_on(tmp_path: Path) -> None:
    """180 g rests at 30 degC under the ceiling; the source stuck on at 39 degC and the lesson's 35 degC refuse it."""
    nominal = scene(tmp_path, assume=NOMINAL)
    ceiling = 94.848 * BAR + 101325.0
    assert highest_pressure(nominal, 0.180, 303.15).value == pytest.approx(83.570 * BAR, rel=2e-4)
    stuck = highest_pressure(nominal, 0.180, 312.15).value
    lesson = highest_pressure(nominal, 0.180, 308.15).value
    assert stuck is not None
    assert lesson is not None
    assert (stuck - 101325.0) / BAR == pytest.approx(116.0, abs=0.1)
    assert (lesson - 101325.0) / BAR == pytest.approx(101.0, abs=0.5)
    assert min(stuck, lesson) > ceiling
    corner = scene(tmp_path, assume=Assumptions(equation_uncertainty=False, air=False))
    for kelvin, bar in ((312.15, 121.0), (308.15, 105.0)):
        # The plan's 180 ± 2 g in 250 ± 2 mL.
        worst = highest_pressure(corner, 0.182, kelvin).value
        assert worst is not None
        assert (worst - 101325.0) / BAR == pytest.approx(bar, abs=0.5)


def test_closing_on_180_g_names_the_stuck_source(tmp_path: Path) -> None:
    """The look-ahead at closing refuses 180 g by the relief disc, with the heat stuck on."""
    there = scene(tmp_path)
    lines = walk(there, (0.180, 0.180))
    sealing = sealing_line(lines)
    assert sealing is not None
    found = look(there, lines, sealing, with_times=False, high_kg=0.180)
    governing = next(m for m in found.margins if m.kind == "pressure")
    assert governing.limit == "RD1"
    assert governing.cause == "heat stuck on"
    assert governing.margin is not None
    assert governing.margin < 0


def test_an_over_filled_vessel_passes_its_ceiling_by_itself_at_a_time(tmp_path: Path) -> None:
    """225 g: heat off alone passes the ceiling, and the time is worked out; 117 g never does."""
    there = scene(tmp_path)
    for grams, falls in ((0.225, True), (0.117, False)):
        lines = walk(there, (grams, grams))
        sealing = sealing_line(lines)
        assert sealing is not None
        alone = look(there, lines, sealing, with_times=True, high_kg=grams).left_alone
        off = alone.futures[0]
        assert off.cause == "heat off"
        assert (off.limit_after_s is not None) is falls
        assert off.at_rest is not falls
        if off.limit_after_s is not None:
            assert 60.0 < off.limit_after_s < 4 * 3600.0
