"""What every screen is told: permission, what is wanted, how far, and what is kept back."""

from __future__ import annotations

from dataclasses import replace

import pytest

from runbook.answers import Judgement, Need
from runbook.run import acts
from runbook.run.events import GapOpened, Halted, MadeSafe, RunClosed, TurnedBack
from runbook.run.standing import Standing, standing
from tests.run.plans import (
    AGREES,
    BS1,
    HS1,
    MOVING,
    PG1,
    ROOM,
    TT1,
    Run,
    begun,
    empty,
    hold,
    line,
    margin,
    plan,
    quick,
    witness,
)


def look(run: Run) -> Standing:
    """Where it stands now."""
    return standing(run.plan, run.ledger, run.clock.now())


def warming(**changes: object) -> Run:
    """In a line that raises, read every two minutes."""
    every = Need("PG1", "pressure", "bar(g)", fresh_s=300.0, every_s=120.0)
    run = begun(plan(line(1), line(2, "Warm", raises=True, reads=(every,), ahead=(margin(11e5),)), line(3)))
    run.must(acts.GoOn())
    run.answered()
    run.must(acts.GoOn())
    run.read("PG1", ROOM + 62.6e5)
    run.answered(**changes)
    return run


def test_permission_is_what_decide_says() -> None:
    """Yes, not yet, blocked, make safe, halted, finished: each in its state, with its reasons."""
    run = begun(plan(line(1, reads=(PG1,)), line(2, raises=True)))
    assert look(run).permission == "yes"
    run.must(acts.GoOn())
    assert (look(run).permission, look(run).reasons[0].code) == ("not yet", "reading wanted")
    run.read("PG1", ROOM + 60e5)
    assert (look(run).permission, look(run).reasons[0].code) == ("blocked", "nothing computed")
    run.answered()
    assert look(run).permission == "yes"
    run.must(acts.GoOn())
    assert look(run).permission == "yes"
    run.put(TurnedBack(1, "RD1"))
    assert look(run).permission == "blocked"
    run.answered()
    assert (look(run).permission, look(run).take_up) == ("not yet", True)
    run.must(acts.MakeSafe())
    assert look(run).permission == "make safe"
    run.put(Halted("the disk is full"))
    assert look(run).permission == "halted"
    ended = begun(plan(line(1)))
    ended.must(acts.GoOn())
    ended.must(acts.Finish())
    assert look(ended).permission == "finished"


def test_what_will_block_is_known_before_the_step_is_finished() -> None:
    """A limit ahead is shown while the present step still asks for readings."""
    run = begun(plan(line(1, reads=(PG1,)), line(2, raises=True)))
    run.must(acts.GoOn())
    run.answered(ahead=(margin(-1.0),))
    seen = look(run)
    assert seen.permission == "not yet"
    assert [r.code for r in seen.then] == ["margin ahead"]


def test_the_instruction_is_the_line_the_way_back_or_make_safe() -> None:
    """The forbidden instruction is never on the screen."""
    run = warming()
    assert (look(run).instruction, look(run).loud) == (("Warm",), False)
    run.put(TurnedBack(1, "RD1"))
    assert (look(run).instruction, look(run).loud) == (("HEAT OFF: switch H1 off. Then read PG1.",), True)
    run.must(acts.MakeSafe())
    first = look(run).instruction
    run.must(acts.SafeActDone(0))
    assert look(run).instruction == first[1:]
    assert look(begun(plan(line(1)))).instruction == ()


def test_readings_are_wanted_in_time_and_twice_as_often_when_narrow() -> None:
    """Every two minutes; every minute while a margin is narrow; overdue is said loudly."""
    run = warming()
    assert look(run).wanted[0].due_s == pytest.approx(120.0)
    run.answered(now=(margin(2e5, judgement=Judgement.NARROW),))
    assert look(run).wanted[0].due_s == pytest.approx(60.0)
    run.clock.advance(61.0)
    assert look(run).wanted[0].overdue


def test_a_reading_is_wanted_no_later_than_the_margin_allows() -> None:
    """Where the margin lasts shorter than the step's interval, that counts."""
    assert look(warming(good_for_s=50.0)).wanted[0].due_s == pytest.approx(50.0)


def test_readings_the_next_step_leans_on_are_wanted_before() -> None:
    """Missing ones now, others before they are too old; none where the next step raises nothing."""
    run = begun(plan(line(1), line(2, raises=True, entry_needs=(PG1, TT1))))
    run.must(acts.GoOn())
    assert [w.need.tag for w in look(run).wanted] == ["PG1", "TT1"]
    run.read("PG1", ROOM + 60e5)
    run.read("TT1", 294.0)
    assert look(run).wanted == ()
    run.clock.advance(200.0)
    assert [round(w.due_s) for w in look(run).wanted] == [100, 100]
    keeping = begun(plan(line(1), line(2, entry_needs=(PG1,))))
    keeping.must(acts.GoOn())
    assert look(keeping).wanted == ()


def test_what_a_hold_and_a_proof_want() -> None:
    """The signer's blind reading; the wall and the low gauge of the proof that is due."""
    run = begun(plan(hold(read=HS1), empty()))
    run.must(acts.GoOn())
    assert [(w.need.tag, w.blind) for w in look(run).wanted] == [("HS1", True)]
    proving = begun(plan(empty()))
    proving.must(acts.GoOn())
    assert look(proving).wanted == ()
    proving.must(acts.Prove("vent"))
    assert [(w.need.tag, w.purpose) for w in look(proving).wanted] == [("TT1", "proof")]


def test_nothing_is_wanted_where_nothing_goes_on() -> None:
    """Make safe, a halted and an ended run ask for no reading."""
    for event in (Halted("x"), RunClosed("halted"), MadeSafe("C", ("HEAT OFF.",), "Never.", "")):
        run = begun(plan(line(1, reads=(PG1,))))
        run.must(acts.GoOn())
        assert look(run).wanted
        run.put(event)
        assert look(run).wanted == ()


def test_readings_after_a_quick_sequence_are_wanted_after_it() -> None:
    """Nobody is asked to type while the sequence runs."""
    run = begun(plan(quick(read_after=(BS1,))))
    run.must(acts.GoOn())
    assert look(run).wanted == ()
    run.must(acts.QuickDone(0))
    assert look(run).wanted == ()
    run.must(acts.QuickDone(1))
    assert [w.need.tag for w in look(run).wanted] == ["BS1"]


def test_a_blind_reading_that_is_in_is_not_wanted_again() -> None:
    """Once the signer has read, and once the hold is signed, nothing more is asked for."""
    run = begun(plan(hold(read=HS1)))
    run.must(acts.GoOn())
    run.read("HS1", 0.030, by="Bo", blind=True)
    assert look(run).wanted == ()


def test_a_proof_of_an_instrument_nobody_has_wants_nothing() -> None:
    """A plan that names a gauge the vessel lacks does not end in an error on the screen."""
    run = begun(plan(empty(), instruments=()))
    run.must(acts.GoOn())
    run.must(acts.Prove("vent"))
    assert look(run).wanted == ()


def test_a_reading_out_of_range_is_wanted_again() -> None:
    """What was read outside its range is asked for again, with what to do."""
    run = begun(plan(line(1, reads=(BS1,)), line(2)))
    run.must(acts.GoOn())
    run.read("BS1", 0.2)
    assert [(w.need.tag, w.outside) for w in look(run).wanted] == [("BS1", True)]
    run.read("BS1", 0.117)
    assert look(run).wanted == ()


def test_the_ruler_has_now_worst_and_ceiling() -> None:
    """As read with U, the worst of the step that is under way, and the lowest limit."""
    seen = look(warming()).ceiling
    assert (seen.now, seen.now_U) == (AGREES.read, AGREES.read_U)
    assert seen.step_worst == pytest.approx(ROOM + 83.8e5)
    assert (seen.ceiling, seen.by, seen.judgement) == (ROOM + 94.8e5, "RD1", Judgement.CLEAR)
    unread = look(warming(agreement=replace(AGREES, verdict="no reading", read=None, read_U=None))).ceiling
    assert unread.now == ROOM + 62.0e5
    run = warming()
    run.read("PG1", ROOM + 63e5)
    unknown = look(run).ceiling
    assert (unknown.now, unknown.judgement) == (None, Judgement.BLOCKED)
    assert unknown.ceiling == ROOM + 94.8e5
    gone = (margin(-1e5), margin(2e5, judgement=Judgement.NARROW))
    assert look(warming(now=gone)).ceiling.judgement is Judgement.BLOCKED
    assert look(warming(now=gone[1:])).ceiling.judgement is Judgement.NARROW
    open_vessel = look(warming(now=())).ceiling
    assert (open_vessel.judgement, open_vessel.ceiling) == (Judgement.CLEAR, ROOM + 94.8e5)


def test_left_alone_is_the_answers_else_the_plans() -> None:
    """Without an answer the plan's future is shown, and said to be the plan's."""
    run = begun(plan(line(1, left_alone=MOVING)))
    run.must(acts.GoOn())
    assert (look(run).left_alone, look(run).left_alone_planned) == (MOVING, True)
    run.answered()
    assert look(run).left_alone.at_rest
    assert not look(run).left_alone_planned


def test_what_would_be_copied_is_kept_back() -> None:
    """Until the signer has read blind, neither computed nor compared values are shown."""
    run = begun(plan(hold(read=PG1)))
    run.must(acts.GoOn())
    run.read("PG1", ROOM + 62.6e5)
    run.answered()
    assert look(run).hidden
    assert look(run).agreement is None
    run.read("PG1", ROOM + 62.6e5, by="Bo", blind=True)
    run.answered()
    assert not look(run).hidden
    assert look(run).agreement is not None


def test_the_age_behind_an_agreement_is_of_the_older_reading() -> None:
    """Agreement is as old as the older of the two readings it compares."""
    run = begun(plan(line(1)))
    run.read("TT1", 294.0)
    run.clock.advance(40.0)
    run.read("PG1", ROOM + 62.6e5)
    run.answered()
    run.clock.advance(10.0)
    assert look(run).agreement_age_s == pytest.approx(50.0)
    assert look(run).good_for_s == 240.0


def test_a_quick_sequence_counts_down() -> None:
    """Only the item that is due has a countdown; a late one says so."""
    run = begun(plan(quick()))
    run.must(acts.GoOn())
    run.clock.advance(20.0)
    assert [item.left_s for item in look(run).quick] == [pytest.approx(40.0), None]
    run.clock.advance(50.0)
    assert look(run).quick[0].late
    run.must(acts.QuickDone(0))
    assert [(item.done, item.late) for item in look(run).quick] == [(True, True), (False, False)]


def test_a_hold_names_who_may_sign() -> None:
    """People who have the role and performed nothing of it."""
    run = begun(plan(line(1, who="performer"), hold(read=HS1)))
    run.must(acts.GoOn())
    run.must(acts.GoOn())
    state = look(run).hold
    assert state is not None
    assert (state.may_sign, state.signed_by, state.tag) == (("Bo",), "", "HS1")
    assert [r.code for r in state.missing] == ["own blind reading wanted", "other person's reading wanted"]
    none = begun(plan(line(1, who="second"), hold()))
    none.must(acts.GoOn())
    none.must(acts.GoOn())
    state = look(none).hold
    assert state is not None
    assert state.may_sign == ()


def test_witness_proofs_and_gap() -> None:
    """Who is called and how long for; which proofs stand; that questions are open."""
    run = begun(plan(witness(), empty()))
    run.must(acts.GoOn())
    run.clock.advance(100.0)
    called = look(run).witness
    assert called is not None
    assert (called[0], round(called[1])) == ("teacher", 200)
    run.must(acts.Attend("Cy"))
    assert look(run).witness is None
    run.must(acts.GoOn())
    run.must(acts.Prove("vent"))
    assert [(p.name, p.done) for p in look(run).proofs] == [
        ("vent", True),
        ("wall", False),
        ("low gauge", False),
        ("left open", False),
    ]
    assert [r.code for r in look(run).proofs[1].missing] == ["wall readings wanted"]
    run.put(GapOpened("resumed"))
    assert look(run).gap_open


def test_unknown_margins_count_down_to_the_way_back() -> None:
    """While margins are unknown during a step, it is said how long that may last."""
    run = warming(good_for_s=100.0)
    assert look(run).unknown_s is None
    run.read("PG1", ROOM + 63e5)
    run.clock.advance(30.0)
    assert look(run).unknown_s == pytest.approx(30.0)
    assert look(run).unknown_left_s == pytest.approx(70.0)


def test_nothing_counts_down_where_nothing_can_be_turned_back() -> None:
    """Before the first line, turned back and in make safe no way back is announced."""
    run = begun(plan(line(1, raises=True)))
    run.clock.advance(30.0)
    assert look(run).unknown_left_s is None
    run = warming(good_for_s=100.0)
    run.read("PG1", ROOM + 63e5)
    run.clock.advance(30.0)
    run.put(TurnedBack(1, "RD1"))
    assert look(run).unknown_left_s is None


def test_make_safe_stays_as_it_was_begun() -> None:
    """The acts on the screen are those of the event, whatever phase comes after."""
    run = warming()
    run.must(acts.MakeSafe("window"))
    run.answered()
    seen = look(run).safe
    assert (seen.phase, seen.may_wait) == ("I", "no")
    assert seen.acts[0].startswith("HEAT OFF")


def test_only_where_emptiness_is_shown_are_there_proofs() -> None:
    """Other steps show none."""
    assert look(warming()).proofs == ()


def test_make_safe_is_always_ready() -> None:
    """Its acts are worked out before anybody presses the key."""
    run = warming()
    ready = look(run).safe
    run.must(acts.MakeSafe())
    assert look(run).safe.acts == ready.acts
    assert look(run).making_safe
