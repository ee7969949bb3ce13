"""What the list holds: procedures of the shelf, open runs and loaded vessels of the logbook.

Reads files, so the slow half of it is called from a thread after the list is up.
"""

from __future__ import annotations

import re
from pathlib import Path
from typing import TYPE_CHECKING, Final

from runbook.bench.screens.listing import Entry
from runbook.errors import InputUnusable, JournalError, RunbookError
from runbook.procedure.shelf import list_procedures, shipped_folder

if TYPE_CHECKING:
    from runbook.run.logbook import Logbook, RunFile

_NAME: Final = re.compile(r"^name:\s*(.+?)\s*(?:\s#.*)?$", re.MULTILINE)
_HEAD: Final = 4096
"""[characters] the name stands among the first lines."""


def title_of(path: Path) -> str:
    """The name a procedure gives itself, without reading it as a whole; else its file's name."""
    try:
        with path.open(encoding="utf-8", errors="replace") as file:
            found = _NAME.search(file.read(_HEAD))
    except OSError:
        return path.stem
    return found[1].strip("'\"") if found else path.stem


def procedures() -> tuple[tuple[Entry, ...], tuple[str, ...]]:
    """Each procedure twice: to try without a vessel, and at the vessel."""
    try:
        paths = list_procedures()
    except InputUnusable as error:
        return (), (str(error),)
    shipped = shipped_folder()
    tried, real = [], []
    for path in paths:
        title = title_of(path)
        where = "shipped" if shipped is not None and path.parent == shipped else str(path.parent)
        tried.append(Entry("rehearse", title, where, str(path)))
        real.append(Entry("bench", title, where, str(path)))
    return (*tried, *real), ()


def recorded(logbook: Logbook) -> tuple[tuple[Entry, ...], tuple[str, ...]]:
    """Open runs and loaded vessels, and what could not be read."""
    # Here, not above: the list stands on the screen before these are needed.
    from runbook.quantities import say
    from runbook.run.opening import charge_record, unfinished

    try:
        runs = logbook.runs()
    except JournalError as error:
        return (), (str(error),)
    said = [run.damaged for run in runs if run.damaged]
    found = [
        Entry("resume", _title(run), f"{run.vessel}, begun {run.begun[:16]}", str(run.path)) for run in unfinished(runs)
    ]
    for vessel in dict.fromkeys(run.vessel for run in runs if run.vessel):
        skipped: list[RunFile] = []
        try:
            record = charge_record(logbook, vessel, skipped)
        except RunbookError as error:
            said.append(str(error))
            continue
        if record is not None:
            held = f"{say(record.box.low_kg, 'g', 1)} to {say(record.box.high_kg, 'g', 1)} of {record.fluid}"
            proved = "proved" if record.box.proved else "NOT PROVED"
            found.append(Entry("vessel", vessel, f"{held}, {proved}, {record.at[:16]}", ""))
    return tuple(found), tuple(said)


def _title(run: RunFile) -> str:
    plan = run.opened.get("plan")
    name = plan.get("procedure") if isinstance(plan, dict) else None
    return name if isinstance(name, str) else run.path.stem
