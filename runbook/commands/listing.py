"""`runbook` alone: the list of procedures, loaded vessels and open runs, "try it without a vessel" on top.

On a terminal it opens the screens; anywhere else it prints the list.
"""

from __future__ import annotations

import sys

from runbook.commands.arguments import iso_date
from runbook.errors import ExitCode


def main(argv: list[str]) -> int:
    """Open or print the list; returns the exit code."""
    if sys.stdin.isatty() and sys.stdout.isatty() and sys.stderr.isatty():
        from runbook.bench.journey import Session
        from runbook.bench.launch import run_screens

        return run_screens(Session(None, iso_date(None).isoformat()))
    print("\n".join(list_lines()))
    return int(ExitCode.GOOD)


def list_lines() -> list[str]:
    """The list as text."""
    from runbook.bench.entries import recorded, title_of
    from runbook.procedure.shelf import list_procedures
    from runbook.run.logbook import Logbook, logbook_folder

    found = list_procedures()
    lines = ["Try it without a vessel:"]
    lines += [f"  runbook rehearse {path}    {title_of(path)}" for path in found]
    lines.append("At the vessel:")
    lines += [f"  runbook bench {path}    {title_of(path)}" for path in found]
    entries, wrong = recorded(Logbook(logbook_folder(None)))
    runs = [e for e in entries if e.kind == "resume"]
    if runs:
        lines.append("Runs left unfinished:")
        lines += [f"  runbook bench --resume {e.path}    {e.title}, {e.detail}" for e in runs]
    vessels = [e for e in entries if e.kind == "vessel"]
    if vessels:
        lines.append("Loaded vessels:")
        lines += [f"  {e.title}: {e.detail}" for e in vessels]
    return [*lines, *wrong]
