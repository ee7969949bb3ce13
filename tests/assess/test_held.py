"""A vent that is shut only while a hand presses it: what the hand may reach, and what happens when it is gone."""

from __future__ import annotations

from datetime import date
from pathlib import Path

import pytest

from runbook.answers import Effect, Hazard, Margin, Observation, Phase, Plan, Question
from runbook.assess.bind import bind
from runbook.assess.futures import left_alone
from runbook.assess.held import stuck_pressure
from runbook.assess.now import answer
from runbook.assess.walk import Walked, walk
from tests.assess.tube import ISSUED, scene, tube

ON = date.fromisoformat(ISSUED)


def plan(folder: Path, procedure: dict[str, str] | None = None, vessel: dict[str, str] | None = None) -> Plan:
    """The plan of the changed files on the day of issue."""
    return bind(tube(folder, procedure, vessel), ON, 101325.0)


def held_lines(lines: tuple[Walked, ...]) -> list[int]:
    """Those in which a hand keeps the vessel shut."""
    return [i for i, line in enumerate(lines) if line.held is not None]


def blocked(found: Plan) -> set[tuple[str, str, str]]:
    """(limit, kind, cause) of every margin of the plan that is gone or unknown."""
    bad = [m for line in found.lines for m in line.ahead if m.margin is None or m.margin <= 0.0]
    return {(m.limit, m.kind, m.cause) for m in bad}


def test_the_shipped_tube_is_within_limits(tmp_path: Path) -> None:
    """Four closings and the proof of empty, each below the ceiling of 0.9 x 0.97 x 7 bar(g) and each let go again."""
    found = plan(tmp_path)
    assert (found.verdict, blocked(found)) == ("within limits", set())
    assert found.ceiling == pytest.approx(101325.0 + 0.9 * 0.97 * 7e5)
    assert len(held_lines(walk(scene(tmp_path)))) == 5


def test_a_sequence_that_ends_open_was_closed_all_the_same(tmp_path: Path) -> None:
    """Judged by its end alone it would raise nothing; it closes, so it raises, and leaves the vessel letting down."""
    lines = walk(scene(tmp_path))
    line = lines[held_lines(lines)[1]]
    assert line.seals
    assert line.during.closed
    assert not line.after.closed
    assert line.after.letting_down
    found = plan(tmp_path).lines[held_lines(lines)[1]]
    effects = dict(found.effects)
    assert [effects[h] for h in (Hazard.OVER_PRESSURE, Hazard.COLD, Hazard.GAS)] == [Effect.RAISES] * 3
    assert found.committing
    assert found.phases[0] is Phase.B
    assert found.way_back.startswith("LET GO of V1.")


def test_without_a_level_it_counts_as_left_shut(tmp_path: Path) -> None:
    """Nothing says then how far the hand lets it come: the room alone would bring it to 70 bar(g)."""
    path = ", path: {let_rise_to: 1 bar(g), read_on: PG1, let_go_within: 2 s}"
    found = plan(tmp_path, {path: ""})
    assert found.verdict == "outside limits"
    assert ("RV1", "pressure", "this step") in blocked(found)


def test_a_vent_that_stays_where_it_is_gives_no_credit(tmp_path: Path) -> None:
    """With everybody gone it stays shut: the same procedure with an ordinary valve is outside limits."""
    found = plan(tmp_path, vessel={"let_go: opens": "let_go: stays"})
    assert found.verdict == "outside limits"
    assert not held_lines(walk(scene(tmp_path, vessel={"let_go: opens": "let_go: stays"})))


@pytest.mark.parametrize(
    ("where", "old", "new"),
    [
        ("procedure", "let_rise_to: 4.6 bar(g)", "let_rise_to: 5.5 bar(g)"),
        ("procedure", "let_go_within: 2 s", "let_go_within: 8 s"),
        ("vessel", "from_fluid: 0.1 W/K ± 0.01 W/K", "from_fluid: 0.6 W/K ± 0.01 W/K"),
    ],
)
def test_what_the_hand_is_too_slow_for_is_outside(tmp_path: Path, where: str, old: str, new: str) -> None:
    """A higher level, a slower hand and a better contact each bring it past the ceiling."""
    found = plan(tmp_path, **{where: {old: new}})
    assert ("RV1", "pressure", "this step") in blocked(found)


def test_a_coarser_gauge_takes_its_error_off(tmp_path: Path) -> None:
    """The level is what the gauge shows: class 4 may stand 0.4 bar below what is there."""
    fine, coarse = plan(tmp_path), plan(tmp_path, vessel={"class: 1.0": "class: 4.0"})

    def worst(found: Plan) -> Margin:
        line = found.lines[held_lines(walk(scene(tmp_path)))[1]]
        return next(m for m in line.ahead if (m.limit, m.kind) == ("RV1", "pressure"))

    assert (worst(coarse).worst or 0.0) - (worst(fine).worst or 0.0) == pytest.approx(0.3e5, rel=0.3)


def test_over_loaded_to_the_brim_no_hand_is_quick_enough(tmp_path: Path) -> None:
    """Nearly full of liquid the margin is unknown, which blocks."""
    grams = {"mass: 8 g ± 0.5 g": "mass: 53 g ± 0.5 g", "load: 8 g ± 0.5 g": "load: 53 g ± 0.5 g"}
    found = plan(tmp_path, grams)
    assert found.verdict != "within limits"
    assert ("RV1", "pressure", "this step") in blocked(found)


def test_should_the_vent_stick_the_relief_keeps_it_under_110_percent(tmp_path: Path) -> None:
    """7 bar(g) + 3 % + 10 % while it flows is 7.93 bar(g); 110 % of 8 bar(g) is 8.8 (ASME BPVC VIII-1 UG-125)."""
    here = scene(tmp_path)
    line = walk(here)[held_lines(walk(here))[0]]
    worst = stuck_pressure(here, line.during, 303.15)
    assert worst.value is not None
    assert worst.value - here.barometer.high_Pa == pytest.approx(1.1 * 1.03 * 7e5, rel=1e-6)
    weak = plan(tmp_path, vessel={"mawp: {rating: 8 bar(g)": "mawp: {rating: 7.1 bar(g)"})
    assert ("TP-5", "relieved pressure", "V1 stuck shut") in blocked(weak)


def test_without_a_relief_a_vent_that_sticks_is_outside(tmp_path: Path) -> None:
    """A spring alone is no protection: the charge would come to 70 bar(g) behind it."""
    text = (Path(__file__).parents[2] / "procedures" / "apparatus" / "triple-point-tube-50.yaml").read_text("utf-8")
    relief = next(line for line in text.splitlines() if "tag: RV1" in line)
    found = plan(tmp_path, {"the outlets of V1 and RV1": "the outlet of V1"}, {f"relief:\n{relief}\n": ""})
    assert ("TP-5", "relieved pressure", "V1 stuck shut") in blocked(found)


def test_left_alone_it_opens(tmp_path: Path) -> None:
    """With the hand gone the tube is at rest at the room's pressure; should the vent stick, by its relief valve."""
    here = scene(tmp_path)
    line = walk(here)[held_lines(walk(here))[1]]
    during = line.during
    shut = type(during)(**{f: getattr(during, f) for f in during.__slots__} | {"valves": {"V1": "shut", "C1": "shut"}})
    alone, _ = left_alone(here, shut, with_times=False)
    assert [f.cause for f in alone.futures] == ["V1 let go", "V1 stuck shut"]
    assert alone.at_rest
    assert alone.futures[0].ends_Pa == pytest.approx(here.barometer.high_Pa)


def ask(line: int, closed: str, *seen: Observation) -> Question:
    """A question in a line, the valves as `closed` says."""
    vent = "open" if closed == "open" else "shut"
    return Question("key", line, line + 1, closed, (("C1", "shut"), ("V1", vent)), "none", None, seen)


def test_now_while_a_hand_is_on_it(tmp_path: Path) -> None:
    """The margin that was judged at entry stands: nobody reads anything until the hand has let go."""
    here = scene(tmp_path)
    lines = walk(here)
    at = held_lines(lines)[1]
    weighed = Observation("BS1", "mass", 8e-3, 1, "A", False)
    found = answer(here, lines, ask(at, "closed", weighed))
    margin = next(m for m in found.now if m.kind == "pressure" and m.limit == "RV1")
    assert margin.margin is not None
    assert 0.0 < margin.margin < 0.6e5
    assert found.phases == (Phase.B,)
    assert found.left_alone.at_rest


def test_a_wall_at_the_room_says_nothing_of_ice_behind_it(tmp_path: Path) -> None:
    """20 degC read on the tube before it was closed would make 56 bar of what melts in it at -56.6 degC."""
    here = scene(tmp_path)
    lines = walk(here)
    at = held_lines(lines)[1]
    weighed = Observation("BS1", "mass", 8e-3, 1, "A", False)
    found = answer(here, lines, ask(at, "closed", weighed, Observation("TT1", "temperature", 293.15, 2, "A", False)))
    assert found.pressure is None
    assert found.agreement.verdict == "no reading"


def test_the_class_is_told_what_melts_and_what_freezes(tmp_path: Path) -> None:
    """The author's words first, then computed: it stands still while it melts, and what is left freezes; the closing
    that is let go of at 1 bar(g) comes to neither."""
    found = plan(tmp_path).lines
    low, high = (found[i] for i in held_lines(walk(scene(tmp_path)))[:2])
    assert [(s.computed, s.of) for s in high.sights] == [(False, ""), (True, "solid"), (True, "solid")]
    assert "stand still at -56.6 °C" in high.sights[1].words
    assert low.sights == ()


def test_how_much_may_be_loaded(tmp_path: Path) -> None:
    """At least what shows liquid in the window, at most what a hand is quick enough for; planned lies between."""
    bounds = plan(tmp_path).bounds
    assert bounds.least_kg is not None
    assert bounds.most_kg is not None
    assert 2e-3 < bounds.least_kg < 7.5e-3
    assert 8.5e-3 < bounds.most_kg < 0.9 * 1178.0 * 49e-6
    assert bounds.best_kg is None


def test_the_pictured_path_ends_where_the_hand_lets_go(tmp_path: Path) -> None:
    """Nothing of it is left to come to the room: the picture ends below the ceiling."""
    found = plan(tmp_path)
    assert found.ceiling is not None
    assert max(pressure for _, pressure in found.path) < found.ceiling
    assert max(temperature for temperature, _ in found.path) < 230.0


def test_before_it_is_closed_again_the_gauge_has_to_stand_at_zero(tmp_path: Path) -> None:
    """A vent plugged by snow looks open: only the gauge says where the pressure is, and one that shows 3 bar blocks."""
    here = scene(tmp_path)
    lines = walk(here)
    at = held_lines(lines)[1]
    weighed = Observation("BS1", "mass", 8e-3, 1, "A", False)
    risen = Observation("PG1", "pressure", 7.2e5, 2, "A", False)
    zero = Observation("PG1", "pressure", 101325.0, 2, "A", False)
    pressures = []
    for one in (risen, zero):
        found = answer(here, lines, ask(at, "open", weighed, one))
        pressures.append(next(m.margin for m in found.now if m.kind == "pressure" and m.limit == "RV1"))
    assert pressures[0] is not None
    assert pressures[1] is not None
    assert pressures[0] < 0.0 < pressures[1]
