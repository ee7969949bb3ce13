"""Line mode: a whole run as prompts and lines, from the same core as the screens.

For terminals that draw badly, for ears, for logs and for scripts. When its input ends it leaves the tool, and
the run stays unfinished.
"""

from __future__ import annotations

import asyncio
import contextlib
import sys
import tempfile
from collections.abc import Iterator
from math import isfinite
from pathlib import Path

from runbook.answers import BindRequest, ChargeBox, Plan
from runbook.bench.resuming import opening_of, request_from_record
from runbook.bench.simulated import Simulated
from runbook.commands.plain_session import Input, Session
from runbook.errors import ExitCode, InputUnusable, JournalError
from runbook.procedure.reader import read_procedure
from runbook.rehearsal.failing import FailingEngine
from runbook.run.amounts import planned, pressure, vessels
from runbook.run.clock import Clock, ScaledClock, SystemClock
from runbook.run.conductor import Conductor
from runbook.run.engine import ChildEngine
from runbook.run.evidence_words import TOLD, telling_lines
from runbook.run.journal import Journal, JournalWriter, read
from runbook.run.logbook import Logbook, RunFile, logbook_folder
from runbook.run.opening import Participant, charge_record, people, played, run_opened
from runbook.run.record import record_lines


def rehearse_plain(path: Path, seed: int, logbook: Path | None, fault: str = "") -> int:
    """A rehearsal in lines; returns the exit code."""
    return asyncio.run(_rehearse(path, seed, Logbook(logbook_folder(logbook)), fault))


def bench_plain(path: Path, on: str, part: int, logbook: Path | None, closed_kg: float | None = None) -> int:
    """A run in lines; closed_kg: charge stated to be closed in already [kg]; returns the exit code."""
    return asyncio.run(_bench(path, on, part, Logbook(logbook_folder(logbook)), closed_kg))


def resume_plain(path: Path) -> int:
    """An unfinished run taken up again in lines; returns the exit code."""
    return asyncio.run(_resume(path))


class _Pace(Simulated):
    """The simulated bench with its speed set by a typed number."""

    def set_speed(self, factor: float) -> None:
        """1 to 600 times."""
        self.clock.set_speed(factor)


async def _rehearse(path: Path, seed: int, logbook: Logbook, fault: str) -> int:
    on = read_procedure(path).procedure.issue.date.isoformat()
    request = BindRequest(str(path), on)
    engine, clock = ChildEngine(), ScaledClock(SystemClock())
    with _loading():
        bound = await engine.bind(request)
    who = played(bound.plan.roles)
    print("REHEARSAL: nothing here happens at a vessel. Played, with their signing numbers:")
    print("\n".join(f"  {p.name}, {', '.join(p.roles)}: {p.number}" for p in who))
    target = logbook.new_run_path(bound.plan.vessel, clock.now(), rehearsal=True)
    pace = _Pace(clock, who[1:])
    lossy = FailingEngine(engine, lambda: pace.lost)
    desk = Conductor(JournalWriter(Journal.create(target)), clock, lossy)
    await desk.open(run_opened(bound, people(who, bound.plan.roles), request, rehearsal=True))
    await pace.open(request, bound.plan, seed, fault)
    try:
        return await _to_the_end(Session(desk, Input(), pace), target)
    finally:
        await pace.close()


async def _bench(path: Path, on: str, part: int, logbook: Logbook, closed_kg: float | None) -> int:
    given = Input()
    vessel = read_procedure(path).apparatus.tag
    engine = ChildEngine()
    held = _held(logbook, vessel) if part else None
    if closed_kg is not None and isfinite(closed_kg):
        held = ChargeBox(closed_kg, closed_kg, False, ("stated",))
    request = BindRequest(str(path), on, charge=held, part=part, cell_closed=closed_kg is not None)
    with _loading():
        bound = await engine.bind(request)
    plan = bound.plan
    print("\n".join(briefing_lines(plan)))
    who = await _people(given, plan)
    if who is None:
        await engine.close()
        return int(ExitCode.NOT_GOOD)
    clock: Clock = SystemClock()
    target = logbook.new_run_path(vessel, clock.now(), rehearsal=False)
    desk = Conductor(JournalWriter(Journal.create(target)), clock, engine)
    await desk.open(run_opened(bound, people(who, plan.roles), request, rehearsal=False))
    return await _to_the_end(Session(desk, given), target)


async def _resume(path: Path) -> int:
    journal, records = Journal.open(path)
    opened = opening_of(records, path)
    with tempfile.TemporaryDirectory(prefix="runbook-") as folder:
        engine = ChildEngine(request=request_from_record(opened, Path(folder)))
        desk = Conductor(JournalWriter(journal), SystemClock(), engine)
        await desk.resume(records, "the run was taken up again")
        return await _to_the_end(Session(desk, Input()), path)


async def _to_the_end(session: Session, target: Path) -> int:
    try:
        code = await session.go()
    finally:
        await session.desk.close()
    with contextlib.suppress(JournalError):
        print("\n".join(("", *record_lines(read(target).records))))
    print(f"record: {target}")
    return code


async def _people(given: Input, plan: Plan) -> tuple[Participant, ...] | None:
    """One person a role, with a signing number of their own; None where the input ended."""
    while True:
        found: dict[str, tuple[list[str], str]] = {}
        for role in plan.roles:
            name = await given.line(f"Who is {role}? ")
            number = await given.line(f"  signing number of {name or ''}: ") if name and name not in found else ""
            if name is None or number is None:
                return None
            roles, kept = found.get(name, ([], number))
            found[name] = ([*roles, role], kept)
        who = tuple(Participant(name, tuple(roles), number) for name, (roles, number) in found.items())
        try:
            people(who, plan.roles)
        except InputUnusable as error:
            print(f"  ! {error}")
            continue
        return who


def briefing_lines(plan: Plan) -> list[str]:
    """The numbers of the briefing."""
    bounds = plan.bounds
    masses = {"least": bounds.least_kg, "best": bounds.best_kg, "most": bounds.most_kg}
    reasons = {"least": bounds.least_reason, "best": bounds.best_reason, "most": bounds.most_reason}
    lines = [
        f"{plan.procedure} in {vessels(plan)}",
        f"{plan.verdict} of the figures in this file, approved by {plan.approved}",
        f"ceiling {pressure(plan, plan.ceiling)} by {plan.ceiling_by}; barometer {plan.barometer / 100:.0f} hPa, "
        f"by {plan.barometer_source}",
        f"planned {planned(plan)}",
    ]
    for name, mass in () if plan.beside else masses.items():
        lines.append(f"  {name} " + ("none" if mass is None else f"{mass * 1000:.1f} g") + f": {reasons[name]}")
    lines += [f"  instrument {said}" for said in telling_lines(plan, TOLD)]
    lines += [f"  bring: {thing}" for thing in plan.bring]
    lines += [
        f"  {c.tag} {c.what}: {c.state.upper()} (until {c.until})" for c in plan.certificates if c.state != "valid"
    ]
    return lines


def _held(logbook: Logbook, vessel: str) -> ChargeBox | None:
    skipped: list[RunFile] = []
    record = charge_record(logbook, vessel, skipped)
    for run in skipped:
        print(f"runbook: the history of {vessel} passes over {run.path.name}: {run.damaged}", file=sys.stderr)
    return None if record is None else record.box


@contextlib.contextmanager
def _loading() -> Iterator[None]:
    """The library takes two seconds, and nobody should wonder."""
    print("loading property data, about 2 s ...", file=sys.stderr, flush=True)
    yield
