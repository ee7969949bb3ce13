"""A rehearsal without a screen: the ideal operator on the simulated vessel, through the same door as a person.

Time is simulated, so an hour takes under a second; the same seed gives the same run to the last digit.
"""

from __future__ import annotations

from collections.abc import Callable, Sequence
from dataclasses import dataclass, field
from pathlib import Path
from typing import Final

from runbook.answers import BindRequest, ChargeBox, Plan
from runbook.apparatus.model import Apparatus
from runbook.assess.local import LocalEngine
from runbook.assess.scene import Scene
from runbook.procedure.reader import read_procedure
from runbook.quantities import NotKnown
from runbook.rehearsal.bath import world_of
from runbook.rehearsal.failing import FailingEngine
from runbook.rehearsal.faults import Fault, Trouble, Troubles
from runbook.rehearsal.lots import Lot
from runbook.rehearsal.operator import Operator
from runbook.rehearsal.story import Story
from runbook.rehearsal.world import World
from runbook.run.acts import Act, GoOn, MakeSafe, QuickDone
from runbook.run.clock import FakeClock
from runbook.run.conductor import Conductor
from runbook.run.events import Answered
from runbook.run.journal import JournalWriter
from runbook.run.opening import people, played, run_opened
from runbook.run.reasons import Reason, Refused
from runbook.run.sentences import reason_words

PATIENCE_S: Final = 24 * 3600.0
"""[s] the operator waits in one line before giving up."""
_NO_PROGRESS: Final = 400
"""Wishes in one line without an event, after which the operator gives up."""
_FAULT_PATIENCE_S: Final = 8 * 3600.0
"""[s] the operator waits in one line when something may be wrong, before making safe."""
_BLOCKED_PATIENCE_S: Final = 1800.0
"""[s] the operator looks for the cause while the next step stays blocked and something may be wrong."""
_AFTER_S: Final = 12 * 3600.0
"""[s] for which a vessel that was made safe is watched."""
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
    fault: FaultStory | None = None
    """How it went with a fault; None: there was none."""
    relief_s: float | None = None
    """When the lowest pressure at which the relief device may open was reached [s since the run was opened]."""


@dataclass(frozen=True, slots=True)
class FaultStory:
    """How a rehearsal with a fault went."""

    name: str
    began_s: float | None
    """[s since the run was opened]; None: its situation never came."""
    noticed_s: float | None
    """When the run first blocked, turned back, or said that gauge and model disagree [s since the run was opened]."""
    said: str
    """What it said first."""
    acted_s: float | None
    """When make safe was begun [s since the run was opened]."""
    highest_after: float
    """True pressure, to twelve hours after the end [Pa]."""
    wrong: tuple[str, ...]
    """What should not have happened; empty is good."""


async def rehearse(
    path: Path,
    seed: int,
    journal: JournalWriter | None = None,
    charge: ChargeBox | None = None,
    part: int = 0,
    faults: Sequence[tuple[Fault, float]] = (),
    draw: Callable[[Scene, Plan], Lot] | None = None,
) -> Outcome:
    """One rehearsal of a procedure; faults: what goes wrong, and seconds after its situation; told of is the first.

    draw: what is really there, out of what the tolerances allow; None: every figure as written. Raises FileProblems or
    InputUnusable where it cannot be bound.
    """
    loaded = read_procedure(path)
    local = LocalEngine()
    engine = FailingEngine(local)
    request = BindRequest(
        procedure_path=str(path), on=loaded.procedure.issue.date.isoformat(), charge=charge, part=part
    )
    bound = await engine.bind(request)
    clock = FakeClock(_START.boot, _START.wall)
    conductor = Conductor(journal, clock, engine)
    who = played(bound.plan.roles)
    await conductor.open(run_opened(bound, people(who, bound.plan.roles), request, rehearsal=True))
    await conductor.settled()
    scene, lines = local.here.scene, local.here.lines
    assert scene is not None, "bind leaves a scene"
    troubles = Troubles([Trouble(*one) for one in faults])
    there = None if draw is None else draw(scene, bound.plan)
    scenes = local.here.scenes if there is None else ((there.scene, there.lines), *local.here.scenes[1:])
    world = world_of(scenes, bound.plan, seed, clock.now(), part, troubles)
    engine.away = lambda: troubles.lost(clock.now().boot)
    run = _Run(conductor, world, Operator(conductor, world, lines, who), clock, loaded.apparatus)
    try:
        return await run.go()
    finally:
        await conductor.close()


@dataclass
class _Run:
    """The loop of one rehearsal."""

    conductor: Conductor
    world: World
    operator: Operator
    clock: FakeClock
    apparatus: Apparatus
    story: Story = field(default_factory=Story)
    seen: int = 0
    refusals: int = 0
    last_reason: Reason | None = None
    entered: int = -2
    since: float = 0.0
    blocked_since: float | None = None
    """Since when the next line has been blocked; None: it is not."""
    least_margin: float | None = None

    async def go(self) -> Outcome:
        """Until the run is closed, or the operator gives up."""
        self.world.follow(self.conductor.ledger)
        self.world.move_to(self.clock.now())
        while self.conductor.ledger.outcome is None and self.conductor.ledger.halted is None:
            self._watch_line()
            if self._given_up():
                if not self._trouble or self.conductor.ledger.safe is not None:
                    return self._outcome("refused")
                self.since, self.refusals, self.blocked_since = self.clock.now().boot, 0, None
                await self._do(MakeSafe(), 0.0)
                continue
            if self.world.troubles.away(self.clock.now().boot):
                await self._wait(60.0)
                continue
            wish = self.operator.next()
            if wish.act is not None:
                await self._do(wish.act, wish.wait_s)
            else:
                await self._wait(wish.wait_s)
        ledger = self.conductor.ledger
        return self._outcome(ledger.outcome or "halted")

    async def _do(self, act: Act, wait_s: float) -> None:
        before = self.conductor.ledger
        found = await self.conductor.act(act)
        if found is not None and not isinstance(found, Refused):
            self.story.happened(before, found, self.clock.now(), self._began)
        await self._heard()
        self.world.follow(self.conductor.ledger)
        if isinstance(found, Refused):
            self.story.refused(self.conductor.ledger, found, self.clock.now(), self._began)
            self.refusals += 1
            self.last_reason = found.reasons[0]
            blocked = isinstance(act, GoOn) and found.kind == "blocked"
            self.operator.look_again = blocked
            if blocked and self.blocked_since is None:
                self.blocked_since = self.clock.now().boot
            await self._wait(wait_s or 20.0)
            return
        self.refusals = 0
        # A person needs a moment for everything; with a hand on a valve and the eyes on a gauge a shorter one.
        await self._wait(1.0 if isinstance(act, QuickDone) else 3.0)

    async def _wait(self, seconds: float) -> None:
        left = max(1.0, seconds)
        while left > 0.0:
            step = min(left, 10.0)
            self.clock.advance(step)
            self.world.move_to(self.clock.now())
            before = self.conductor.ledger
            ticked = await self.conductor.tick()
            if ticked is not None:
                self.story.happened(before, ticked, self.clock.now(), self._began)
            await self._heard()
            self._watch_margin()
            left -= step

    async def _heard(self) -> None:
        """What the physics said since."""
        for name, words in self.world.troubles.news():
            await self.conductor.fault_began(name, words)
        await self.conductor.settled()
        ledger = self.conductor.ledger
        if ledger.answer is not None and ledger.seq != self.seen:
            self.seen = ledger.seq
            self.story.happened(ledger, Answered(ledger.answer), self.clock.now(), self._began)

    @property
    def _trouble(self) -> bool:
        return bool(self.world.troubles.all)

    @property
    def _began(self) -> float | None:
        return min((one.began for one in self.world.troubles.all if one.began is not None), default=None)

    def _watch_margin(self) -> None:
        answer = self.conductor.ledger.answer
        for one in answer.now if answer is not None else ():
            if one.kind == "pressure" and one.margin is not None:
                self.least_margin = one.margin if self.least_margin is None else min(self.least_margin, one.margin)

    def _watch_line(self) -> None:
        if self.conductor.ledger.line != self.entered:
            self.entered, self.since, self.refusals = self.conductor.ledger.line, self.clock.now().boot, 0
            self.blocked_since = None

    def _given_up(self) -> bool:
        now, began = self.clock.now().boot, self._began is not None
        patience = _FAULT_PATIENCE_S if began else PATIENCE_S
        if began and self.blocked_since is not None and now - self.blocked_since > _BLOCKED_PATIENCE_S:
            return True
        return self.refusals > _NO_PROGRESS or now - self.since > patience

    def _outcome(self, outcome: str) -> Outcome:
        ledger = self.conductor.ledger
        reason = None
        highest = self.world.highest_pressure
        told = self._told(outcome) if self._trouble else None
        reached = self.world.relief_reached
        if outcome != "completed":
            reason = ledger.halted or (self._said() if outcome == "refused" else f"make safe in line {ledger.line + 1}")
        return Outcome(
            outcome=outcome,
            reason=reason,
            steps_done=ledger.line + (1 if outcome == "completed" else 0),
            duration_s=self.clock.now().boot - ledger.opened_at.boot,
            highest_pressure=highest,
            least_margin=self.least_margin,
            events=ledger.seq,
            fault=told,
            relief_s=None if reached is None else reached - ledger.opened_at.boot,
        )

    def _told(self, outcome: str) -> FaultStory:
        """What became of the fault, and what the vessel did in the twelve hours after."""
        start, trouble = self.conductor.ledger.opened_at.boot, self.world.troubles.all[0]
        highest = self.world.watch(_AFTER_S)
        wrong = list(self.story.wrong)
        top = self._most_allowed()
        if highest > top and trouble.fault.name != "relief never":
            wrong.append(f"{highest / 1e5:.1f} bar(a) was reached; 110 % of MAWP is {top / 1e5:.1f}")
        if outcome == "made safe" and not self.world.at_rest():
            wrong.append("twelve hours after make safe the vessel is not at rest")

        def since(moment: float | None) -> float | None:
            return None if moment is None else moment - start

        return FaultStory(
            trouble.fault.name, since(trouble.began), since(self.story.noticed_s), self.story.said,
            since(self.story.acted_s), highest, tuple(wrong),
        )  # fmt: skip

    def _most_allowed(self) -> float:
        """110 % of the maximum allowable working pressure (ASME VIII-1 UG-125), absolute [Pa]."""
        rating = self.apparatus.mawp.rating
        if isinstance(rating, NotKnown):
            return float("inf")
        barometer = self.conductor.plan.barometer
        return 1.1 * rating.gauge(barometer) + barometer

    def _said(self) -> str:
        if self.last_reason is None:
            return "nothing more happened"
        return reason_words(self.conductor.plan, self.conductor.ledger, self.last_reason)
