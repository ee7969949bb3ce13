"""The journal of a run, for those who use it: write it through one thread, read it, have it verified.

Reading never locks and never changes anything, so a journal can be read while its run goes on. Here stands what
is asked from outside; the form of the lines, with the rule by which anybody can check the marks, is in
`journal_lines`, the writing of them in `journal_file`.
"""

from __future__ import annotations

import asyncio
from collections.abc import Mapping
from concurrent.futures import Future, ThreadPoolExecutor
from dataclasses import dataclass, replace
from pathlib import Path

from runbook.errors import JournalDamaged, JournalError
from runbook.run import posix
from runbook.run.clock import Moment
from runbook.run.journal_file import MOST, Journal, read_head
from runbook.run.journal_lines import (
    Draft,
    Head,
    Reading,
    Record,
    draft,
    parse_as_far_as_good,
    parse_bytes,
)

__all__ = [
    "Draft",
    "Head",
    "Journal",
    "JournalWriter",
    "Reading",
    "Record",
    "Verification",
    "draft",
    "parse_bytes",
    "read",
    "verify",
]


@dataclass(frozen=True, slots=True)
class Verification:
    """What can be said about a journal to a person."""

    good: bool
    """Every record is as it was written, and none that was acknowledged is missing as far as the head tells."""
    records: tuple[Record, ...]
    """Those before the first damage."""
    said: tuple[str, ...]
    """Whole sentences, the finding first; plain text."""


def read(path: Path) -> Reading:
    """Everything the journal at `path` holds; also while somebody writes it.

    A missing or unreadable head is a warning, since the records themselves are still proved by their marks. Raises
    JournalDamaged with the line for anything else that is not as written, JournalError where there is no file.
    """
    reading, damage = _read(path)
    if damage is not None:
        raise damage
    return reading


def verify(path: Path) -> Verification:
    """Judge the journal at `path`, in sentences; only a file that cannot be read at all raises JournalError."""
    reading, damage = _read(path)
    if damage is not None:
        kept = f"{_records(len(reading.records))} before that are as they were written."
        return Verification(False, reading.records, (str(damage), kept, *reading.warnings))
    said = [f"{_records(len(reading.records))} are as they were written. The last mark is {reading.head.mark}."]
    if reading.torn_bytes:
        said.append(
            f"{reading.torn_bytes} bytes of an unfinished line follow: an event that was never acknowledged, "
            "or that is being written now."
        )
    said.append("Compare the last mark with the printed record: only that shows a journal written wholly anew.")
    return Verification(True, reading.records, (*said, *reading.warnings))


def _records(count: int) -> str:
    return "1 record" if count == 1 else f"{count} records"


def _read(path: Path) -> tuple[Reading, JournalDamaged | None]:
    """Records up to the first damage, and the damage."""
    # The head first: what it names was on the disk before it, also where the run goes on while we read.
    head, missing = read_head(path)
    try:
        data = posix.read_file(path, MOST)
    except FileNotFoundError:
        raise JournalError(f"There is no journal at {path}.") from None
    except OSError as error:
        raise JournalError(f"The journal {path} cannot be read: {error.strerror or error}.") from error
    reading, damage = parse_as_far_as_good(data, head)
    if damage is not None:
        damage = JournalDamaged(damage.line, damage.why, str(path))
    return replace(reading, warnings=(missing,) if missing else reading.warnings), damage


class JournalWriter:
    """Writes a journal from one thread, so that a slow disk never stops the screen.

    Events are written in the order in which they were handed over. Once the journal is broken, every event still
    waiting fails as well. An event that was handed over is written even if nobody waits for it any more. The
    thread ends with `close`, at the latest with the process, which first writes what is waiting.
    """

    def __init__(self, journal: Journal) -> None:
        """Take over `journal`; from now on nobody else may append to it."""
        self._journal = journal
        self._thread = ThreadPoolExecutor(max_workers=1, thread_name_prefix="journal")

    @property
    def path(self) -> Path:
        """Where the journal lies."""
        return self._journal.path

    @property
    def broken(self) -> str | None:
        """Why nothing can be written any more, as a sentence; None while all is well."""
        return self._journal.broken

    @property
    def head(self) -> tuple[int, str]:
        """How many records are acknowledged, and the mark of the last."""
        return self._journal.head

    def submit(self, kind: str, data: Mapping[str, object], now: Moment, version: int = 1) -> Future[Record]:
        """Hand an event over; its record comes when it is on the disk.

        The data is put into words here and now, so a later change of it has no effect. Raises JournalError where
        that is impossible or the writer was closed; the future raises JournalBroken.
        """
        event = draft(kind, data, now, version)
        try:
            return self._thread.submit(self._journal.write, event)
        except RuntimeError:
            raise JournalError(f"{self.path} has been put away; nothing more is written there.") from None

    async def append(self, kind: str, data: Mapping[str, object], now: Moment, version: int = 1) -> Record:
        """Write an event without stopping the loop; it is on the disk when this returns. Raises as `submit`."""
        waiting = asyncio.wrap_future(self.submit(kind, data, now, version))
        # Shielded: whoever waits may be cancelled, the event is written all the same. Its failure is then nobody's
        # but latched, so it is looked at here and not reported by the loop as forgotten.
        waiting.add_done_callback(lambda done: None if done.cancelled() else done.exception() and None)
        return await asyncio.shield(waiting)

    def append_now(self, kind: str, data: Mapping[str, object], now: Moment, version: int = 1) -> Record:
        """Write an event and wait for the disk. Raises as `submit`."""
        return self.submit(kind, data, now, version).result()

    def close(self) -> None:
        """Write what is waiting, end the thread and let go of the journal. May be called again."""
        self._thread.shutdown(wait=True)
        self._journal.close()

    def __enter__(self) -> JournalWriter:
        return self

    def __exit__(self, *_: object) -> None:
        self.close()
