"""Every dated proof of an apparatus, judged on one day.

An instrument or device whose date is not known is not valid. A date in the future proves nothing yet.
"""

from __future__ import annotations

import datetime
from collections.abc import Iterable

from runbook.answers import Certificate
from runbook.apparatus.model import Apparatus
from runbook.quantities import NOT_KNOWN, NotKnown


def certificates(apparatus: Apparatus, on: datetime.date, cycles_in_log: int = 0) -> tuple[Certificate, ...]:
    """All of them, in the order of the file. cycles_in_log: pressure cycles since the file's own count.

    A proof is valid up to and including its last day.
    """
    found = [_dated(apparatus.tag, "approval of the figures", apparatus.approved.date, datetime.date.max, on)]
    proof = apparatus.proof_test
    if isinstance(proof, NotKnown):
        found.append(_unknown(apparatus.tag, "proof test"))
    else:
        found.append(_dated(apparatus.tag, "proof test", proof.done, proof.valid_until, on))
    found += _cycles(apparatus, cycles_in_log)
    found += [_dated(d.tag, d.kind, d.fitted, d.valid_until, on) for d in apparatus.relief]
    found += _cut_out(apparatus, on)
    found += [_dated(i.tag, f"{i.reads} instrument", None, i.valid_until, on) for i in apparatus.instruments]
    return tuple(found)


def _dated(
    tag: str, what: str, since: datetime.date | None, until: datetime.date | NotKnown, on: datetime.date
) -> Certificate:
    if isinstance(until, NotKnown):
        return _unknown(tag, what)
    last = "no end stated" if until == datetime.date.max else until.isoformat()
    if since is not None and since > on:
        return Certificate(tag, f"{what} of {since.isoformat()}", "not yet valid", last)
    return Certificate(tag, what, "expired" if until < on else "valid", last)


def _unknown(tag: str, what: str) -> Certificate:
    return Certificate(tag, what, NOT_KNOWN.value, NOT_KNOWN.value)


def _cycles(apparatus: Apparatus, in_log: int) -> Iterable[Certificate]:
    cycles = apparatus.cycles
    if isinstance(cycles, NotKnown):
        yield _unknown(apparatus.tag, "pressure cycles")
        return
    used = cycles.before_this_log + in_log
    state = "expired" if used >= cycles.allowed else "valid"
    yield Certificate(apparatus.tag, f"{used} of {cycles.allowed} pressure cycles", state, "no end stated")


def _cut_out(apparatus: Apparatus, on: datetime.date) -> Iterable[Certificate]:
    source = apparatus.heat_source
    if source is None or source.cut_out is None:
        return
    if source.tested is None:
        yield _unknown(source.tag, "test of the cut-out")
        return
    yield _dated(source.tag, "test of the cut-out", source.tested, datetime.date.max, on)
