"""Hold points: who signs, with which number, and after which readings."""

from __future__ import annotations

from runbook.run.acts import GoOn, Sign
from runbook.run.events import GapOpened, Signed
from runbook.run.signing import performers, readings_missing
from tests.run.plans import HS1, PEOPLE, Run, begun, hold, line, plan, quick

SIGN = Sign("Bo", "222")
U = (4.0 / 3.0 * (0.001**2 + 0.0005**2)) ** 0.5
"""[m] of HS1: 2 u_c of two rectangular half-widths."""


def at_hold(before: str | None = "performer", measuring: bool = False) -> Run:
    """A run that stands at a hold of the second after a step of `before`."""
    run = begun(plan(line(1, who=before), hold(read=HS1 if measuring else None), line(3)))
    run.must(GoOn())
    run.must(GoOn())
    return run


def test_the_named_role_signs_once() -> None:
    """A hold is signed by who has the role, and then it is signed."""
    run = at_hold()
    assert run.must(SIGN) == Signed(1, "Bo", "second")
    assert run.codes(SIGN) == ["signed already"]


def test_a_wrong_number_is_no_signature() -> None:
    """The number is the person's own, of the briefing; another person's does not help."""
    run = at_hold()
    assert run.codes(Sign("Bo", "333")) == ["wrong number"]
    assert run.codes(Sign("Bo", "")) == ["wrong number"]


def test_another_role_does_not_sign() -> None:
    """The role counts, not that somebody signs."""
    assert at_hold(before=None).codes(Sign("Cy", "333")) == ["wrong role"]
    assert at_hold().codes(Sign("Zoe", "1")) == ["unknown person"]


def test_who_performed_a_step_does_not_sign_for_it() -> None:
    """Never the performer of what is signed for."""
    assert at_hold(before="second").codes(SIGN) == ["performed it"]


def test_performers_are_those_since_the_hold_before() -> None:
    """Steps count from the hold point, parked line or part before; a quick sequence is the first role's."""
    made = plan(line(1, who="second"), hold(), line(3, who="teacher"), quick(), hold(), line(6, who="second"))
    assert performers(made, 4) == {"teacher", "performer"}
    assert performers(made, 1) == {"second"}
    assert performers(plan(line(1), hold()), 1) == frozenset()


def test_a_measuring_hold_wants_two_readings() -> None:
    """The signer's own blind one and another person's; the other's may be from the line before."""
    run = at_hold(measuring=True)
    assert run.codes(SIGN) == ["own blind reading wanted", "other person's reading wanted"]
    run.read("HS1", 0.030, by="Bo")
    assert run.codes(SIGN) == ["own blind reading wanted", "other person's reading wanted"]
    run.read("HS1", 0.030, by="Bo", blind=True)
    assert run.codes(SIGN) == ["other person's reading wanted"]
    run.read("HS1", 0.030 + 1.4 * U)
    assert run.codes(SIGN) == []


def test_the_other_reading_may_be_of_the_line_before_but_not_older() -> None:
    """Two lines back is another moment of the run."""
    run = begun(plan(line(1), line(2), hold(read=HS1)))
    run.must(GoOn())
    run.read("HS1", 0.030)
    run.must(GoOn())
    run.must(GoOn())
    run.read("HS1", 0.030, by="Bo", blind=True)
    assert run.codes(SIGN) == ["other person's reading wanted"]
    near = begun(plan(line(1), hold(read=HS1)))
    near.must(GoOn())
    near.read("HS1", 0.030)
    near.must(GoOn())
    near.read("HS1", 0.030, by="Bo", blind=True)
    assert near.codes(SIGN) == []


def test_readings_outside_what_is_accepted_sign_nothing() -> None:
    """Neither the signer's nor the other's latest reading may lie outside the accepted range."""
    run = at_hold(measuring=True)
    run.read("HS1", 0.035, by="Bo", blind=True)
    assert run.codes(SIGN) == ["reading for signing outside"]
    run.read("HS1", 0.030, by="Bo", blind=True)
    run.read("HS1", 0.035)
    assert run.codes(SIGN) == ["reading for signing outside"]


def test_a_third_reading_decides() -> None:
    """Two that differ by more than both uncertainties together wait for a third that agrees with one."""
    run = at_hold(measuring=True)
    run.read("HS1", 0.0275)
    run.read("HS1", 0.0315, by="Bo", blind=True)
    assert run.codes(SIGN) == ["readings differ"]
    run.read("HS1", 0.0315, by="Cy")
    assert run.codes(SIGN) == []


def test_a_third_of_the_signers_own_may_bear_the_other_out() -> None:
    """The signer reads again in sight and comes to what the other read: then the blind one was wrong."""
    run = at_hold(measuring=True)
    run.read("HS1", 0.0275)
    run.read("HS1", 0.0315, by="Bo", blind=True)
    run.read("HS1", 0.0275, by="Bo")
    assert run.codes(SIGN) == []


def test_a_third_that_agrees_with_neither_decides_nothing() -> None:
    """Three that all differ are no agreement."""
    run = at_hold(measuring=True)
    run.read("HS1", 0.0271)
    run.read("HS1", 0.0319, by="Bo", blind=True)
    run.read("HS1", 0.0295, by="Bo")
    assert run.codes(SIGN) == ["readings differ"]


def test_a_third_before_both_decides_nothing() -> None:
    """The third comes after the two it decides between."""
    run = at_hold(measuring=True)
    run.read("HS1", 0.0315, by="Cy")
    run.read("HS1", 0.0275)
    run.read("HS1", 0.0315, by="Bo", blind=True)
    assert run.codes(SIGN) == ["readings differ"]


def test_a_gap_takes_the_readings_of_a_hold_away() -> None:
    """Both are taken anew after a gap."""
    run = at_hold(measuring=True)
    run.read("HS1", 0.030)
    run.read("HS1", 0.030, by="Bo", blind=True)
    run.put(GapOpened("resumed"))
    assert run.codes(SIGN) == ["own blind reading wanted", "other person's reading wanted"]


def test_what_is_missing_can_be_asked_for() -> None:
    """Whoever guides the signer is told the same reasons."""
    run = at_hold(measuring=True)
    assert len(readings_missing(run.plan, run.ledger, "Bo")) == 2
    run.read("HS1", 0.030)
    run.read("HS1", 0.030, by="Bo", blind=True)
    assert readings_missing(run.plan, run.ledger, "Bo") == ()
    assert readings_missing(run.plan, at_hold().ledger, "Bo") == ()


def test_a_person_with_two_roles_performed_with_either() -> None:
    """Who has both roles performed the step, whatever role signs."""
    both = (PEOPLE[0], PEOPLE[1].__class__("Bo", ("second", "performer"), PEOPLE[1].number_sha256))
    run = begun(plan(line(1, who="performer"), hold()), people=both)
    run.must(GoOn())
    run.must(GoOn())
    assert run.codes(SIGN) == ["performed it"]
