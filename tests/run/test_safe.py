"""Make safe: which phase governs, what its acts are, and what a vessel takes out of them."""

from __future__ import annotations

from dataclasses import replace
from itertools import combinations

import pytest

from runbook.answers import ChargeBox, Phase
from runbook.run.acts import GoOn, MakeSafe
from runbook.run.events import MadeSafe
from runbook.run.safe import LEAVES, ORDER, make_safe, phase_of, rest_shut
from tests.run.plans import MOVING, begun, line, plan

WHOLE = plan(line(1))
BY_RANK = ["J", "F", "I", "B", "K", "D", "H", "G", "E", "L", "C", "B'", "A"]


def test_the_order_is_complete() -> None:
    """Every phase has its place, once."""
    assert [p.value for p in ORDER] == BY_RANK
    assert set(ORDER) == set(Phase)


@pytest.mark.parametrize("pair", list(combinations(BY_RANK, 2)), ids=" over ".join)
def test_of_two_possible_phases_the_first_governs(pair: tuple[str, str]) -> None:
    """Pair by pair, in whatever order the answer names them."""
    for phases in (pair, pair[::-1]):
        run = begun(WHOLE)
        run.answered(phases=tuple(Phase(p) for p in phases))
        assert phase_of(run.plan, run.ledger, "") == pair[0]


@pytest.mark.parametrize(("seen", "phase"), [("relief", "F"), ("window", "I"), ("fire", "J")])
def test_what_a_person_sees_governs(seen: str, phase: str) -> None:
    """The tool cannot see a flame or a crack; a person can."""
    run = begun(WHOLE)
    run.answered(phases=(Phase.A,))
    begin = run.must(MakeSafe(seen))
    assert isinstance(begin, MadeSafe)
    assert (begin.phase, begin.seen) == (phase, seen)


def test_the_phase_needs_no_child() -> None:
    """The last answer to any question tells; before any, the line; before any line, what is in the vessel."""
    made = plan(line(1, phases=(Phase.D, Phase.C)), line(2))
    run = begun(made)
    assert phase_of(made, run.ledger, "") is Phase.A
    run.must(GoOn())
    assert phase_of(made, run.ledger, "") is Phase.D
    run.answered(phases=(Phase.E,))
    run.must(GoOn())
    run.lost()
    assert phase_of(made, run.ledger, "") is Phase.E
    loaded = replace(made, charge=ChargeBox(0.1, 0.2, False, ("charge record",)))
    assert phase_of(loaded, begun(loaded).ledger, "") is Phase.D
    unknown = begun(plan(line(1, phases=())))
    unknown.must(GoOn())
    assert phase_of(unknown.plan, unknown.ledger, "") is Phase.B


FIRST = {
    "A": "LID OFF",
    "B": "OPEN V2",
    "B'": "SHIELD SHUT",
    "C": "HEAT OFF",
    "D": "HEAT OFF",
    "E": "HEAT OFF",
    "F": "ALL OUT",
    "G": "LEAVE V2",
    "H": "LEAVE V2",
    "I": "HEAT OFF",
    "J": "HEAT OFF if H1 is in reach",
    "K": "STOP the pump",
    "L": "HEAT OFF",
}


@pytest.mark.parametrize(("phase", "first"), FIRST.items())
def test_the_first_act_of_each_phase(phase: str, first: str) -> None:
    """The first act is the one that counts, and names what is at this bench."""
    found = make_safe(WHOLE, Phase(phase))
    assert found.acts[0].startswith(first)
    assert found.never.startswith("Never ")
    assert all(act.endswith(".") and act.split()[0].strip(":").isupper() for act in found.acts)


@pytest.mark.parametrize("phase", list(Phase))
def test_a_fluid_that_may_not_be_let_down_takes_the_vent_out(phase: Phase) -> None:
    """Where nothing may be let out no act names the vent, and people go instead."""
    found = make_safe(replace(WHOLE, release_forbidden=True), phase)
    assert found.acts
    assert not any("V2" in act for act in found.acts)
    if phase in (Phase.B, Phase.D, Phase.G, Phase.H):
        assert any(act.startswith("PEOPLE OUT") for act in found.acts)
    if phase in (Phase.B, Phase.G, Phase.H):
        assert found.acts[0].startswith("PEOPLE OUT")


@pytest.mark.parametrize("phase", list(Phase))
def test_without_vent_and_without_source_there_are_acts(phase: Phase) -> None:
    """A vessel with neither still has a first act that can be done."""
    found = make_safe(replace(WHOLE, let_down_valve=None, source_tag=None, source_away=False), phase)
    assert found.acts
    assert not any("None" in act or "H1" in act or "V2" in act for act in found.acts)


def test_heat_is_taken_away_only_where_it_can_be() -> None:
    """A jacket that is screwed on cannot be taken away in one motion."""
    for phase in (Phase.D, Phase.E):
        assert any(act.startswith("TAKE H1 AWAY") for act in make_safe(WHOLE, phase).acts)
        fixed = make_safe(replace(WHOLE, source_away=False), phase)
        assert not any("AWAY" in act for act in fixed.acts)


def test_the_author_adds_and_never_replaces() -> None:
    """What the author adds comes after every built-in act."""
    added = make_safe(replace(WHOLE, make_safe_also=(("Call 4711.", "second"), ("Lock up.", ""))), Phase.C)
    assert added.acts == (*make_safe(WHOLE, Phase.C).acts, "Call 4711. (second)", "Lock up.")


def test_letting_down_is_stopped_only_where_the_shut_vessel_is_at_rest() -> None:
    """While letting down, shutting the vent is the first act only if it began at rest with a proved charge."""
    run = begun(plan(line(1), line(2, lowers=True)))
    run.must(GoOn())
    run.must(GoOn())
    assert not rest_shut(run.plan, run.ledger)
    run.answered(phases=(Phase.G,))
    assert rest_shut(run.plan, run.ledger)
    begin = run.must(MakeSafe())
    assert isinstance(begin, MadeSafe)
    assert begin.acts[0].startswith("SHUT V2")
    for box in (ChargeBox(0.115, 0.125, True, ()), ChargeBox(0.115, 0.119, False, ())):
        run.answered(charge=box)
        assert not rest_shut(run.plan, run.ledger)
    moving = begun(plan(line(1, left_alone=MOVING), line(2, lowers=True)))
    moving.must(GoOn())
    moving.must(GoOn())
    moving.answered()
    assert not rest_shut(moving.plan, moving.ledger)


def test_gas_alarms_are_of_the_gas() -> None:
    """Percentages of carbon dioxide are said only where a meter reads it."""
    meter = next(i for i in WHOLE.instruments if i.reads == "carbon dioxide")
    other = replace(WHOLE, instruments=tuple(i for i in WHOLE.instruments if i is not meter))
    for phase in (Phase.A, Phase.F):
        assert any("carbon dioxide" in act for act in make_safe(WHOLE, phase).acts)
        assert not any("carbon dioxide" in act for act in make_safe(other, phase).acts)


@pytest.mark.parametrize("phase", list(Phase))
def test_how_the_acts_leave_the_vessel_is_what_they_say(phase: Phase) -> None:
    """The table that `check` proves rest from agrees with the words a person reads."""
    acts, leaves = " ".join(make_safe(WHOLE, phase).acts), LEAVES[phase]
    assert leaves.source_gone == ("TAKE " in acts)
    if leaves.vent == "open" and phase is not Phase.K:
        assert any(word in acts for word in ("OPEN V2", "LEAVE V2 open", "LID OFF"))
    if leaves.vent == "stays":
        assert "OPEN V2 now" not in acts
    if leaves.away:
        assert any(word in acts for word in ("OUT", "BACK", "AIR IN"))
    else:
        assert "OUT:" not in acts


@pytest.mark.parametrize("phase", [Phase.B, Phase.D])
def test_a_vent_that_springs_open_is_let_go_of(phase: Phase) -> None:
    """Nobody opens it: taking the hand away is the act."""
    sprung = replace(WHOLE, let_down_valve="V2", valve_lets_go=(("V2", "opens"),))
    acts = make_safe(sprung, phase).acts
    assert any(act.startswith("LET GO of V2") for act in acts)
    assert not any(act.startswith("OPEN V2") for act in acts)


def test_a_vent_that_springs_open_is_never_shut_to_come_to_rest() -> None:
    """Shut it needs a hand for ever: what was at rest with a valve that stays is not with a spring."""
    sprung = replace(WHOLE, let_down_valve="V2", valve_lets_go=(("V2", "opens"),))
    assert make_safe(WHOLE, Phase.G, rest_shut=True).acts[0].startswith("SHUT")
    assert make_safe(sprung, Phase.G, rest_shut=True).acts[0] == "LEAVE V2 open."
