"""One session, screen after screen, from the first painted one: list or opening, then a run's course.

The first screen is painted with what Textual brings and names of files alone. Models, the run and the computing
process come after it, the process first: it takes longest and does so on a core of its own.
"""

from __future__ import annotations

import asyncio
import contextlib
from collections.abc import Callable
from dataclasses import dataclass
from pathlib import Path
from typing import TYPE_CHECKING

from runbook.bench import loading
from runbook.bench.entries import procedures, recorded
from runbook.bench.screens.listing import Entry, ListScreen
from runbook.errors import ExitCode, RunbookError

if TYPE_CHECKING:
    from runbook.bench.app import BenchApp
    from runbook.bench.course import Course
    from runbook.run.clock import Clock
    from runbook.run.conductor import Conductor
    from runbook.run.engine import ChildEngine
    from runbook.run.logbook import Logbook


@dataclass
class Session:
    """What a session at the screens begins with."""

    folder: Path | None
    """Of the logbook; None: where the system keeps it."""
    on: str
    """ISO date on which certificates are judged at the vessel."""
    start: Entry | None = None
    """Straight to this entry; None: the list."""
    seed: int = 1
    """Of a rehearsal's instruments."""
    fault: str = ""
    """What goes wrong in a rehearsal; empty: nothing."""
    make_engine: Callable[[], ChildEngine] | None = None
    """Another computing process than the usual one."""
    clock: Clock | None = None
    """Another clock than the system's."""
    left: Conductor | None = None
    """The run as it was left, for the card that is printed."""

    async def __call__(self, app: BenchApp) -> int:
        """The whole session; the exit code. Raises RunbookError where what was named cannot be used."""
        app.painted.clear()
        course = asyncio.ensure_future(self._course(app))
        try:
            return await self._session(app, course)
        finally:
            course.cancel()
            with contextlib.suppress(asyncio.CancelledError, RunbookError):
                await (await course).close()

    async def _course(self, app: BenchApp) -> Course:
        """Everything a run needs, brought in once the first screen stands."""
        await app.painted.wait()
        await loading.load(loading.ENGINE, app.typing)
        from runbook.run.engine import ChildEngine

        engine = (self.make_engine or ChildEngine)()
        # Its library loads on the other core while the rest is read here, and while somebody reads the list.
        warming = asyncio.ensure_future(_warm(engine))
        try:
            await loading.load(loading.RUN, app.typing)
            from runbook.bench.course import Course
            from runbook.run.clock import SystemClock

            return Course(engine, warming, self._logbook(), self.on, self.seed, self.fault, self.clock or SystemClock())
        except BaseException:
            warming.cancel()
            await engine.close()
            raise

    def _logbook(self) -> Logbook:
        """Raises JournalError where no folder can be told."""
        from runbook.run.logbook import Logbook, logbook_folder

        return Logbook(logbook_folder(self.folder))

    async def _session(self, app: BenchApp, coming: asyncio.Future[Course]) -> int:
        if self.start is not None:
            return await self._straight(app, coming, self.start)
        said: tuple[str, ...] = ()
        while True:
            entry = await self._listed(app, coming, said)
            if entry is None:
                return int(ExitCode.GOOD)
            said = ()
            try:
                course = await asyncio.shield(coming)
                desk = await course.opened(app, entry)
            except RunbookError as error:
                desk, said = None, (str(error),)
            if desk is not None:
                return await self._run(app, course, desk)

    async def _straight(self, app: BenchApp, coming: asyncio.Future[Course], start: Entry) -> int:
        from runbook.bench.screens.opening import OpeningScreen

        app.push_screen(OpeningScreen(start))
        course = await asyncio.shield(coming)
        desk = await course.opened(app, start)
        return int(ExitCode.NOT_GOOD) if desk is None else await self._run(app, course, desk)

    async def _run(self, app: BenchApp, course: Course, desk: Conductor) -> int:
        self.left = desk
        return await course.run(app, desk)

    async def _listed(self, app: BenchApp, coming: asyncio.Future[Course], said: tuple[str, ...]) -> Entry | None:
        entries, wrong = procedures()
        screen = ListScreen(entries, (*wrong, *said))

        async def fill() -> None:
            try:
                logbook = (await asyncio.shield(coming)).logbook
                found, unread = await asyncio.to_thread(recorded, logbook)
            except RunbookError as error:
                found, unread = (), (str(error),)
            if screen.is_attached:
                screen.add(found, unread)

        filling = asyncio.ensure_future(fill())
        try:
            return await app.push_screen_wait(screen)
        finally:
            if not coming.done():
                filling.cancel()
            with contextlib.suppress(asyncio.CancelledError):
                await filling


async def _warm(engine: ChildEngine) -> None:
    with contextlib.suppress(RunbookError):
        await engine.warm()
