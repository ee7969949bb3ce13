"""Types a whole rehearsal into line mode: the ideal operator's wishes, written as a person would write them."""

from __future__ import annotations

from pathlib import Path

from runbook.answers import BindRequest
from runbook.assess.local import LocalEngine
from runbook.commands.plain_session import Input, Session
from runbook.procedure.reader import read_procedure
from runbook.rehearsal.faults import Trouble, parse_fault
from runbook.rehearsal.operator import Operator
from runbook.rehearsal.world import World
from runbook.run import acts
from runbook.run.acts import Act
from runbook.run.clock import FakeClock
from runbook.run.conductor import Conductor
from runbook.run.journal import Journal, JournalWriter
from runbook.run.opening import people, played, run_opened
from runbook.run.proofs import not_proved
from runbook.run.state import Ledger
from runbook.run.typed import typed_value


class Table:
    """Implements the simulated bench of line mode in this process, on a clock that is set."""

    words = "x1"

    def __init__(self, world: World, clock: FakeClock, desk: Conductor) -> None:
        self._world, self._clock, self._desk = world, clock, desk

    def set_speed(self, factor: float) -> None:
        """The clock of a test has no speed."""

    def jump(self, seconds: float) -> None:
        """Later at once [s]."""
        self._clock.advance(seconds)

    def trouble(self, fault: str) -> None:
        """One more thing that goes wrong."""
        self._world.troubles.all.append(Trouble(*parse_fault(fault, 1)))

    def news(self) -> list[tuple[str, str]]:
        """What has begun since."""
        return self._world.troubles.news()

    def follow(self, ledger: Ledger) -> None:
        """What was done, up to now."""
        self._world.follow(ledger)
        self._world.move_to(self._clock.now())

    async def looked(self) -> None:
        """At once."""

    @property
    def seen(self) -> str:
        """As the world has it."""
        return self._world.seen

    def dial(self, tag: str) -> str | None:
        """As typed."""
        value = self._world.read(tag)
        one = next(i for i in self._desk.plan.instruments if i.tag == tag)
        return None if value is None else typed_value(value, one, self._desk.plan)


class Typist(Input):
    """Standard input, played."""

    def __init__(self, operator: Operator, desk: Conductor, table: Table, most: int = 4000) -> None:
        super().__init__()
        self._operator, self._desk, self._table, self._most = operator, desk, table, most
        self._numbers: dict[str, str] = {}
        self.typed: list[str] = []

    async def line(self, prompt: str, wait_s: float | None = None) -> str | None:
        """The next line; ends the input after too many."""
        if "Enter takes it" in prompt:
            return ""
        if len(self.typed) >= self._most:
            return None
        self.typed.append(self._answer(prompt))
        return self.typed[-1]

    def _answer(self, prompt: str) -> str:
        if "heat" in prompt:
            return self._desk.ledger.source
        if "vent" in prompt:
            tag = self._desk.plan.let_down_valve or ""
            return self._desk.ledger.position(tag)
        if "touched" in prompt:
            return "no"
        if "Who is here" in prompt:
            return " ".join(p.name for p in self._desk.ledger.people)
        wish = self._operator.next()
        if wish.act is None:
            return f"wait {max(wish.wait_s, 1.0) / 60.0:.4f}"
        return self._words(wish.act)

    def _words(self, act: Act) -> str:
        match act:
            case acts.GoOn() | acts.Finish():
                return self._onward()
            case acts.Read(tag=tag, by=by, blind=blind):
                shown = self._table.dial(tag)
                return f"blind {by} {shown}" if blind else f"{tag} {shown}"
            case acts.Sign(by=by, number=number):
                return f"sign {by} {number}"
            case acts.Attend(by=by):
                return f"came {by}"
            case acts.SetValve(tag=tag, position=position):
                return f"valve {tag} {position}"
            case acts.MakeSafe():
                return "safe"
            case acts.Prove(proof=proof) if not_proved(self._desk.ledger, self._desk.clock.now(), proof):
                return "wait 0.4"
            case _:
                return "done"

    def _onward(self) -> str:
        """Enter where it says yes; else a moment of waiting, as a person would."""
        if self._desk.standing().permission == "yes" or self._desk.ledger.safe is not None:
            return ""
        self._operator.look_again = True
        return "wait 0.4"


async def opened(path: Path, journal: Path, seed: int = 3) -> tuple[Session, Typist]:
    """A session of line mode on a fresh journal, with its typist."""
    engine = LocalEngine()
    request = BindRequest(str(path), read_procedure(path).procedure.issue.date.isoformat())
    bound = await engine.bind(request)
    clock = FakeClock()
    desk = Conductor(JournalWriter(Journal.create(journal)), clock, engine)
    who = played(bound.plan.roles)
    await desk.open(run_opened(bound, people(who, bound.plan.roles), request, rehearsal=True))
    await desk.settled()
    scene, lines = engine.here.scene, engine.here.lines
    assert scene is not None
    world = World(scene, lines, bound.plan, seed, clock.now())
    table = Table(world, clock, desk)
    table.follow(desk.ledger)
    typist = Typist(Operator(desk, world, lines, who), desk, table)
    return Session(desk, typist, table), typist
