"""The only door: what each act becomes, what is refused in which state, and what the clock brings about."""

from __future__ import annotations

from dataclasses import replace
from typing import Any

import pytest

from runbook.answers import Need, Phase, Unanswered
from runbook.run import acts
from runbook.run.acts import Act
from runbook.run.decide import decide
from runbook.run.events import (
    GapAnswered,
    GapOpened,
    Halted,
    LeftTool,
    MadeSafe,
    NoAnswer,
    Noted,
    QuickConfirmed,
    ReadingTaken,
    RunClosed,
    SourceStated,
    TurnedBack,
    ValveStated,
    WitnessCame,
)
from runbook.run.ledger import Ledger
from tests.run.plans import BS1, ROOM, Run, begun, line, margin, plan, quick, witness

EVERY: tuple[Act, ...] = (
    acts.GoOn(),
    acts.TakeUp(),
    acts.Read("PG1", ROOM, "0", "PG1 0 bar(g)", "Ada"),
    acts.Sign("Bo", "222"),
    acts.Attend("Cy"),
    acts.QuickDone(0),
    acts.Prove("vent"),
    acts.SetValve("V2", "open"),
    acts.SetSource("off"),
    acts.Note("frost", "Ada"),
    acts.GapAnswers("off", "shut", "no", ()),
    acts.SafeActDone(0),
    acts.LeaveTool(),
    acts.Finish(),
)


def raising(**changes: Any) -> Run:
    """A run that stands in a line that raises."""
    run = begun(plan(line(1, raises=True, **changes), line(2)))
    run.answered()
    run.must(acts.GoOn())
    return run


def test_a_reading_is_recorded_with_its_uncertainty() -> None:
    """U is 2 u_c of two rectangular half-widths (JCGM 100), and of a pressure with the barometer's bound."""
    taken = raising().read("PG1", ROOM + 62.6e5)
    expected = (4.0 / 3.0 * (0.96e5**2 + 0.5e5**2 + 500.0**2)) ** 0.5
    assert pytest.approx(expected, rel=1e-12) == taken.U
    assert taken.in_range
    warm = raising().read("TT1", 303.15)
    assert pytest.approx((4.0 / 3.0 * ((0.3 + 0.005 * 30.0) ** 2 + 0.05**2)) ** 0.5, rel=1e-9) == warm.U


def test_a_reading_outside_is_recorded_and_marked() -> None:
    """Outside dial or accepted range a reading is what the instrument showed, so it is kept."""
    run = begun(plan(line(1, reads=(BS1,))))
    assert run.read("BS1", 0.2).in_range, "nothing accepts a range before the first line"
    run.must(acts.GoOn())
    assert not run.read("BS1", 0.2).in_range
    assert run.read("BS1", 0.117).in_range
    assert not run.read("PG2", ROOM + 11e5).in_range


@pytest.mark.parametrize(
    ("act", "code"),
    [
        (acts.Read("PG1", float("nan"), "x", "", "Ada"), "not a number"),
        (acts.Read("PG1", float("inf"), "x", "", "Ada"), "not a number"),
        (acts.Read("PG9", 1.0, "1", "", "Ada"), "unknown tag"),
        (acts.Read("PG1", 1.0, "1", "", "Zoe"), "unknown person"),
        (acts.SetValve("V9", "open"), "unknown tag"),
        (acts.SetValve("V2", "ajar"), "unknown position"),
        (acts.SetSource("hot"), "unknown position"),
        (acts.Sign("Bo", "222"), "no hold here"),
        (acts.Attend("Cy"), "no witness point here"),
        (acts.QuickDone(0), "no quick sequence here"),
        (acts.SafeActDone(0), "no such act"),
        (acts.GapAnswers("off", "shut", "no", ()), "no gap open"),
        (acts.Finish(), "run not finished"),
    ],
)
def test_what_has_no_sense_here_is_refused(act: Act, code: str) -> None:
    """Each act is refused by name where it has no place."""
    assert raising().codes(act) == [code]


@pytest.mark.parametrize(
    ("act", "event"),
    [
        (acts.SetValve("V2", "do not know"), ValveStated("V2", "do not know")),
        (acts.SetSource("unplugged"), SourceStated("unplugged")),
        (acts.Note("[bold]frost[/]", "Ada"), Noted("[bold]frost[/]", "Ada")),
        (acts.LeaveTool(), LeftTool()),
    ],
)
def test_statements_of_fact_are_never_refused(act: Act, event: object) -> None:
    """What somebody found or did is recorded in every state of an open run."""
    run = raising()
    run.put(GapOpened("resumed"))
    assert run.must(act) == event


def test_the_last_line_is_finished_not_gone_on_from() -> None:
    """At the end there is nothing to go on to, and the run is finished once the line is."""
    run = begun(plan(line(1, reads=(BS1,))))
    run.must(acts.GoOn())
    assert run.codes(acts.GoOn()) == ["reading wanted"]
    assert run.codes(acts.Finish()) == ["reading wanted"]
    run.read("BS1", 0.117)
    assert run.codes(acts.GoOn()) == ["last line"]
    assert run.must(acts.Finish()) == RunClosed("completed")


def test_after_the_end_nothing_happens() -> None:
    """A closed run takes no act, not even make safe, and its clock stands still."""
    run = begun(plan(line(1)))
    run.must(acts.GoOn())
    run.must(acts.Finish())
    for act in (*EVERY, acts.MakeSafe()):
        assert run.codes(act) == ["run closed"]
    assert run.act(acts.Tick()) is None


def test_a_halted_run_takes_make_safe_and_leaving_only() -> None:
    """Where the record cannot be kept, only make safe and leaving remain."""
    run = raising()
    run.put(Halted("the disk is full"))
    for act in EVERY:
        allowed = isinstance(act, acts.LeaveTool | acts.SafeActDone)
        assert ("run halted" in run.codes(act)) is not allowed, act
    assert isinstance(run.must(acts.MakeSafe()), MadeSafe)
    assert run.act(acts.Tick()) is None


def test_while_making_safe_nothing_goes_on() -> None:
    """Make safe leaves reading, stating, noting, its own acts, leaving and the end."""
    run = raising()
    run.must(acts.MakeSafe())
    stopped = (acts.GoOn, acts.TakeUp, acts.Sign, acts.Attend, acts.QuickDone, acts.Prove)
    for act in EVERY:
        assert (run.codes(act) == ["make safe under way"]) is isinstance(act, stopped), act
    assert run.act(acts.Tick()) is None


def test_make_safe_ends_the_run_once_every_act_is_confirmed() -> None:
    """Made safe is every act confirmed, not the key pressed."""
    run = raising()
    begin = run.must(acts.MakeSafe())
    assert isinstance(begin, MadeSafe)
    assert run.codes(acts.SafeActDone(len(begin.acts))) == ["no such act"]
    for item in reversed(range(len(begin.acts))):
        assert run.codes(acts.Finish()) == ["acts of make safe left"]
        run.must(acts.SafeActDone(item))
    assert run.must(acts.Finish()) == RunClosed("made safe")


def test_make_safe_is_never_refused() -> None:
    """Before the first event, in a gap, halted, again while under way: it always begins."""
    made = plan(line(1, raises=True))
    assert isinstance(decide(made, Ledger.start(), begun(made).clock.now(), acts.MakeSafe()), MadeSafe)
    run = begun(made)
    for event in (NoAnswer(Unanswered(run.ledger.key, "x")), GapOpened("x"), Halted("x")):
        run.put(event)
        for seen in ("", "relief", "window", "fire"):
            assert isinstance(run.must(acts.MakeSafe(seen)), MadeSafe)


def test_quick_items_are_in_order_and_never_too_late() -> None:
    """Lateness is recorded, and is no reason to refuse what was done."""
    run = begun(plan(quick(), line(2)))
    run.must(acts.GoOn())
    assert run.codes(acts.QuickDone(1)) == ["items in order"]
    run.clock.advance(60.0)
    assert run.must(acts.QuickDone(0)) == QuickConfirmed(0, 0, False)
    run.clock.advance(31.0)
    assert run.must(acts.QuickDone(1)) == QuickConfirmed(0, 1, True)
    assert run.codes(acts.QuickDone(2)) == ["items in order"]


@pytest.mark.parametrize(("by", "code"), [("Zoe", "unknown person"), ("Ada", "wrong role")])
def test_only_the_called_role_attends(by: str, code: str) -> None:
    """A witness is who was called."""
    run = begun(plan(witness()))
    run.must(acts.GoOn())
    assert run.codes(acts.Attend(by)) == [code]
    assert run.must(acts.Attend("Cy")) == WitnessCame(0, "Cy")
    assert run.codes(acts.Attend("Cy")) == ["witness came already"]


def test_gap_answers_are_of_known_words() -> None:
    """What cannot be understood is asked again; do not know is an answer."""
    run = raising()
    run.put(GapOpened("resumed"))
    for wrong in (("hot", "shut", "no"), ("off", "ajar", "no"), ("off", "shut", "maybe")):
        assert run.codes(acts.GapAnswers(*wrong, ("Ada",))) == ["unknown position"]
    known = ("do not know", "do not know", "do not know")
    assert run.must(acts.GapAnswers(*known, ("Ada",))) == GapAnswered(*known, ("Ada",))
    assert run.ledger.position("V2") == "do not know"
    assert run.ledger.source == "do not know"


def test_where_nothing_heats_the_vessel_nobody_says_how_the_heat_stands() -> None:
    """It has none, whatever is answered: else a gap could never be closed there."""
    run = begun(replace(plan(line(1)), source_tag=None, source="none"))
    run.put(GapOpened("resumed"))
    said = GapAnswered("none", "open", "no", ("Ada",))
    assert run.must(acts.GapAnswers("none", "open", "no", ("Ada",))) == said
    run.put(GapOpened("again"))
    assert run.must(acts.GapAnswers("on", "open", "no", ("Ada",))) == said


def test_before_the_first_event_nothing_but_make_safe() -> None:
    """Without an open run there is nothing to read into."""
    run = Run(plan(line(1)))
    for act in EVERY:
        assert run.codes(act) == ["run not opened"]
    assert run.act(acts.Tick()) is None


# -- the clock ---------------------------------------------------------------------------------------------


def test_a_margin_that_goes_turns_the_line_back() -> None:
    """During a step that raises, a margin that is gone brings the way back at once."""
    run = raising()
    run.answered()
    assert run.act(acts.Tick()) is None
    run.read("PG1", ROOM + 94e5)
    run.answered(now=(margin(-1e4),))
    assert isinstance(run.must(acts.Tick()), TurnedBack)
    assert run.act(acts.Tick()) is None, "once is enough"


def test_only_a_raising_line_is_turned_back() -> None:
    """A step that keeps or lowers goes on: there is no way back from it."""
    run = begun(plan(line(1, lowers=True)))
    run.must(acts.GoOn())
    run.answered(now=(margin(-1e4),))
    run.clock.advance(1e5)
    assert run.act(acts.Tick()) is None


def test_margins_unknown_for_longer_than_they_last_turn_the_line_back() -> None:
    """Unknown counts from the fact that changed the question; a stream of further facts does not begin it anew."""
    run = raising()
    run.answered(good_for_s=100.0)
    run.read("PG1", ROOM + 62e5)
    run.clock.advance(60.0)
    run.read("PG1", ROOM + 63e5)
    run.lost()
    run.clock.advance(40.0)
    assert run.act(acts.Tick()) is None
    run.clock.advance(1.0)
    assert isinstance(run.must(acts.Tick()), TurnedBack)


def test_margins_that_last_for_ever_may_stay_unknown_for_ten_minutes() -> None:
    """Without anything that says how long they last, ten minutes is long enough."""
    run = raising()
    run.answered(good_for_s=None)
    run.read("PG1", ROOM + 62e5)
    run.clock.advance(600.0)
    assert run.act(acts.Tick()) is None
    run.clock.advance(1.0)
    assert isinstance(run.must(acts.Tick()), TurnedBack)


@pytest.mark.parametrize(
    ("fresh", "every", "good_for", "after"), [(600.0, 120.0, 300.0, 420.0), (60.0, 120.0, 30.0, 60.0)]
)
def test_an_overdue_reading_makes_margins_unknown(fresh: float, every: float, good_for: float, after: float) -> None:
    """A reading asked at intervals that does not come counts as unknown from when it was due."""
    run = raising(reads=(Need("PG1", "pressure", "bar(g)", fresh_s=fresh, every_s=every),))
    run.read("PG1", ROOM + 62e5)
    run.answered(good_for_s=good_for)
    run.clock.advance(after)
    assert run.act(acts.Tick()) is None
    run.clock.advance(1.0)
    assert isinstance(run.must(acts.Tick()), TurnedBack)


def test_a_reading_asked_once_is_never_overdue() -> None:
    """What is read at the end of a step makes nothing unknown while the step lasts."""
    run = raising(reads=(BS1,))
    run.answered(good_for_s=None)
    run.clock.advance(1e4)
    assert run.act(acts.Tick()) is None


def test_the_first_line_is_not_turned_back_before_it_is_entered() -> None:
    """Before the first line there is nothing to turn back."""
    run = begun(plan(line(1, raises=True)))
    run.answered(now=(margin(-1e4),), phases=(Phase.B,))
    assert run.act(acts.Tick()) is None


def test_a_reading_event_names_its_line() -> None:
    """A reading belongs to the line the run stands in."""
    taken = raising().read("PG1", ROOM)
    assert isinstance(taken, ReadingTaken)
    assert taken.line == 0
