"""The form of a journal: records to bytes and back, without files.

A journal is UTF-8 text, one record a line, each line one JSON object with these keys in this order and no spaces:

    {"n":1,"v":1,"event":"...","at":"2031-03-02T14:32:07.123Z","boot":812.25,"data":{...},"mark":"<64 hex>"}

`n` counts from 1; `v` is the version of that kind of event; `at` is the wall clock, `boot` [s] the elapsed one;
`data` has its keys sorted. Non-finite numbers do not occur.

**Mark.** SHA-256, in small hex, of the mark of the line before (64 zeros for the first line) followed by this
line up to, not including, `,"mark":`. For the line in the file `line` and the previous mark in `$before`:

    (printf %s "$before"; head -c -76 line) | sha256sum

**Head.** Beside the journal lies `<name>.head`, one line of fixed length that names how many records have been
acknowledged and the mark of the last. Its check is the mark of its own text after 64 zeros:

    {"format":"journal 1","count":          3,"last":"<64 hex>","mark":"<64 hex>"}

What this detects: a changed byte, a missing, added or moved line, and a tail that was cut off. What it cannot:
somebody who writes the whole journal and its head anew. Against that stands only a mark kept elsewhere, on paper.

Only an unterminated last line beyond what the head names may be dropped: its event was never acknowledged.
Everything else that is wrong is damage, named by its line; nothing is mended here.
"""

from __future__ import annotations

import hashlib
import json
import re
from collections.abc import Mapping
from dataclasses import dataclass, field
from typing import Final

from runbook.errors import JournalDamaged, JournalError
from runbook.run.clock import Moment, utc_text, utc_wall

NO_MARK: Final = "0" * 64
"""Stands before the first record."""

_SEAL: Final = re.compile(rb',"mark":"([0-9a-f]{64})"}')
_SEAL_LENGTH: Final = len(b',"mark":""}') + 64
_KEYS: Final = ["n", "v", "event", "at", "boot", "data"]


@dataclass(frozen=True, slots=True)
class Draft:
    """An event ready to be written: its data is text already, so nobody can change it any more."""

    kind: str
    """What happened; never empty."""
    version: int
    """Of this kind of event, from 1."""
    at: str
    """UTC, as `utc_text` gives it."""
    boot: float
    """[s] elapsed; finite."""
    data: str
    """Canonical JSON of an object."""


@dataclass(frozen=True, slots=True)
class Record:
    """One event as it stands in the journal; what `append` returns equals what is read back later."""

    n: int
    """Its place in the journal, from 1, without gaps."""
    v: int
    """Version of this kind of event, from 1."""
    kind: str
    """What happened."""
    at: str
    """UTC, to 1 ms, as `utc_text` gives it."""
    boot: float
    """[s] elapsed when it happened, on the clock of the machine that wrote it."""
    data: dict[str, object] = field(hash=False)
    """What JSON can hold: lists, never tuples; keys are text. Treat as read-only."""
    mark: str
    """64 hex digits that depend on this record and on all before it."""

    @property
    def moment(self) -> Moment:
        """When it happened, the wall clock to 1 ms: live and replayed runs see the same number."""
        return Moment(boot=self.boot, wall=utc_wall(self.at))


@dataclass(frozen=True, slots=True)
class Head:
    """How far a journal has been acknowledged."""

    count: int = 0
    """Records."""
    mark: str = NO_MARK
    """Of the last of them."""


@dataclass(frozen=True, slots=True)
class Reading:
    """What a journal holds."""

    records: tuple[Record, ...]
    """All whole records, in order; every mark was checked."""
    torn_bytes: int
    """[byte] of an unterminated last line, which was never acknowledged, or is being written just now."""
    head: Head
    """Count and mark of `records`, computed and not read."""
    warnings: tuple[str, ...] = ()
    """Sentences about what is missing without being damage, such as the head file."""


def draft(kind: str, data: Mapping[str, object], now: Moment, version: int = 1) -> Draft:
    """Make an event ready to be written; JournalError where it cannot be put into JSON, nothing is lost by that."""
    if not kind or version < 1:
        raise JournalError(f"An event needs a kind and a version from 1, not '{kind}' {version}.")
    try:
        return Draft(kind, version, utc_text(now.wall), float(_json(now.boot)), _json(dict(data)))
    except (TypeError, ValueError, RecursionError) as error:
        raise JournalError(f"The event '{kind}' cannot be written down: {error}. Nothing was written.") from error


def seal(before: str, body: bytes) -> bytes:
    """Close a JSON object, given without its last brace, by the mark that it gets after the mark `before`."""
    return b'%b,"mark":"%b"}\n' % (body, _mark(before, body).encode())


def line_of(draft: Draft, after: Head) -> tuple[Record, bytes]:
    """The record of a draft that comes after `after`, and its line; JournalError where it would not read back.

    The record is read from the line, so that a live run and its replay work on the same data.
    """
    body = _body(after.count + 1, draft.version, draft.kind, draft.at, draft.boot, draft.data)
    line = seal(after.mark, body)
    try:
        return _record(line[:-1], after), line
    except ValueError as error:
        raise JournalError(f"The event '{draft.kind}' was not written: {error}.") from error


def head_line(head: Head) -> bytes:
    """The head file's bytes; always of the same length, so that it can be rewritten in place on a full disk."""
    return seal(NO_MARK, b'{"format":"journal 1","count":%11d,"last":"%b"' % (head.count, head.mark.encode()))


def parse_head(data: bytes) -> Head | None:
    """What a head file says; None where it is not one, or is damaged itself."""
    try:
        found = json.loads(data)
        head = Head(int(found["count"]), str(found["last"]))
        return head if head.count >= 0 and head_line(head) == data else None
    except (ValueError, TypeError, KeyError, OverflowError, RecursionError):
        return None


def parse_bytes(data: bytes, head: Head | None = None) -> Reading:
    """All records of a journal's bytes, held against its head where there is one.

    Raises JournalDamaged with the line and the reason for anything wrong but an unterminated last line.
    """
    reading, damage = parse_as_far_as_good(data, head)
    if damage is not None:
        raise damage
    return reading


def parse_as_far_as_good(data: bytes, head: Head | None = None) -> tuple[Reading, JournalDamaged | None]:
    """The records before the first damage, and that damage; the head is asked once all lines are good."""
    *lines, torn = data.split(b"\n")
    records: list[Record] = []
    reached = Head()
    damage: JournalDamaged | None = None
    for line in lines:
        try:
            records.append(_record(line, reached))
        except ValueError as error:
            damage = JournalDamaged(len(records) + 1, str(error))
            break
        reached = Head(len(records), records[-1].mark)
    if damage is None and head is not None:
        damage = _against(head, records, len(torn))
    warnings: tuple[str, ...] = ()
    if damage is None and head is not None and len(records) > head.count + 1:
        warnings = (f"{len(records)} records are there, {head.count} were acknowledged: the head is an older one.",)
    return Reading(tuple(records), len(torn) if damage is None else 0, reached, warnings), damage


def _against(head: Head, records: list[Record], torn: int) -> JournalDamaged | None:
    """What is wrong between the head and the records, if anything; the head may lag, but never lead."""
    if head.count > len(records):
        rest = f", and {torn} bytes of an unfinished line" if torn else ""
        return JournalDamaged(
            len(records) + 1,
            f"the end was cut off: {head.count} records were acknowledged, {len(records)} are there{rest}",
        )
    if head.count and records[head.count - 1].mark != head.mark:
        return JournalDamaged(head.count, "this record is not the one that was acknowledged: it was written anew")
    return None


def _record(line: bytes, after: Head) -> Record:
    """The record of a line without its line end; ValueError with a clause saying what is wrong with it."""
    body, ending = line[:-_SEAL_LENGTH], _SEAL.fullmatch(line[-_SEAL_LENGTH:])
    if ending is None:
        raise ValueError("it does not end in a mark")
    mark = _mark(after.mark, body)
    if mark.encode() != ending[1]:
        raise ValueError("its mark does not fit: this line, or the order of lines, was changed")
    # Whoever can compute marks can write anything; what follows keeps out what this program would not have written,
    # such as a key given twice, which two readers could read in two ways.
    try:
        found = json.loads(body + b"}")
        if not isinstance(found, dict) or list(found) != _KEYS:
            raise ValueError("it has other entries than a record")
        n, v, kind, at, boot, data = found.values()
        if not (_whole(n) and _whole(v) and kind and isinstance(kind, str) and isinstance(at, str)):
            raise ValueError("its number, version, event or time is none")
        if not (isinstance(boot, float) and isinstance(data, dict)):
            raise ValueError("its elapsed time or its data is none")
        utc_wall(at)
        if n != after.count + 1:
            raise ValueError(f"it is numbered {n} and should be {after.count + 1}")
        if _body(n, v, kind, at, boot, _json(data)) != body:
            raise ValueError("it is not written in the one form that records have")
    except RecursionError:
        raise ValueError("it is nested too deeply") from None
    return Record(n, v, kind, at, boot, data, mark)


def _whole(value: object) -> bool:
    return type(value) is int and value >= 1


def _mark(before: str, body: bytes) -> str:
    return hashlib.sha256(before.encode() + body).hexdigest()


def _body(n: int, v: int, kind: str, at: str, boot: float, data: str) -> bytes:
    """A record without its mark and without its last brace."""
    text = f'{{"n":{n},"v":{v},"event":{_json(kind)},"at":{_json(at)},"boot":{_json(boot)},"data":{data}'
    return text.encode()


def _json(value: object) -> str:
    """Canonical JSON: sorted keys, no spaces, text as it is, no number that is not finite.

    A lone surrogate, which a terminal can deliver for a byte that is no UTF-8, becomes the escape that JSON has
    for it: backslashreplace happens to write exactly that. It is read back once, because two of them in a row
    can be one character then.
    """
    text = _dump(value)
    try:
        text.encode()
    except UnicodeEncodeError:
        again = json.loads(text.encode(errors="backslashreplace"))
        return _dump(again).encode(errors="backslashreplace").decode()
    return text


_dump: Final = json.JSONEncoder(sort_keys=True, separators=(",", ":"), allow_nan=False, ensure_ascii=False).encode
