"""Each assumption of the look-ahead, taken away alone, would let something through that must not pass."""

from __future__ import annotations

from dataclasses import dataclass, field, replace
from pathlib import Path

import pytest

from runbook.answers import ChargeBox
from runbook.assess.ahead import look
from runbook.assess.assumptions import ALL
from runbook.assess.bounds import first_blocked, sealing_line
from runbook.assess.boxes import charge_box
from runbook.assess.scene import Scene
from runbook.assess.walk import walk
from tests.assess.scenes import observed, scene


@dataclass(frozen=True)
class Case:
    """A vessel in which one assumption decides."""

    taken_away: str
    procedure: dict[str, str] = field(default_factory=dict)
    apparatus: dict[str, str] = field(default_factory=dict)


COOL_SOURCE = {"cut_out: 38 degC ± 1 K": "cut_out: 32 degC ± 1 K"}
"""A source whose cut-out lies below the lesson's worst wall: then the step itself governs, not the stuck source."""

CASES = [
    Case("heat_stuck_on"),
    Case("volume_corner"),
    Case("equation_uncertainty"),
    Case("air"),
    Case("hottest_room", {"hottest: 30 degC": "hottest: 45 degC"}),
    Case("overshoot", apparatus=COOL_SOURCE),
    Case("lag", apparatus=COOL_SOURCE),
    Case("probe_error", apparatus=COOL_SOURCE),
]


def most(there: Scene) -> float:
    """Most charge that passes [kg], to 0.01 g."""
    low, high = 0.05, 0.27
    while high - low > 1e-5:
        middle = 0.5 * (low + high)
        low, high = (middle, high) if first_blocked(there, middle) is None else (low, middle)
    return low


@pytest.mark.parametrize("case", CASES, ids=lambda c: c.taken_away)
def test_without_it_a_charge_would_wrongly_pass(tmp_path: Path, case: Case) -> None:
    """There is a charge that is refused with all assumptions and passes with one of them taken away."""
    there = scene(tmp_path, case.procedure, case.apparatus)
    blind = scene(tmp_path, case.procedure, case.apparatus, replace(ALL, **{case.taken_away: False}))
    with_all, without = most(there), most(blind)
    assert without > with_all + 5e-5
    between = 0.5 * (with_all + without)
    refused = first_blocked(there, between)
    assert refused is not None
    assert refused.margin is not None
    assert refused.margin <= 0
    assert first_blocked(blind, between) is None


def test_without_the_no_loss_rule_a_heavy_reading_would_wrongly_pass(tmp_path: Path) -> None:
    """At closing the charge is the last reading plus the scale's error; the plan's mass would wave 180 g through."""
    weighed = (observed("mass", 0.180, 4, closed=False),)
    for no_loss, passes in ((True, False), (False, True)):
        there = scene(tmp_path, assume=replace(ALL, no_loss=no_loss))
        box = charge_box(there, None, weighed, closed=False)
        assert isinstance(box, ChargeBox)
        lines = walk(there)
        sealing = sealing_line(lines)
        assert sealing is not None
        found = look(there, lines, sealing, with_times=False, high_kg=box.high_kg)
        blocked = [m for m in found.margins if m.margin is None or m.margin <= 0]
        assert (not blocked) is passes
