"""Whether a line is finished and whether another may be entered: each rule alone stops, and nothing else does."""

from __future__ import annotations

from dataclasses import replace
from typing import Any

import pytest

from runbook.answers import Agreement, Certificate, ChargeBox, Effect, Hazard, Judgement, Need, PlanLine
from runbook.run.acts import Attend, GapAnswers, GoOn, Prove, QuickDone, SetValve, Sign, TakeUp, Tick
from runbook.run.events import GapOpened, NotAttended, Proved, Signed, TurnedBack, WentOn
from tests.run.plans import (
    AGREES,
    BS1,
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

WARM = line(
    2,
    "Warm the cell",
    raises=True,
    committing=True,
    leans_on=("temperature",),
    entry_needs=(PG1, TT1),
    needs_charge_proof=True,
)


def ready(to: PlanLine = WARM, **changes: Any) -> Run:
    """Everything is well for entering `to`: read, answered, proved."""
    run = begun(plan(line(1), to, **changes))
    run.must(GoOn())
    run.read("PG1", ROOM + 62.6e5)
    run.read("TT1", 297.25)
    run.answered()
    return run


def test_a_raising_line_is_entered_when_all_is_well() -> None:
    """With every reading fresh, every margin clear and everything proved, a step that raises may be entered."""
    assert ready().codes(GoOn()) == []


def test_a_reading_before_the_step_is_needed() -> None:
    """A step is not entered without the readings it leans on."""
    run = begun(plan(line(1), WARM))
    run.must(GoOn())
    run.read("PG1", ROOM + 62.6e5)
    run.answered()
    assert run.codes(GoOn()) == ["reading needed before"]


def test_a_reading_from_before_a_gap_does_not_count() -> None:
    """After a gap every reading is stale, whatever its age."""
    run = ready()
    run.put(GapOpened("resumed"))
    run.must(GapAnswers("off", "shut", "no", ("Ada",)))
    run.answered()
    assert run.codes(GoOn()) == ["reading needed before", "reading needed before"]


def test_a_reading_outside_the_dial_is_not_leant_on() -> None:
    """What a gauge shows beyond its dial says nothing."""
    run = ready()
    run.read("PG1", ROOM + 161e5)
    run.answered()
    assert run.codes(GoOn()) == ["reading outside the dial"]


def test_a_reading_is_no_older_than_the_step_says() -> None:
    """A reading older than the step's own limit is taken again."""
    run = ready()
    run.answered(good_for_s=None)
    run.clock.advance(300.0)
    assert run.codes(GoOn()) == []
    run.clock.advance(1.0)
    assert run.codes(GoOn()) == ["reading too old to lean on"] * 2


def test_a_reading_is_no_older_than_half_the_margin_lasts() -> None:
    """Where the margin lasts shorter than the step's own limit, that counts."""
    run = ready()
    run.answered(good_for_s=100.0)
    run.clock.advance(101.0)
    assert run.codes(GoOn()) == ["reading too old to lean on"] * 2


def test_a_wall_clock_that_jumps_makes_readings_stale() -> None:
    """Where a clock was set nobody knows how old a reading is."""
    run = ready()
    run.clock.jump_wall(-3600.0)
    assert run.codes(GoOn()) == ["reading too old to lean on"] * 2


def test_without_an_answer_margins_are_unknown_and_block() -> None:
    """A new fact changes the question; until it is answered a raising step stays shut."""
    run = ready()
    run.read("PG1", ROOM + 62.7e5)
    assert run.codes(GoOn()) == ["nothing computed"]


def test_an_answer_that_is_taken_back_counts_no_more() -> None:
    """The latest of Answered and NoAnswer counts."""
    run = ready()
    run.lost()
    assert run.codes(GoOn()) == ["nothing computed"]


@pytest.mark.parametrize(
    ("changes", "code"),
    [
        ({"valid": False}, "models do not reach"),
        ({"now": (margin(0.0),)}, "margin now"),
        ({"now": (margin(None),)}, "margin now"),
        ({"now": (margin(5.0, judgement=Judgement.BLOCKED),)}, "margin now"),
        ({"now": (margin(float("nan"), judgement=Judgement.CLEAR),)}, "margin now"),
        ({"ahead": (margin(1e5), margin(-1.0))}, "margin ahead"),
        ({"ahead": (margin(None),)}, "margin ahead"),
        ({"agreement": replace(AGREES, verdict="disagrees")}, "reading disagrees"),
        ({"agreement": replace(AGREES, verdict="cannot tell")}, "agreement not shown"),
        ({"agreement": Agreement("no reading", None, None, None, None, None, "nothing")}, "agreement not shown"),
        ({"charge_proved": False}, "charge not proved"),
    ],
)
def test_each_part_of_an_answer_can_block(changes: dict[str, Any], code: str) -> None:
    """Validity, margins now and ahead, agreement and proof of the charge block each for itself."""
    run = ready()
    run.answered(**changes)
    assert run.codes(GoOn()) == [code]


def test_narrow_goes_on() -> None:
    """A narrow margin asks for more readings but stops nothing."""
    run = ready()
    run.answered(now=(margin(2e5, judgement=Judgement.NARROW),))
    assert run.codes(GoOn()) == []


def test_cannot_tell_stops_only_where_the_step_leans_on_it() -> None:
    """Where a step leans on nothing, 'cannot tell' is enough; 'disagrees' never is."""
    run = ready(replace(WARM, leans_on=()))
    run.answered(agreement=replace(AGREES, verdict="cannot tell"))
    assert run.codes(GoOn()) == []
    run.answered(agreement=replace(AGREES, verdict="disagrees"))
    assert run.codes(GoOn()) == ["reading disagrees"]


def test_an_expired_certificate_stops_a_committing_step_only() -> None:
    """Certificates are judged before steps that cannot be taken back."""
    expired = (Certificate("RD1", "inspection", "expired", "2030-01-01"),)
    assert ready(certificates=expired).codes(GoOn()) == ["certificate"]
    assert ready(replace(WARM, committing=False), certificates=expired).codes(GoOn()) == []


def test_an_open_gap_blocks() -> None:
    """Until the four questions are answered no raising step is entered."""
    run = ready(replace(WARM, entry_needs=()))
    run.put(GapOpened("resumed"))
    run.answered()
    assert run.codes(GoOn()) == ["gap open"]


def test_a_hold_passed_unsigned_blocks_for_good() -> None:
    """A hold that was left through a lowering step still blocks every raising one."""
    raising = line(4, raises=True)
    run = begun(plan(hold(number=1), line(2, lowers=True), raising))
    run.must(GoOn())
    run.must(GoOn())
    run.answered()
    assert run.codes(GoOn()) == ["hold passed unsigned"]


def test_a_lowering_line_may_always_be_entered() -> None:
    """What only lowers is entered from an unfinished line, in a gap, with nothing known."""
    run = begun(plan(line(1, reads=(PG1,)), line(2, lowers=True)))
    run.must(GoOn())
    run.put(GapOpened("resumed"))
    assert run.codes(GoOn()) == []


def test_a_keeping_line_needs_the_line_before_finished_and_no_gate() -> None:
    """Reading, signing and waiting need no margin, but no step is left unfinished for them."""
    run = begun(plan(line(1, reads=(PG1,)), line(2)))
    run.must(GoOn())
    assert run.codes(GoOn()) == ["reading wanted"]
    run.read("PG1", ROOM + 50e5)
    assert run.codes(GoOn()) == []


def test_unknown_counts_as_raising() -> None:
    """A step whose effect nobody knows needs the gate."""
    unknown = replace(line(2), effects=((Hazard.SHOCK, Effect.UNKNOWN),))
    run = begun(plan(line(1), unknown))
    run.must(GoOn())
    assert run.codes(GoOn()) == ["nothing computed"]


def test_a_mixed_line_is_gated_only_at_rest() -> None:
    """What lowers one hazard and raises another needs the gate at rest, and may be entered where it is not."""
    run = begun(plan(line(1), line(2, raises=True, lowers=True)))
    run.must(GoOn())
    run.answered(now=(margin(-1e5),))
    assert run.codes(GoOn()) == ["margin now"]
    run.answered(now=(margin(-1e5),), left_alone=MOVING)
    assert run.codes(GoOn()) == []


def proved_empty(*following: PlanLine) -> Run:
    """All four proofs made in the first line; V2 stated open."""
    run = begun(plan(empty(), *following))
    run.must(GoOn())
    for proof in ("vent", "wall", "low gauge", "left open"):
        run.put(Proved(0, proof))
    return run


def test_opening_needs_all_four_proofs() -> None:
    """Containment is opened only after all four proofs of empty, even by a step that lowers."""
    opening = line(2, lowers=True, opens_containment=True)
    assert proved_empty(opening).codes(GoOn()) == []
    run = begun(plan(empty(), opening))
    run.must(GoOn())
    for proof in ("vent", "wall", "low gauge"):
        run.put(Proved(0, proof))
    assert run.codes(GoOn()) == ["not proved empty"]


def test_opening_needs_the_vent_open() -> None:
    """The let-down valve was left open and is so still."""
    run = proved_empty(line(2, opens_containment=True))
    run.must(SetValve("V2", "do not know"))
    assert run.codes(GoOn()) == ["vent not open since"]


def test_opening_is_refused_where_leaving_the_line_shuts_the_vent() -> None:
    """Going on confirms what the line does to its valves, so it counts already."""
    run = proved_empty(line(2, valves=(("V2", "shut"),)), line(3, opens_containment=True))
    run.must(GoOn())
    assert run.codes(GoOn()) == ["vent not open since"]


@pytest.mark.parametrize(("leaves", "why"), [("shut", ["vent not open since"]), ("open", [])])
def test_an_opening_line_that_shuts_the_vent_is_not_taken_up(leaves: str, why: list[str]) -> None:
    """With the vent on its way to shut nothing is opened; one that was open and is left open stands open."""
    run = proved_empty(line(2, raises=True, opens_containment=True, valves=(("V2", leaves),)))
    run.answered()
    run.must(GoOn())
    run.put(TurnedBack(run.ledger.line, "margins have been unknown for too long"))
    run.answered()
    if why:
        assert run.codes(TakeUp()) == why
    else:
        run.must(TakeUp())


def test_closing_voids_the_proofs_of_empty() -> None:
    """Proofs are of what is in the vessel now: a charge closed in later has not been shown to be gone."""
    run = proved_empty(line(2, seals=True), line(3, opens_containment=True))
    run.must(GoOn())
    assert run.codes(GoOn()) == ["not proved empty"]


# -- finished ----------------------------------------------------------------------------------------------


@pytest.mark.parametrize(
    ("value", "wait", "codes"),
    [
        (0.117, 0.0, []),
        (0.117, 121.0, ["reading too old"]),
        (0.125, 0.0, ["reading outside its range"]),
        (0.125, 121.0, ["reading outside its range", "reading too old"]),
    ],
)
def test_a_reading_of_the_line_is_accepted_and_fresh(value: float, wait: float, codes: list[str]) -> None:
    """A line is finished by readings that lie in their range and are young enough."""
    run = begun(plan(line(1, reads=(BS1,)), line(2)))
    run.must(GoOn())
    run.read("BS1", value)
    run.clock.advance(wait)
    assert run.codes(GoOn()) == codes


def test_a_reading_of_the_line_before_does_not_finish_this_one() -> None:
    """Each line is finished by readings taken in it."""
    run = begun(plan(line(1), line(2, reads=(PG1,)), line(3)))
    run.must(GoOn())
    run.read("PG1", ROOM + 50e5)
    run.must(GoOn())
    assert run.codes(GoOn()) == ["reading wanted"]


def test_a_reading_asked_at_intervals_is_no_older_than_one() -> None:
    """Where a line asks every two minutes, one of three minutes ago does not finish it."""
    run = begun(plan(line(1, reads=(Need("PG1", "pressure", "bar(g)", every_s=120.0),)), line(2)))
    run.must(GoOn())
    run.read("PG1", ROOM + 50e5)
    run.clock.advance(180.0)
    assert run.codes(GoOn()) == ["reading too old"]


def test_a_gap_unfinishes_a_line() -> None:
    """Readings from before a gap do not finish a line either."""
    run = begun(plan(line(1, reads=(PG1,)), line(2)))
    run.must(GoOn())
    run.read("PG1", ROOM + 50e5)
    run.put(GapOpened("resumed"))
    assert run.codes(GoOn()) == ["reading wanted"]


def test_a_hold_is_finished_by_its_signature() -> None:
    """Nobody goes on from an unsigned hold."""
    run = begun(plan(hold(), line(2)))
    run.must(GoOn())
    assert run.codes(GoOn()) == ["hold not signed"]
    assert run.must(Sign("Bo", "222")) == Signed(0, "Bo", "second")
    assert run.codes(GoOn()) == []


def test_a_witness_point_is_finished_by_coming_or_by_the_wait() -> None:
    """The witness comes, or the wait is over and the record says so."""
    run = begun(plan(witness(), line(2)))
    run.must(GoOn())
    assert run.codes(GoOn()) == ["witness waited for"]
    run.clock.advance(299.0)
    assert run.act(Tick()) is None
    run.clock.advance(1.0)
    assert run.must(Tick()) == NotAttended(0)
    assert run.codes(GoOn()) == []
    came = begun(plan(witness(), line(2)))
    came.must(GoOn())
    came.must(Attend("Cy"))
    assert came.codes(GoOn()) == []


def test_a_quick_sequence_is_finished_by_all_items_and_the_readings_after() -> None:
    """One key each, in order, then what is read at rest."""
    run = begun(plan(quick(read_after=(BS1,)), line(2)))
    run.must(GoOn())
    assert run.codes(GoOn()) == ["quick item not done", "reading wanted"]
    run.must(QuickDone(0))
    run.must(QuickDone(1))
    assert run.codes(GoOn()) == ["reading wanted"]
    run.read("BS1", 0.117)
    assert run.codes(GoOn()) == []


def test_show_empty_is_finished_by_four_proofs() -> None:
    """Three of four proofs are none."""
    run = begun(plan(empty(), line(2)))
    run.must(GoOn())
    for proof in ("vent", "wall", "low gauge"):
        run.put(Proved(0, proof))
    assert run.codes(GoOn()) == ["proof not made"]


def test_a_turned_back_line_is_taken_up_through_the_same_gate() -> None:
    """It is not finished until it is taken up again, and taking it up is entering it."""
    run = ready()
    run.must(GoOn())
    run.put(TurnedBack(1, "RD1"))
    run.answered(ahead=(margin(-1.0),))
    assert run.codes(TakeUp()) == ["margin ahead"]
    run.answered()
    assert run.must(TakeUp())
    assert run.codes(TakeUp()) == ["not turned back"]


def test_a_turned_back_line_is_left_only_into_a_lowering_one() -> None:
    """The way back stands until the line is taken up again or a step lowers."""
    lowering = line(3, lowers=True)
    run = begun(plan(line(1, raises=True), line(2)))
    run.answered()
    run.must(GoOn())
    run.put(TurnedBack(0, "RD1"))
    assert run.codes(GoOn()) == ["turned back"]
    other = begun(plan(line(1, raises=True), lowering))
    other.answered()
    other.must(GoOn())
    other.put(TurnedBack(0, "RD1"))
    assert other.must(GoOn()) == WentOn(1)


def test_a_part_that_begins_later_asks_for_no_hold_of_an_earlier_one() -> None:
    """Holds count from the run's own first line on."""
    made = plan(hold(number=1), line(2), line(3, raises=True))
    later = replace(made.parts[0], name="Later", first=2)
    run = begun(replace(made, parts=(*made.parts, later)), part=1)
    run.answered()
    assert run.codes(GoOn()) == []
    assert run.must(GoOn()) == WentOn(2)


def test_proofs_are_made_in_an_empty_line_only() -> None:
    """The four proofs belong to the step that asks for them."""
    run = begun(plan(line(1)))
    run.must(GoOn())
    assert run.codes(Prove("vent")) == ["no proofs here"]


def test_charge_contradicted_is_said() -> None:
    """Where measurements contradict each other the reason says which."""
    run = ready()
    run.answered(charge_proved=False, charge=ChargeBox(0.1, 0.14, False, ("height",), "a height by Bo says more"))
    refused = run.act(GoOn())
    assert refused is not None
    assert "a height by Bo says more" in repr(refused)
