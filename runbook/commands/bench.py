"""`runbook bench FILE`: the run at the vessel, on screens or as prompts and lines.

Certificates are judged on today's date. A run that was left is taken up again with --resume, or from the list
that `runbook` alone opens.
"""

from __future__ import annotations

from pathlib import Path

from runbook.commands.arguments import Arguments, iso_date
from runbook.errors import InputUnusable
from runbook.procedure.shelf import find_procedure


def main(argv: list[str]) -> int:
    """Run one procedure at the vessel; returns the exit code."""
    parser = Arguments(prog="runbook bench", description=__doc__)
    parser.add_argument("file", metavar="FILE", nargs="?", help="a procedure file, or the name of a shipped one")
    parser.add_argument("--plain", action="store_true", help="prompts and lines instead of screens")
    parser.add_argument("--part", type=int, default=1, metavar="N", help="the part of the day to begin with (1)")
    parser.add_argument(
        "--closed", metavar="MASS", help="with --plain: the vessel is closed already with this much in it, or '?'"
    )
    parser.add_argument("--on", metavar="DATE", help="judge certificates on this date (default: today)")
    parser.add_argument("--resume", metavar="RUN", type=Path, help="take up an unfinished run: its record file")
    parser.add_argument("--logbook", metavar="DIR", type=Path, help="where the record goes")
    parser.add_argument("--ascii", action="store_true", help="no braille and no box characters")
    asked = parser.parse_args(argv)
    if (asked.file is None) == (asked.resume is None):
        raise InputUnusable("name a procedure file, or an unfinished run with --resume")
    if asked.resume is not None:
        return _resumed(asked.resume, asked.plain, asked.logbook, asked.ascii)
    path = find_procedure(asked.file)
    on = iso_date(asked.on).isoformat()
    if asked.plain:
        from runbook.commands.plain import bench_plain

        return bench_plain(path, on, _part(asked.part), asked.logbook, _closed(asked.closed))
    return _on_screens("bench", path, on, asked.logbook, asked.ascii)


def _closed(mass: str | None) -> float | None:
    """Mass stated to be closed in [kg]; infinite: nobody knows; None: the vessel is not closed."""
    if mass is None:
        return None
    from runbook.quantities import Dimension, parse

    return float("inf") if mass == "?" else parse(mass, Dimension.MASS)


def _part(number: int) -> int:
    if number < 1:
        raise InputUnusable("parts are numbered from 1")
    return number - 1


def _resumed(run: Path, plain: bool, logbook: Path | None, ascii_only: bool) -> int:
    if not run.is_file():
        raise InputUnusable(f"there is no run '{run}': 'runbook logbook list' names them")
    if plain:
        from runbook.commands.plain import resume_plain

        return resume_plain(run)
    return _on_screens("resume", run, iso_date(None).isoformat(), logbook, ascii_only)


def _on_screens(kind: str, path: Path, on: str, logbook: Path | None, ascii_only: bool) -> int:
    from runbook.bench.launch import check_terminal, run_screens

    check_terminal("bench")
    from runbook.bench.entries import title_of
    from runbook.bench.journey import Session
    from runbook.bench.screens.listing import Entry

    start = Entry(kind, title_of(path), str(path.parent), str(path))
    return run_screens(Session(logbook, on, start=start), ascii_only)
