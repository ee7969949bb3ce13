"""The shipped procedure at the screens, key by key, from the first line to the end."""

from __future__ import annotations

from pathlib import Path

import pytest

from runbook.answers import BindRequest
from runbook.assess.local import LocalEngine
from runbook.bench.app import BenchApp
from runbook.bench.screens import question, quick
from runbook.bench.screens.hold import HoldScreen
from runbook.bench.screens.run import RunScreen
from runbook.bench.screens.state import _SIGNS, StatePanel
from runbook.procedure.reader import read_procedure
from runbook.rehearsal.operator import Operator
from runbook.rehearsal.world import World
from runbook.run import acts
from runbook.run.clock import FakeClock
from runbook.run.conductor import Conductor
from runbook.run.journal import Journal, JournalWriter, read, verify
from runbook.run.opening import people, played, run_opened
from runbook.run.proofs import not_proved
from tests.bench.pilot import Bench
from tests.commands.typist import Table

SHIPPED = Path(__file__).parents[2] / "procedures" / "co2-critical-point.yaml"


class Dials(Table):
    """The bench of a rehearsal for the screens: nobody is played, every number is typed."""

    def faster(self) -> None:
        """The clock of a test has no speed."""

    def slower(self) -> None:
        """The clock of a test has no speed."""

    def pause(self) -> None:
        """The clock of a test stands anyway."""

    def played(self, name: str) -> str | None:
        """Nobody."""
        return None


class Hands:
    """Turns what the ideal operator wants into keys."""

    def __init__(self, bench: Bench, operator: Operator, table: Dials, numbers: dict[str, str]) -> None:
        self.bench, self.operator, self.table, self.numbers = bench, operator, table, numbers
        self.seen: set[str] = set()

    async def one(self) -> None:
        """One wish."""
        desk = self.bench.desk
        self.seen.add(desk.standing().permission)
        wish = self.operator.next()
        match wish.act:
            case None:
                await self.wait(wish.wait_s)
            case acts.GoOn() | acts.Finish():
                await self.onward()
            case acts.Read(blind=True) | acts.Sign():
                await self.sign()
            case acts.Read(tag=tag):
                await self.read(tag)
            case acts.Attend():
                await self.bench.press("f4", "y")
            case acts.QuickDone():
                await self.bench.press("enter")
            case acts.Prove(proof=proof) if not_proved(desk.ledger, desk.clock.now(), proof):
                await self.wait(20.0)
            case acts.Prove() | acts.SetValve():
                await self.state(wish.act)
            case _:
                raise AssertionError(f"no key for {wish.act}")
        self.table.follow(desk.ledger)

    async def wait(self, seconds: float) -> None:
        """Time passes; the screen need not be drawn for each bit of it."""
        self.table.jump(max(1.0, seconds))
        self.table.follow(self.bench.desk.ledger)
        await self.bench.desk.tick()
        await self.bench.desk.settled()

    async def onward(self) -> None:
        """Enter where the screen says yes."""
        if self.bench.desk.standing().permission != "yes":
            self.operator.look_again = True
            await self.wait(20.0)
            return
        await self.bench.settle()
        await self.bench.press("enter")
        self.table.jump(3.0)

    async def read(self, tag: str) -> None:
        """F3, on to the dial that is meant, the value, Enter, Enter."""
        await self.bench.settle()
        await self.bench.press("f3")
        for _ in range(12):
            if any(line.lstrip().startswith(f"{tag} ") and "read from" in line for line in self.bench.rows):
                break
            await self.bench.press("f3")
        await self.typed(self.table.dial(tag) or "")
        await self.bench.press("enter", "enter")
        if not isinstance(self.bench.screen, RunScreen):
            await self.bench.press("escape")

    async def sign(self) -> None:
        """F4, the signer's own reading where one is asked, the number."""
        await self.bench.settle()
        await self.bench.press("f4")
        screen = self.bench.screen
        assert isinstance(screen, HoldScreen)
        hold = self.bench.desk.standing().hold
        assert hold is not None
        if not screen.reading_in:
            await self.typed(self.table.dial(hold.tag) or "")
            await self.bench.press("enter", "enter")
        if isinstance(self.bench.screen, HoldScreen) and self.bench.screen.reading_in:
            await self.typed(self.numbers[hold.may_sign[0]])
            await self.bench.press("enter")
        if isinstance(self.bench.screen, HoldScreen):
            await self.bench.press("escape")

    async def state(self, act: acts.Act) -> None:
        """F8 and the key that stands beside it."""
        await self.bench.settle()
        await self.bench.press("f8")
        panel = self.bench.screen
        assert isinstance(panel, StatePanel)
        index = next(i for i, (_, _, one) in enumerate(panel.choices()) if one == act)
        await self.bench.press(_SIGNS[index])
        if isinstance(self.bench.screen, StatePanel):
            await self.bench.press("escape")

    async def typed(self, text: str) -> None:
        """Character by character."""
        for character in text:
            key = {".": "full_stop", "-": "minus"}.get(character, character)
            await self.bench.pilot.press(key)


async def test_the_shipped_procedure_key_by_key(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    """Every line is reached with keys at 80x24, the run is completed, the record is whole."""
    for module in (quick, question):
        # Dialogs are armed by the real clock, which does not pass here.
        monkeypatch.setattr(module, "ARM_S", 0.0)
    engine = LocalEngine()
    request = BindRequest(str(SHIPPED), read_procedure(SHIPPED).procedure.issue.date.isoformat())
    bound = await engine.bind(request)
    clock = FakeClock()
    journal = tmp_path / "run.jsonl"
    desk = Conductor(JournalWriter(Journal.create(journal)), clock, engine)
    who = played(bound.plan.roles)
    await desk.open(run_opened(bound, people(who, bound.plan.roles), request, rehearsal=True))
    await desk.settled()
    assert engine.here.scene is not None
    table = Dials(World(engine.here.scene, engine.here.lines, bound.plan, 3, clock.now()), clock, desk)
    table.follow(desk.ledger)

    async def journey(app: BenchApp) -> int:
        app.take(desk, table)
        app.push_screen(RunScreen(desk))
        await app.ended.wait()
        return 0

    app = BenchApp(journey, drop_stalled=False)
    async with app.run_test(size=(80, 24)) as pilot:
        bench = Bench(app, pilot, desk, engine, clock)  # type: ignore[arg-type]  # any engine will do
        await bench.settle()
        operator = Operator(desk, table._world, engine.here.lines, who)
        hands = Hands(bench, operator, table, {p.name: p.number for p in who})
        for _ in range(6000):
            if desk.ledger.outcome is not None:
                break
            before = desk.ledger.seq, clock.now()
            await hands.one()
            assert (desk.ledger.seq, clock.now()) != before, (desk.ledger.line, bench.text)
        assert desk.ledger.outcome == "completed", (desk.ledger.line, app.screen, bench.text)
    await desk.close()
    assert {"yes", "not yet"} <= hands.seen
    assert verify(journal).good
    assert read(journal).records[-1].kind == "RunClosed"
