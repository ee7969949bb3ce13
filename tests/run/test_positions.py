"""Where valves and heat source stand, as far as anybody has said: nobody's word is not a position."""

from __future__ import annotations

from dataclasses import replace

import pytest

from runbook.answers import QuickItem
from runbook.run import acts
from runbook.run.events import GapOpened
from runbook.run.questions import closed, question
from runbook.run.sentences import unstated_words
from runbook.run.standing import standing
from tests.run.plans import BS1, Run, begun, line, plan, quick


def asked(run: Run) -> dict[str, str]:
    """The positions that the standing question carries."""
    found = question(run.plan, run.ledger)
    assert found is not None
    return dict(found.valves)


def unstated(run: Run) -> tuple[str, ...]:
    """Valves that the screens ask to look at."""
    return standing(run.plan, run.ledger, run.clock.now()).unstated


def test_a_finished_line_was_done() -> None:
    """Going on from it says that its valves were moved."""
    run = begun(plan(line(1, valves=(("V2", "open"),)), line(2)))
    run.must(acts.GoOn())
    assert asked(run)["V2"] == "do not know"
    run.must(acts.GoOn())
    assert asked(run)["V2"] == "open"
    assert unstated(run) == ()


def test_a_line_left_undone_leaves_its_valves_unknown() -> None:
    """Going on from an unfinished line to one that lowers confirms nothing, and the screens ask to look."""
    run = begun(plan(line(1, valves=(("V2", "open"),), reads=(BS1,)), line(2, "Let down", lowers=True), line(3)))
    run.must(acts.GoOn())
    run.must(acts.GoOn())
    assert run.ledger.line == 1
    assert asked(run)["V2"] == "do not know"
    assert unstated(run) == ("V2",)
    words = unstated_words(standing(run.plan, run.ledger, run.clock.now()))
    assert words == "Nobody has said where V2 stands: look, and state it"
    run.must(acts.SetValve("V2", "open"))
    assert asked(run)["V2"] == "open"
    assert unstated(run) == ()


def test_what_was_stated_in_the_line_stays_when_it_is_left_undone() -> None:
    """Somebody looked: leaving the line takes nothing back."""
    run = begun(plan(line(1, valves=(("V2", "open"),), reads=(BS1,)), line(2, "Let down", lowers=True)))
    run.must(acts.GoOn())
    run.must(acts.SetValve("V2", "shut"))
    run.must(acts.GoOn())
    assert asked(run)["V2"] == "shut"


def test_a_quick_sequence_moves_its_valves_one_by_one() -> None:
    """From its entry on they are not known; each confirmed item says where its own stand."""
    run = begun(plan(quick(), line(2, "Let down", lowers=True)))
    run.must(acts.GoOn())
    assert asked(run)["V2"] == "do not know"
    run.must(acts.QuickDone(0))
    assert asked(run)["V2"] == "shut"


def test_a_quick_sequence_left_before_its_end() -> None:
    """What its unconfirmed items move is not known afterwards."""
    run = begun(plan(quick(), line(2, "Let down", lowers=True)))
    run.must(acts.GoOn())
    run.must(acts.GoOn())
    assert asked(run)["V2"] == "do not know"
    assert unstated(run) == ("V2",)


@pytest.mark.parametrize(("touched", "kept"), [("no", "shut"), ("yes", "do not know"), ("do not know", "do not know")])
def test_a_gap(touched: str, kept: str) -> None:
    """Open, nothing is known. Answered: the vent and the source as said, the others only if nothing was touched."""
    run = begun(plan(line(1), line(2)))
    vent = run.plan.let_down_valve
    assert vent is not None
    other = next(tag for tag, _ in run.plan.valves if tag != vent)
    run.must(acts.SetValve(other, "shut"))
    run.put(GapOpened("resumed"))
    assert set(asked(run).values()) == {"do not know"}
    found = question(run.plan, run.ledger)
    assert found is not None
    assert found.source == ("none" if run.plan.source == "none" else "do not know")
    assert unstated(run) == ()  # the four questions come first
    run.must(acts.GapAnswers("off", "open", touched, ("Ada",)))
    assert (asked(run)[vent], asked(run)[other]) == ("open", kept)
    assert (other in unstated(run)) is (kept == "do not know")


def test_a_sequence_that_closes_and_lets_go_ends_open() -> None:
    """While it is gone through the vessel counts as closed; once all items are confirmed, as its valves were stated."""
    items = (
        QuickItem("Shut V2", 60.0, "Let go.", (("V2", "shut"),), True),
        QuickItem("Let V2 go", 60.0, "Let go.", (("V2", "open"),)),
    )
    run = begun(plan(replace(quick(), quick=items, seals=True), line(2)))
    run.must(acts.GoOn())
    run.must(acts.QuickDone(0))
    assert closed(run.ledger) == "closed"
    run.must(acts.QuickDone(1))
    assert closed(run.ledger) == "open"
