"""The course of one run at the screens: briefing, people, set-up, the run, its record."""

from __future__ import annotations

import asyncio
import contextlib
import tempfile
from dataclasses import dataclass
from pathlib import Path
from typing import TYPE_CHECKING

from runbook.answers import BindRequest, ChargeBox
from runbook.bench.people import performer
from runbook.bench.resuming import opening_of, request_from_record
from runbook.bench.screens.briefing import BriefingScreen
from runbook.bench.screens.listing import Entry
from runbook.bench.screens.people import PeopleScreen
from runbook.bench.screens.record import RecordScreen
from runbook.bench.screens.run import RunScreen
from runbook.bench.screens.setup import SetUpScreen
from runbook.bench.simulated import Simulated
from runbook.errors import ExitCode
from runbook.procedure.reader import read_procedure
from runbook.rehearsal.failing import FailingEngine
from runbook.run.acts import Note
from runbook.run.clock import Clock, ScaledClock
from runbook.run.conductor import Conductor
from runbook.run.engine import Bound, ChildEngine
from runbook.run.journal import Journal, JournalWriter, read
from runbook.run.logbook import Logbook, RunFile
from runbook.run.opening import Participant, charge_record, people, played, run_opened
from runbook.run.record import account

if TYPE_CHECKING:
    from runbook.bench.app import BenchApp


@dataclass
class Course:
    """What every run of a session shares."""

    engine: ChildEngine
    warming: asyncio.Future[None]
    """Its start, which nobody waits for."""
    logbook: Logbook
    on: str
    """ISO date on which certificates are judged at the vessel."""
    seed: int
    """Of a rehearsal's instruments."""
    fault: str
    """What goes wrong in a rehearsal; empty: nothing."""
    clock: Clock
    _texts: tempfile.TemporaryDirectory[str] | None = None
    """Both files of a run taken up again: a computing process that is started anew reads them anew."""

    async def close(self) -> None:
        """End the computing process."""
        self.warming.cancel()
        with contextlib.suppress(asyncio.CancelledError):
            await self.warming
        await self.engine.close()
        if self._texts is not None:
            self._texts.cleanup()

    async def opened(self, app: BenchApp, entry: Entry) -> Conductor | None:
        """The open run of that entry; None: somebody went back. Raises RunbookError."""
        if entry.kind == "resume":
            return await self._resumed(app, Path(entry.path))
        rehearsal = entry.kind == "rehearse"
        if rehearsal:
            app.rehearsal_mark = "REHEARSAL"
        known = read_procedure(Path(entry.path))
        # A rehearsal is about the steps: certificates are judged on the procedure's own date.
        on = str(known.procedure.issue.date) if rehearsal else self.on
        held, said = (None, "") if rehearsal else self._held(known.apparatus.tag)
        request = BindRequest(entry.path, on, charge=held, cell_closed=held is not None)
        briefing = BriefingScreen(self.engine.bind, request, held, rehearsal, said, self.fault)
        briefed = await app.push_screen_wait(briefing)
        if briefed is None:
            app.rehearsal_mark = ""
            return None
        bound, request = briefed
        self.fault = briefing.fault
        who = played(bound.plan.roles) if rehearsal else await self._people(app, bound)
        if who is None or not (rehearsal or await app.push_screen_wait(_set_up(bound, request))):
            return None
        return await self._begun(app, bound, request, who, rehearsal)

    async def _people(self, app: BenchApp, bound: Bound) -> tuple[Participant, ...] | None:
        roles = bound.plan.roles

        def wrong(found: tuple[Participant, ...]) -> None:
            people(found, roles)

        return await app.push_screen_wait(PeopleScreen(roles, wrong))

    async def _begun(
        self,
        app: BenchApp,
        bound: Bound,
        request: BindRequest,
        who: tuple[Participant, ...],
        rehearsal: bool,
    ) -> Conductor:
        clock = ScaledClock(self.clock) if rehearsal else self.clock
        path = self.logbook.new_run_path(bound.plan.vessel, clock.now(), rehearsal)
        opened = run_opened(bound, people(who, bound.plan.roles), request, rehearsal)
        journal = JournalWriter(Journal.create(path))
        if isinstance(clock, ScaledClock):
            # The first person is who sits here; all others are played.
            pace = Simulated(clock, who[1:])
            desk = Conductor(journal, clock, FailingEngine(self.engine, lambda: pace.lost))
            await desk.open(opened)
            await pace.open(request, bound.plan, self.seed, self.fault)
            app.take(desk, pace)
        else:
            desk = Conductor(journal, clock, self.engine)
            await desk.open(opened)
            app.take(desk)
            await desk.act(Note("Set-up check confirmed point by point.", performer(desk.ledger)))
        return desk

    async def _resumed(self, app: BenchApp, path: Path) -> Conductor:
        journal, records = Journal.open(path)
        opened = opening_of(records, path)
        self._texts = tempfile.TemporaryDirectory(prefix="runbook-")
        request = request_from_record(opened, Path(self._texts.name))
        self.engine.request = request
        desk = Conductor(JournalWriter(journal), self.clock, self.engine)
        await desk.resume(records, "the run was taken up again")
        app.take(desk)
        return desk

    def _held(self, vessel: str) -> tuple[ChargeBox | None, str]:
        """What the vessel's charge record says is in it, and what of its history cannot be read."""
        skipped: list[RunFile] = []
        record = charge_record(self.logbook, vessel, skipped)
        said = " ".join(f"{run.path.name} cannot be read: {run.damaged}" for run in skipped)
        return (None if record is None else record.box), said

    async def run(self, app: BenchApp, desk: Conductor) -> int:
        """From the run's first line to its record; the exit code."""
        app.push_screen(RunScreen(desk))
        try:
            await app.ended.wait()
            await desk.settled()
            outcome = desk.ledger.outcome or "left"
            where = "" if desk.journal is None else str(desk.journal.path)
            lines = () if desk.journal is None else account(read(desk.journal.path).records)
            await app.push_screen_wait(RecordScreen(outcome, where, lines))
            return int(ExitCode.GOOD if outcome == "completed" else ExitCode.NOT_GOOD)
        finally:
            if isinstance(app.pace, Simulated):
                await app.pace.close()
            await desk.close()


def _set_up(bound: Bound, request: BindRequest) -> SetUpScreen:
    return SetUpScreen(bound.plan.bring, request.cell_closed)
