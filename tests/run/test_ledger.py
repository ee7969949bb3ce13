"""The fold: one by one equals all at once, resume is the fold again, and ten thousand events are quick."""

from __future__ import annotations

import math
import subprocess
import sys
from dataclasses import replace

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from runbook.run import acts
from runbook.run.clock import Moment
from runbook.run.decide import Refused, decide
from runbook.run.events import (
    Event,
    GapOpened,
    Halted,
    TurnedBack,
    event_from_plain,
    event_to_plain,
)
from runbook.run.ledger import REMEMBERED, Ledger, fold, fold_all
from runbook.run.questions import key_of, observations_json
from runbook.run.state import Trail
from tests.run.plans import BS1, HS1, PG1, ROOM, TT1, Run, begun, empty, hold, line, plan, quick, witness


def scripted() -> Run:
    """A run that meets every kind of event."""
    made = plan(
        line(1, reads=(BS1,), who="performer"),
        hold(read=BS1),
        quick(seals=True, read_after=(TT1,)),
        witness(),
        line(5, "Warm", raises=True, source="on", entry_needs=(PG1, TT1)),
        empty(),
        line(7, opens_containment=True),
    )
    run = begun(made)
    run.lost()
    run.must(acts.Note("the room is warm", "Cy"))
    run.must(acts.GoOn())
    run.read("BS1", 0.117)
    run.must(acts.GoOn())
    run.read("BS1", 0.117, by="Bo", blind=True)
    run.must(acts.Sign("Bo", "222"))
    run.must(acts.GoOn())
    run.must(acts.QuickDone(0))
    run.clock.advance(40.0)
    run.must(acts.QuickDone(1))
    run.read("TT1", 294.0)
    run.read("HS1", 0.030)
    run.must(acts.GoOn())
    run.clock.advance(300.0)
    run.must(acts.Tick())
    run.must(acts.Attend("Cy"))
    run.read("PG1", ROOM + 57e5)
    run.read("TT1", 294.0)
    run.answered()
    run.must(acts.GoOn())
    run.put(TurnedBack(4, "RD1"))
    run.answered()
    run.must(acts.TakeUp())
    run.must(acts.SetSource("off"))
    run.put(GapOpened("taken up again"))
    run.must(acts.GapAnswers("off", "open", "no", ("Ada", "Bo")))
    run.must(acts.GoOn())
    _prove_empty(run)
    run.must(acts.LeaveTool())
    run.must(acts.MakeSafe("window"))
    run.must(acts.SafeActDone(0))
    run.put(Halted("the disk is full"))
    return run


def _prove_empty(run: Run) -> None:
    run.must(acts.SetValve("V2", "open"))
    run.must(acts.Prove("vent"))
    run.read("TT1", 290.0)
    run.clock.advance(600.0)
    run.read("TT1", 290.0)
    run.must(acts.Prove("wall"))
    run.must(acts.SetValve("V3", "open"))
    run.must(acts.SetValve("V2", "shut"))
    run.read("PG2", ROOM)
    run.clock.advance(600.0)
    run.read("PG2", ROOM)
    run.must(acts.Prove("low gauge"))
    run.must(acts.SetValve("V2", "open"))
    run.must(acts.Prove("left open"))


def test_folding_all_equals_folding_one_by_one() -> None:
    """The ledger is nothing but its events."""
    run = scripted()
    assert fold_all(run.pairs) == run.ledger


def test_every_prefix_resumes_as_it_was() -> None:
    """Killed after any event, a run is folded again from its journal and stands where it stood."""
    run = scripted()
    ledger = Ledger.start()
    for n, (event, at) in enumerate(run.pairs, start=1):
        ledger = fold(ledger, event, at)
        kind_and_data = [(*event_to_plain(e), m) for e, m in run.pairs[:n]]
        again = fold_all((event_from_plain(kind, data), m) for kind, data, m in kind_and_data)
        assert again == ledger, event
        resumed = fold(again, GapOpened("taken up again"), at)
        act = acts.MakeSafe()
        assert not isinstance(decide(run.plan, resumed, run.clock.now(), act), Refused)


def test_a_fold_leaves_the_ledger_before_it_alone() -> None:
    """Two futures of one moment do not see each other."""
    run = begun(plan(line(1)))
    before, at = run.ledger, run.clock.now()
    run.read("PG1", ROOM + 60e5)
    event = run.pairs[-1][0]
    other = fold(before, replace(event, value=ROOM + 70e5), at)  # type: ignore[arg-type] # it is a reading
    assert [t.event.value for t in run.ledger.here] == [ROOM + 60e5]
    assert [t.event.value for t in other.here] == [ROOM + 70e5]
    assert list(before.here) == []


def test_what_was_encoded_in_pieces_is_what_would_be_encoded_anew() -> None:
    """The cached parts of the key never drift from the facts."""
    run = begun(plan(line(1), line(2)))
    for step in range(30):
        run.read(("PG1", "TT1", "BS1", "HS1")[step % 4], 0.03 if step % 4 == 3 else 0.1 * step + 1.0)
        run.must(acts.SetValve("V2", ("open", "shut", "do not know")[step % 3]))
        assert run.ledger.observations_json == observations_json(run.ledger.seen)
        assert run.ledger.key == key_of(run.ledger)


def test_only_so_many_answers_are_remembered() -> None:
    """A long run does not keep every answer it ever had; the last ones are there."""
    run = begun(plan(line(1)))
    for n in range(REMEMBERED + 20):
        run.read("PG1", ROOM + n * 1e5)
        run.answered()
    assert len(run.ledger.answers) == REMEMBERED
    assert run.ledger.answer is not None


def test_a_trail_that_branches_copies() -> None:
    """Appending twice to the same trail gives two trails."""
    run = begun(plan(line(1)))
    run.read("PG1", ROOM)
    run.read("TT1", 290.0)
    one, two = run.ledger.here
    start = Trail()
    first = start.appended(one)
    left, right = first.appended(two), first.appended(one)
    assert (list(left), list(right), list(first), list(start)) == ([one, two], [one, one], [one], [])
    assert left != right


@settings(max_examples=60, deadline=None)
@given(st.lists(st.sampled_from(["read", "answer", "lost", "go on", "open", "shut", "gap", "answers", "tick"])))
def test_any_order_of_events_folds_the_same(steps: list[str]) -> None:
    """Whatever happens, incremental and whole agree, and unknown is counted exactly while there is no answer."""
    run = begun(plan(line(1, reads=(HS1,)), line(2, lowers=True), line(3, raises=True, valves=(("V2", "shut"),))))
    for step in steps:
        run.clock.advance(30.0)
        match step:
            case "read":
                run.read("HS1", 0.030)
            case "answer":
                run.answered()
            case "lost":
                run.lost()
            case "go on":
                run.act(acts.GoOn())
            case "open" | "shut":
                run.must(acts.SetValve("V2", step))
            case "gap":
                run.put(GapOpened("x"))
            case "answers":
                run.act(acts.GapAnswers("off", "shut", "no", ()))
            case _:
                run.act(acts.Tick())
        assert (run.ledger.unknown_since is None) is (run.ledger.answer is not None)
    assert fold_all(run.pairs) == run.ledger


REPLAY = """
import sys
sys.modules["CoolProp"] = None
sys.modules["numpy"] = None
from tests.run.test_ledger import long_run, fold_all
assert fold_all(long_run(10_000)).seq == 10_000
assert not [name for name in sys.modules if name.startswith(("runbook.fluids", "runbook.charge", "runbook.assess"))]
"""


def long_run(count: int) -> list[tuple[Event, Moment]]:
    """A long day: readings answered one by one in one line, now and then a height and a valve."""
    run = begun(plan(line(1), line(2)))
    while len(run.pairs) < count:
        run.clock.advance(30.0)
        n = len(run.pairs)
        if n % 500 == 1:
            run.read("HS1", 0.030)
        elif n % 100 == 1:
            run.must(acts.SetValve("V3", "open" if n % 200 == 1 else "shut"))
        else:
            run.read(("PG1", "TT1")[n // 2 % 2], 290.0 + 10.0 * math.sin(n))
        run.answered()
    return run.pairs[:count]


def test_ten_thousand_events_replay_without_physics() -> None:
    """Ten thousand events fold with the property library blocked; how fast is for tests/benchmarks/bench_replay.py."""
    done = subprocess.run([sys.executable, "-c", REPLAY], capture_output=True, text=True, check=False, timeout=120)
    assert done.returncode == 0, done.stderr


def test_a_line_with_thousands_of_readings_costs_no_more_each() -> None:
    """An event late in a long line is folded from shared lists, not copied ones."""
    run = begun(plan(line(1)))
    for _ in range(3000):
        run.read("PG1", ROOM + 60e5)
    items = run.ledger.here._items
    run.read("PG1", ROOM + 60e5)
    assert run.ledger.here._items is items


@pytest.mark.parametrize("part", [0, 1])
def test_a_run_begins_before_the_first_line_of_its_part(part: int) -> None:
    """Part 0 before everything; a later part in the last line of the one before."""
    made = plan(line(1), line(2), line(3))
    made = replace(made, parts=(*made.parts, replace(made.parts[0], first=2)))
    assert begun(made, part=part).ledger.line == (-1, 1)[part]
