"""Every sentence of a run, word for word: a change of one is a change here."""

from __future__ import annotations

import math
from dataclasses import replace

import pytest

from runbook.answers import Agreement, Corner, Distance, Future, Judgement, LeftAlone, Margin
from runbook.run import acts
from runbook.run.amounts import difference, duration, pressure, pressure_difference, reading
from runbook.run.ceiling_now import Ceiling
from runbook.run.reason_words import margin_words
from runbook.run.reasons import BLOCKED, NOT_YET, REFUSED, Code, Reason
from runbook.run.sentences import (
    PERMISSION,
    agreement_age,
    agreement_pair,
    agreement_proves,
    begin_words,
    ceiling_words,
    clears_words,
    distance_words,
    hold_words,
    left_alone_verdict,
    left_alone_words,
    next_words,
    permission_words,
    phase_words,
    proof_words,
    quick_words,
    reason_words,
    reasons_words,
    unknown_words,
    wanted_words,
    witness_words,
)
from runbook.run.standing import Standing, standing
from runbook.run.wanted import Wanted
from tests.run.plans import (
    AGREES,
    BS1,
    HS1,
    MOVING,
    PG1,
    REST,
    ROOM,
    Run,
    begun,
    empty,
    hold,
    line,
    margin,
    plan,
    quick,
)


def _run() -> Run:
    run = begun(plan(line(1), line(2)))
    run.must(acts.GoOn())
    run.answered(agreement=replace(AGREES, verdict="disagrees", computed=ROOM + 58.0e5))
    return run


RUN = _run()
"""Stands in the first line, open, with a disagreement answered."""
PLAN = RUN.plan

REASONS = {
    Code.READING_WANTED: Reason(NOT_YET, Code.READING_WANTED, tag="PG1", need=PG1),
    Code.READING_OUTSIDE: Reason(NOT_YET, Code.READING_OUTSIDE, tag="BS1", need=BS1, value=0.1252),
    Code.READING_OLD: Reason(NOT_YET, Code.READING_OLD, tag="PG1", need=PG1, seconds=725.0, allowed_s=300.0),
    Code.NOT_SIGNED: Reason(NOT_YET, Code.NOT_SIGNED, said="second"),
    Code.WITNESS_WAITED: Reason(NOT_YET, Code.WITNESS_WAITED, seconds=200.0, said="teacher"),
    Code.QUICK_NOT_DONE: Reason(NOT_YET, Code.QUICK_NOT_DONE, said="Shut V2"),
    Code.PROOF_NOT_MADE: Reason(NOT_YET, Code.PROOF_NOT_MADE, said="wall"),
    Code.TURNED_BACK: Reason(NOT_YET, Code.TURNED_BACK, said="RD1: no pressure margin left"),
    Code.NEED_MISSING: Reason(BLOCKED, Code.NEED_MISSING, tag="PG1", need=PG1),
    Code.NEED_OUTSIDE: Reason(BLOCKED, Code.NEED_OUTSIDE, tag="PG1", need=PG1, value=ROOM + 161.5e5),
    Code.NEED_OLD: Reason(BLOCKED, Code.NEED_OLD, tag="PG1", need=PG1, seconds=math.inf, allowed_s=240.0),
    Code.NO_ANSWER: Reason(BLOCKED, Code.NO_ANSWER, said="the process was lost"),
    Code.NOT_VALID: Reason(BLOCKED, Code.NOT_VALID),
    Code.MARGIN_NOW: Reason(BLOCKED, Code.MARGIN_NOW, tag="RD1", margin=margin(-1.3e5)),
    Code.MARGIN_AHEAD: Reason(
        BLOCKED,
        Code.MARGIN_AHEAD,
        tag="RD1",
        margin=margin(-26.2e5, cause="heat stuck on", at=Corner(0.1802, 0.248e-3, 312.15)),
    ),
    Code.DISAGREES: Reason(BLOCKED, Code.DISAGREES, tag="PG1"),
    Code.CANNOT_TELL: Reason(BLOCKED, Code.CANNOT_TELL, tag="PG1", said="temperature, charge"),
    Code.CHARGE_NOT_PROVED: Reason(BLOCKED, Code.CHARGE_NOT_PROVED),
    Code.HOLD_PASSED: Reason(BLOCKED, Code.HOLD_PASSED, line=1, said="second"),
    Code.CERTIFICATE: Reason(BLOCKED, Code.CERTIFICATE, tag="RD1", said="inspection: expired"),
    Code.GAP_OPEN: Reason(BLOCKED, Code.GAP_OPEN),
    Code.NOT_PROVED_EMPTY: Reason(BLOCKED, Code.NOT_PROVED_EMPTY),
    Code.VENT_NOT_OPEN: Reason(BLOCKED, Code.VENT_NOT_OPEN, tag="V2"),
    Code.NOT_OPENED: Reason(REFUSED, Code.NOT_OPENED),
    Code.CLOSED: Reason(REFUSED, Code.CLOSED),
    Code.HALTED: Reason(REFUSED, Code.HALTED, said="the disk is full."),
    Code.MAKING_SAFE: Reason(REFUSED, Code.MAKING_SAFE),
    Code.LAST_LINE: Reason(REFUSED, Code.LAST_LINE),
    Code.NOT_TURNED: Reason(REFUSED, Code.NOT_TURNED),
    Code.NOT_FINITE: Reason(REFUSED, Code.NOT_FINITE, tag="PG1", said="{0}"),
    Code.UNKNOWN_TAG: Reason(REFUSED, Code.UNKNOWN_TAG, tag="[red]PG9", said=""),
    Code.UNKNOWN_PERSON: Reason(REFUSED, Code.UNKNOWN_PERSON, said="Zoe"),
    Code.UNKNOWN_WORD: Reason(REFUSED, Code.UNKNOWN_WORD, said="ajar"),
    Code.NO_HOLD: Reason(REFUSED, Code.NO_HOLD),
    Code.SIGNED_ALREADY: Reason(REFUSED, Code.SIGNED_ALREADY, said="Bo"),
    Code.WRONG_ROLE: Reason(REFUSED, Code.WRONG_ROLE, said="teacher"),
    Code.WRONG_NUMBER: Reason(REFUSED, Code.WRONG_NUMBER, said="Bo"),
    Code.PERFORMED: Reason(REFUSED, Code.PERFORMED, said="Bo"),
    Code.OWN_WANTED: Reason(NOT_YET, Code.OWN_WANTED, tag="HS1", said="Bo"),
    Code.OTHER_WANTED: Reason(NOT_YET, Code.OTHER_WANTED, tag="HS1", said="Bo"),
    Code.SIGN_OUTSIDE: Reason(NOT_YET, Code.SIGN_OUTSIDE, tag="HS1", value=0.0355, said="Bo"),
    Code.DIFFER: Reason(NOT_YET, Code.DIFFER, tag="HS1", value=0.004, limit=0.0018),
    Code.NO_WITNESS: Reason(REFUSED, Code.NO_WITNESS),
    Code.CAME_ALREADY: Reason(REFUSED, Code.CAME_ALREADY),
    Code.NO_QUICK: Reason(REFUSED, Code.NO_QUICK),
    Code.WRONG_ITEM: Reason(REFUSED, Code.WRONG_ITEM, said="Step back"),
    Code.NO_EMPTY: Reason(REFUSED, Code.NO_EMPTY),
    Code.WRONG_PROOF: Reason(REFUSED, Code.WRONG_PROOF, said="wall"),
    Code.VENT_NOT_STATED_OPEN: Reason(NOT_YET, Code.VENT_NOT_STATED_OPEN, tag="V2"),
    Code.WALL_WANTED: Reason(NOT_YET, Code.WALL_WANTED, tag="TT1"),
    Code.WALL_COLD: Reason(NOT_YET, Code.WALL_COLD, tag="TT1", value=233.65, limit=233.15),
    Code.WALL_SHORT: Reason(NOT_YET, Code.WALL_SHORT, tag="TT1", seconds=95.0, allowed_s=600.0),
    Code.WALL_OLD: Reason(NOT_YET, Code.WALL_OLD, tag="TT1", seconds=130.0, allowed_s=120.0),
    Code.VENT_NOT_SHUT: Reason(NOT_YET, Code.VENT_NOT_SHUT, tag="V2"),
    Code.SHUT_SHORT: Reason(NOT_YET, Code.SHUT_SHORT, tag="V2", seconds=95.0, allowed_s=600.0),
    Code.ISOLATOR_NOT_OPEN: Reason(NOT_YET, Code.ISOLATOR_NOT_OPEN, tag="V3"),
    Code.FIRST_WANTED: Reason(NOT_YET, Code.FIRST_WANTED, tag="PG2", allowed_s=120.0),
    Code.SECOND_WANTED: Reason(NOT_YET, Code.SECOND_WANTED, tag="PG2", allowed_s=120.0),
    Code.GAUGE_RISES: Reason(NOT_YET, Code.GAUGE_RISES, tag="PG2", value=1.2e4, limit=1.0e4),
    Code.NO_ACT: Reason(REFUSED, Code.NO_ACT),
    Code.NO_GAP: Reason(REFUSED, Code.NO_GAP),
    Code.NOT_FINISHED: Reason(NOT_YET, Code.NOT_FINISHED),
    Code.ACTS_LEFT: Reason(NOT_YET, Code.ACTS_LEFT, said="HEAT OFF: switch H1 off."),
}
"""One of each reason, with the figures it comes with."""

GOLDEN = {
    Code.READING_WANTED: (
        'PG1 has not been read in this step.',
        'Read PG1.',
    ),
    Code.READING_OUTSIDE: (
        'BS1 read 125.2 g; accepted is 115 g to 119 g.',
        'Read BS1 again.',
    ),
    Code.READING_OLD: (
        'PG1 was read 12 min ago; it counts for 5 min.',
        'Read PG1 again.',
    ),
    Code.NOT_SIGNED: (
        'The second has not signed.',
        'The second signs here.',
    ),
    Code.WITNESS_WAITED: (
        'The teacher has been called and is not here; the run goes on in 3 min 20 s.',
        'Wait, or confirm that the teacher is here.',
    ),
    Code.QUICK_NOT_DONE: (
        'Not confirmed: Shut V2',
        'Do it and confirm it with its key.',
    ),
    Code.PROOF_NOT_MADE: (
        "The proof of empty 'wall' has not been made.",
        'Make it and confirm it.',
    ),
    Code.TURNED_BACK: (
        'The way back stands in place of the step: RD1: no pressure margin left.',
        'Do what it says, read again, then take the step up again or make safe.',
    ),
    Code.NEED_MISSING: (
        'PG1 has to be read before the next step.',
        'Read PG1.',
    ),
    Code.NEED_OUTSIDE: (
        'PG1 read 161.5 bar(g), outside its dial.',
        'Read PG1 again; where it stays there, make safe.',
    ),
    Code.NEED_OLD: (
        'How old the reading of PG1 is cannot be told, because a clock was set or the machine restarted.',
        'Read PG1 again.',
    ),
    Code.NO_ANSWER: (
        'Nothing has been computed for the vessel as it stands: the process was lost.',
        'It is asked again by itself. A step that lowers, or make safe.',
    ),
    Code.NOT_VALID: (
        "The vessel's state lies outside what can be computed.",
        'Read temperature and pressure again. A step that lowers, or make safe.',
    ),
    Code.MARGIN_NOW: (
        'Now: pressure reaches 96.1 bar(g) with 119.0 g at 35.0 °C. RD1 allows 94.8 bar(g), 1.3 bar less.',
        'A step that lowers, or make safe. A new reading, if that one was wrong.',
    ),
    Code.MARGIN_AHEAD: (
        'With the heat stuck on: pressure reaches 121.0 bar(g) with 180.2 g at 39.0 °C. RD1 allows 94.8 '
        'bar(g), 26.2 bar less.',
        'Let 63.2 g sublime, to 117.0 g on the scale, or make safe: it is still open.',
    ),
    Code.DISAGREES: (
        'PG1 reads 62.6 ±1.2, computed 58.0 ±0.4 bar(g): they disagree.',
        'Tap and re-zero the gauge and read again; then a second thermometer; then 10 min at rest; then '
        'the height; then weigh.',
    ),
    Code.CANNOT_TELL: (
        'Reading and computation do not show agreement, and the next step leans on it: temperature, charge.',
        'Read again with the finest instrument there is. Tap and re-zero the gauge and read again; then '
        'a second thermometer; then 10 min at rest; then the height; then weigh.',
    ),
    Code.CHARGE_NOT_PROVED: (
        'How much is in the vessel has not been proved since it was closed.',
        'Read the height of the liquid with the temperature beside it, or weigh the closed vessel.',
    ),
    Code.HOLD_PASSED: (
        'The hold of step 1.2 was passed without the signature of the second.',
        'It cannot be signed afterwards. A step that lowers, or make safe.',
    ),
    Code.CERTIFICATE: (
        'A proof of RD1 is not valid today: inspection: expired.',
        'Renew it before the run. A step that lowers, or make safe.',
    ),
    Code.GAP_OPEN: (
        'The four questions after the gap have not been answered.',
        'Answer them.',
    ),
    Code.NOT_PROVED_EMPTY: (
        'The vessel has not been proved empty by all four proofs.',
        'Make all four proofs in one step.',
    ),
    Code.VENT_NOT_OPEN: (
        'V2 has not been stated open.',
        'Open V2 and say so.',
    ),
    Code.NOT_OPENED: (
        'No run is open.',
        'Open one.',
    ),
    Code.CLOSED: (
        'The run has ended.',
        'Nothing clears it here.',
    ),
    Code.HALTED: (
        'The run is halted: the disk is full.',
        'Make safe, then leave the tool.',
    ),
    Code.MAKING_SAFE: (
        'Make safe is under way.',
        'Go on with its acts.',
    ),
    Code.LAST_LINE: (
        'This is the last step.',
        'Finish the run.',
    ),
    Code.NOT_TURNED: (
        'The step was not turned back.',
        'Nothing clears it here.',
    ),
    Code.NOT_FINITE: (
        "'{0}' is not a number.",
        'Type the number that PG1 shows.',
    ),
    Code.UNKNOWN_TAG: (
        "There is no '[red]PG9' here.",
        'Use a tag of the apparatus.',
    ),
    Code.UNKNOWN_PERSON: (
        "'Zoe' does not take part in this run.",
        'Use a name from the briefing.',
    ),
    Code.UNKNOWN_WORD: (
        "'ajar' is no position or state.",
        'Choose one of those that are offered.',
    ),
    Code.NO_HOLD: (
        'This step is no hold point.',
        'Nothing clears it here.',
    ),
    Code.SIGNED_ALREADY: (
        'Bo has signed already.',
        'Nothing clears it here.',
    ),
    Code.WRONG_ROLE: (
        'Only the teacher can do this.',
        'Call the teacher.',
    ),
    Code.WRONG_NUMBER: (
        'That is not the number Bo set at the briefing.',
        'Type your own number.',
    ),
    Code.PERFORMED: (
        'Bo performed one of the steps that are signed for.',
        'Somebody signs who did not perform them.',
    ),
    Code.OWN_WANTED: (
        'Bo has not read HS1 without sight of the other reading.',
        'Read HS1 blind.',
    ),
    Code.OTHER_WANTED: (
        'Nobody but Bo has read HS1 here.',
        'Another person reads HS1.',
    ),
    Code.SIGN_OUTSIDE: (
        'Bo read HS1 at 35.5 mm, outside what is accepted.',
        'Read HS1 again.',
    ),
    Code.DIFFER: (
        'The two readings of HS1 differ by 4 mm, more than their uncertainties together, 1.8 mm.',
        'A third reading of HS1 decides.',
    ),
    Code.NO_WITNESS: (
        'This step is no witness point.',
        'Nothing clears it here.',
    ),
    Code.CAME_ALREADY: (
        'The witness is here already.',
        'Nothing clears it here.',
    ),
    Code.NO_QUICK: (
        'This step is no quick sequence.',
        'Nothing clears it here.',
    ),
    Code.WRONG_ITEM: (
        'The acts are confirmed in order; next is: Step back',
        'Confirm that one.',
    ),
    Code.NO_EMPTY: (
        'No proof of empty is made in this step.',
        'Nothing clears it here.',
    ),
    Code.WRONG_PROOF: (
        'The proofs are made in order; next is: wall',
        'Make that one.',
    ),
    Code.VENT_NOT_STATED_OPEN: (
        'V2 has not been stated open.',
        'Open V2 and say so.',
    ),
    Code.WALL_WANTED: (
        'TT1 has not been read in this step.',
        'Read TT1.',
    ),
    Code.WALL_COLD: (
        'TT1 read -39.5 °C, not surely above -40 °C.',
        'Let it warm with the vent open, and read TT1 again.',
    ),
    Code.WALL_SHORT: (
        'TT1 has to stay above -40 °C for 10 min; 1 min 35 s are left.',
        'Wait, and read TT1 again.',
    ),
    Code.WALL_OLD: (
        'TT1 was read 2 min 10 s ago; it counts for 2 min.',
        'Read TT1 again.',
    ),
    Code.VENT_NOT_SHUT: (
        'V2 has not been stated shut since the wall was proved.',
        'Shut V2 and say so.',
    ),
    Code.SHUT_SHORT: (
        'V2 has to stay shut for 10 min; 1 min 35 s are left.',
        'Wait.',
    ),
    Code.ISOLATOR_NOT_OPEN: (
        'V3 has not been open all the while, so the low gauge proves nothing.',
        'Open V3, open the vent, shut it again and begin this proof anew.',
    ),
    Code.FIRST_WANTED: (
        'PG2 was not read within 2 min of shutting the vent.',
        'Read PG2; where it is too late, open the vent and shut it again first.',
    ),
    Code.SECOND_WANTED: (
        'PG2 has to be read now, at the end of the wait.',
        'Read PG2.',
    ),
    Code.GAUGE_RISES: (
        'PG2 has risen by 0.12 bar, which is not less than 0.1 bar: gas is left.',
        'Open the vent again and let it warm; begin this proof anew later.',
    ),
    Code.NO_ACT: (
        'There is no such act of make safe.',
        'Begin make safe first.',
    ),
    Code.NO_GAP: (
        'No question is open.',
        'Nothing clears it here.',
    ),
    Code.NOT_FINISHED: (
        'Steps are left.',
        'Go on, make safe, or leave the tool.',
    ),
    Code.ACTS_LEFT: (
        'Not confirmed: HEAT OFF: switch H1 off.',
        'Do it and confirm it.',
    ),
}
"""(what is wrong, what clears it) of each."""


def test_every_reason_has_its_sentence_here() -> None:
    """No reason is without words, and none of its words is untested."""
    assert set(REASONS) == set(GOLDEN) == set(Code)


@pytest.mark.parametrize("code", list(Code))
def test_what_is_wrong_and_what_clears_it(code: Code) -> None:
    """Limit, number, corner, and what to do at the bench, word for word."""
    assert reasons_words(PLAN, RUN.ledger, (REASONS[code],)) == (GOLDEN[code],)


def test_a_reason_without_detail_still_reads() -> None:
    """Where nothing more was said no colon is left hanging."""
    assert reason_words(PLAN, RUN.ledger, Reason(BLOCKED, Code.NO_ANSWER)) == (
        "Nothing has been computed for the vessel as it stands."
    )
    said = Reason(BLOCKED, Code.CHARGE_NOT_PROVED, said="a height by Bo says more")
    assert reason_words(PLAN, RUN.ledger, said).endswith("since it was closed: a height by Bo says more.")


def test_what_the_author_wrote_clears_a_reading_outside() -> None:
    """The author's own words where there are some."""
    need = replace(BS1, if_not="Let it sublime, or stop here.")
    outside = Reason(NOT_YET, Code.READING_OUTSIDE, tag="BS1", need=need, value=0.125)
    assert clears_words(PLAN, RUN.ledger, outside) == "Let it sublime, or stop here."


@pytest.mark.parametrize(
    ("low", "high", "words"),
    [(None, None, "anything on its dial"), (0.1, None, "at least 100 g"), (None, 0.1, "at most 100 g")],
)
def test_open_ranges_read(low: float | None, high: float | None, words: str) -> None:
    """A range with one end says which."""
    need = replace(BS1, low=low, high=high)
    outside = Reason(NOT_YET, Code.READING_OUTSIDE, tag="BS1", need=need, value=0.125)
    assert reason_words(PLAN, RUN.ledger, outside) == f"BS1 read 125 g; accepted is {words}."


def test_too_much_is_mended_only_while_it_is_open() -> None:
    """Once the vessel is closed nothing sublimes out of it."""
    run = _run()
    run.must(acts.SetValve("V1", "shut"))
    run.must(acts.SetValve("V2", "shut"))
    words = clears_words(PLAN, run.ledger, REASONS[Code.MARGIN_AHEAD])
    assert words == "A step that lowers, or make safe. A new reading, if that one was wrong."


@pytest.mark.parametrize(
    ("changed", "words"),
    [
        ({"margin": None, "why": "the rating of RD1 is not known"},
         "In step 3.4: the pressure margin of RD1 is not known, because the rating of RD1 is not known."),
        ({"margin": None},
         "In step 3.4: the pressure margin of RD1 is not known, because it could not be computed."),
        ({"kind": "lowest temperature", "unit": "K", "worst": 194.65, "allowed": 223.15, "margin": -28.5,
          "limit": "S1", "at": Corner(None, 1e-4, 194.65)},
         "In step 3.4: lowest temperature falls to -78.5 °C. S1 allows -50.0 °C, 28 K higher."),
        ({"kind": "difference", "unit": "K", "worst": 90.0, "allowed": 60.0, "margin": -30.0, "limit": "W1",
          "at": None},
         "In step 3.4: difference reaches 90 K. W1 allows 60 K, 30 K less."),
        ({"kind": "gas in the room", "unit": "m3/m3", "worst": 0.0084, "allowed": 0.005, "margin": -0.0034,
          "limit": "room", "at": None},
         "In step 3.4: gas in the room reaches 0.84 %. room allows 0.50 %, 0.34 % less."),
        ({"kind": "charge", "unit": "kg", "worst": 0.18, "allowed": 0.15, "margin": -0.03, "at": None},
         "In step 3.4: charge reaches 180.0 g. RD1 allows 150.0 g, 30.0 g less."),
    ],
)  # fmt: skip
def test_margins_of_every_kind(changed: dict[str, object], words: str) -> None:
    """Each kind of limit in its own unit, the unknown with what is missing."""
    gone: Margin = margin(-1e5, cause="3.4", **changed)
    assert margin_words(PLAN, gone) == words


# -- figures -------------------------------------------------------------------------------------------------


@pytest.mark.parametrize(
    ("seconds", "words"),
    [
        (0.0, "0 s"),
        (59.9, "59 s"),
        (110.0, "1 min 50 s"),
        (120.0, "2 min"),
        (725.0, "12 min"),
        (4320.0, "1 h 12 min"),
        (7200.0, "2 h"),
        (90000.0, "1 d 1 h"),
        (-75.0, "1 min 15 s"),
        (math.inf, "too long to tell"),
        (None, "not known"),
        (math.nan, "not known"),
    ],
)
def test_durations(seconds: float | None, words: str) -> None:
    """At most two units, never rounded up, seconds only under ten minutes."""
    assert duration(seconds) == words


def test_pressures_are_in_the_dials_unit() -> None:
    """Levels say gauge or absolute, differences neither; unknown is never a number."""
    assert pressure(PLAN, ROOM + 62.6e5) == "62.6 bar(g)"
    assert pressure_difference(PLAN, 31.0e5) == "31.0 bar"
    psi = replace(PLAN, pressure_unit="psig")
    assert pressure(psi, ROOM + 62.6e5) == "908 psig"
    assert pressure_difference(psi, 31.0e5) == "450 psi"
    mega = replace(PLAN, pressure_unit="MPa(a)")
    assert pressure(mega, 6.26e6) == "6.26 MPa(a)"
    assert pressure_difference(mega, 3.1e6) == "3.10 MPa"
    for unknown in (None, math.nan, math.inf):
        assert pressure(PLAN, unknown) == "not known"
        assert pressure_difference(PLAN, unknown) == "not known"
        assert reading(PLAN, "PG1", unknown) == "not known"
    assert reading(PLAN, "no such", 1.0) == "not known"
    assert difference(PLAN, "TT1", 1.25) == "1.2 K"


# -- bands ---------------------------------------------------------------------------------------------------


def test_permission_is_shape_and_word() -> None:
    """Readable without colour: no two share shape and word."""
    run = begun(plan(line(1)))
    assert permission_words(standing(run.plan, run.ledger, run.clock.now())) == "● YES"
    assert len(set(PERMISSION.values())) == len(PERMISSION) == 6


def test_left_alone_in_words() -> None:
    """Where it ends, and when which limit falls, with the first act."""
    stuck = Future("heat stuck on", 312.15, ROOM + 87.0e5, False, "RD1", 4320.0, about=True)
    both = LeftAlone(False, True, (*REST.futures, stuck))
    assert left_alone_words(PLAN, REST) == "heat off: 71.0 bar(g) at 30.0 °C"
    assert left_alone_words(PLAN, both).endswith("    heat stuck on: 87.0 bar(g) at 39.0 °C")
    assert left_alone_verdict(REST, "OPEN V2 now.") == "AT REST"
    assert left_alone_verdict(both, "HEAT OFF.") == (
        "NOT AT REST: passes RD1's limit in about 1 h 12 min with the heat stuck on. HEAT OFF."
    )
    assert left_alone_verdict(MOVING, "OPEN V2 now.") == (
        "NOT AT REST: passes RD1's limit in 1 h 12 min. OPEN V2 now."
    )
    untimed = LeftAlone(False, True, (replace(MOVING.futures[0], limit_after_s=None),))
    assert left_alone_verdict(untimed, "OPEN V2 now.") == "NOT AT REST: passes RD1's limit. OPEN V2 now."
    nowhere = LeftAlone(False, True, (replace(MOVING.futures[0], limit=None, limit_after_s=None),))
    assert left_alone_verdict(nowhere, "OPEN V2 now.") == "NOT AT REST. OPEN V2 now."
    unknown = LeftAlone(False, False, ())
    assert left_alone_words(PLAN, unknown) == "what happens left alone is not known"
    assert left_alone_verdict(unknown, "OPEN V2 now.") == "NOT AT REST: what happens is not known. OPEN V2 now."
    assert left_alone_words(PLAN, LeftAlone(True, True, ())) == "nothing happens"


def test_the_ceiling_in_words() -> None:
    """Now, this step's worst, the ceiling; then bar, kelvin and minutes."""
    distance = Distance(31.0e5, 19.2, 1440.0, 0.8 / 60.0)
    found = Ceiling(ROOM + 62.6e5, 1.2e5, ROOM + 83.8e5, ROOM + 94.8e5, "RD1", distance, Judgement.CLEAR)
    assert ceiling_words(PLAN, found) == ("now 62.6 ±1.2", "this step at worst 83.8", "94.8 bar(g) by RD1")
    assert distance_words(PLAN, found) == ("31.0 bar", "19 K", "about 24 min at 0.8 K a minute")
    for_ever = replace(found, distance=replace(distance, seconds=None))
    assert distance_words(PLAN, for_ever) == ("31.0 bar", "19 K", "never, as it stands")
    never = replace(found, distance=Distance(31.0e5, None, None, None))
    assert distance_words(PLAN, never) == ("31.0 bar", "never by warming", "")
    unknown = replace(found, now=None, step_worst=None, distance=Distance(None, None, None, None))
    assert ceiling_words(PLAN, unknown)[:2] == ("now not known", "this step at worst not known")
    assert distance_words(PLAN, unknown) == ("not known", "not known", "not known")


@pytest.mark.parametrize(
    ("verdict", "proves", "shape", "words"),
    [
        ("agrees", "thermometer and gauge", "●", "says: thermometer and gauge are sound; not: how much is in the cell"),
        ("agrees", "charge", "●", "says: thermometer, gauge and charge are sound"),
        ("cannot tell", "nothing", "□", "cannot tell: the readings are too coarse for the margin that is left"),
        ("disagrees", "nothing", "■", "disagrees: one of the two is wrong, and nothing that raises goes on"),
    ],
)
def test_agreement_in_words(verdict: str, proves: str, shape: str, words: str) -> None:
    """The pair, and what it proves beside what it does not."""
    found = replace(AGREES, verdict=verdict, proves=proves)
    assert agreement_pair(PLAN, found) == f"{shape} PG1 62.6 ±1.2, computed 62.0 ±0.4"
    assert agreement_proves(found) == words


def test_no_agreement_in_words() -> None:
    """Nothing to compare, nothing shown."""
    nothing = Agreement("no reading", None, None, None, None, None, "nothing")
    assert agreement_pair(PLAN, nothing) == "□ no reading to compare"
    assert agreement_pair(PLAN, None) == "□ not shown, or nothing computed"
    assert agreement_proves(None) == agreement_proves(nothing) == "says: nothing yet"
    assert agreement_age(70.0, 240.0) == "1 min 10 s old, good for 4 min"
    assert agreement_age(70.0, None) == "1 min 10 s old"
    assert agreement_age(None, 240.0) == ""


@pytest.mark.parametrize(
    ("wanted", "words"),
    [
        (Wanted(PG1, 110.0, False, "this step"), "next reading of PG1 in 1 min 50 s"),
        (Wanted(PG1, 0.0, False, "this step"), "read PG1"),
        (Wanted(PG1, -5.0, True, "this step"), "READ PG1 NOW"),
        (Wanted(BS1, 0.0, False, "this step", outside=True), "read BS1 again"),
        (Wanted(replace(BS1, if_not="Stop."), 0.0, False, "this step", outside=True), "read BS1 again"),
        (Wanted(HS1, 0.0, False, "signing", blind=True), "the signer reads HS1 without sight of the other reading"),
    ],
)
def test_wanted_readings_in_words(wanted: Wanted, words: str) -> None:
    """What to read and when."""
    assert wanted_words(wanted) == words


def test_steps_of_their_own_kind_in_words() -> None:
    """Hold, witness, quick sequence and proof, each as it stands."""
    run = begun(plan(hold(), quick(), empty(), line(4, seals=True)))

    def look() -> Standing:
        return standing(run.plan, run.ledger, run.clock.now())

    assert begin_words(look()) == "Nothing has been done yet. Go on to the first step."
    run.must(acts.GoOn())
    state = look().hold
    assert state is not None
    assert hold_words(state) == "The second signs (Bo), because it matters."
    assert hold_words(replace(state, may_sign=())).startswith("The second signs, and nobody here may")
    run.must(acts.Sign("Bo", "222"))
    signed = look().hold
    assert signed is not None
    assert hold_words(signed) == "Signed by Bo as second."
    run.must(acts.GoOn())
    run.clock.advance(70.0)
    assert [quick_words(item) for item in look().quick] == ["■ Shut V2: 10 s late. Begin again.", "□ Step back"]
    run.must(acts.QuickDone(0))
    assert [quick_words(item) for item in look().quick] == ["● Shut V2 (late)", "□ Step back: 30 s left"]
    run.must(acts.QuickDone(1))
    run.must(acts.SetValve("V2", "open"))
    run.must(acts.GoOn())
    run.must(acts.Prove("vent"))
    assert [proof_words(run.plan, run.ledger, proof) for proof in look().proofs] == [
        "● vent",
        "□ wall: TT1 has not been read in this step.",
        "□ low gauge",
        "□ left open",
    ]
    assert witness_words(look()) == ""
    assert next_words(look()) == "Next the vessel is closed."


def test_next_is_told_without_its_instruction() -> None:
    """A forbidden instruction is never on the screen, so what comes next is only named."""
    words = []
    for following in (line(2, opens_containment=True), line(2, source="on"), line(2, "Secret")):
        run = begun(plan(line(1), following))
        run.must(acts.GoOn())
        words.append(next_words(standing(run.plan, run.ledger, run.clock.now())))
    assert words == ["Next the vessel is opened.", "Next the heat goes on.", "Next is step 1.2."]
    last = begun(plan(line(1)))
    last.must(acts.GoOn())
    assert next_words(standing(last.plan, last.ledger, last.clock.now())) == "This is the last step."


def test_unknown_margins_say_when_the_way_back_comes() -> None:
    """Unknown is said, with how long it may last."""
    run = begun(plan(line(1, raises=True)))
    run.answered(good_for_s=100.0)
    run.must(acts.GoOn())
    run.clock.advance(30.0)
    seen = standing(run.plan, run.ledger, run.clock.now())
    assert unknown_words(seen) == "margins are not known; the way back comes in 1 min 10 s"
    run.answered()
    assert unknown_words(standing(run.plan, run.ledger, run.clock.now())) == ""


def test_phases_in_words() -> None:
    """Each phase by its letter and what it is."""
    assert phase_words("B'") == "phase B': closed, solid in it, charge proved"
    assert phase_words("Z") == "phase Z: not known"
