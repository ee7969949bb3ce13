"""Explanations of readings: physics of each cause, strike-outs, what is said to be one, the deciding test."""

from __future__ import annotations

from dataclasses import replace
from math import e, isfinite
from pathlib import Path
from random import Random

import pytest

from runbook.answers import ChargeBox, Explanation, Past
from runbook.assess.agreement import agreement, computed_pressure
from runbook.assess.boxes import charge_box
from runbook.assess.evidence.faults import causes, moles_per_pascal
from runbook.assess.evidence.forecast import BEFORE, NONE, Fault, forecast, wall_temperature
from runbook.assess.evidence.given import Given, given, stated_charge
from runbook.assess.evidence.looks import Look, looks
from runbook.assess.evidence.ranking import explanations
from runbook.fluids.substance import substance
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


def wall(at_s: float, celsius: float) -> Past:
    return Past("TT1", "temperature", celsius + 273.15, at_s)


def gauge(at_s: float, bar: float) -> Past:
    return Past("PG1", "pressure", bar * BAR, at_s)


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


@pytest.mark.parametrize("fluid", ["carbon dioxide", "sulfur hexafluoride", "water", "nitrogen", "propane"])
def test_whatever_is_read_ends_in_belief_or_in_nothing(tmp_path: Path, fluid: str) -> None:
    """Impossible readings of any fluid at any filling raise nothing: shares sum to one, or nothing is said."""
    random = Random(fluid)
    of = replace(known(tmp_path, FINE), substance=substance(fluid), _air={})
    said = 0
    for _ in range(30):
        of.charge = of.substance.critical_density * random.choice((0.05, 0.3, 1.0, 1.6, 2.8)) * of.volume
        of.room = of.substance.critical_temperature * random.choice((0.6, 0.9, 0.999, 1.02))
        history: list[Past] = []
        for k in range(random.randint(1, 6)):
            at_s, celsius = 300.0 * k, of.room - 273.15 + random.uniform(0.0, 10.0)
            history.append(wall(at_s, celsius))
            history.append(gauge(at_s, random.choice((-1.0, 0.0, 20.0, 60.0, 900.0, 2e4))))
            if random.random() < 0.3:
                history.append(Past("HS1", "liquid height", random.choice((-0.01, 0.0, 0.03, 0.2)), at_s))
        found = explanations(of, looks(history, "PG1", "TT1", random.choice((0.0, 0.02))))
        said += bool(found)
        assert not found or sum(e.share for e in found) == pytest.approx(1.0)
        assert all(isfinite(e.size) for e in found)
    assert said > 5
