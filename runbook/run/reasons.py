"""Why something may not be done, as data: the words are in `runbook.run.sentences`.

*Not yet* (the step is not finished), *blocked* (a limit, something unknown, something unsigned) and *refused*
(no sense here) are kept apart: a screen that says blocked all day teaches people to ignore it.
"""

from __future__ import annotations

from dataclasses import dataclass
from enum import StrEnum
from typing import Final

from runbook.answers import Margin, Need

NOT_YET: Final = "not yet"
BLOCKED: Final = "blocked"
REFUSED: Final = "refused"


class Code(StrEnum):
    """Readable name of a reason."""

    # A line is not finished.
    READING_WANTED = "reading wanted"
    READING_OUTSIDE = "reading outside its range"
    READING_OLD = "reading too old"
    NOT_SIGNED = "hold not signed"
    WITNESS_WAITED = "witness waited for"
    QUICK_NOT_DONE = "quick item not done"
    PROOF_NOT_MADE = "proof not made"
    TURNED_BACK = "turned back"
    # The gate.
    NEED_MISSING = "reading needed before"
    NEED_OUTSIDE = "reading outside the dial"
    NEED_OLD = "reading too old to lean on"
    NO_ANSWER = "nothing computed"
    NOT_VALID = "models do not reach"
    MARGIN_NOW = "margin now"
    MARGIN_AHEAD = "margin ahead"
    DISAGREES = "reading disagrees"
    CANNOT_TELL = "agreement not shown"
    CHARGE_NOT_PROVED = "charge not proved"
    HOLD_PASSED = "hold passed unsigned"
    CERTIFICATE = "certificate"
    GAP_OPEN = "gap open"
    NOT_PROVED_EMPTY = "not proved empty"
    VENT_NOT_OPEN = "vent not open since"
    # The run's own state.
    NOT_OPENED = "run not opened"
    CLOSED = "run closed"
    HALTED = "run halted"
    MAKING_SAFE = "make safe under way"
    LAST_LINE = "last line"
    NOT_TURNED = "not turned back"
    # What was typed.
    NOT_FINITE = "not a number"
    UNKNOWN_TAG = "unknown tag"
    UNKNOWN_PERSON = "unknown person"
    UNKNOWN_WORD = "unknown position"
    # Signing.
    NO_HOLD = "no hold here"
    SIGNED_ALREADY = "signed already"
    WRONG_ROLE = "wrong role"
    WRONG_NUMBER = "wrong number"
    PERFORMED = "performed it"
    OWN_WANTED = "own blind reading wanted"
    OTHER_WANTED = "other person's reading wanted"
    SIGN_OUTSIDE = "reading for signing outside"
    DIFFER = "readings differ"
    # Witness, quick sequence, proofs, make safe, gap, end.
    NO_WITNESS = "no witness point here"
    CAME_ALREADY = "witness came already"
    NO_QUICK = "no quick sequence here"
    WRONG_ITEM = "items in order"
    NO_EMPTY = "no proofs here"
    WRONG_PROOF = "proofs in order"
    VENT_NOT_STATED_OPEN = "vent not stated open"
    WALL_WANTED = "wall readings wanted"
    WALL_COLD = "wall too cold"
    WALL_SHORT = "wall not long enough"
    WALL_OLD = "wall reading too old"
    VENT_NOT_SHUT = "vent not shut"
    SHUT_SHORT = "vent not shut long enough"
    ISOLATOR_NOT_OPEN = "isolator not open"
    FIRST_WANTED = "first low reading wanted"
    SECOND_WANTED = "second low reading wanted"
    GAUGE_RISES = "low gauge rises"
    NO_ACT = "no such act"
    NO_GAP = "no gap open"
    NOT_FINISHED = "run not finished"
    ACTS_LEFT = "acts of make safe left"


@dataclass(frozen=True, slots=True)
class Reason:
    """One reason, with its figures."""

    kind: str
    """'not yet', 'blocked' or 'refused'."""
    code: Code
    tag: str = ""
    """The instrument, valve or certificate it is about."""
    line: int | None = None
    """The line it is about, where that is not the present one."""
    margin: Margin | None = None
    need: Need | None = None
    seconds: float | None = None
    """How long is left, or how old it is [s]."""
    allowed_s: float | None = None
    """How old it may be, or how long it has to be [s]."""
    value: float | None = None
    """What was read, or by how much [SI]."""
    limit: float | None = None
    """What it is held against [SI]."""
    said: str = ""
    """A name, role, position or clause that belongs to it, as given."""


@dataclass(frozen=True, slots=True)
class Refused:
    """An act that does not become an event."""

    reasons: tuple[Reason, ...]
    """Never empty; the first is the one to show where there is room for one."""

    @property
    def kind(self) -> str:
        """Of the first reason."""
        return self.reasons[0].kind


def refused(code: Code, tag: str = "", said: str = "") -> Refused:
    """A single reason of kind 'refused'."""
    return Refused((Reason(REFUSED, code, tag=tag, said=said),))
