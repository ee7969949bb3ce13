"""What the run asks: facts only, a key that is their digest, and which readings count."""

from __future__ import annotations

import hashlib
import json
from dataclasses import replace

import pytest

from runbook.answers import ChargeBox, LineKind, QuickItem
from runbook.codec import to_plain
from runbook.run.acts import GapAnswers, GoOn, Note, QuickDone, SetSource, SetValve
from runbook.run.events import GapOpened, TurnedBack
from runbook.run.ledger import fold_all
from runbook.run.questions import closed, plan_digest, question
from tests.run.plans import ROOM, Run, begun, line, plan, quick

SHUT = line(1, "Shut V2", valves=(("V2", "shut"),), seals=True)


def carried(run: Run, tag: str) -> list[float]:
    """Values of an instrument that count."""
    asked = question(run.plan, run.ledger)
    assert asked is not None
    return [o.value for o in asked.observations if o.tag == tag]


def beside(run: Run) -> list[float]:
    """Temperatures [K] that stand beside a height and say nothing of the wall now."""
    asked = question(run.plan, run.ledger)
    assert asked is not None
    return [o.value for o in asked.observations if o.beside]


def test_the_key_is_the_digest_of_everything_else() -> None:
    """Anybody can work the key out from the question and the plan; the history follows from the observations."""
    charged = plan(line(1), charge=ChargeBox(0.115, 0.119, True, ("charge record",)))
    run = begun(charged)
    run.read("PG1", ROOM + 62.6e5)
    run.read("TT1", 297.0)
    run.must(SetSource("do not know"))
    asked = question(run.plan, run.ledger)
    assert asked is not None
    plain = to_plain(asked)
    del plain["key"], plain["history"]
    text = json.dumps(plain | {"plan": plan_digest(charged)}, sort_keys=True, separators=(",", ":"))
    assert asked.key == hashlib.sha256(text.encode()).hexdigest()


def test_time_and_notes_change_no_question_and_facts_do() -> None:
    """An answer holds as long as the facts stand."""
    run = begun(plan(line(1), line(2)))
    keys = [run.ledger.key]
    run.clock.advance(1e5)
    run.must(Note("frost", "Ada"))
    assert run.ledger.key == keys[0]
    for act in (SetValve("V1", "shut"), SetSource("on"), GoOn()):
        run.must(act)
        keys.append(run.ledger.key)
    run.read("TT1", 297.0)
    keys.append(run.ledger.key)
    run.read("TT1", 297.0)
    keys.append(run.ledger.key)
    assert len(set(keys)) == 6


def test_another_plan_is_another_question() -> None:
    """An answer never outlives the plan it was computed for."""
    one = begun(plan(line(1)))
    other = begun(plan(line(1), room_hottest=304.15))
    assert one.ledger.key != other.ledger.key


def test_facts_that_come_back_find_their_answer_again() -> None:
    """An answer is looked up by its key, never by time."""
    run = begun(plan(line(1)))
    run.answered()
    run.must(SetValve("V1", "shut"))
    assert run.ledger.answer is None
    run.must(SetValve("V1", "open"))
    assert run.ledger.answer is not None
    assert run.ledger.unknown_since is None


def test_it_asks_of_the_line_that_would_be_entered() -> None:
    """The next line; the same one at the end and where it has to be taken up again."""
    run = begun(plan(line(1, raises=True), line(2)))
    tos = []
    for step in (lambda: None, lambda: run.must(GoOn()), lambda: run.put(TurnedBack(0, "x"))):
        run.answered()
        step()
        asked = question(run.plan, run.ledger)
        assert asked is not None
        tos.append((asked.line, asked.to))
    assert tos == [(-1, 0), (0, 1), (0, 0)]


def test_closed_open_and_do_not_know() -> None:
    """Closed only if every way to the room is shut; open if one is open; else nobody knows."""
    run = begun(plan(line(1)))
    assert closed(run.ledger) == "open"
    run.must(SetValve("V1", "shut"))
    run.must(SetValve("V2", "do not know"))
    assert closed(run.ledger) == "do not know"
    run.must(SetValve("V2", "shut"))
    assert closed(run.ledger) == "closed"
    assert closed(begun(plan(line(1), outside_valves=())).ledger) == "closed"
    assert closed(begun(plan(line(1), outside_valves=("V9",))).ledger) == "do not know"


def test_a_valve_a_line_moves_is_not_known_until_somebody_says() -> None:
    """From entering until it is stated or the line is left, nobody knows where it stands."""
    moving = line(1, valves=(("V3", "open"),))
    run = begun(plan(moving, line(2)))
    run.must(GoOn())
    asked = question(run.plan, run.ledger)
    assert asked is not None
    assert dict(asked.valves)["V3"] == "do not know"
    run.must(GoOn())
    assert run.ledger.position("V3") == "open"
    said = begun(plan(moving, line(2)))
    said.must(GoOn())
    said.must(SetValve("V3", "shut"))
    asked = question(said.plan, said.ledger)
    assert asked is not None
    assert dict(asked.valves)["V3"] == "shut"


def test_a_scale_read_before_the_last_vent_is_shut_weighs_no_closed_vessel() -> None:
    """In a sequence that seals, a reading is one of the closed vessel once the item that closes it is confirmed."""
    items = (
        QuickItem("Lift the cell", 60.0, "Begin again."),
        QuickItem("Shut V2", 60.0, "Begin again.", (("V2", "shut"),), True),
        QuickItem("Step back", 60.0, "Open V2."),
    )
    run = begun(plan(replace(quick(seals=True), quick=items), line(8)))
    run.must(GoOn())
    assert closed(run.ledger) == "closed"
    run.read("BS1", 0.119)
    run.read("PG1", 60e5)
    run.must(QuickDone(0))
    run.read("BS1", 0.118)
    run.must(QuickDone(1))
    run.read("BS1", 0.117, by="Bo")
    asked = question(run.plan, run.ledger)
    assert asked is not None
    found = [(o.tag, o.value, o.closed) for o in asked.observations]
    assert found == [("PG1", 60e5, False), ("BS1", 0.118, False), ("BS1", 0.117, True)]
    assert [past.value for past in run.ledger.past.readings] == [0.117]
    assert fold_all(run.pairs) == run.ledger


def test_a_line_that_seals_counts_as_closed_from_its_entry_on() -> None:
    """Whoever is told to shut the vent may have shut it already."""
    run = begun(plan(SHUT, line(2), valves=(("V1", "shut"), ("V2", "open"))))
    run.answered()
    run.must(GoOn())
    assert closed(run.ledger) == "closed"
    sequence = begun(plan(quick(seals=True)))
    sequence.must(GoOn())
    assert closed(sequence.ledger) == "closed"


def test_a_quick_item_states_its_valves() -> None:
    """Confirming the item says where the valve stands."""
    run = begun(plan(quick()))
    run.must(GoOn())
    assert run.ledger.position("V2") == "open"
    run.must(QuickDone(0))
    assert run.ledger.position("V2") == "shut"


def test_entering_states_the_source_and_a_gap_what_was_answered() -> None:
    """Heating lines switch the source on; after a gap it stands as somebody found it."""
    run = begun(plan(line(1, source="on")))
    run.must(GoOn())
    assert run.ledger.source == "on"
    run.put(GapOpened("resumed"))
    run.must(GapAnswers("do not know", "shut", "no", ()))
    assert run.ledger.source == "do not know"
    assert run.ledger.position("V2") == "shut"


# -- which readings count ------------------------------------------------------------------------------------


def test_of_temperature_and_pressure_the_last_counts() -> None:
    """A newer reading replaces an older one that it does not contradict."""
    run = begun(plan(line(1)))
    run.read("PG1", ROOM + 60e5)
    run.read("PG1", ROOM + 61e5)
    assert carried(run, "PG1") == [ROOM + 61e5]


def test_a_contradiction_is_carried_until_a_third_agrees() -> None:
    """A new reading does not erase an earlier one that contradicts it."""
    run = begun(plan(line(1)))
    run.read("PG1", ROOM + 60e5)
    run.clock.advance(120.0)
    run.read("PG1", ROOM + 70e5)
    assert carried(run, "PG1") == [ROOM + 60e5, ROOM + 70e5]
    run.read("PG1", ROOM + 65e5)
    assert carried(run, "PG1") == [ROOM + 60e5, ROOM + 70e5, ROOM + 65e5]
    run.clock.advance(900.0)
    run.read("PG1", ROOM + 61e5)
    assert carried(run, "PG1") == [ROOM + 61e5]


@pytest.mark.parametrize("how", ["later", "next line"])
def test_readings_of_different_moments_do_not_contradict(how: str) -> None:
    """More than two minutes apart, or a step apart, a value may have moved."""
    run = begun(plan(line(1)))
    run.read("PG1", ROOM + 60e5)
    if how == "later":
        run.clock.advance(121.0)
    else:
        run.must(GoOn())
    run.read("PG1", ROOM + 70e5)
    assert carried(run, "PG1") == [ROOM + 70e5]


@pytest.mark.parametrize(("after", "carries"), [(60.0, [65e5]), (5.0, [70e5, 65e5])])
def test_what_falls_by_the_step_itself_is_no_contradiction(after: float, carries: list[float]) -> None:
    """While a step cools or lets down, a lower reading a minute later is newer; at one moment it is one still."""
    run = begun(plan(line(1), line(2, falls=True)))
    run.must(GoOn())
    run.must(GoOn())
    run.read("PG1", ROOM + 70e5)
    run.clock.advance(after)
    run.read("PG1", ROOM + 65e5)
    assert carried(run, "PG1") == [ROOM + x for x in carries]


def test_many_contradictions_keep_the_extremes() -> None:
    """However many disagree, the lowest, the highest and the last are carried."""
    run = begun(plan(line(1)))
    for n in range(29):
        run.read("PG1", ROOM + (10.0 + 5.0 * (7 * n % 29)) * 1e5)
    found = carried(run, "PG1")
    assert len(found) <= 8
    assert {min(found), max(found)} == {ROOM + 10e5, ROOM + 150e5}


def test_while_open_only_the_last_weighing_counts() -> None:
    """Dry ice in an open vessel becomes less by itself."""
    run = begun(plan(line(1)))
    run.read("BS1", 0.140)
    run.read("BS1", 0.120)
    assert carried(run, "BS1") == [0.120]


def sealed() -> Run:
    """Weighed open at 120 g, then closed."""
    run = begun(plan(SHUT, line(2), valves=(("V1", "shut"), ("V2", "open"), ("V3", "shut"))))
    run.read("BS1", 0.120)
    run.answered()
    run.must(GoOn())
    run.must(GoOn())
    return run


def test_after_closing_every_measurement_of_the_charge_counts() -> None:
    """The last weighing before closing and all masses and heights since, with who took them."""
    run = sealed()
    run.read("BS1", 0.118)
    run.read("BS1", 0.140, by="Bo")
    assert carried(run, "BS1") == [0.120, 0.118, 0.140]
    asked = question(run.plan, run.ledger)
    assert asked is not None
    assert [(o.closed, o.by) for o in asked.observations] == [(False, "Ada"), (True, "Ada"), (True, "Bo")]


def test_a_height_keeps_the_temperature_beside_it() -> None:
    """A height says how much only with its own temperature, also when the vessel is warmer later."""
    run = sealed()
    run.read("TT1", 294.0)
    run.read("HS1", 0.030)
    assert beside(run) == []  # it is also the last of its instrument
    run.clock.advance(900.0)
    run.read("TT1", 300.0)
    assert carried(run, "TT1") == [294.0, 300.0]
    assert beside(run) == [294.0]
    run.put(GapOpened("resumed"))
    assert carried(run, "TT1") == beside(run) == [294.0]


def test_a_height_without_a_temperature_takes_the_next() -> None:
    """Where none is near, the next temperature belongs to the height."""
    run = sealed()
    run.read("TT1", 290.0)
    run.clock.advance(601.0)
    run.read("HS1", 0.030)
    run.read("TT1", 294.0)
    run.clock.advance(900.0)
    run.read("TT1", 300.0)
    assert carried(run, "TT1") == [294.0, 300.0]


def test_closing_anew_begins_anew() -> None:
    """What was measured of an earlier charge says nothing of this one."""
    run = sealed()
    run.read("BS1", 0.118)
    run.must(SetValve("V2", "open"))
    run.must(SetValve("V2", "shut"))
    assert carried(run, "BS1") == [0.120]


def test_after_a_gap_how_warm_it_was_does_not_count() -> None:
    """Every reading is stale; what was measured of the charge, and a contradiction, stand."""
    run = sealed()
    run.read("BS1", 0.118)
    run.read("TT1", 294.0)
    run.read("PG1", ROOM + 60e5)
    run.read("PG1", ROOM + 70e5)
    run.put(GapOpened("resumed"))
    assert carried(run, "TT1") == []
    assert carried(run, "PG1") == [ROOM + 60e5, ROOM + 70e5]
    assert carried(run, "BS1") == [0.120, 0.118]


def test_the_air_of_the_room_is_no_part_of_a_question() -> None:
    """What a gas meter shows changes nothing that is computed of the vessel."""
    run = begun(plan(line(1)))
    key = run.ledger.key
    run.read("GD1", 0.002)
    assert carried(run, "GD1") == []
    assert run.ledger.key == key


def test_no_question_before_the_beginning_and_after_the_end() -> None:
    """Nothing is asked where there is no run."""
    made = plan(replace(line(1), kind=LineKind.DO))
    run = Run(made)
    assert question(made, run.ledger) is None
