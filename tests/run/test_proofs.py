"""The four proofs of empty, each with what it takes."""

from __future__ import annotations

import pytest

from runbook.run.acts import GapAnswers, GoOn, Prove, SetValve
from runbook.run.events import GapOpened
from tests.run.plans import ROOM, Run, begun, empty, line, plan

COLD = 233.15


def at_empty() -> Run:
    """A run that stands where emptiness is shown."""
    run = begun(plan(empty(), line(2)))
    run.must(GoOn())
    return run


def with_wall_proved() -> Run:
    """The vent and the wall are proved."""
    run = at_empty()
    run.must(Prove("vent"))
    run.read("TT1", 290.0)
    run.clock.advance(600.0)
    run.read("TT1", 290.0)
    run.must(Prove("wall"))
    return run


def with_gauge_watched(rise: float = 0.0, first_after: float = 60.0) -> Run:
    """The vent has been shut for ten minutes with the low gauge read at both ends."""
    run = with_wall_proved()
    run.must(SetValve("V3", "open"))
    run.must(SetValve("V2", "shut"))
    run.clock.advance(first_after)
    run.read("PG2", ROOM + 1e4)
    run.clock.advance(600.0 - first_after)
    run.read("PG2", ROOM + 1e4 + rise)
    return run


def test_all_four_in_order() -> None:
    """Vent, wall, low gauge, left open: in this order and no other."""
    run = at_empty()
    for wrong in ("wall", "low gauge", "left open", "fifth"):
        assert run.codes(Prove(wrong)) == ["proofs in order"]
    run = with_gauge_watched()
    run.must(Prove("low gauge"))
    assert run.codes(Prove("left open")) == ["vent not stated open"]
    run.must(SetValve("V2", "open"))
    run.must(Prove("left open"))
    assert run.ledger.empty_proved
    assert run.codes(Prove("vent")) == ["proofs in order"]


@pytest.mark.parametrize("position", ["shut", "do not know"])
def test_the_vent_is_stated_open(position: str) -> None:
    """The first proof is of a vent that somebody says is open."""
    run = at_empty()
    run.must(SetValve("V2", position))
    assert run.codes(Prove("vent")) == ["vent not stated open"]


def test_the_wall_is_read() -> None:
    """Without a reading nothing is known of the wall."""
    run = at_empty()
    run.must(Prove("vent"))
    assert run.codes(Prove("wall")) == ["wall readings wanted"]


def test_the_wall_is_above_minus_forty_with_its_uncertainty() -> None:
    """A reading within its uncertainty of -40 degC is not surely above it."""
    run = at_empty()
    run.must(Prove("vent"))
    run.read("TT1", COLD + 0.5)
    assert run.codes(Prove("wall")) == ["wall too cold"]


def test_the_wall_stays_warm_for_ten_minutes_without_a_break() -> None:
    """One cold reading begins the ten minutes anew."""
    run = at_empty()
    run.must(Prove("vent"))
    run.read("TT1", 290.0)
    run.clock.advance(590.0)
    run.read("TT1", 290.0)
    assert run.codes(Prove("wall")) == ["wall not long enough"]
    run.read("TT1", 220.0)
    run.read("TT1", 290.0)
    run.clock.advance(20.0)
    assert run.codes(Prove("wall")) == ["wall not long enough"]


def test_the_wall_was_read_in_the_last_two_minutes() -> None:
    """Two readings long ago do not show that it is warm now."""
    run = at_empty()
    run.must(Prove("vent"))
    run.read("TT1", 290.0)
    run.clock.advance(600.0)
    assert run.codes(Prove("wall")) == ["wall reading too old"]


def test_the_vent_is_shut_after_the_wall() -> None:
    """A vent that was shut before does not count; it is stated again."""
    run = with_wall_proved()
    assert run.codes(Prove("low gauge")) == ["vent not shut"]


@pytest.mark.parametrize(
    ("rise", "first_after", "code"),
    [(9.9e3, 60.0, ""), (1.01e4, 60.0, "low gauge rises"), (0.0, 121.0, "first low reading wanted")],
)
def test_the_low_gauge_does_not_rise(rise: float, first_after: float, code: str) -> None:
    """First reading within two minutes of shutting, last after ten minutes, less than 0.1 bar between."""
    run = with_gauge_watched(rise, first_after)
    assert run.codes(Prove("low gauge")) == ([code] if code else [])


def test_the_vent_stays_shut_for_ten_minutes() -> None:
    """Nine minutes are not ten."""
    run = with_wall_proved()
    run.must(SetValve("V3", "open"))
    run.must(SetValve("V2", "shut"))
    run.read("PG2", ROOM)
    run.clock.advance(599.0)
    run.read("PG2", ROOM)
    assert run.codes(Prove("low gauge")) == ["vent not shut long enough"]


def test_the_second_reading_is_of_the_end() -> None:
    """A reading before the ten minutes were over, or one that is old by now, is not the second."""
    run = with_wall_proved()
    run.must(SetValve("V3", "open"))
    run.must(SetValve("V2", "shut"))
    run.read("PG2", ROOM)
    run.clock.advance(500.0)
    run.read("PG2", ROOM)
    run.clock.advance(150.0)
    assert run.codes(Prove("low gauge")) == ["second low reading wanted"]
    run.read("PG2", ROOM)
    run.clock.advance(121.0)
    assert run.codes(Prove("low gauge")) == ["second low reading wanted"]


def test_opening_the_vent_begins_the_wait_anew() -> None:
    """A vent that was opened in between was not shut for ten minutes."""
    run = with_gauge_watched()
    run.must(SetValve("V2", "open"))
    assert run.codes(Prove("low gauge")) == ["vent not shut"]
    run.must(SetValve("V2", "shut"))
    assert "first low reading wanted" in run.codes(Prove("low gauge"))


@pytest.mark.parametrize("again", [False, True])
def test_the_isolator_is_open_all_the_while(again: bool) -> None:
    """A low gauge that is or was cut off proves nothing."""
    run = with_gauge_watched()
    run.must(SetValve("V3", "shut"))
    if again:
        run.must(SetValve("V3", "open"))
    assert run.codes(Prove("low gauge")) == ["isolator not open"]


def test_a_reading_beyond_the_dial_proves_nothing() -> None:
    """A low gauge that stands beyond its dial shows no rise."""
    run = with_wall_proved()
    run.must(SetValve("V3", "open"))
    run.must(SetValve("V2", "shut"))
    run.read("PG2", ROOM + 12e5)
    run.clock.advance(600.0)
    run.read("PG2", ROOM + 12e5)
    assert run.codes(Prove("low gauge")) == ["first low reading wanted"]


def test_readings_of_before_a_gap_prove_nothing() -> None:
    """After a gap the watching begins anew."""
    run = at_empty()
    run.must(Prove("vent"))
    run.read("TT1", 290.0)
    run.clock.advance(600.0)
    run.put(GapOpened("resumed"))
    run.must(GapAnswers("off", "open", "no", ()))
    run.read("TT1", 290.0)
    assert run.codes(Prove("wall")) == ["wall not long enough"]
