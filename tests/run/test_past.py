"""The history of readings that explanations are made from."""

from __future__ import annotations

from dataclasses import replace

from runbook.run.acts import SetValve
from runbook.run.clock import Moment
from runbook.run.events import ReadingTaken
from runbook.run.ledger import fold_all
from runbook.run.past import KEPT, NOTHING, History, with_past
from runbook.run.questions import key_of, question
from tests.run.plans import ROOM, begun, line, plan


def reading(what: str, value: float, tag: str = "TT1") -> ReadingTaken:
    return ReadingTaken(tag, what, value, 0.2, f"{value}", f"{value}", "Ada", False, 3, True)


def at(seconds: float) -> Moment:
    return Moment(100.0 + seconds, 1e9 + seconds)


def taken(*readings: tuple[float, str, float]) -> History:
    history = NOTHING
    for when, what, value in readings:
        history = with_past(history, reading(what, value), at(when))
    return history


def test_readings_stand_with_the_seconds_since_the_first() -> None:
    """Differences of time are what a rate needs, whatever the clock of the day."""
    history = taken((50.0, "temperature", 294.1), (51.2, "pressure", 59e5), (230.0, "temperature", 297.0))
    assert [p.at_s for p in history.readings] == [0.0, 1.0, 180.0]
    assert [p.value for p in history.readings] == [294.1, 59e5, 297.0]


def test_the_oldest_of_its_kind_goes_first() -> None:
    """A long lesson keeps its heights and weighings however often the thermometer is read."""
    first = (0.0, "liquid height", 0.0285)
    many = tuple((60.0 * n, "temperature", 290.0 + 0.1 * n) for n in range(40))
    history = taken(first, *many)
    assert history.readings[0].what == "liquid height"
    temperatures = [p.value for p in history.readings if p.what == "temperature"]
    assert len(temperatures) == KEPT["temperature"]
    assert temperatures[-1] == 290.0 + 0.1 * 39


def test_what_says_nothing_of_the_charge_is_not_kept() -> None:
    """A gas meter's readings explain no gauge."""
    assert taken((0.0, "carbon dioxide", 0.0004)) == NOTHING


def test_broken_clocks_begin_it_anew() -> None:
    """A machine that was restarted does not know how long ago the last reading was."""
    history = taken((500.0, "temperature", 294.1), (510.0, "pressure", 59e5))
    restarted = with_past(history, reading("temperature", 295.0), Moment(3.0, 1e9 + 900.0))
    assert [p.value for p in restarted.readings] == [295.0]
    assert restarted.readings[0].at_s == 0.0


def test_a_question_carries_what_was_read_since_closing_and_its_key_does_not_change_for_it() -> None:
    """Readings of the open vessel are of another charge; the key is that of the facts alone."""
    run = begun(plan(line(1), outside_valves=("V1",)))
    run.read("TT1", 294.0)
    asked = question(run.plan, run.ledger)
    assert asked is not None
    assert asked.history == ()
    run.must(SetValve("V1", "shut"))
    run.clock.advance(60.0)
    run.read("TT1", 295.0)
    run.clock.advance(60.0)
    run.read("PG1", ROOM + 62.6e5)
    asked = question(run.plan, run.ledger)
    assert asked is not None
    assert [(p.what, p.at_s) for p in asked.history] == [("temperature", 0.0), ("pressure", 60.0)]
    assert key_of(replace(run.ledger, past=NOTHING)) == run.ledger.key


def test_closed_anew_the_history_begins_anew() -> None:
    """What was read after an earlier closing was of another charge."""
    run = begun(plan(line(1), outside_valves=("V1",), valves=(("V1", "shut"),)))
    run.read("TT1", 294.0)
    assert len(run.ledger.past.readings) == 1
    run.must(SetValve("V1", "open"))
    run.must(SetValve("V1", "shut"))
    assert run.ledger.past == NOTHING


def test_the_same_events_give_the_same_history() -> None:
    """It is folded like everything else, one by one or all at once."""
    run = begun(plan(line(1), outside_valves=("V1",), valves=(("V1", "shut"),)))
    for n in range(40):
        run.clock.advance(30.0)
        run.read("TT1", 294.0 + 0.1 * n)
    assert fold_all(run.pairs).past == run.ledger.past
    assert len(run.ledger.past.readings) == KEPT["temperature"]
