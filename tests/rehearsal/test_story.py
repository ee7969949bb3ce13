"""The judge of a rehearsal that goes wrong: each thing that must not happen is told when it is made to happen."""

from __future__ import annotations

from dataclasses import replace

import pytest

from runbook.answers import Need
from runbook.rehearsal.story import Story
from runbook.run import acts
from runbook.run.events import Answered, Event, MadeSafe, TurnedBack, WentOn
from tests.run.plans import AGREES, PG1, ROOM, Run, answer, begun, line, margin, plan

HEIGHT = Need("HS1", "liquid height", "mm", low=0.027, high=0.032, if_not="Make safe. Touch nothing.")


def told(run: Run, *events: Event, began: float | None = 0.0) -> Story:
    """A story of these events, each after what the run has been through."""
    story = Story()
    for event in events:
        story.happened(run.ledger, event, run.clock.now(), began)
    return story


def warming() -> Run:
    """Before a line that raises and leans on the gauge."""
    run = begun(plan(line(1, reads=(HEIGHT,)), line(2, "Warm", raises=True, entry_needs=(PG1,))))
    run.must(acts.GoOn())
    run.clock.advance(10.0)
    return run


def test_going_on_while_gauge_and_model_disagree_is_wrong() -> None:
    """The first reading that shows the fault has to stop what raises."""
    run = warming()
    run.read("PG1", ROOM + 60e5)
    wrong = Answered(answer("k", agreement=replace(AGREES, verdict="disagrees")))
    assert told(run, wrong, WentOn(1)).wrong == ["went on into step 1.2, which raises, while gauge and model disagreed"]
    assert told(run, Answered(answer("k")), WentOn(1)).wrong == []


def test_going_on_without_a_reading_is_wrong() -> None:
    """A reading that the step leans on was never taken."""
    assert told(warming(), WentOn(1)).wrong == ["went on into step 1.2, which raises, without a reading of PG1"]


def test_going_on_after_a_reading_that_calls_for_make_safe_is_wrong() -> None:
    """The author's own word stands until the instrument has been read anew."""
    run = warming()
    run.read("PG1", ROOM + 60e5)
    low = run.read("HS1", 0.020)
    assert not low.in_range
    story = told(run, low, WentOn(1))
    (wrong,) = story.wrong
    assert wrong.endswith("though HS1 had been read where the author says to make safe")
    assert story.said.startswith("HS1 read 20")
    good = run.read("HS1", 0.030)
    assert told(run, low, good, WentOn(1)).wrong == []


def test_make_safe_begins_with_the_first_act_of_its_phase() -> None:
    """Anything else on top is wrong."""
    run = warming()
    made = run.must(acts.MakeSafe())
    assert isinstance(made, MadeSafe)
    before = begun(run.plan)
    assert told(before, made).wrong == []
    turned = replace(made, acts=tuple(reversed(made.acts)))
    (wrong,) = told(before, turned).wrong
    assert "not with the first act of phase" in wrong


@pytest.mark.parametrize(
    ("event", "said"),
    [
        (TurnedBack(1, "RD1: no pressure margin left"), "RD1: no pressure margin left"),
        (Answered(answer("k", now=(margin(-1.0),))), "no margin is left"),
        (Answered(answer("k", agreement=replace(AGREES, verdict="disagrees"))), "gauge and model disagree"),
    ],
)
def test_what_counts_as_noticing(event: Event, said: str) -> None:
    """A way back, a margin that is gone, a disagreement; nothing before the fault has begun."""
    run = warming()
    assert said in told(run, event).said
    assert told(run, event, began=None).noticed_s is None
