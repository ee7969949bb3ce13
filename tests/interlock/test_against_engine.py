"""The interlock against a second one, through thousands of random runs.

More runs than in the everyday suite: RUNBOOK_SEQUENCES=100000 python -m pytest tests/interlock
One run again, with its fewest moves: RUNBOOK_SEED=1234 RUNBOOK_SEQUENCES=1 python -m pytest tests/interlock
"""

from __future__ import annotations

import math
import os
from collections import Counter
from collections.abc import Callable
from dataclasses import replace

import pytest

from runbook.answers import Effect, Need, Plan, PlanLine
from runbook.run import acts
from runbook.run.clock import Moment
from runbook.run.decide import Refused, decide
from runbook.run.events import KINDS, Event, ReadingTaken, Signed, TurnedBack, WentOn
from runbook.run.ledger import Ledger
from runbook.run.questions import question
from tests.interlock import harness
from tests.interlock.harness import explore, play

SEQUENCES = int(os.environ.get("RUNBOOK_SEQUENCES", "2000"))
FIRST = int(os.environ.get("RUNBOOK_SEED", "0"))


@pytest.fixture(scope="module")
def tally() -> Counter[str]:
    """What is met on the way, counted; played in each process that asks, for tests are shared out among several."""
    found: Counter[str] = Counter()
    for seed in range(FIRST, FIRST + SEQUENCES):
        play(seed, found)
    return found


def test_engine_and_model_agree(tally: Counter[str]) -> None:
    """Whatever is done in whatever order, both permit the same acts, see the same facts, and nothing unsafe passes.

    Each step also asks that make safe is open, so no run that is not closed ever offers waiting alone.
    """
    assert tally["GoOn yes"] > 0, "a disagreement stops the playing: see the error of the fixture"


NOT_BY_AN_ACT = ("RunOpened", "Answered", "NoAnswer", "GapOpened", "Halted", "FaultBegan")
"""Events that no wish of a person brings."""


@pytest.mark.skipif(SEQUENCES < 2000, reason="too few runs to meet everything")
@pytest.mark.parametrize(
    "met",
    [
        "GoOn yes",
        "GoOn no: not yet: unfinished",
        "GoOn no: blocked: no answer",
        "GoOn no: blocked: not valid",
        "GoOn no: blocked: margin",
        "GoOn no: blocked: reading",
        "GoOn no: blocked: agreement",
        "GoOn no: blocked: charge",
        "GoOn no: blocked: certificate",
        "GoOn no: blocked: unsigned",
        "GoOn no: blocked: gap",
        "GoOn no: blocked: not proved empty",
        "containment opened",
        "through the gate",
        "gentler way",
        "TakeUp yes",
        "Sign yes",
        "Sign no: role",
        "Sign no: number",
        "Sign no: performer",
        "Sign no: measuring",
        "Prove no: wall",
        "Prove no: low gauge",
        "Prove no: order",
        "Finish yes",
        *(kind for kind in KINDS if kind not in NOT_BY_AN_ACT),
    ],
)
def test_the_runs_meet_what_they_are_for(tally: Counter[str], met: str) -> None:
    """Agreement says something only where every way through and every refusal was really met, several times."""
    assert tally[met] >= 5, tally


Decide = Callable[[Plan, Ledger, Moment, acts.Act], "Event | Refused | None"]


def _with(change: Callable[[PlanLine], PlanLine]) -> Decide:
    """An engine that reads every line of the plan otherwise than it is written."""

    def faulty(plan: Plan, ledger: Ledger, now: Moment, act: acts.Act) -> Event | Refused | None:
        misread = replace(plan, lines=tuple(map(change, plan.lines)))
        return decide(misread, replace(ledger, plan=misread), now, act)

    return faulty


def _for_ever(needs: tuple[Need, ...]) -> tuple[Need, ...]:
    return tuple(replace(need, fresh_s=math.inf) for need in needs)


def _overrides(plan: Plan, ledger: Ledger, now: Moment, act: acts.Act) -> Event | Refused | None:
    """Going on where the engine refuses."""
    result, asked = decide(plan, ledger, now, act), question(plan, ledger)
    if isinstance(act, acts.GoOn) and isinstance(result, Refused) and asked is not None and asked.to > asked.line:
        return WentOn(asked.to)
    return result


def _takes_any_number(plan: Plan, ledger: Ledger, now: Moment, act: acts.Act) -> Event | Refused | None:
    """Signing by whoever says so."""
    result, asked = decide(plan, ledger, now, act), question(plan, ledger)
    if isinstance(act, acts.Sign) and isinstance(result, Refused) and asked is not None and asked.line >= 0:
        hold = plan.lines[asked.line].hold
        return Signed(asked.line, act.by, hold.signed_by) if hold is not None else result
    return result


def _blocks_make_safe(plan: Plan, ledger: Ledger, now: Moment, act: acts.Act) -> Event | Refused | None:
    """Make safe only where nothing was read yet."""
    asked = question(plan, ledger)
    if isinstance(act, acts.MakeSafe) and asked is not None and len(asked.observations) > 1:
        return decide(plan, ledger, now, acts.SafeActDone(-1))
    return decide(plan, ledger, now, act)


def _takes_no_number(plan: Plan, ledger: Ledger, now: Moment, act: acts.Act) -> Event | Refused | None:
    """Recording what is no number."""
    if not isinstance(act, acts.Read) or math.isfinite(act.value):
        return decide(plan, ledger, now, act)
    result = decide(plan, ledger, now, replace(act, value=2.0e5))
    return replace(result, value=act.value) if isinstance(result, ReadingTaken) else result


def _forgets_gaps(plan: Plan, ledger: Ledger, now: Moment, act: acts.Act) -> Event | Refused | None:
    """Leaning on what was read before a gap."""
    answered = isinstance(act, acts.GapAnswers)
    return decide(plan, ledger if answered else replace(ledger, gap_seq=0, gap_open=False), now, act)


def _never_turns_back(plan: Plan, ledger: Ledger, now: Moment, act: acts.Act) -> Event | Refused | None:
    """Leaving the instruction on the screen whatever becomes of the margin."""
    result = decide(plan, ledger, now, act)
    return None if isinstance(result, TurnedBack) else result


def _sees_no_jump(plan: Plan, ledger: Ledger, now: Moment, act: acts.Act) -> Event | Refused | None:
    """Counting with a wall clock that nobody can set."""
    wall = ledger.last_at.wall + now.boot - ledger.last_at.boot
    return decide(plan, ledger, Moment(now.boot, wall), act)


FAULTS: dict[str, Decide] = {
    "overrides": _overrides,
    "takes any number": _takes_any_number,
    "blocks make safe": _blocks_make_safe,
    "takes no number": _takes_no_number,
    "forgets gaps": _forgets_gaps,
    "never turns back": _never_turns_back,
    "sees no jump": _sees_no_jump,
    "forgets entry readings": _with(lambda line: replace(line, entry_needs=())),
    "stale entry readings": _with(lambda line: replace(line, entry_needs=_for_ever(line.entry_needs))),
    "stale readings": _with(lambda line: replace(line, reads=_for_ever(line.reads))),
    "leans on anything": _with(lambda line: replace(line, leans_on=())),
    "charge never proved": _with(lambda line: replace(line, needs_charge_proof=False)),
    "opens containment": _with(lambda line: replace(line, opens_containment=False)),
    "no certificates": _with(lambda line: replace(line, committing=False)),
    "performer signs": _with(lambda line: replace(line, who=None)),
    "unmeasured": _with(lambda line: replace(line, hold=line.hold and replace(line.hold, read=None))),
    "no wait": _with(lambda line: replace(line, witness=line.witness and replace(line.witness, wait_s=0.0))),
    "nothing raises": _with(lambda line: replace(line, effects=tuple((h, Effect.KEEPS) for h, _ in line.effects))),
    "too strict: all lean": _with(lambda line: replace(line, leans_on=("pressure",))),
    "too strict: all commit": _with(lambda line: replace(line, committing=True)),
    "too strict: all open": _with(lambda line: replace(line, opens_containment=True)),
}


@pytest.mark.parametrize("fault", FAULTS)
def test_a_faulty_engine_is_found(monkeypatch: pytest.MonkeyPatch, fault: str) -> None:
    """An engine with one rule left out, or one too many, does not get through a few hundred runs."""
    monkeypatch.setattr(harness, "decide", FAULTS[fault])
    assert any(explore(seed)[1] is not None for seed in range(600))
