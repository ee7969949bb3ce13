"""An unfinished run taken up again: computed from the texts its record holds, whatever the files say today."""

from __future__ import annotations

import re
from dataclasses import replace
from pathlib import Path
from typing import Final

from runbook.answers import BindRequest
from runbook.errors import JournalError
from runbook.run.events import RunOpened, event_from_plain
from runbook.run.journal import Record

_APPARATUS: Final = re.compile(r"^apparatus:\s*(.+?)\s*(?:\s#.*)?$", re.MULTILINE)


def opening_of(records: tuple[Record, ...], path: Path) -> RunOpened:
    """The first event of a run. Raises JournalError where it is another."""
    if records:
        event = event_from_plain(records[0].kind, records[0].data)
        if isinstance(event, RunOpened):
            return event
    raise JournalError(f"The journal {path} does not begin with the opening of a run.")


def request_from_record(opened: RunOpened, folder: Path) -> BindRequest:
    """What to bind again: both texts written into `folder`, as they were when the run was opened.

    Raises JournalError where the record does not say from what the plan was made.
    """
    if opened.request is None:
        raise JournalError("This run's record does not say from what its plan was made: it can be read, not taken up.")
    found = _APPARATUS.search(opened.procedure_text)
    named = Path(found[1].strip("'\"")) if found else Path("apparatus.yaml")
    if named.is_absolute() or ".." in named.parts:
        raise JournalError(
            f"The apparatus file {named} lies outside the procedure's folder: the run cannot be taken up."
        )
    procedure = folder / Path(opened.request.procedure_path).name
    apparatus = folder / named
    apparatus.parent.mkdir(parents=True, exist_ok=True)
    procedure.write_text(opened.procedure_text, encoding="utf-8")
    apparatus.write_text(opened.apparatus_text, encoding="utf-8")
    return replace(opened.request, procedure_path=str(procedure))
