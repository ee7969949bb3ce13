"""A vessel without a window: nothing of the inside is promised, and its limits hold all the same."""

from __future__ import annotations

from dataclasses import replace
from datetime import date
from pathlib import Path

import pytest

from runbook.answers import Plan
from runbook.assess.bind import bind
from runbook.errors import FileProblems
from tests.assess.scenes import loaded

ISSUED = date(2031, 3, 2)
WINDOW = "window: 6 mm to 54 mm "


@pytest.fixture(scope="module")
def plans(tmp_path_factory: pytest.TempPathFactory) -> tuple[Plan, Plan]:
    """Of the shipped procedure, with the window and without it."""
    good = loaded(tmp_path_factory.mktemp("windowless"))
    blind = replace(good, apparatus=good.apparatus.model_copy(update={"window": None}))
    return bind(good, ISSUED), bind(blind, ISSUED)


def test_nothing_of_the_inside_is_promised(plans: tuple[Plan, Plan]) -> None:
    """No surface, haze, rain or solid is computed for it; frost and snow are seen from outside."""
    with_window, without = ({s.of for line in plan.lines for s in line.sights if s.computed} for plan in plans)
    assert {"meniscus", "haze"} <= with_window
    assert without <= {"frost", "snow"}


def test_a_sight_that_is_asked_for_is_told_missing(plans: tuple[Plan, Plan]) -> None:
    """The author who asks for a meniscus is told that there is no window to see it in."""
    said = [f for f in plans[1].findings if f.rule == "words and sight"]
    assert said
    assert all("no 'window'" in f.message for f in said)


def test_its_limits_are_the_same(plans: tuple[Plan, Plan]) -> None:
    """The most it may hold has nothing to do with what is seen; least and best have."""
    with_window, without = (plan.bounds for plan in plans)
    assert without.most_kg == with_window.most_kg
    assert with_window.best_kg is not None
    assert without.best_kg is None
    assert "no window" in without.best_reason
    assert plans[1].verdict == plans[0].verdict == "within limits"


def test_a_height_is_read_at_a_window(tmp_path: Path) -> None:
    """A ruler on a vessel without a window is an error that says what to write."""
    with pytest.raises(FileProblems, match="no window to read it at"):
        loaded(tmp_path, {}, {WINDOW: "#"})
