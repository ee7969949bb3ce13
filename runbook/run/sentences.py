"""Data into words, for the bench, line mode, paper and record alike: one home for every sentence of a run.

Plain text only; what a person or a file wrote is passed on as it is and never read as markup. Reasons are in
`reason_words`, figures in `amounts`; both are handed on from here.
"""

from __future__ import annotations

from collections.abc import Sequence
from typing import Final

from runbook.answers import Agreement, Explanation, Future, LeftAlone, Plan
from runbook.run.amounts import (
    duration,
    kelvins,
    pressure,
    pressure_difference,
    pressure_difference_number,
    pressure_number,
    temperature,
)
from runbook.run.ceiling_now import Ceiling
from runbook.run.evidence_words import DECIDED_BY_TESTS, charge_words, first_explanation, ranked_lines
from runbook.run.reason_words import cause_words, clears_words, margin_words, reason_words
from runbook.run.reasons import Reason
from runbook.run.standing import HoldState, ProofState, QuickState, Standing
from runbook.run.state import Ledger
from runbook.run.wanted import Wanted

__all__ = [
    "GAP_QUESTIONS",
    "PERMISSION",
    "agreement_age",
    "agreement_pair",
    "agreement_proves",
    "agreement_says",
    "begin_words",
    "cause_words",
    "ceiling_words",
    "clears_words",
    "distance_words",
    "duration",
    "gap_questions",
    "hold_words",
    "left_alone_verdict",
    "left_alone_words",
    "margin_words",
    "next_words",
    "permission_words",
    "phase_words",
    "proof_words",
    "quick_words",
    "reason_words",
    "reasons_words",
    "unknown_words",
    "wanted_words",
    "why_lines",
    "witness_words",
]

PERMISSION: Final = {
    "yes": "● YES",
    "not yet": "□ NOT YET",
    "blocked": "■ BLOCKED",
    "make safe": "▲ MAKE SAFE",
    "halted": "■ HALTED",
    "finished": "● FINISHED",
}
"""Shape and word: readable without colour."""

GAP_QUESTIONS: Final = (
    ("source", "Is the heat on, off or unplugged?"),
    ("vent", "Is the vent open or shut?"),
    ("touched", "Has anything been touched meanwhile?"),
    ("here", "Who is here?"),
)
"""After a gap; 'do not know' is an answer to the first three, and counts as the worst."""

_PHASES: Final = {
    "A": "open, dry ice in hand or in the cell",
    "B": "closed, solid in it, how much is in doubt",
    "B'": "closed, solid in it, charge proved",
    "C": "liquid and vapour near room temperature",
    "D": "going liquid-full",
    "E": "one phase, warm",
    "F": "relief open, disc burst or a loud leak",
    "G": "letting down, liquid in it",
    "H": "gauge at zero, solid or a plugged outlet possible",
    "I": "mark, crack or frost on a window, or a joint weeps",
    "J": "fire, gas alarm, or somebody hurt",
    "K": "evacuated glass",
    "L": "sealed tube in a bath",
}


def gap_questions(plan: Plan) -> tuple[tuple[str, str], ...]:
    """Those of the four that this vessel can answer: where it has no heat source, nobody is asked for it."""
    return tuple(one for one in GAP_QUESTIONS if one[0] != "source" or plan.source_tag is not None)


def permission_words(standing: Standing) -> str:
    """'● YES', '□ NOT YET', ..."""
    return PERMISSION[standing.permission]


def reasons_words(plan: Plan, ledger: Ledger, reasons: tuple[Reason, ...]) -> tuple[tuple[str, str], ...]:
    """(what is wrong, what clears it) of each reason."""
    return tuple((reason_words(plan, ledger, r), clears_words(plan, ledger, r)) for r in reasons)


def phase_words(phase: str) -> str:
    """'phase C: liquid and vapour near room temperature'."""
    return f"phase {phase}: {_PHASES.get(phase, 'not known')}"


def begin_words(standing: Standing) -> str:
    """What stands where the step would, before the first line and after the last."""
    if standing.permission == "finished":
        return "The run has ended."
    return "" if standing.line is not None else "Nothing has been done yet. Go on to the first step."


def next_words(standing: Standing) -> str:
    """What going on is about, without its instruction: a forbidden one is never on the screen."""
    line = standing.next
    if line is None:
        return "This is the last step."
    if line.seals:
        return "Next the vessel is closed."
    if line.opens_containment:
        return "Next the vessel is opened."
    if line.source == "on":
        return "Next the heat goes on."
    return f"Next is step {line.number}."


# -- left alone ------------------------------------------------------------------------------------------


def left_alone_words(plan: Plan, alone: LeftAlone) -> str:
    """'heat off: 71 bar(g) at 30.0 °C    heat stuck on: 87 bar(g) at 39.0 °C'."""
    if not alone.known:
        return "what happens left alone is not known"
    if not alone.futures:
        return "nothing happens"
    return "    ".join(_future(plan, future) for future in alone.futures)


def left_alone_verdict(alone: LeftAlone, first_act: str) -> str:
    """'AT REST', or which limit falls when, and the first act of make safe."""
    if alone.known and alone.at_rest:
        return "AT REST"
    falling = [f for f in alone.futures if not f.at_rest]
    timed = [f for f in falling if f.limit_after_s is not None]
    first = min(timed, key=lambda f: f.limit_after_s or 0.0) if timed else next(iter(falling), None)
    if not alone.known or first is None:
        return f"NOT AT REST: what happens is not known. {first_act}"
    stuck = " with the heat stuck on" if first.cause == "heat stuck on" else ""
    if first.limit is None:
        return f"NOT AT REST{stuck}. {first_act}"
    if first.limit_after_s is None:
        return f"NOT AT REST: passes {first.limit}'s limit{stuck}. {first_act}"
    about = "about " if first.about else ""
    return f"NOT AT REST: passes {first.limit}'s limit in {about}{duration(first.limit_after_s)}{stuck}. {first_act}"


def _future(plan: Plan, future: Future) -> str:
    ends = pressure(plan, future.ends_Pa)
    at = "" if future.ends_K is None else f" at {temperature(future.ends_K)}"
    return f"{future.cause}: {ends}{at}"


# -- ceiling ---------------------------------------------------------------------------------------------


def ceiling_words(plan: Plan, ceiling: Ceiling) -> tuple[str, str, str]:
    """('now 62.6 ±1.2', 'this step at worst 83.8', '94.8 bar(g) by RD1')."""
    U = "" if ceiling.now_U is None else f" ±{pressure_difference_number(plan, ceiling.now_U)}"
    now = f"now {pressure_number(plan, ceiling.now)}{U if ceiling.now is not None else ''}"
    by = f" by {ceiling.by}" if ceiling.by else ""
    return now, f"this step at worst {pressure_number(plan, ceiling.step_worst)}", pressure(plan, ceiling.ceiling) + by


def distance_words(plan: Plan, ceiling: Ceiling) -> tuple[str, str, str]:
    """('31.0 bar', '19 K', 'about 24 min at 0.8 K a minute'); what is not known says so."""
    distance = ceiling.distance
    bar = pressure_difference(plan, distance.pressure)
    if distance.temperature is None:
        known = distance.pressure is not None
        return bar, "never by warming" if known else "not known", "" if known else "not known"
    if distance.seconds is None:
        return bar, kelvins(distance.temperature), "never, as it stands"
    rate = "" if distance.rate is None else f" at {distance.rate * 60.0:.1f} K a minute"
    return bar, kelvins(distance.temperature), f"about {duration(distance.seconds)}{rate}"


# -- readings --------------------------------------------------------------------------------------------


def agreement_pair(plan: Plan, agreement: Agreement | None) -> str:
    """'● PG1 62.6 ±1.2, computed 62.0 ±0.4'."""
    if agreement is None:
        return "□ not shown, or nothing computed"
    if agreement.read is None or agreement.computed is None:
        return "□ no reading to compare"
    shape = {"agrees": "●", "disagrees": "■"}.get(agreement.verdict, "□")
    return (
        f"{shape} {agreement.tag} {pressure_number(plan, agreement.read)} "
        f"±{pressure_difference_number(plan, agreement.read_U)}, computed {pressure_number(plan, agreement.computed)} "
        f"±{pressure_difference_number(plan, agreement.computed_U)}"
    )


def agreement_proves(agreement: Agreement | None) -> str:
    """What the agreement proves, and what it does not."""
    if agreement is None or agreement.verdict == "no reading":
        return "says: nothing yet"
    if agreement.verdict == "disagrees":
        return "disagrees: one of the two is wrong, and nothing that raises goes on"
    if agreement.proves == "read apart":
        return "cannot tell: the vessel was moved between the two readings; read both again"
    if agreement.verdict == "cannot tell":
        return "cannot tell: the readings are too coarse for the margin that is left"
    if agreement.proves == "charge":
        return "says: thermometer, gauge and charge are sound"
    return "says: thermometer and gauge are sound; not: how much is in the cell"


def agreement_says(plan: Plan, agreement: Agreement | None, found: Sequence[Explanation]) -> str:
    """What the comparison says: what it proves; where something is explained, the first explanation and its test."""
    first, test = first_explanation(plan, agreement, found)
    harmless = agreement is not None and agreement.verdict == "cannot tell" and found and found[0].cause == "none"
    if agreement is None or not first or harmless:
        return agreement_proves(agreement)
    # A question: it is a guess until the test has been made.
    return f"{agreement.verdict}: {first}? {test}" if test else f"{agreement.verdict}: {first}"


def why_lines(plan: Plan, standing: Standing) -> list[tuple[str, str]]:
    """What the readings may mean, in full: (explanation, its test), then the charge as a best estimate."""
    lines = ranked_lines(plan, standing.agreement, standing.explanations)
    if lines:
        lines.append((DECIDED_BY_TESTS, ""))
    elif standing.hidden:
        lines.append(("What is expected is kept back until the reading is in.", ""))
    else:
        lines += [("There is nothing to explain.", ""), (agreement_proves(standing.agreement), "")]
    if standing.estimate is not None:
        lines.append((f"best estimate of the charge: {charge_words(standing.estimate)}", ""))
    return lines


def agreement_age(age_s: float | None, good_for_s: float | None) -> str:
    """'1 min 10 s old, good for 4 min'."""
    if age_s is None:
        return ""
    good = "" if good_for_s is None else f", good for {duration(good_for_s)}"
    return f"{duration(age_s)} old{good}"


def wanted_words(wanted: Wanted) -> str:
    """'READ PG1 NOW', 'read PG1', or when it is due."""
    tag = wanted.need.tag
    if wanted.blind:
        return f"the signer reads {tag} without sight of the other reading"
    if wanted.overdue:
        return f"READ {tag} NOW"
    if wanted.outside:
        # What the author says to do outside the range stands with the reason, once.
        return f"read {tag} again"
    if wanted.due_s > 0.0:
        return f"next reading of {tag} in {duration(wanted.due_s)}"
    return f"read {tag}"


def unknown_words(standing: Standing) -> str:
    """That margins are unknown, and how long it may last."""
    if standing.unknown_s is None or standing.line is None:
        return ""
    left = standing.unknown_left_s
    return "margins are not known" + ("" if left is None else f"; the way back comes in {duration(left)}")


def unstated_words(standing: Standing) -> str:
    """Which valves have to be looked at and stated."""
    tags = standing.unstated
    if not tags:
        return ""
    stand = "stands" if len(tags) == 1 else "stand"
    return f"Nobody has said where {' and '.join(tags)} {stand}: look, and state it"


# -- hold, witness, quick sequence, proofs ---------------------------------------------------------------


def hold_words(hold: HoldState) -> str:
    """Who signs, and why."""
    if hold.signed_by:
        return f"Signed by {hold.signed_by} as {hold.role}."
    if not hold.may_sign:
        return f"The {hold.role} signs, and nobody here may: who performed a step never signs for it."
    return f"The {hold.role} signs ({' or '.join(hold.may_sign)}), because {hold.because}."


def witness_words(standing: Standing) -> str:
    """Who is called, and how long for."""
    if standing.witness is None:
        return ""
    called, left = standing.witness
    return f"The {called} has been called; the run goes on in {duration(left)}."


def quick_words(item: QuickState) -> str:
    """One item of a quick sequence with its countdown, or the act when its time has passed."""
    if item.done:
        return f"● {item.text}" + (" (late)" if item.late else "")
    if item.left_s is None:
        return f"□ {item.text}"
    if item.late:
        return f"■ {item.text}: {duration(item.left_s)} late. {item.if_not}"
    return f"□ {item.text}: {duration(item.left_s)} left"


def proof_words(plan: Plan, ledger: Ledger, proof: ProofState) -> str:
    """One proof of empty and what it still wants."""
    if proof.done:
        return f"● {proof.name}"
    if not proof.missing:
        return f"□ {proof.name}"
    return f"□ {proof.name}: {reason_words(plan, ledger, proof.missing[0])}"
