"""`runbook logbook list|show|verify`: what was recorded, read from the journals and nothing else."""

from __future__ import annotations

import sys
from pathlib import Path

from runbook.commands.arguments import Arguments
from runbook.errors import ExitCode, InputUnusable, JournalDamaged
from runbook.run.journal import read, verify
from runbook.run.logbook import Logbook, RunFile, logbook_folder
from runbook.run.opening import charge_record


def main(argv: list[str]) -> int:
    """List runs, show one, or verify one or all; returns the exit code."""
    parser = Arguments(prog="runbook logbook", description=__doc__)
    parser.add_argument("--logbook", metavar="DIR", type=Path, help="the logbook's folder")
    parser.add_argument("what", choices=("list", "show", "verify"))
    parser.add_argument("run", nargs="?", help="a run's name as listed, or its file; verify: all, without")
    asked = parser.parse_args(argv)
    logbook = Logbook(logbook_folder(asked.logbook))
    if asked.what == "list":
        return _list(logbook)
    if asked.what == "show":
        if asked.run is None:
            raise InputUnusable("say which run: 'runbook logbook list' names them")
        return _show(_path(logbook, asked.run))
    paths = [_path(logbook, asked.run)] if asked.run else [r.path for r in (*logbook.runs(), *logbook.rehearsals())]
    return max((_verify(path) for path in paths), default=int(ExitCode.GOOD))


def _list(logbook: Logbook) -> int:
    print(f"logbook {logbook.folder}")
    found = (*logbook.runs(), *logbook.rehearsals())
    for run in found:
        kind = "REHEARSAL" if run.rehearsal else "run"
        print(f"  {run.path.stem}  {kind:<9}  {run.vessel:<10}  {run.count:>5} events  {_state(run)}")
    if not found:
        print("  no runs yet")
    _loaded(logbook, {r.vessel for r in logbook.runs() if r.vessel})
    damaged = [r for r in found if r.damaged]
    return int(ExitCode.NOT_GOOD if damaged else ExitCode.GOOD)


def _loaded(logbook: Logbook, vessels: set[str]) -> None:
    for vessel in sorted(vessels):
        skipped: list[RunFile] = []
        record = charge_record(logbook, vessel, skipped)
        if record is not None:
            box = record.box
            print(
                f"vessel {vessel} is loaded: {box.low_kg * 1000:.1f} to {box.high_kg * 1000:.1f} g of {record.fluid}, "
                f"by {' and '.join(box.by)}, {record.at}"
            )
        for run in skipped:
            print(f"vessel {vessel}: its history passes over {run.path.name}: {run.damaged}", file=sys.stderr)


def _state(run: RunFile) -> str:
    if run.damaged:
        return f"DAMAGED: {run.damaged}"
    return "closed" if run.closed else "left unfinished"


def _show(path: Path) -> int:
    from runbook.run.record import record_lines

    try:
        records = read(path).records
    except JournalDamaged as error:
        print(f"runbook: {error}", file=sys.stderr)
        records = verify(path).records
        print("\n".join(record_lines(records)))
        return int(ExitCode.FAILED)
    print("\n".join(record_lines(records)))
    return int(ExitCode.GOOD)


def _verify(path: Path) -> int:
    found = verify(path)
    print(f"{path.name}: " + " ".join(found.said))
    return int(ExitCode.GOOD if found.good else ExitCode.FAILED)


def _path(logbook: Logbook, given: str) -> Path:
    """A journal by its file, its name or the beginning of its name. Raises InputUnusable."""
    if Path(given).is_file():
        return Path(given)
    found = [r.path for r in (*logbook.runs(), *logbook.rehearsals()) if r.path.stem.startswith(given)]
    if len(found) != 1:
        many = "no run" if not found else f"{len(found)} runs"
        raise InputUnusable(f"{many} in {logbook.folder} called '{given}': see 'runbook logbook list'")
    return found[0]
