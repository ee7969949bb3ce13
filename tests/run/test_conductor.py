"""The loop of a run: durable before shown, make safe drawn first, asked in the background, resumed after any event."""

from __future__ import annotations

from dataclasses import dataclass, field
from pathlib import Path

import pytest

from runbook.answers import Answer, BindRequest, Plan, Question, Unanswered
from runbook.run import acts
from runbook.run.clock import FakeClock
from runbook.run.conductor import AGAIN_S, AWAY_S, Conductor
from runbook.run.decide import Refused
from runbook.run.engine import Bound
from runbook.run.events import GapOpened, MadeSafe, RunOpened, WentOn, event_to_plain
from runbook.run.journal import Journal, JournalWriter, read
from runbook.run.ledger import fold_all
from tests.run.plans import PEOPLE, ROOM, answer, line, plan
from tests.run.test_ledger import scripted

PLAN = plan(line(1), line(2, "Warm", raises=True), line(3, lowers=True))


@dataclass
class Physics:
    """Answers at once, or says why not."""

    away: bool = False
    asked: list[str] = field(default_factory=list)
    closed: bool = False

    async def bind(self, request: BindRequest) -> Bound:
        raise AssertionError("nothing is bound here")

    async def ask(self, question: Question) -> Answer | Unanswered:
        self.asked.append(question.key)
        return Unanswered(question.key, "it is away") if self.away else answer(question.key)

    async def close(self) -> None:
        self.closed = True


@dataclass
class Desk:
    """A conductor with everything around it."""

    path: Path
    clock: FakeClock = field(default_factory=FakeClock)
    physics: Physics = field(default_factory=Physics)
    shown: int = 0

    def __post_init__(self) -> None:
        self.writer = JournalWriter(Journal.create(self.path))
        self.conductor = Conductor(self.writer, self.clock, self.physics, self._changed)

    def _changed(self) -> None:
        self.shown += 1

    async def begin(self, made: Plan = PLAN) -> Conductor:
        await self.conductor.open(RunOpened(made, PEOPLE, "", "", (), False, 0, "2031-03-02"))
        await self.conductor.settled()
        return self.conductor

    def kinds(self) -> list[str]:
        """What the journal holds."""
        return [record.kind for record in read(self.path).records]


@pytest.fixture
def desk(tmp_path: Path) -> Desk:
    """A run that has not been opened, on a disk of its own."""
    return Desk(tmp_path / "run.jsonl")


async def test_every_event_is_durable_and_shown_and_asked_about(desk: Desk) -> None:
    """Opening and going on are in the journal, their questions were asked, the answers are events."""
    conductor = await desk.begin()
    assert await conductor.act(acts.GoOn()) == WentOn(0)
    await conductor.settled()
    assert desk.kinds() == ["RunOpened", "Answered", "WentOn", "Answered"]
    assert desk.shown == 4
    assert conductor.ledger.answer is not None
    assert conductor.standing().permission == "yes"
    assert len(desk.physics.asked) == 2
    await conductor.close()
    assert desk.physics.closed


async def test_what_is_refused_is_not_written(desk: Desk) -> None:
    """An act that does not become an event leaves no trace."""
    conductor = await desk.begin()
    assert isinstance(await conductor.act(acts.Finish()), Refused)
    assert desk.kinds() == ["RunOpened", "Answered"]
    await conductor.close()


async def test_live_and_replayed_ledgers_are_equal(desk: Desk) -> None:
    """What the run saw is what its journal says, to the millisecond and the bit."""
    conductor = await desk.begin()
    for act in (acts.GoOn(), acts.Read("PG1", ROOM + 62.6e5, "62.6", "62.6 bar(g)", "Ada"), acts.GoOn()):
        await conductor.act(act)
        await conductor.settled()
        desk.clock.advance(1.2345678)
    again = Conductor(None, desk.clock, Physics())
    await again.resume(read(desk.path).records, "taken up again")
    from_journal = [e for e in desk.kinds() if e != "GapOpened"]
    assert len(from_journal) == conductor.ledger.seq
    assert again.ledger.line == conductor.ledger.line == 1
    assert again.ledger.latest == conductor.ledger.latest
    assert again.ledger.gap_open
    await conductor.close()


async def test_a_run_resumes_after_any_of_its_events(tmp_path: Path) -> None:
    """Whatever was last written, the run is taken up with the four questions and make safe at hand."""
    run = scripted()
    with JournalWriter(Journal.create(tmp_path / "run.jsonl")) as writer:
        for event, at in run.pairs:
            writer.append_now(*event_to_plain(event), at)
    records = read(tmp_path / "run.jsonl").records
    for count in range(1, len(records) + 1):
        conductor = Conductor(None, run.clock, Physics())
        await conductor.resume(records[:count], "taken up again")
        assert conductor.ledger == fold_all([*run.pairs[:count], (GapOpened("taken up again"), run.clock.now())])
        assert conductor.standing().gap_open
        assert isinstance(await conductor.act(acts.MakeSafe()), MadeSafe)
        await conductor.close()


async def test_make_safe_is_drawn_before_it_is_written(desk: Desk) -> None:
    """It stands on the screen at once, NOT RECORDED beside it until the disk has it."""
    conductor = await desk.begin()
    assert isinstance(await conductor.act(acts.MakeSafe("fire")), MadeSafe)
    assert conductor.not_recorded
    assert conductor.standing().making_safe
    assert "MadeSafe" not in desk.kinds()
    await conductor.settled()
    assert not conductor.not_recorded
    assert "MadeSafe" in desk.kinds()
    await conductor.close()


async def test_a_broken_journal_halts_and_leaves_make_safe(desk: Desk) -> None:
    """Where the record cannot be kept the run is halted for good, and make safe still comes."""
    conductor = await desk.begin()
    desk.path.unlink()
    assert await conductor.act(acts.GoOn()) is None
    assert conductor.standing().permission == "halted"
    assert isinstance(await conductor.act(acts.GoOn()), Refused)
    assert isinstance(await conductor.act(acts.MakeSafe()), MadeSafe)
    await conductor.settled()
    assert conductor.not_recorded
    assert conductor.standing().making_safe
    assert await conductor.tick() is None
    await conductor.close()


async def test_without_physics_a_raising_step_stays_shut_and_the_rest_goes_on(desk: Desk) -> None:
    """A lost process is unknown, said once a question, and asked again."""
    desk.physics.away = True
    conductor = await desk.begin()
    assert desk.kinds() == ["RunOpened", "NoAnswer"]
    for _ in range(3):
        desk.clock.advance(AGAIN_S + 0.1)
        await conductor.tick()
        await conductor.settled()
    assert desk.kinds() == ["RunOpened", "NoAnswer"]
    assert len(desk.physics.asked) == 4
    assert await conductor.act(acts.GoOn()) == WentOn(0)
    await conductor.settled()
    refused = await conductor.act(acts.GoOn())
    assert isinstance(refused, Refused)
    assert refused.reasons[0].code == "nothing computed"
    await conductor.close()


@pytest.mark.parametrize(("away_s", "gap"), [(AWAY_S - 10.0, False), (AWAY_S + 10.0, True)])
async def test_physics_that_was_away_for_long_opens_the_four_questions(desk: Desk, away_s: float, gap: bool) -> None:
    """A moment is forgiven; after a minute nobody knows what happened at the bench meanwhile."""
    desk.physics.away = True
    conductor = await desk.begin()
    desk.clock.advance(away_s)
    desk.physics.away = False
    await conductor.tick()
    await conductor.settled()
    assert ("GapOpened" in desk.kinds()) is gap
    desk.clock.advance(AGAIN_S + 0.1)
    await conductor.tick()
    await conductor.settled()
    assert conductor.ledger.gap_open is gap
    assert conductor.ledger.answer is not None
    await conductor.close()


async def test_the_clock_turns_a_line_back_through_the_same_door(desk: Desk) -> None:
    """A tick is an act like any other: decided, written, shown."""
    conductor = await desk.begin()
    await conductor.act(acts.GoOn())
    await conductor.settled()
    await conductor.act(acts.GoOn())
    await conductor.settled()
    desk.physics.away = True
    await conductor.act(acts.Read("PG1", ROOM + 63e5, "63", "63 bar(g)", "Ada"))
    await conductor.settled()
    assert await conductor.tick() is None
    desk.clock.advance(241.0)
    await conductor.tick()
    await conductor.settled()
    assert "TurnedBack" in desk.kinds()
    assert conductor.standing().loud
    await conductor.close()
