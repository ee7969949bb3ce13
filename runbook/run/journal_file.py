"""The one writer of a journal: every event is on the disk before anybody is told so.

Refuses to go on after any doubt. A write or a sync that failed may have left anything on the disk, and
asking the disk again can be answered with a false yes, because systems mark pages clean that they failed to
write. So the first failure latches, and each later append is refused.
"""

from __future__ import annotations

import contextlib
import os
from collections.abc import Mapping
from dataclasses import replace
from pathlib import Path
from typing import Final

from runbook.errors import JournalBroken, JournalDamaged, JournalError, JournalLocked
from runbook.run import posix
from runbook.run.clock import Moment
from runbook.run.journal_lines import (
    Draft,
    Head,
    Reading,
    Record,
    draft,
    head_line,
    line_of,
    parse_bytes,
    parse_head,
)

LEAST_FREE: Final = 5_000_000
"""[byte] free on the disk for a run to be begun: a long day's journal takes about one."""

MOST: Final = 500_000_000
"""[byte] of a journal that is still read; a long day's takes about one million."""


def head_path(path: Path) -> Path:
    """Where the head of a journal lies: beside it."""
    return path.with_name(path.name + ".head")


def read_head(path: Path) -> tuple[Head | None, str]:
    """The head of the journal at `path`, and a sentence where there is none that can be read."""
    place = head_path(path)
    try:
        head = parse_head(posix.read_file(place, MOST))
    except FileNotFoundError:
        return None, f"{place} is missing: nobody can tell whether the end of the journal was cut off."
    except OSError as error:
        return None, f"{place} cannot be read ({error.strerror or error}): a cut end would go unnoticed."
    if head is None:
        return None, f"{place} is damaged: nobody can tell whether the end of the journal was cut off."
    return head, ""


class Journal:
    """The durable record of one run, open for appending by one writer."""

    def __init__(self, path: Path, descriptor: int, head_descriptor: int, size: int, head: Head) -> None:
        """Take over open files that are locked and checked; use `create` or `open`."""
        self.path: Final = path
        """Where it lies."""
        self.torn = 0
        """[byte] of an unfinished last line that `open` dropped; its event was never acknowledged."""
        self.warnings: tuple[str, ...] = ()
        """Sentences that `open` has to tell, for instance that the head file was missing and was made anew."""
        self._descriptor = descriptor
        self._head_descriptor = head_descriptor
        self._open_files = [descriptor, head_descriptor]
        self._size = size
        self._head = head
        self._broken: str | None = None

    @classmethod
    def create(cls, path: Path) -> Journal:
        """Begin a journal where there is none, locked for us and on the disk.

        Raises JournalError where it exists already, the folder is none, or the disk is nearly full.
        """
        try:
            if head_path(path).exists() and not path.exists():
                raise JournalError(f"{head_path(path)} lies there without its journal: look for it, begin another.")
            if posix.free_bytes(path.parent) < LEAST_FREE:
                raise JournalError(
                    f"The disk of {path.parent} has less than {LEAST_FREE // 1_000_000} MB free: "
                    "make room before the run is begun."
                )
            descriptor = os.open(path, posix.APPEND_NEW, 0o644)
        except FileExistsError:
            raise JournalError(f"{path} exists already: open it, or begin another one.") from None
        except OSError as error:
            raise _cannot("begun", path, error) from error
        return cls._settle(path, descriptor, made=True)[0]

    @classmethod
    def open(cls, path: Path) -> tuple[Journal, tuple[Record, ...]]:
        """Go on with a journal; an unfinished last line is cut off, which `torn` tells.

        Raises JournalLocked where somebody else has it open, JournalDamaged where it is not what was written
        (then nothing was changed), JournalError where it cannot be opened.
        """
        try:
            if not path.is_file():
                raise JournalError(f"There is no journal at {path}.")
            descriptor = os.open(path, posix.APPEND_OLD)
        except OSError as error:
            raise _cannot("opened", path, error) from error
        return cls._settle(path, descriptor, made=False)

    @classmethod
    def _settle(cls, path: Path, descriptor: int, *, made: bool) -> tuple[Journal, tuple[Record, ...]]:
        """Lock, read, mend the torn end and bring the head up to date; every descriptor closed on failure."""
        with contextlib.ExitStack() as undo:
            if made:
                # Nothing was written yet, and a leftover would be listed as a run. Registered first, hence done
                # last: Windows removes no open file.
                undo.callback(path.unlink, missing_ok=True)
                undo.callback(head_path(path).unlink, missing_ok=True)
            undo.callback(os.close, descriptor)
            try:
                if not posix.lock(descriptor):
                    raise JournalLocked(f"Somebody else has {path} open: it can be read here, not continued.")
                reading, good = _read_locked(path, descriptor, made)
                head_descriptor = os.open(head_path(path), posix.REWRITE, 0o644)
                undo.callback(os.close, head_descriptor)
                if reading.torn_bytes:
                    os.ftruncate(descriptor, good)
                posix.sync(descriptor)
                os.ftruncate(head_descriptor, len(head_line(Head())))
                journal = cls(path, descriptor, head_descriptor, good, reading.head)
                journal._write_head(reading.head)
                posix.sync_folder(path.parent)
            except OSError as error:
                raise _cannot("begun" if made else "opened", path, error) from error
            undo.pop_all()
        journal.torn, journal.warnings = reading.torn_bytes, reading.warnings
        return journal, reading.records

    @property
    def broken(self) -> str | None:
        """Why nothing can be written any more, as a sentence; None while all is well."""
        return self._broken

    @property
    def head(self) -> tuple[int, str]:
        """How many records are acknowledged, and the mark of the last: what a person copies onto paper."""
        return self._head.count, self._head.mark

    def append(self, kind: str, data: Mapping[str, object], now: Moment, version: int = 1) -> Record:
        """Write an event; when this returns, it is on the disk.

        Raises JournalBroken where that is in doubt, now and from then on; JournalError where the event cannot
        be put into words that read back the same, with nothing written and nothing latched.
        """
        return self.write(draft(kind, data, now, version))

    def write(self, event: Draft) -> Record:
        """Write a prepared event, as `append` does."""
        if self._broken is not None:
            raise JournalBroken(self._broken)
        record, line = line_of(event, self._head)
        try:
            written = os.write(self._descriptor, line)
            if written != len(line):
                raise OSError(f"only {written} of {len(line)} bytes were written")
            posix.sync(self._descriptor)
            if not posix.still_there(self._descriptor, self.path, self._size + written):
                raise OSError("the file was deleted, replaced or changed by somebody else")
            self._write_head(Head(record.n, record.mark))
        except OSError as error:
            raise JournalBroken(self._latch(error)) from error
        except BaseException as interruption:
            # Whatever stopped us between the bytes and the head leaves the same doubt.
            self._latch(interruption)
            raise
        self._size += written
        self._head = Head(record.n, record.mark)
        return record

    def _write_head(self, head: Head) -> None:
        """Rewrite the head in place, synced; never by a second file, which a full disk would refuse."""
        line = head_line(head)
        if posix.write_at_start(self._head_descriptor, line) != len(line):
            raise OSError("the head of the journal was written in part only")
        posix.sync(self._head_descriptor)
        if not posix.still_there(self._head_descriptor, head_path(self.path), len(line)):
            raise OSError("the head of the journal was deleted, replaced or changed by somebody else")

    def _latch(self, error: BaseException) -> str:
        why = getattr(error, "strerror", None) or str(error) or type(error).__name__
        self._broken = (
            f"Record {self._head.count + 1} of {self.path} may not be on the disk: {why}. "
            "Nothing more is written there; the run is halted."
        )
        return self._broken

    def close(self) -> None:
        """Let go of the files and of the lock; appending is refused from then on. May be called again."""
        if self._broken is None:
            self._broken = f"{self.path} has been put away; nothing more is written there."
        with contextlib.suppress(OSError):
            while self._open_files:
                os.close(self._open_files.pop())

    def __enter__(self) -> Journal:
        return self

    def __exit__(self, *_: object) -> None:
        self.close()


def _read_locked(path: Path, descriptor: int, made: bool) -> tuple[Reading, int]:
    """What the locked file holds, and how many of its bytes [byte] are whole lines; JournalDamaged names it."""
    size = os.fstat(descriptor).st_size
    if not posix.still_there(descriptor, path, size):
        raise OSError("it was replaced while it was being opened")
    if size > MOST:
        raise OSError(f"it is larger than {MOST // 1_000_000} MB")
    head, missing = (None, "") if made else read_head(path)
    try:
        reading = parse_bytes(posix.read_all(descriptor), head)
    except JournalDamaged as damage:
        raise JournalDamaged(damage.line, damage.why, str(path)) from None
    warnings = (missing,) if missing else reading.warnings
    return replace(reading, warnings=warnings), size - reading.torn_bytes


def _cannot(done: str, path: Path, error: OSError) -> JournalError:
    return JournalError(f"The journal {path} cannot be {done}: {error.strerror or error}.")
