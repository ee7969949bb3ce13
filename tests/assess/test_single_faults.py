"""One thing wrong at a time: a valve left as it was, cooling lost, nobody there."""

from __future__ import annotations

from datetime import date
from pathlib import Path

import pytest

from runbook.answers import Finding, Plan
from runbook.assess.bind import bind
from tests.assess.scenes import loaded

ON = date(2031, 3, 2)
RV2 = (
    "  - {tag: RV2, kind: relief valve, space: low gauge line, opens_at: 9 bar(g), tolerance: 3 %, run_below: 90 %, "
    "fitted: 2031-02-11, valid_until: 2032-02-11, source: test sheet}\n"
)


def plan(folder: Path, apparatus: dict[str, str], procedure: dict[str, str] | None = None) -> Plan:
    """The shipped files with these changes."""
    return bind(loaded(folder, procedure, apparatus), ON)


def found(made: Plan) -> list[Finding]:
    """Findings under the rule."""
    return [f for f in made.findings if f.rule == "single fault"]


def test_the_shipped_vessel_bears_a_valve_left_open(tmp_path: Path) -> None:
    """V3 left open: RV2 opens at 9.3 bar(g) at most, and PG2 reads to 10 bar(g)."""
    assert found(plan(tmp_path, {})) == []


@pytest.mark.parametrize(
    ("changes", "says"),
    [
        ({RV2: ""}, "no relief in the low gauge line"),
        ({"opens_at: 9 bar(g)": "opens_at: 20 bar(g)"}, "bears 11.0 bar(a)"),
    ],
)
def test_a_low_gauge_with_nothing_to_keep_it(tmp_path: Path, changes: dict[str, str], says: str) -> None:
    """Without a relief valve of its own, or with one that opens too late, the low gauge sees the whole pressure."""
    (one, *_) = found(plan(tmp_path, changes))
    assert one.severity == "error"
    assert "V3 left open" in one.message
    assert "PG2" in one.message
    assert says in one.message
    assert plan(tmp_path, changes).verdict != "within limits"


def test_a_part_behind_the_valve_that_nobody_rated(tmp_path: Path) -> None:
    """Unknown is not enough."""
    hose = "components:\n  - {tag: L1, what: gauge hose, space: low gauge line, pressure: not known, temperature: -80 degC to 80 degC, source: none}\n"  # noqa: E501
    (one, *_) = found(plan(tmp_path, {"components:\n": hose}))
    assert "L1" in one.message
    assert "not known" in one.message


def test_cooling_that_is_lost_is_judged_to_the_hottest_room(tmp_path: Path) -> None:
    """180 g kept at 5 degC would be far below every limit; left alone it ends at the hottest room, 30 degC."""
    wide = {
        "mass: 117 g ± 2 g": "mass: 180 g ± 2 g",
        "accept: 115 g to 119 g": "accept: 178 g to 182 g",
        "path: {cool_to: 30 degC, by_means_of: H1, set_to: 25 degC, rate: up to 2 K/min}":
        "path: {cool_to: 5 degC, by_means_of: cold water}",
    }
    made = plan(tmp_path, {}, wide)
    cold = next(line for line in made.lines if line.number == "3.6")
    off = cold.left_alone.futures[0]
    assert (off.cause, off.at_rest) == ("heat off", False)
    assert off.ends_K == pytest.approx(303.15)
