"""What stands before a run: who takes part, what is in the vessel, and which runs are unfinished."""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import dataclass

from runbook.answers import BindRequest, ChargeBox
from runbook.errors import InputUnusable
from runbook.run.engine import Bound
from runbook.run.events import Person, RunOpened, WentOn, event_from_plain
from runbook.run.journal import Record
from runbook.run.ledger import Ledger, fold
from runbook.run.logbook import Logbook, RunFile
from runbook.run.questions import closed
from runbook.run.signing import number_sha256


@dataclass(frozen=True, slots=True)
class Participant:
    """Somebody at the briefing."""

    name: str
    roles: tuple[str, ...]
    number: str
    """Their own signing number, which never leaves this process."""


@dataclass(frozen=True, slots=True)
class ChargeRecord:
    """What a vessel holds, from the journals of its runs."""

    box: ChargeBox
    fluid: str
    at: str
    """UTC of the last event that said so."""
    procedure: str
    """Of the run that left it so."""


def played(roles: tuple[str, ...]) -> tuple[Participant, ...]:
    """The people of a rehearsal: the one who sits here, and a played one for every other role."""
    return tuple(
        Participant("You" if n == 0 else f"{role} (played)", (role,), str(111 * (n + 1)))
        for n, role in enumerate(roles)
    )


def people(participants: Iterable[Participant], roles: tuple[str, ...]) -> tuple[Person, ...]:
    """The people of a run. Raises InputUnusable: a role nobody or two people have, a missing name or number."""
    given = tuple(participants)
    names = [p.name.strip() for p in given]
    if not all(names) or len(set(names)) != len(names):
        raise InputUnusable("each person needs a name, and no two the same")
    for one in given:
        if not one.number.isdigit() or len(one.number) < 3:
            raise InputUnusable(f"{one.name} needs a signing number of at least three digits")
    for role in roles:
        having = [p.name for p in given if role in p.roles]
        if not having:
            raise InputUnusable(f"nobody is {role}: name a person for it")
        if len(having) > 1:
            raise InputUnusable(f"{' and '.join(having)} cannot both be {role}: one person a role")
    return tuple(Person(p.name.strip(), p.roles, number_sha256(p.name.strip(), p.number)) for p in given)


def run_opened(bound: Bound, who: tuple[Person, ...], request: BindRequest, rehearsal: bool) -> RunOpened:
    """The first event of a run."""
    return RunOpened(
        plan=bound.plan,
        people=who,
        procedure_text=bound.procedure_text,
        apparatus_text=bound.apparatus_text,
        versions=bound.versions,
        rehearsal=rehearsal,
        part=request.part,
        on=request.on,
        request=request,
    )


@dataclass(frozen=True, slots=True)
class _Vessel:
    """Folded over the runs of one vessel."""

    record: ChargeRecord | None = None
    ledger: Ledger | None = None
    sealed: bool = False


def charge_record(logbook: Logbook, vessel: str, skipped: list[RunFile]) -> ChargeRecord | None:
    """What the vessel holds; None: nothing, as far as the journals say.

    Damaged journals are put into `skipped`: whoever leans on the answer must show them. Raises JournalError.
    """
    last = logbook.history(vessel, _folded, _Vessel(), skipped)
    return last.record


def _folded(so_far: _Vessel, record: Record) -> _Vessel:
    event = event_from_plain(record.kind, record.data)
    ledger = Ledger.start() if isinstance(event, RunOpened) or so_far.ledger is None else so_far.ledger
    sealed = so_far.sealed
    if isinstance(event, RunOpened):
        sealed = event.plan.charge is not None
    ledger = fold(ledger, event, record.moment)
    if isinstance(event, WentOn) and ledger.present is not None:
        sealed = sealed or ledger.present.seals
    return _Vessel(_after(so_far.record, ledger, sealed, record), ledger, sealed)


def _after(before: ChargeRecord | None, ledger: Ledger, sealed: bool, record: Record) -> ChargeRecord | None:
    """Proved empty: nothing. Sealed: what the last answer said. A vent opened since proves nothing."""
    if ledger.empty_proved:
        return None
    answer = ledger.last_answer
    if not sealed or ledger.plan is None or answer is None or answer.charge is None:
        return before
    if before is not None and (closed(ledger) == "open" or "gas left" in answer.charge.by):
        # Letting down has begun: until all four proofs are made, what was sealed in may still be there.
        return before
    return ChargeRecord(answer.charge, ledger.plan.fluid, record.at, ledger.plan.procedure)


def unfinished(runs: Iterable[RunFile]) -> tuple[RunFile, ...]:
    """Runs that can be taken up again: begun, readable, without a last event."""
    return tuple(r for r in runs if not r.closed and not r.damaged and r.count > 0)
