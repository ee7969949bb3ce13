"""One live evaluation: margins, agreement and what it proves, phases, distance."""

from __future__ import annotations

from dataclasses import replace
from pathlib import Path

import pytest

from runbook.answers import Answer, ChargeBox, Judgement, Observation, Phase
from runbook.assess.now import answer
from runbook.assess.plan_line import kind_of
from runbook.assess.scene import Scene
from runbook.assess.walk import Walked, walk
from runbook.procedure.model import WarmTo
from tests.assess.scenes import observed, question, scene

BAR = 1e5
LOADED = (
    observed("mass", 0.1172, 3, closed=False),
    observed("mass", 0.1171, 5),
    observed("temperature", 294.15, 10),
    observed("liquid height", 0.0285, 11, by="T. Okoro"),
)


def warming(there: Scene) -> tuple[tuple[Walked, ...], int]:
    """The walk and the index of the lesson's warming."""
    lines = walk(there)
    return lines, next(i for i, w in enumerate(lines) if w.warms)


def ask(there: Scene, *seen: Observation, source: str = "unplugged", at: int = -1, to: int = 0) -> Answer:
    """Standing before the warming unless told otherwise."""
    lines, index = warming(there)
    return answer(there, lines, question(index + at, index + to, LOADED + seen, source=source))


def test_before_the_lesson_everything_is_clear_and_agrees(tmp_path: Path) -> None:
    """At 21 degC with the right gauge reading the warming may be entered, and two phases prove no charge."""
    found = ask(scene(tmp_path), observed("pressure", 58.65 * BAR, 12))
    assert all(m.judgement is not Judgement.BLOCKED for m in (*found.now, *found.ahead))
    assert found.agreement.verdict == "agrees"
    assert found.agreement.proves == "thermometer and gauge"
    assert found.phases == (Phase.C,)
    assert found.charge_proved
    assert found.left_alone.at_rest
    assert found.region == "liquid+vapour"


def test_a_gauge_far_from_the_computed_pressure_disagrees(tmp_path: Path) -> None:
    """3 bar over saturation is outside the band of a class 0.6 gauge and a class A thermometer."""
    assert ask(scene(tmp_path), observed("pressure", 61.9 * BAR, 12)).agreement.verdict == "disagrees"


def test_agreement_looser_than_the_margin_cannot_tell(tmp_path: Path) -> None:
    """With a class 4 gauge the band is as wide as what the step has left."""
    there = scene(tmp_path, apparatus={"class: 0.6": "class: 4.0"})
    assert ask(there, observed("pressure", 58.65 * BAR, 12)).agreement.verdict == "cannot tell"


def test_without_a_gauge_reading_there_is_no_agreement(tmp_path: Path) -> None:
    """No reading is not agreement."""
    assert ask(scene(tmp_path)).agreement.verdict == "no reading"


def test_the_worse_of_measured_and_computed_governs(tmp_path: Path) -> None:
    """A gauge at 96 bar(g) blocks the margin now, whatever the model says."""
    found = ask(scene(tmp_path), observed("pressure", 97.0 * BAR, 12))
    worst = next(m for m in found.now if m.limit == "RD1" and m.kind == "pressure")
    assert worst.judgement is Judgement.BLOCKED


def test_one_phase_far_above_critical_is_phase_e_and_lasts_minutes(tmp_path: Path) -> None:
    """At 33 degC with the source on the distance is in bar, kelvin and minutes along the isochore."""
    hot = (observed("temperature", 306.15, 20), observed("pressure", 77.5 * BAR, 21))
    found = ask(scene(tmp_path), *hot, source="on", at=0, to=1)
    assert Phase.E in found.phases
    assert found.distance.seconds is not None
    assert 60.0 < found.distance.seconds < 3600.0
    assert found.good_for_s == pytest.approx(found.distance.seconds / 2)


def test_an_over_filled_vessel_is_phase_d_and_not_at_rest(tmp_path: Path) -> None:
    """225 g closed: liquid-full in the room alone, so the phase says do not wait."""
    there = scene(tmp_path)
    lines, index = warming(there)
    record = ChargeBox(0.224, 0.226, True, ("weighing",))
    found = answer(there, lines, question(index - 1, index, (observed("temperature", 288.15, 10),), charge=record))
    assert Phase.D in found.phases
    assert not found.left_alone.at_rest


def test_a_closed_vessel_with_solid_and_no_weighing_is_phase_b(tmp_path: Path) -> None:
    """Charge doubtful, solid in: the first act is to open the vent."""
    there = scene(tmp_path)
    lines, index = warming(there)
    cold = observed("temperature", 200.15, 10)
    found = answer(there, lines, question(index - 1, index, (cold,)))
    assert Phase.B in found.phases


def test_an_isolated_gauge_is_not_leaned_on(tmp_path: Path) -> None:
    """PG2 behind its shut isolator says nothing of the cell."""
    there = scene(tmp_path)
    lines, index = warming(there)
    low = Observation("PG2", "pressure", 5 * BAR, 12, "R. Amsel", True)
    found = answer(there, lines, question(index - 1, index, (*LOADED, low)))
    assert found.agreement.verdict == "no reading"


def test_an_open_isolator_brings_the_low_gauges_limit(tmp_path: Path) -> None:
    """With V3 open or not known the low gauge bears the charge: blocked."""
    there = scene(tmp_path)
    lines, index = warming(there)
    seen = (*LOADED, observed("pressure", 58.65 * BAR, 12))
    for position in ("open", "do not know"):
        found = answer(there, lines, question(index - 1, index, seen, valves={"V3": position}))
        assert any(m.limit in ("PG2", "RV2") and m.judgement is Judgement.BLOCKED for m in found.now)


def test_every_line_of_the_walk_has_a_kind_and_a_number(tmp_path: Path) -> None:
    """Numbers are part.step from 1, holds are lines of their own."""
    lines = walk(scene(tmp_path))
    assert len({w.number for w in lines}) == len(lines)
    assert lines[0].number == "1.1"
    assert {kind_of(w.step).value for w in lines} >= {"do", "hold", "quick", "show empty", "parked"}
    assert isinstance(lines[warming(scene(tmp_path))[1]].verb, WarmTo)


def test_a_gauge_read_over_the_open_vessel_is_not_compared_with_the_closed_charge(tmp_path: Path) -> None:
    """Zero before closing is no disagreement with 58 bar after it: there is no reading to compare yet."""
    found = ask(scene(tmp_path), observed("pressure", 1.0 * BAR, 2, closed=False))
    assert found.agreement.verdict == "no reading"


def test_a_temperature_kept_beside_a_height_is_not_the_walls(tmp_path: Path) -> None:
    """Read at 30 degC with a height, at 21 degC since: margins are those of 21 degC; alone it is no reading."""
    there = scene(tmp_path)
    kept = replace(observed("temperature", 303.15, 8), beside=True)
    with_it, without = ask(there, kept), ask(there)
    assert with_it.pressure == without.pressure
    lines, index = warming(there)
    alone = answer(there, lines, question(index - 1, index, (LOADED[0], kept)))
    assert alone.pressure is None
