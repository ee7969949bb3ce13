"""The logbook: the folder in which the journals of all runs lie.

Nothing is kept beside the journals, so there is nothing that could disagree with them: lists and the history of a
vessel are read from them anew each time. A damaged journal is listed with its reason and never stops the rest from
being read, but no history passes over it in silence: an event may be missing there that decides what is in
the vessel.

    <folder>/runs/20310302T143207Z-<vessel>-<4 hex>.jsonl    and its head; rehearsals under <folder>/rehearsals/
"""

from __future__ import annotations

import os
import re
import secrets
import sys
from collections.abc import Callable
from dataclasses import dataclass, field, replace
from datetime import datetime
from pathlib import Path
from typing import Final, TypeVar
from urllib.parse import quote, unquote

from runbook.errors import JournalError
from runbook.run import posix
from runbook.run.clock import Moment, utc_text
from runbook.run.journal import Record, read

S = TypeVar("S")

CLOSING: Final = "RunClosed"
"""The kind of event with which a run ends; the only one whose name is known here."""

LONGEST_VESSEL: Final = 160
"""[byte] of a vessel's tag as part of a file name; file systems end at 255 for the whole."""

_NAME: Final = re.compile(r"(?P<begun>\d{8}T\d{6}Z)-(?P<vessel>.+)-[0-9a-f]{4}\.jsonl")


@dataclass(frozen=True, slots=True)
class RunFile:
    """One run as it stands in the logbook."""

    path: Path
    """Its journal."""
    vessel: str
    """Tag of the vessel, from the file's name; empty where that is not a name given here."""
    begun: str
    """UTC; from the first record, and where there is none from the file's name; empty where neither tells."""
    rehearsal: bool
    """Whether it lies among the rehearsals, which are no part of a vessel's history."""
    opened: dict[str, object] = field(hash=False)
    """Data of the first record; empty where there is none."""
    last: Moment | None
    """When the last record was written."""
    closed: bool
    """Whether the event that ends a run is in it; without it the run was left and can be gone on with."""
    count: int
    """Records; of a damaged journal those before the damage are not counted."""
    damaged: str
    """Why it cannot be read, as a sentence; empty where it can."""
    warnings: tuple[str, ...]
    """Sentences about what is missing without being damage."""


def logbook_folder(explicit: Path | None = None) -> Path:
    """Where the logbook lies: the given folder, else RUNBOOK_LOGBOOK, else where this system keeps users' data.

    Nothing is made or looked at. Raises JournalError where the home folder cannot be told.
    """
    if explicit is not None:
        return explicit
    try:
        if named := os.environ.get("RUNBOOK_LOGBOOK"):
            return Path(named).expanduser()
        return _user_data() / "runbook"
    except RuntimeError:
        raise JournalError("Your home folder cannot be told: name a folder with --logbook.") from None


def _user_data() -> Path:
    """Where this system keeps the data of a user's programs."""
    if sys.platform == "win32":
        named = os.environ.get("LOCALAPPDATA", "")
        return Path(named) if named else Path.home() / "AppData" / "Local"
    if sys.platform == "darwin":
        return Path.home() / "Library" / "Application Support"
    # The XDG Base Directory Specification has a relative path ignored.
    named = os.environ.get("XDG_DATA_HOME", "")
    return Path(named) if Path(named).is_absolute() else Path.home() / ".local" / "share"


class Logbook:
    """The runs in one folder."""

    def __init__(self, folder: Path) -> None:
        """Look into `folder`, which need not be there yet."""
        self.folder: Final = folder
        """The logbook; runs and rehearsals lie in folders beneath."""

    def new_run_path(self, vessel: str, now: Moment, rehearsal: bool) -> Path:
        """A name that no run has, for a run on `vessel` that begins now; its folder is made.

        Raises JournalError where the folder cannot be made or the tag cannot be part of a file's name.
        """
        # Quoted, so that two tags never give one name and the tag can be told from the name.
        tag = quote(vessel, safe="", errors="surrogatepass")
        if not 0 < len(tag) <= LONGEST_VESSEL:
            raise JournalError(
                f"The vessel's tag '{vessel[:40]}' cannot name a file: give it 1 to {LONGEST_VESSEL} characters, "
                "where one that is not a plain letter or digit counts three or more."
            )
        folder = self._folder(rehearsal)
        try:
            posix.make_folder(folder)
        except OSError as error:
            raise JournalError(
                f"The logbook folder {folder} cannot be made: {error.strerror or error}. "
                "Name another one with --logbook."
            ) from error
        begun = re.sub(r"[-:]|\.\d+", "", utc_text(now.wall))
        while (path := folder / f"{begun}-{tag}-{secrets.token_hex(2)}.jsonl").exists():
            pass
        return path

    def runs(self) -> tuple[RunFile, ...]:
        """All runs, those begun last first. Raises JournalError where the folder cannot be read."""
        return self._list(rehearsal=False)

    def rehearsals(self) -> tuple[RunFile, ...]:
        """All rehearsals, those begun last first. Raises JournalError where the folder cannot be read."""
        return self._list(rehearsal=True)

    def history(self, vessel: str, fold: Callable[[S, Record], S], start: S, skipped: list[RunFile] | None = None) -> S:
        """What the runs of `vessel`, oldest first, make of `start`, each record handed to `fold` in order.

        A damaged journal is passed over and put into `skipped`; whoever leans on the answer must look there, and
        without such a list it raises JournalError. The same goes for a journal whose vessel cannot be told, and
        for a second copy of one. Rehearsals do not count.
        """
        seen: dict[str, Path] = {}
        state = start
        for run, records in reversed(self._read(rehearsal=False)):
            if run.vessel not in (vessel, ""):
                continue
            reason = run.damaged
            if records and records[0].mark in seen:
                reason = f"{run.path} is a copy of {seen[records[0].mark]}."
            if reason:
                if skipped is None:
                    raise JournalError(f"The history of {vessel} leans on a journal that is no use: {reason}")
                skipped.append(replace(run, damaged=reason))
                continue
            for record in records:
                state = fold(state, record)
            if records:
                seen[records[0].mark] = run.path
        return state

    def begun_after(self, now: Moment) -> tuple[RunFile, ...]:
        """Runs that claim to have begun after now: this machine's clock was set back, or theirs was ahead.

        While there are any, the order of a vessel's history, which goes by the clock, is in doubt.
        """
        present = utc_text(now.wall)
        return tuple(run for run in self.runs() if run.begun > present)

    def _folder(self, rehearsal: bool) -> Path:
        return self.folder / ("rehearsals" if rehearsal else "runs")

    def _list(self, rehearsal: bool) -> tuple[RunFile, ...]:
        return tuple(run for run, _ in self._read(rehearsal))

    def _read(self, rehearsal: bool) -> list[tuple[RunFile, tuple[Record, ...]]]:
        """Every journal with its records, those begun last first."""
        folder = self._folder(rehearsal)
        try:
            paths = [path for path in folder.iterdir() if path.suffix == ".jsonl"]
        except FileNotFoundError:
            return []
        except OSError as error:
            raise JournalError(
                f"The logbook folder {folder} cannot be read: {error.strerror or error}. "
                "Name another one with --logbook."
            ) from error
        found = [_run_file(path, rehearsal) for path in paths]
        return sorted(found, key=lambda each: (each[0].begun, each[0].path.name), reverse=True)


def _run_file(path: Path, rehearsal: bool) -> tuple[RunFile, tuple[Record, ...]]:
    """One journal, whatever state it is in; its records where it is good."""
    name = _NAME.fullmatch(path.name)
    vessel = unquote(name["vessel"], errors="surrogatepass") if name else ""
    records: tuple[Record, ...] = ()
    warnings: tuple[str, ...] = ()
    damaged = "" if name else f"{path} has another name than runs get here, so its vessel cannot be told."
    try:
        reading = read(path)
        records, warnings = reading.records, reading.warnings
    except JournalError as error:
        damaged = str(error)
    begun = records[0].at if records else _begun(name["begun"]) if name else ""
    run = RunFile(
        path=path,
        vessel=vessel,
        begun=begun,
        rehearsal=rehearsal,
        opened=records[0].data if records else {},
        last=records[-1].moment if records else None,
        closed=any(record.kind == CLOSING for record in records),
        count=len(records),
        damaged=damaged,
        warnings=warnings,
    )
    return run, records


def _begun(stamp: str) -> str:
    """The time in a file's name, '20310302T143207Z', as the records write it; empty where it is none."""
    try:
        return utc_text(datetime.fromisoformat(stamp).timestamp())
    except ValueError:
        return ""
