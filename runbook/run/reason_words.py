"""A reason in words: the limit, the number, the corner, and what clears it. Plain text, whole sentences.

What clears a reason is never that somebody overrides it: do what is not yet done, a new reading, a step that
lowers, or make safe.
"""

from __future__ import annotations

from collections.abc import Callable
from typing import Final

from runbook.answers import Margin, Plan
from runbook.run.amounts import (
    accepted,
    difference,
    duration,
    grams,
    level,
    margin_left,
    pressure_difference_number,
    pressure_number,
    reading,
    temperature,
)
from runbook.run.questions import closed
from runbook.run.reasons import Code, Reason
from runbook.run.state import Ledger

OTHERWISE: Final = "A step that lowers, or make safe."
DECIDING: Final = (
    "Tap and re-zero the gauge and read again; then a second thermometer; then 10 min at rest; "
    "then the height; then weigh."
)
"""The deciding tests, quickest first (common practice)."""

_CAUSES: Final = {
    "now": "Now",
    "this step": "In that step",
    "left alone": "Left alone",
    "heat off": "With the heat off and nobody there",
    "heat stuck on": "With the heat stuck on",
}


def reason_words(plan: Plan, ledger: Ledger, reason: Reason) -> str:
    """What is wrong, in a sentence."""
    return _WORDS[reason.code][0](plan, ledger, reason)


def clears_words(plan: Plan, ledger: Ledger, reason: Reason) -> str:
    """What to do at the bench that clears it, in a sentence."""
    return _WORDS[reason.code][1](plan, ledger, reason)


def cause_words(cause: str) -> str:
    """What brings a worst value about, as the beginning of a sentence."""
    return _CAUSES.get(cause, f"In step {cause}")


def margin_words(plan: Plan, margin: Margin) -> str:
    """A margin that is gone, with its corner."""
    if margin.margin is None or margin.worst is None or margin.allowed is None:
        why = margin.why or "it could not be computed"
        return f"{cause_words(margin.cause)}: the {margin.kind} margin of {margin.limit} is not known, because {why}."
    if margin.why:
        # A limit that a law sets says itself what it forbids.
        return f"{cause_words(margin.cause)}: {margin.why}."
    low = margin.kind.startswith("lowest")
    reaches = f"{margin.kind} {'falls to' if low else 'reaches'} {level(plan, margin, margin.worst)}{_corner(margin)}"
    allows = f"{margin.limit} allows {level(plan, margin, margin.allowed)}"
    beyond = margin_left(plan, margin).removeprefix("-")
    return f"{cause_words(margin.cause)}: {reaches}. {allows}, {beyond} {'higher' if low else 'less'}."


def _corner(margin: Margin) -> str:
    if margin.at is None:
        return ""
    at = temperature(margin.at.temperature_K)
    if margin.at.charge_kg is None:
        return "" if margin.unit == "K" else f" at {at}"
    return f" with {grams(margin.at.charge_kg)} at {at}"


def _lighter(plan: Plan, ledger: Ledger, reason: Reason) -> str:
    """While the vessel is open, too much can still sublime."""
    if reason.margin is not None and reason.margin.limit == "room":
        # What the room must not get does not depend on a reading.
        return OTHERWISE
    at = reason.margin.at if reason.margin is not None else None
    most, charge = plan.bounds.most_kg, at.charge_kg if at is not None else None
    if closed(ledger) == "open" and most is not None and charge is not None and charge > most:
        best = plan.bounds.best_kg if plan.bounds.best_kg is not None else most
        return f"Let {grams(charge - best)} sublime, to {grams(best)} on the scale, or make safe: it is still open."
    return f"{OTHERWISE} A new reading, if that one was wrong."


def _outside(plan: Plan, _: Ledger, r: Reason) -> str:
    said = f"{r.tag} read {reading(plan, r.tag, r.value)}"
    return f"{said}; accepted is {accepted(plan, r.need)}." if r.need is not None else f"{said}, outside its dial."


def _old(_: Plan, __: Ledger, r: Reason) -> str:
    if r.seconds == float("inf"):
        return f"How old the reading of {r.tag} is cannot be told, because a clock was set or the machine restarted."
    return f"{r.tag} was read {duration(r.seconds)} ago; it counts for {duration(r.allowed_s)}."


def _disagrees(plan: Plan, ledger: Ledger, r: Reason) -> str:
    answer = ledger.answer
    a = answer.agreement if answer is not None else None
    if a is None or a.read is None or a.computed is None:
        return f"What {r.tag} reads disagrees with what is computed."
    return (
        f"{r.tag} reads {pressure_number(plan, a.read)} ±{pressure_difference_number(plan, a.read_U)}, computed "
        f"{pressure_number(plan, a.computed)} ±{pressure_difference_number(plan, a.computed_U)} {plan.pressure_unit}: "
        "they disagree."
    )


def _rises(plan: Plan, _: Ledger, r: Reason) -> str:
    return f"{r.tag} has risen by {difference(plan, r.tag, r.value)}, which is not less than 0.1 bar: gas is left."


def _differ(plan: Plan, _: Ledger, r: Reason) -> str:
    off, band = (difference(plan, r.tag, v) for v in (r.value, r.limit))
    return f"The two readings of {r.tag} differ by {off}, more than their uncertainties together, {band}."


def _hold_line(plan: Plan, _: Ledger, r: Reason) -> str:
    number = plan.lines[r.line].number if r.line is not None else "before"
    return f"The hold of step {number} was passed without the signature of the {r.said}."


def _margin(plan: Plan, _: Ledger, r: Reason) -> str:
    return margin_words(plan, r.margin) if r.margin is not None else f"The margin of {r.tag} is gone."


def _if_not(_: Plan, __: Ledger, r: Reason) -> str:
    return r.need.if_not if r.need is not None and r.need.if_not else f"Read {r.tag} again."


_Said = Callable[[Plan, Ledger, Reason], str]


def _text(text: str) -> _Said:
    """A sentence with {tag}, {said}, {left} and {allowed} filled in; `: {said}` goes where nothing was said."""

    def words(plan: Plan, ledger: Ledger, r: Reason) -> str:
        body = text if r.said else text.replace(": {said}", "")
        return body.format(tag=r.tag, said=r.said, left=duration(r.seconds), allowed=duration(r.allowed_s))

    return words


_READ: Final = _text("Read {tag}.")
_READ_AGAIN: Final = _text("Read {tag} again.")
_NOTHING: Final = _text("Nothing clears it here.")

_WORDS: Final[dict[Code, tuple[_Said, _Said]]] = {
    Code.READING_WANTED: (_text("{tag} has not been read in this step."), _READ),
    Code.READING_OUTSIDE: (_outside, _if_not),
    Code.READING_OLD: (_old, _READ_AGAIN),
    Code.NOT_SIGNED: (_text("The {said} has not signed."), _text("The {said} signs here.")),
    Code.WITNESS_WAITED: (
        _text("The {said} has been called and is not here; the run goes on in {left}."),
        _text("Wait, or confirm that the {said} is here."),
    ),
    Code.QUICK_NOT_DONE: (_text("Not confirmed: {said}"), _text("Do it and confirm it with its key.")),
    Code.PROOF_NOT_MADE: (_text("The proof of empty '{said}' has not been made."), _text("Make it and confirm it.")),
    Code.TURNED_BACK: (
        _text("The way back stands in place of the step: {said}."),
        _text("Do what it says, read again, then take the step up again or make safe."),
    ),
    Code.NEED_MISSING: (_text("{tag} has to be read before the next step."), _READ),
    Code.NEED_OUTSIDE: (
        lambda plan, ledger, r: f"{r.tag} read {reading(plan, r.tag, r.value)}, outside its dial.",
        _text("Read {tag} again; where it stays there, make safe."),
    ),
    Code.NEED_OLD: (_old, _READ_AGAIN),
    Code.NO_ANSWER: (
        _text("Nothing has been computed for the vessel as it stands: {said}."),
        _text(f"It is asked again by itself. {OTHERWISE}"),
    ),
    Code.NOT_VALID: (
        _text("The vessel's state lies outside what can be computed."),
        _text(f"Read temperature and pressure again. {OTHERWISE}"),
    ),
    Code.MARGIN_NOW: (_margin, _text(f"{OTHERWISE} A new reading, if that one was wrong.")),
    Code.MARGIN_AHEAD: (_margin, _lighter),
    Code.DISAGREES: (_disagrees, _text(DECIDING)),
    Code.CANNOT_TELL: (
        _text("Reading and computation do not show agreement, and the next step leans on it: {said}."),
        _text(f"Read again with the finest instrument there is. {DECIDING}"),
    ),
    Code.CHARGE_NOT_PROVED: (
        _text("How much is in the vessel has not been proved since it was closed: {said}."),
        _text("Read the height of the liquid with the temperature beside it, or weigh the closed vessel."),
    ),
    Code.HOLD_PASSED: (_hold_line, _text(f"It cannot be signed afterwards. {OTHERWISE}")),
    Code.CERTIFICATE: (
        _text("A proof of {tag} is not valid today: {said}."),
        _text(f"Renew it before the run. {OTHERWISE}"),
    ),
    Code.GAP_OPEN: (_text("The four questions after the gap have not been answered."), _text("Answer them.")),
    Code.NOT_PROVED_EMPTY: (
        _text("The vessel has not been proved empty by all four proofs."),
        _text("Make all four proofs in one step."),
    ),
    Code.VENT_NOT_OPEN: (_text("{tag} has not been stated open."), _text("Open {tag} and say so.")),
    Code.NOT_OPENED: (_text("No run is open."), _text("Open one.")),
    Code.CLOSED: (_text("The run has ended."), _NOTHING),
    Code.HALTED: (_text("The run is halted: {said}"), _text("Make safe, then leave the tool.")),
    Code.MAKING_SAFE: (_text("Make safe is under way."), _text("Go on with its acts.")),
    Code.LAST_LINE: (_text("This is the last step."), _text("Finish the run.")),
    Code.NOT_TURNED: (_text("The step was not turned back."), _NOTHING),
    Code.NOT_FINITE: (_text("'{said}' is not a number."), _text("Type the number that {tag} shows.")),
    Code.UNKNOWN_TAG: (_text("There is no '{tag}' here."), _text("Use a tag of the apparatus.")),
    Code.UNKNOWN_PERSON: (_text("'{said}' does not take part in this run."), _text("Use a name from the briefing.")),
    Code.UNKNOWN_WORD: (_text("'{said}' is no position or state."), _text("Choose one of those that are offered.")),
    Code.NO_HOLD: (_text("This step is no hold point."), _NOTHING),
    Code.SIGNED_ALREADY: (_text("{said} has signed already."), _NOTHING),
    Code.WRONG_ROLE: (_text("Only the {said} can do this."), _text("Call the {said}.")),
    Code.WRONG_NUMBER: (_text("That is not the number {said} set at the briefing."), _text("Type your own number.")),
    Code.PERFORMED: (
        _text("{said} performed one of the steps that are signed for."),
        _text("Somebody signs who did not perform them."),
    ),
    Code.OWN_WANTED: (
        _text("{said} has not read {tag} without sight of the other reading."),
        _text("Read {tag} blind."),
    ),
    Code.OTHER_WANTED: (_text("Nobody but {said} has read {tag} here."), _text("Another person reads {tag}.")),
    Code.SIGN_OUTSIDE: (
        lambda plan, ledger, r: f"{r.said} read {r.tag} at {reading(plan, r.tag, r.value)}, outside what is accepted.",
        _READ_AGAIN,
    ),
    Code.DIFFER: (_differ, _text("A third reading of {tag} decides.")),
    Code.NO_WITNESS: (_text("This step is no witness point."), _NOTHING),
    Code.CAME_ALREADY: (_text("The witness is here already."), _NOTHING),
    Code.NO_QUICK: (_text("This step is no quick sequence."), _NOTHING),
    Code.WRONG_ITEM: (_text("The acts are confirmed in order; next is: {said}"), _text("Confirm that one.")),
    Code.NO_EMPTY: (_text("No proof of empty is made in this step."), _NOTHING),
    Code.WRONG_PROOF: (_text("The proofs are made in order; next is: {said}"), _text("Make that one.")),
    Code.VENT_NOT_STATED_OPEN: (_text("{tag} has not been stated open."), _text("Open {tag} and say so.")),
    Code.WALL_WANTED: (_text("{tag} has not been read in this step."), _READ),
    Code.WALL_COLD: (
        lambda plan, ledger, r: f"{r.tag} read {reading(plan, r.tag, r.value)}, not surely above -40 °C.",
        _text("Let it warm with the vent open, and read {tag} again."),
    ),
    Code.WALL_SHORT: (
        _text("{tag} has to stay above -40 °C for {allowed}; {left} are left."),
        _text("Wait, and read {tag} again."),
    ),
    Code.WALL_OLD: (_old, _READ_AGAIN),
    Code.VENT_NOT_SHUT: (
        _text("{tag} has not been stated shut since the wall was proved."),
        _text("Shut {tag} and say so."),
    ),
    Code.SHUT_SHORT: (_text("{tag} has to stay shut for {allowed}; {left} are left."), _text("Wait.")),
    Code.ISOLATOR_NOT_OPEN: (
        _text("{tag} has not been open all the while, so the low gauge proves nothing."),
        _text("Open {tag}, open the vent, shut it again and begin this proof anew."),
    ),
    Code.FIRST_WANTED: (
        _text("{tag} was not read within {allowed} of shutting the vent."),
        _text("Read {tag}; where it is too late, open the vent and shut it again first."),
    ),
    Code.SECOND_WANTED: (_text("{tag} has to be read now, at the end of the wait."), _READ),
    Code.GAUGE_RISES: (_rises, _text("Open the vent again and let it warm; begin this proof anew later.")),
    Code.NO_ACT: (_text("There is no such act of make safe."), _text("Begin make safe first.")),
    Code.NO_GAP: (_text("No question is open."), _NOTHING),
    Code.NOT_FINISHED: (_text("Steps are left."), _text("Go on, make safe, or leave the tool.")),
    Code.ACTS_LEFT: (_text("Not confirmed: {said}"), _text("Do it and confirm it.")),
}
