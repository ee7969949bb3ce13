"""The screens of an open run, driven by keys: what a test needs to begin."""

from __future__ import annotations

from collections.abc import AsyncIterator, Awaitable, Callable
from contextlib import asynccontextmanager
from dataclasses import dataclass
from typing import Any

from textual.pilot import Pilot
from textual.screen import Screen

from runbook.answers import Plan
from runbook.bench import style
from runbook.bench.app import BenchApp
from runbook.bench.pace import Pace
from runbook.bench.screens.run import RunScreen
from runbook.run.clock import FakeClock
from runbook.run.conductor import Conductor
from runbook.run.state import Ledger
from tests.bench import scenes
from tests.bench.svgtext import rows_of


@dataclass
class Bench:
    """An app under test and the run behind it."""

    app: BenchApp
    pilot: Pilot[int]
    desk: Conductor
    engine: scenes.FakeEngine
    clock: FakeClock

    async def press(self, *keys: str) -> None:
        """Press keys one after the other and wait until nothing moves."""
        for key in keys:
            await self.pilot.press(key)
            await self.settle()

    async def settle(self) -> None:
        """Wait until the run and the screen stand still."""
        await self.pilot.pause()
        await self.desk.settled()
        self.app.paint()
        await self.pilot.pause()

    async def passes(self, seconds: float) -> None:
        """Let time pass at the bench [s], and let the clock look."""
        self.clock.advance(seconds)
        await self.app.look()
        await self.settle()

    @property
    def rows(self) -> list[str]:
        """The screen as text."""
        return rows_of(self.app.export_screenshot())

    @property
    def text(self) -> str:
        """The screen as one text."""
        return "\n".join(self.rows)

    @property
    def screen(self) -> Screen[Any]:
        """What is on top."""
        return self.app.screen


class FakePace:
    """A rehearsal's clock and dials, moved by nothing."""

    def __init__(self) -> None:
        self.speed = 1.0
        self.stopped = False
        self.jumped: list[float] = []
        self.seen = "solid 8 % of it"
        self.faults: list[str] = []
        self.begun: list[tuple[str, str]] = []
        self.dials = {"TT1": "24.1", "PG1": "62.6", "HS1": "30"}

    @property
    def words(self) -> str:
        """Speed or pause."""
        return "PAUSED" if self.stopped else f"x{self.speed:g}"

    def faster(self) -> None:
        """Twice as fast."""
        self.speed *= 2.0

    def slower(self) -> None:
        """Half as fast."""
        self.speed /= 2.0

    def pause(self) -> None:
        """Stop, or go on."""
        self.stopped = not self.stopped

    def jump(self, seconds: float) -> None:
        """Noted [s]."""
        self.jumped.append(seconds)

    def follow(self, ledger: Ledger) -> None:
        """Nothing to follow."""

    def dial(self, tag: str) -> str | None:
        """As set."""
        return self.dials.get(tag)

    def played(self, name: str) -> str | None:
        """All but the first person."""
        return {who.name: who.number for who in scenes.WHO[1:]}.get(name)

    def trouble(self, fault: str) -> None:
        """Noted."""
        self.faults.append(fault)

    def news(self) -> list[tuple[str, str]]:
        """Nothing begins by itself."""
        found, self.begun = self.begun, []
        return found


Journey = Callable[[BenchApp], Awaitable[int]]


@asynccontextmanager
async def running(
    plan: Plan | None = None, size: tuple[int, int] = (80, 24), pace: Pace | None = None, **app_options: Any
) -> AsyncIterator[Bench]:
    """The run screen of an open run, before its first line."""
    desk, engine, clock = await scenes.desk(plan, rehearsal=pace is not None)

    async def journey(app: BenchApp) -> int:
        app.take(desk, pace)
        app.push_screen(RunScreen(desk))
        await app.ended.wait()
        return 0

    app = BenchApp(journey, drop_stalled=False, **app_options)
    async with app.run_test(size=size) as pilot:
        bench = Bench(app, pilot, desk, engine, clock)
        await bench.settle()
        yield bench
    await desk.close()


@asynccontextmanager
async def showing(screen: Screen[Any], size: tuple[int, int] = (80, 24)) -> AsyncIterator[tuple[BenchApp, Pilot[int]]]:
    """One screen without a run; what it gives back is the app's `result`."""

    async def journey(app: BenchApp) -> int:
        await app.push_screen_wait(screen)
        return 0

    app = BenchApp(journey, drop_stalled=False)
    async with app.run_test(size=size) as pilot:
        await pilot.pause()
        yield app, pilot


def arm_at_once(monkeypatch: Any) -> None:
    """Questions count a yes at once: tests do not wait."""
    for module in ("question", "quick", "safe"):
        monkeypatch.setattr(f"runbook.bench.screens.{module}.ARM_S", 0.0)
    assert style.ARM_S > 0.0
