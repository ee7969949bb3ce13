"""Explanations in words, each word for word; no sentence of them clears anything."""

from __future__ import annotations

import pytest

from runbook.answers import Agreement, ChargeEstimate, ChargePart, Explanation
from runbook.run.evidence_words import (
    DECIDED_BY_TESTS,
    charge_words,
    explanation_words,
    first_explanation,
    ranked_lines,
)
from runbook.run.sentences import agreement_proves, agreement_says
from tests.run.plans import line, plan

PLAN = plan(line(1))
OFF = Agreement("disagrees", "PG1", 61.0e5, 0.5e5, 58.6e5, 0.3e5, "nothing")
COARSE = Agreement("cannot tell", "PG1", 60.0e5, 3.2e5, 58.6e5, 0.3e5, "nothing")
OFFSET = Explanation("gauge offset", 2.4e5, "Pa", 0.62, False, "re-zero", ("trapped air",))
AIR = Explanation("trapped air", 2.3e5, "Pa", 0.34, False, "re-zero", ("gauge offset",))
NONE = Explanation("none", 0.0, "", 0.5, False, "re-zero")
OUT = Explanation("leak", 0.001, "kg", 1e-9, True, "")


@pytest.mark.parametrize(
    ("cause", "size", "detail", "words"),
    [
        ("trapped air", 1.8e5, "", "trapped air: it adds 1.8 bar"),
        ("over-filled", 0.0059, "", "5.9 g more in it than was stated"),
        ("under-filled", -0.0059, "", "5.9 g less in it than was stated"),
        ("leak", 0.006, "", "a leak: it has lost 6.0 g"),
        ("thermometer lag", 2.0, "", "the thermometer is 2.0 K behind the wall"),
        ("thermometer place", 1.5, "", "the thermometer shows 1.5 K less than the wall has"),
        ("thermometer place", -1.5, "", "the thermometer shows 1.5 K more than the coldest wet place has"),
        ("gauge offset", 2.4e5, "", "PG1 shows 2.4 bar too much"),
        ("gauge offset", -2.4e5, "", "PG1 shows 2.4 bar too little"),
        ("gauge/absolute slip", -1.01325e5, "", "a gauge/absolute slip: 1.0 bar too little"),
        ("wrong unit", 14.5, "psi read as bar", "a wrong unit: psi read as bar"),
        ("none", 0.0, "", "nothing is wrong"),
    ],
)
def test_each_cause_is_a_plain_sentence_with_its_number(cause: str, size: float, detail: str, words: str) -> None:
    """In the dial's unit, with the tag that is compared."""
    assert explanation_words(PLAN, OFF, Explanation(cause, size, "", 0.5, False, "", (), detail)) == words


def test_what_is_one_is_said_to_be_one() -> None:
    """Causes that these readings do not tell apart stand in one sentence."""
    assert explanation_words(PLAN, OFF, OFFSET) == (
        "PG1 shows 2.4 bar too much; or trapped air, which these readings do not tell apart"
    )


def test_the_first_explanation_comes_with_its_test() -> None:
    """Two clauses that fit the band."""
    assert first_explanation(PLAN, OFF, (OFFSET, AIR, OUT)) == (
        "PG1 shows 2.4 bar too much",
        "tap PG1, check its zero",
    )


def test_nothing_wrong_in_front_names_what_else_it_could_be() -> None:
    """It is never said alone, and never as leave to go on."""
    words, test = first_explanation(PLAN, COARSE, (NONE, OFFSET))
    assert words == "perhaps nothing; else PG1 shows 2.4 bar too much"
    assert test == "tap PG1, check its zero"


def test_readings_that_nothing_explains_are_read_again() -> None:
    """All struck out: two things are wrong, or one that nobody thought of."""
    words, test = first_explanation(PLAN, OFF, (OUT,))
    assert words == "nothing that is known explains these readings together"
    assert test == "read both again"


def test_without_explanations_the_band_says_what_it_said() -> None:
    """Agreement, no reading, and answers of an older run."""
    for agreement in (None, OFF, COARSE):
        assert agreement_says(PLAN, agreement, ()) == agreement_proves(agreement)


def test_a_coarse_gauge_with_nothing_wrong_in_front_says_that_it_is_coarse() -> None:
    """What else it could be stands on the page, not in the band of every reading."""
    assert agreement_says(PLAN, COARSE, (NONE, OFFSET)) == agreement_proves(COARSE)
    assert agreement_says(PLAN, COARSE, (OFFSET, NONE)).startswith("cannot tell: PG1 shows 2.4 bar too much?")


def test_the_band_begins_with_the_verdict() -> None:
    """Disagreement is not hidden behind its explanation."""
    assert agreement_says(PLAN, OFF, (OFFSET,)) == ("disagrees: PG1 shows 2.4 bar too much? tap PG1, check its zero")


def test_the_list_ends_with_what_is_struck_out() -> None:
    """Shares in whole per cent; what is excluded in one line without a test."""
    lines = ranked_lines(PLAN, OFF, (OFFSET, AIR, OUT))
    assert lines[0][0].startswith("  62 %  PG1 shows 2.4 bar too much")
    assert lines[-1] == ("struck out: a leak", "")


def test_no_explanation_clears_anything() -> None:
    """And the list says so."""
    assert DECIDED_BY_TESTS == "No explanation clears anything. Make its test; a new reading decides."


def test_the_charge_names_its_parts_and_what_is_blind() -> None:
    """A best estimate with U."""
    parts = (ChargePart("weighing at closing", 0.1172, 0.0006), ChargePart("height", 0.118, 0.004))
    assert charge_words(ChargeEstimate(0.11722, 0.0006, parts, ("pressure",))) == (
        "117.2 g ±0.6 g, from weighing at closing and height; pressure says nothing of it"
    )
    assert charge_words(None) == ""
