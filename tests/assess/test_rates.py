"""Rates of warming, cooling and letting down, the room's pressure from outside, and dry ice brought for cooling."""

from __future__ import annotations

from dataclasses import replace
from datetime import date
from pathlib import Path

import pytest

from runbook.answers import Margin
from runbook.assess.bind import bind
from runbook.assess.limits import open_extremes
from runbook.assess.rates import falling, temperature_rate
from runbook.assess.room import outside_margins
from runbook.assess.walk import walk
from runbook.charge.letdown import Hole, LetDown
from tests.assess.scenes import loaded, scene

ON = date(2031, 3, 2)
WINDOWS = "difference: up to 110 K,"


def margins(
    folder: Path, kind: str, apparatus: dict[str, str], procedure: dict[str, str] | None = None
) -> dict[str, Margin]:
    """Margins of one kind by line and limit."""
    plan = bind(loaded(folder, procedure, apparatus), ON)
    return {f"{line.number} {m.limit}": m for line in plan.lines for m in line.ahead if m.kind == kind}


@pytest.mark.wiring
def test_a_warming_is_as_fast_as_it_is_stated_or_as_the_source_can(tmp_path: Path) -> None:
    """1 K/min as written; without it 60 W into 1.2 + 2.5 kJ/K, by hand 0.973 K/min. Stuck on always counts so."""
    window = {WINDOWS: f"{WINDOWS} temperature_rate: up to 1.2 K/min,"}
    stated = margins(tmp_path, "temperature rate", window)
    assert stated["3.4 W1"].worst == pytest.approx(1.0 / 60.0)
    assert stated["3.4 W1"].allowed == pytest.approx(1.2 / 60.0)
    free = margins(tmp_path, "temperature rate", window, {" rate: up to 1 K/min,": ""})
    assert free["3.4 W1"].worst == pytest.approx(60.0 / 3700.0)
    assert (free["3.4 W1"].margin or 0.0) > 0.0


@pytest.mark.parametrize(
    ("allowed", "verdict"),
    [("up to 5 K/min", "within limits"), ("up to 0.9 K/min", "outside limits"), ("not known", "not proved")],
)
def test_the_verdict_follows_the_rate_that_a_part_bears(tmp_path: Path, allowed: str, verdict: str) -> None:
    """Also letting down counts, so the rate allowed for the good case is above that one's bound."""
    plan = bind(
        loaded(
            tmp_path,
            None,
            {WINDOWS: f"{WINDOWS} temperature_rate: {allowed},", "from_fluid: 5 W/K": "from_fluid: 0.5 W/K"},
        ),
        ON,
    )
    assert plan.verdict == verdict
    told = [f.message for f in plan.findings if "temperature rate" in f.message]
    assert bool(told) is (verdict != "within limits")
    assert all("K/min" in one or "not known" in one for one in told)


@pytest.mark.wiring
def test_letting_down_cools_the_wall_no_faster_than_its_coupling(tmp_path: Path) -> None:
    """(hottest wall - dry ice) x 5 W/K / 1.2 kJ/K, by hand: (303.15 - 194.15) x 5 / 1200 = 0.454 K/s."""
    lines = walk(there := scene(tmp_path))
    (down,) = [line for line in lines if line.lets_down]
    gap = down.before.hot - down.during.cold
    assert temperature_rate(there, down) == pytest.approx(gap * 5.0 / 1200.0)
    assert gap == pytest.approx(109.0, abs=1.5)


@pytest.mark.wiring
def test_the_pressure_begins_to_fall_as_the_flow_says(tmp_path: Path) -> None:
    """First law of an open vessel: m cv dT = -dm [(h - u) + (T dp/dT - p) / rho], and dp = (dp/dT) dT in the dome."""
    there = scene(tmp_path)
    (down,) = [line for line in walk(there) if line.lets_down]
    fluid, hot = there.substance, down.before.hot
    density = down.before.high_kg / there.volume[0]
    state, both = fluid.state(hot, density), fluid.saturation(hot)
    leaving = LetDown(fluid, there.volume[0]).leaving(state, Hole(0.15e-3, "top"), there.barometer.low_Pa)
    assert leaving.enthalpy == pytest.approx(both.vapour_energy + state.pressure / both.vapour_density)
    slope, energy = fluid.dp_dT(hot, density), state.internal_energy
    assert energy is not None
    drawn = leaving.enthalpy - energy + (hot * slope - state.pressure) / density
    expected = leaving.flow / down.before.high_kg * drawn / fluid.heat_capacity(hot, density) * slope
    assert falling(there, down) == pytest.approx(expected, rel=0.01)


@pytest.mark.parametrize(("allowed", "good"), [("up to 200 bar/min", True), ("up to 0.1 bar/min", False)])
def test_a_seal_that_bears_no_fast_fall(tmp_path: Path, allowed: str, good: bool) -> None:
    """A seal soaked with gas bursts where the pressure falls too fast: its rate is a limit of the let-down alone."""
    found = margins(tmp_path, "pressure rate", {WINDOWS: f"{WINDOWS} pressure_rate: {allowed},"})
    assert set(found) == {"4.5 W1"}
    assert ((found["4.5 W1"].margin or 0.0) > 0.0) is good


def test_a_bore_that_nobody_stated_gives_no_rate(tmp_path: Path) -> None:
    """Unknown is never within limits."""
    found = margins(
        tmp_path, "pressure rate", {WINDOWS: f"{WINDOWS} pressure_rate: up to 200 bar/min,", " bore: 0.15 mm,": ""}
    )
    assert found["4.5 W1"].margin is None


def test_what_is_not_stated_is_not_judged(tmp_path: Path) -> None:
    """The shipped vessel states no rates: no such margin, and no pressure from outside."""
    for kind in ("temperature rate", "pressure rate", "lowest pressure"):
        assert margins(tmp_path, kind, {}) == {}


@pytest.mark.parametrize(
    ("says", "left"),
    [
        ("material: glass,", None),
        ("material: sapphire,", "nothing"),
        ("outside_pressure: not known,", None),
        ("material: glass, outside_pressure: up to 1.1 bar(a),", 0.287e5),
        ("outside_pressure: up to 0.5 bar(a),", -0.313e5),
    ],
)
def test_a_vessel_that_holds_less_than_the_room(tmp_path: Path, says: str, left: float | str | None) -> None:
    """At 0.2 bar inside: glass has to say what it bears from outside; 0.2 - (1.013 - 1.1) bar is left, by hand."""
    there = scene(tmp_path, apparatus={WINDOWS: f"{WINDOWS} {says}"})
    reach = replace(open_extremes(there, 300.0, 290.0), lowest_pressure=0.2e5)
    found = {m.limit: m for m in outside_margins(there, reach, "this step")}
    if left == "nothing":
        assert found == {}
    elif left is None:
        assert found["W1"].margin is None
    else:
        assert found["W1"].margin == pytest.approx(left, abs=0.005e5)


def test_dry_ice_for_cooling_ends_in_the_room(tmp_path: Path) -> None:
    """300 g more in 180 m3: 0.3 kg x 0.546 m3/kg / 180 m3, by hand 910 ppm more than the charge alone."""
    alone = margins(tmp_path, "gas in the room", {})
    more = margins(tmp_path, "gas in the room", {}, {"volume: 180 m3,": "volume: 180 m3, dry_ice: 300 g,"})
    added = (more["4.5 room"].worst or 0.0) - (alone["4.5 room"].worst or 0.0)
    assert added == pytest.approx(910e-6, rel=0.01)
    assert len(more) > len(alone)
