"""Line mode: what a typed line means. Turns words into acts; decides nothing."""

from __future__ import annotations

from dataclasses import dataclass

from runbook.answers import Instrument, LineKind, Plan
from runbook.apparatus.dial import DIMENSION
from runbook.errors import InputUnusable
from runbook.quantities import Level, reading_from_typed
from runbook.run.acts import (
    Act,
    Attend,
    Finish,
    GoOn,
    MakeSafe,
    Note,
    Prove,
    QuickDone,
    Read,
    SafeActDone,
    SetSource,
    SetValve,
    Sign,
    TakeUp,
)
from runbook.run.gate import PROOFS
from runbook.run.standing import Standing
from runbook.run.state import Ledger


@dataclass(frozen=True, slots=True)
class Wish:
    """What a line asks for."""

    act: Act
    echo: str = ""
    """Shown in full and confirmed before it counts; empty: at once."""


def wish(plan: Plan, ledger: Ledger, standing: Standing, by: str, text: str) -> Wish:
    """The act of a typed line. Raises InputUnusable with what can be typed instead."""
    words = text.split()
    if not words:
        return Wish(Finish() if _ended(plan, standing) else GoOn())
    first = words[0].casefold()
    if first in ("safe", "note", "sign", "came", "done", "up", "valve", "heat", "blind"):
        return _word(plan, ledger, standing, by, first, words[1:], text)
    return reading(plan, standing, by, words, blind=False)


def _word(plan: Plan, ledger: Ledger, standing: Standing, by: str, first: str, rest: list[str], text: str) -> Wish:
    match first:
        case "safe":
            return Wish(MakeSafe(rest[0].casefold() if rest else ""))
        case "note":
            return Wish(Note(text.split(maxsplit=1)[1] if rest else "", by))
        case "sign":
            if len(rest) < 2:
                raise InputUnusable("write 'sign', the person's name and their signing number")
            return Wish(Sign(_person(ledger, " ".join(rest[:-1])), rest[-1]))
        case "came":
            return Wish(Attend(_person(ledger, " ".join(rest))))
        case "up":
            return Wish(TakeUp())
        case "done":
            return Wish(_done(ledger, standing))
        case "valve":
            if len(rest) != 2:
                raise InputUnusable("write for example 'valve V2 open', 'valve V2 shut' or 'valve V2 ?'")
            return Wish(SetValve(rest[0], _state(rest[1])))
        case "heat":
            return Wish(SetSource(_state(rest[0] if rest else "?")))
        case _:
            if len(rest) < 2:
                raise InputUnusable("write 'blind', the signer's name and the reading")
            return reading(plan, standing, _person(ledger, " ".join(rest[:-1])), [rest[-1]], blind=True)


def reading(plan: Plan, standing: Standing, by: str, words: list[str], *, blind: bool) -> Wish:
    """A reading: 'PG1 62.6 bar(g)', or a value alone for the one that is wanted. Raises InputUnusable."""
    tags = {i.tag.casefold(): i for i in plan.instruments}
    if words[0].casefold() in tags and len(words) > 1:
        instrument, value = tags[words[0].casefold()], " ".join(words[1:])
    else:
        instrument, value = _wanted(plan, standing, blind), " ".join(words)
    typed = reading_from_typed(value, instrument.unit, DIMENSION[instrument.reads])
    amount = typed.value.absolute(plan.barometer) if isinstance(typed.value, Level) else typed.value
    return Wish(Read(instrument.tag, amount, value, f"{instrument.tag} {typed.echo}", by, blind), typed.echo)


def _wanted(plan: Plan, standing: Standing, blind: bool) -> Instrument:
    found = [w.need.tag for w in standing.wanted if w.blind or not blind]
    if not found:
        raise InputUnusable("nothing is wanted just now: write the instrument's tag before the value; 'help' lists all")
    tag = found[0]
    return next(i for i in plan.instruments if i.tag == tag)


def _done(ledger: Ledger, standing: Standing) -> Act:
    if ledger.safe is not None:
        left = [i for i in range(len(ledger.safe.acts)) if i not in ledger.safe_done]
        return SafeActDone(left[0]) if left else Finish()
    line = standing.line
    if line is not None and line.kind is LineKind.EMPTY:
        made = len(ledger.entry.proofs)
        return Prove(PROOFS[min(made, len(PROOFS) - 1)])
    return QuickDone(len(ledger.entry.quick))


def _ended(plan: Plan, standing: Standing) -> bool:
    last = standing.index >= len(plan.lines) - 1 and standing.permission == "yes"
    return last or (standing.making_safe and not standing.instruction)


def _person(ledger: Ledger, given: str) -> str:
    """A person by name, by the beginning of it, or by role. Raises InputUnusable."""
    found = [
        p.name
        for p in ledger.people
        if p.name.casefold().startswith(given.casefold()) or given.casefold() in (r.casefold() for r in p.roles)
    ]
    if len(found) != 1:
        raise InputUnusable(f"'{given}' is not one person here: {', '.join(p.name for p in ledger.people)}")
    return found[0]


def _state(given: str) -> str:
    return "do not know" if given in ("?", "unknown") else given.casefold()
