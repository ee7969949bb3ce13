"""A rehearsal without a screen: the ideal operator on the simulated vessel, through the same door as a person.

Time is simulated, so an hour takes under a second; the same seed gives the same run to the last digit.
"""

from __future__ import annotations

from dataclasses import dataclass
from pathlib import Path
from typing import Final

from runbook.answers import BindRequest, ChargeBox
from runbook.assess.local import LocalEngine
from runbook.procedure.reader import read_procedure
from runbook.rehearsal.operator import Operator
from runbook.rehearsal.world import World
from runbook.run.acts import Act, GoOn
from runbook.run.clock import FakeClock
from runbook.run.conductor import Conductor
from runbook.run.journal import JournalWriter
from runbook.run.opening import people, played, run_opened
from runbook.run.reasons import Reason, Refused
from runbook.run.sentences import reason_words

PATIENCE_S: Final = 24 * 3600.0
"""[s] the operator waits in one line before giving up."""
_NO_PROGRESS: Final = 400
"""Wishes in one line without an event, after which the operator gives up."""
_START: Final = FakeClock().now()


@dataclass(frozen=True, slots=True)
class Outcome:
    """What came of a rehearsal."""

    outcome: str
    """'completed', 'made safe', 'refused' or 'halted'."""
    reason: str | None
    """Why it was not completed; None when it was."""
    steps_done: int
    duration_s: float
    highest_pressure: float
    """True, in the simulated vessel [Pa]."""
    least_margin: float | None
    """Of pressure limits, as computed from readings [Pa]."""
    events: int


async def rehearse(
    path: Path, seed: int, journal: JournalWriter | None = None, charge: ChargeBox | None = None, part: int = 0
) -> Outcome:
    """One rehearsal of a procedure. Raises FileProblems or InputUnusable where it cannot be bound."""
    loaded = read_procedure(path)
    engine = LocalEngine()
    request = BindRequest(
        procedure_path=str(path), on=loaded.procedure.issue.date.isoformat(), charge=charge, part=part
    )
    bound = await engine.bind(request)
    clock = FakeClock(_START.boot, _START.wall)
    conductor = Conductor(journal, clock, engine)
    who = played(bound.plan.roles)
    await conductor.open(run_opened(bound, people(who, bound.plan.roles), request, rehearsal=True))
    await conductor.settled()
    scene, lines = engine.here.scene, engine.here.lines
    assert scene is not None, "bind leaves a scene"
    world = World(scene, lines, bound.plan, seed, clock.now(), part)
    try:
        return await _Run(conductor, world, Operator(conductor, world, lines, who), clock).go()
    finally:
        await conductor.close()


@dataclass
class _Run:
    """The loop of one rehearsal."""

    conductor: Conductor
    world: World
    operator: Operator
    clock: FakeClock
    refusals: int = 0
    last_reason: Reason | None = None
    entered: int = -2
    since: float = 0.0
    least_margin: float | None = None

    async def go(self) -> Outcome:
        """Until the run is closed, or the operator gives up."""
        self.world.follow(self.conductor.ledger)
        self.world.move_to(self.clock.now())
        while self.conductor.ledger.outcome is None and self.conductor.ledger.halted is None:
            self._watch_line()
            if self._given_up():
                return self._outcome("refused")
            wish = self.operator.next()
            if wish.act is not None:
                await self._do(wish.act, wish.wait_s)
            else:
                await self._wait(wish.wait_s)
        ledger = self.conductor.ledger
        return self._outcome(ledger.outcome or "halted")

    async def _do(self, act: Act, wait_s: float) -> None:
        found = await self.conductor.act(act)
        await self.conductor.settled()
        self.world.follow(self.conductor.ledger)
        if isinstance(found, Refused):
            self.refusals += 1
            self.last_reason = found.reasons[0]
            self.operator.look_again = isinstance(act, GoOn) and found.kind == "blocked"
            await self._wait(wait_s or 20.0)
            return
        self.refusals = 0
        # A person needs a moment for everything.
        await self._wait(3.0)

    async def _wait(self, seconds: float) -> None:
        left = max(1.0, seconds)
        while left > 0.0:
            step = min(left, 10.0)
            self.clock.advance(step)
            self.world.move_to(self.clock.now())
            await self.conductor.tick()
            await self.conductor.settled()
            self._watch_margin()
            left -= step

    def _watch_margin(self) -> None:
        answer = self.conductor.ledger.answer
        for one in answer.now if answer is not None else ():
            if one.kind == "pressure" and one.margin is not None:
                self.least_margin = one.margin if self.least_margin is None else min(self.least_margin, one.margin)

    def _watch_line(self) -> None:
        if self.conductor.ledger.line != self.entered:
            self.entered, self.since, self.refusals = self.conductor.ledger.line, self.clock.now().boot, 0

    def _given_up(self) -> bool:
        return self.refusals > _NO_PROGRESS or self.clock.now().boot - self.since > PATIENCE_S

    def _outcome(self, outcome: str) -> Outcome:
        ledger = self.conductor.ledger
        reason = None
        if outcome != "completed":
            reason = ledger.halted or (self._said() if outcome == "refused" else f"make safe in line {ledger.line + 1}")
        return Outcome(
            outcome=outcome,
            reason=reason,
            steps_done=ledger.line + (1 if outcome == "completed" else 0),
            duration_s=self.clock.now().boot - ledger.opened_at.boot,
            highest_pressure=self.world.highest_pressure,
            least_margin=self.least_margin,
            events=ledger.seq,
        )

    def _said(self) -> str:
        if self.last_reason is None:
            return "nothing more happened"
        return reason_words(self.conductor.plan, self.conductor.ledger, self.last_reason)
