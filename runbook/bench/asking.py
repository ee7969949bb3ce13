"""The band ON?: whether one may go on, what stands in the way, what clears it, and the one key that helps.

What others have to do before a signature counts, and what a proof of empty still wants, go before the plain statement
that neither has been made: a person can act on the one and not on the other.
"""

from __future__ import annotations

from typing import Final

from runbook.answers import LineKind
from runbook.bench.view import AskView
from runbook.run.conductor import Conductor
from runbook.run.reasons import Code, Reason
from runbook.run.sentences import (
    next_words,
    permission_words,
    reasons_words,
    unknown_words,
    unstated_words,
    wanted_words,
)
from runbook.run.standing import ProofState, Standing

_STATES: Final = {"yes": "yes", "finished": "yes", "not yet": "not yet"}
"""Permission -> how it is painted; everything else is painted as blocked."""
_TAG: Final = "\0"
"""Stands for the instrument while sentences are compared."""
PROOFS: Final = {
    "vent": "the vent is open and proved clear",
    "wall": "the coldest wall has been above -40 °C for 10 min",
    "low gauge": "the vent was shut for 10 min and the low gauge rose less than 0.1 bar",
    "left open": "the vent is open again, left open and tagged",
}
"""Proof of empty -> what is stated with it."""
_VALVES: Final = (Code.VENT_NOT_STATED_OPEN, Code.VENT_NOT_SHUT, Code.ISOLATOR_NOT_OPEN)
"""What a proof wants that is stated and not read."""


def ask_view(desk: Conductor, standing: Standing) -> AskView:
    """The band ON? as it stands now."""
    word = permission_words(standing).partition(" ")[2]
    asked = {w.need.tag for w in standing.wanted}
    # A reading that is wanted is said with its time, not twice.
    reasons = tuple(r for r in standing.reasons if r.code is not Code.READING_WANTED or r.tag not in asked)
    if first := _before_signing(standing):
        # The signature comes after these.
        reasons = (*first, *(r for r in reasons if r.code is not Code.NOT_SIGNED))
    if (proof := due_proof(standing)) is not None and proof.missing:
        # What the proof that is due still wants says more than that it has not been made.
        reasons = (*proof.missing[:1], *(r for r in reasons if r.code is not Code.PROOF_NOT_MADE))
    items = list(reasons_words(desk.plan, desk.ledger, reasons))
    if standing.permission in ("yes", "blocked") and not standing.turned_back:
        items.insert(0, (next_words(standing), ""))
    if unstated := unstated_words(standing):
        # Where it blocks, the margins behind the other reasons are the worst of all positions.
        items.insert(1 if standing.permission == "blocked" else len(items), (unstated, ""))
    if unknown := unknown_words(standing):
        items.append((unknown, ""))
    if standing.permission in ("yes", "not yet"):
        items += [(words, "") for words in _wanted(standing)]
    return AskView(_STATES.get(standing.permission, "blocked"), word, _each_once(items), _key(standing))


def _before_signing(standing: Standing) -> tuple[Reason, ...]:
    """What others have to do before a signature counts; the signer's own reading is asked for where they sign."""
    hold = standing.hold
    if hold is None or hold.signed_by:
        return ()
    return tuple(reason for reason in hold.missing if reason.code is not Code.OWN_WANTED)


def _wanted(standing: Standing) -> tuple[str, ...]:
    """What is to be read and when; instruments that are due together in one sentence."""
    grouped: dict[str, list[str]] = {}
    for one in standing.wanted:
        grouped.setdefault(wanted_words(one).replace(one.need.tag, _TAG), []).append(one.need.tag)
    return tuple(words.replace(_TAG, " and ".join(tags)) for words, tags in grouped.items())


def _each_once(items: list[tuple[str, str]]) -> tuple[tuple[str, str], ...]:
    """No sentence twice: several reasons are often cleared by the same act."""
    said: set[str] = set()
    found = []
    for what, clears in items:
        found.append(("" if what in said else what, "" if clears in said else clears))
        said |= {what, clears}
    return tuple(item for item in found if any(item))


def _key(standing: Standing) -> str:
    """The key that goes on from here."""
    line = standing.line
    if standing.permission == "yes":
        return "Enter"
    if standing.permission in ("halted", "make safe"):
        return "F9 make safe"
    if standing.gap_open:
        return "answer four questions"
    if standing.take_up:
        return "F8 state"
    if (proof := due_proof(standing)) is not None:
        if any(reason.code in _VALVES for reason in proof.missing[:1]):
            return "F8 state"
        if not proof.missing:
            return "F8 confirm"
    if _before_signing(standing):
        return "F3 read"
    if line is not None and line.kind is LineKind.HOLD and not (standing.hold and standing.hold.signed_by):
        return "F4 sign hold"
    if standing.witness is not None:
        return "F4 is here"
    if standing.permission == "blocked" and standing.unstated:
        return "F8 state"
    if standing.wanted:
        return "F3 read"
    if standing.permission == "blocked":
        # At rest there is time for the reading that clears it, for instance on a scale that falls.
        return "F3 read" if standing.left_alone.known and standing.left_alone.at_rest else "F9 make safe"
    return ""


def due_proof(standing: Standing) -> ProofState | None:
    """The proof of empty that comes next; None where none is asked for, or all are made."""
    return next((proof for proof in standing.proofs if not proof.done), None)
