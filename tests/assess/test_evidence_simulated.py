"""What readings say, as honest bars from a simulation: how often the cause that is so is named.

`lessons` makes the truth and the readings by its own path; the seed was fixed before the rates of it were seen.
"""

from __future__ import annotations

from dataclasses import dataclass
from pathlib import Path
from random import Random

import pytest

from runbook.answers import Explanation
from runbook.assess.evidence.given import Given, given
from runbook.assess.evidence.looks import looks
from runbook.assess.evidence.ranking import explanations
from tests.assess.lessons import AT_REST, CAUSES, LESSON, STATED, Moment, draw, readings
from tests.assess.scenes import observed, scene

SEED = 20310302
CASES, FAULTLESS = 200, 40


@dataclass(frozen=True)
class Case:
    """One simulated lesson as it was explained."""

    cause: str
    lesson: tuple[Explanation, ...]
    at_rest: tuple[Explanation, ...]


def fine(folder: Path) -> Given:
    """The shipped vessel with a class 0.25 gauge read to 0.1 bar, its charge weighed at closing."""
    there = scene(folder, apparatus={"class: 0.6, division: 1 bar": "class: 0.25, division: 0.1 bar"})
    found = given(there, (observed("mass", STATED, 1, closed=False),), "PG1", "TT1", 294.15)
    assert found is not None
    return found


def explained(known: Given, random: Random, cause: str | None) -> Case:
    """One lesson and, of the same vessel, the readings at rest alone."""
    truth = draw(random, cause)

    def of(moments: tuple[Moment, ...]) -> tuple[Explanation, ...]:
        return explanations(known, looks(readings(random, truth, moments), "PG1", "TT1"))

    return Case(cause or "none", of(LESSON), of(AT_REST))


@pytest.fixture(scope="module")
def cases(tmp_path_factory: pytest.TempPathFactory) -> list[Case]:
    """200 lessons with something wrong, each cause as often as the others."""
    known, random = fine(tmp_path_factory.mktemp("fine")), Random(SEED)
    return [explained(known, random, CAUSES[n % len(CAUSES)]) for n in range(CASES)]


def place(found: tuple[Explanation, ...], cause: str) -> int:
    """Rank of a cause from 0."""
    return [e.cause for e in found].index(cause)


def struck(found: tuple[Explanation, ...], cause: str) -> bool:
    return found[place(found, cause)].struck_out


def test_the_true_cause_is_first_in_85_of_100_lessons(cases: list[Case]) -> None:
    """Integrated over its size the cause that is so comes first, strictly, in 85 %."""
    assert sum(place(c.lesson, c.cause) == 0 for c in cases) >= 0.85 * CASES


def test_the_true_cause_is_among_the_first_three_in_97_of_100_lessons(cases: list[Case]) -> None:
    """Whoever makes the tests of the first three finds it."""
    assert sum(place(c.lesson, c.cause) < 3 for c in cases) >= 0.97 * CASES


def test_the_true_cause_is_hardly_ever_struck_out(cases: list[Case]) -> None:
    """Never in 98 % of the lessons, and never in 98 % of the readings at rest alone."""
    assert sum(not struck(c.lesson, c.cause) for c in cases) >= 0.98 * CASES
    assert sum(not struck(c.at_rest, c.cause) for c in cases) >= 0.98 * CASES


def test_readings_at_rest_alone_cannot_name_the_cause(cases: list[Case]) -> None:
    """One pair and a height leave most causes possible: neither of the first two rates is reached."""
    assert sum(place(c.at_rest, c.cause) == 0 for c in cases) < 0.85 * CASES
    assert sum(place(c.at_rest, c.cause) < 3 for c in cases) < 0.97 * CASES


def test_of_faultless_lessons_nothing_is_named(tmp_path: Path) -> None:
    """Of 40 lessons with a small error alone 'none' comes first in 85 %."""
    known, random = fine(tmp_path), Random(SEED + 1)
    found = [explained(known, random, None) for _ in range(FAULTLESS)]
    assert sum(c.lesson[0].cause == "none" for c in found) >= 0.85 * FAULTLESS


def test_shares_are_belief(cases: list[Case]) -> None:
    """They sum to one, and what is struck out comes last."""
    for case in cases:
        assert sum(e.share for e in case.lesson) == pytest.approx(1.0, abs=1e-9)
        out = [e.struck_out for e in case.lesson]
        assert out == sorted(out)


def test_shares_mean_what_they_say(cases: list[Case]) -> None:
    """Of causes given 70 % and more together about as many are so as they were given, within 15 points."""
    sure = [c.lesson[0] for c in cases if c.lesson[0].share >= 0.7]
    right = [c.lesson[0].cause == c.cause for c in cases if c.lesson[0].share >= 0.7]
    assert len(sure) > 80
    assert sum(right) / len(sure) == pytest.approx(sum(e.share for e in sure) / len(sure), abs=0.15)
