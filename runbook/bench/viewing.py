"""From the standing of a run to what stands on its screen: places for sentences, no sentence of its own about the run.

What a signer must not see before their own reading is in is left out here too: the surface in the picture and
the sight in words give a height away as surely as a number does.
"""

from __future__ import annotations

from datetime import UTC, datetime
from typing import Final

from runbook.answers import LineKind, PlanLine, SafetyMessage
from runbook.bench.asking import PROOFS, ask_view, due_proof
from runbook.bench.picturing import picture_of
from runbook.bench.view import (
    AgreeView,
    AloneView,
    CeilingView,
    DoView,
    HeaderView,
    PictureView,
    RunView,
    SeeView,
)
from runbook.drawing import Ruler
from runbook.quantities import pressure_to_unit
from runbook.run.conductor import Conductor
from runbook.run.sentences import (
    agreement_age,
    agreement_pair,
    agreement_says,
    begin_words,
    ceiling_words,
    distance_words,
    hold_words,
    left_alone_verdict,
    left_alone_words,
    proof_words,
    quick_words,
    witness_words,
)
from runbook.run.sight_words import KEPT_BACK, see_if_not, see_source, see_words
from runbook.run.standing import Standing

_JUMP_S: Final = 300.0
"""[s] where nothing is asked for at any known moment."""
_EARLY_S: Final = 5.0
"""[s] before it: what is asked for should be on the screen before it is overdue."""


def tags(desk: Conductor) -> tuple[tuple[str, ...], int]:
    """Instruments to read, and how many of them are asked for: these come first, in order of need."""
    standing = desk.standing()
    wanted = [w.need.tag for w in standing.wanted if not w.blind]
    if standing.hold is not None and standing.hold.tag:
        wanted.append(standing.hold.tag)
    asked = len(dict.fromkeys(wanted))
    return tuple(dict.fromkeys((*wanted, *(one.tag for one in desk.plan.instruments)))), asked


def may_go_on(desk: Conductor) -> bool:
    """Whether Enter exists."""
    return desk.standing().permission == "yes"


def may_finish(desk: Conductor) -> bool:
    """Whether going on ends the run."""
    return desk.standing().next is None


def next_moment(standing: Standing) -> float:
    """How long until something is asked for [s]; for the jump of a rehearsal. 0: an item of a quick sequence is due."""
    waits = [w.due_s - _EARLY_S for w in standing.wanted if w.due_s > 0.0]
    waits += [standing.witness[1] + 1.0] if standing.witness is not None else []
    due = [item.left_s - _EARLY_S for item in standing.quick if item.left_s is not None]
    if due:
        # Never past its latest time, whatever else is waited for.
        return max(0.0, min((*due, *waits)))
    return max(1.0, min(waits, default=_JUMP_S))


def run_view(desk: Conductor, mark: str) -> RunView:
    """All six bands as they stand now."""
    standing = desk.standing()
    return RunView(
        header=_header(desk, standing, mark),
        do=_do(desk, standing),
        ask=ask_view(desk, standing),
        alone=_alone(desk, standing),
        ceiling=_ceiling(desk, standing),
        see=_see(standing),
        agree=_agree(desk, standing),
        pictures=picture_of(desk, standing),
    )


def picture_view(desk: Conductor) -> PictureView:
    """The pictures alone."""
    return picture_of(desk, desk.standing())


def _header(desk: Conductor, standing: Standing, mark: str) -> HeaderView:
    wall = datetime.fromtimestamp(desk.clock.now().wall, UTC).astimezone()
    step, of = standing.step
    place = f"{standing.part}, step {step} of {of}" if step else standing.part
    record = "NOT RECORDED" if desk.not_recorded else f"log {standing.log}"
    return HeaderView(desk.plan.procedure, place, record, f"{wall:%H:%M}", mark)


# -- DO ------------------------------------------------------------------------------------------------------


def _do(desk: Conductor, standing: Standing) -> DoView:
    line = standing.line
    if standing.loud or line is None:
        words = "  ".join(standing.instruction) or begin_words(standing)
        return DoView("", words, "", standing.loud)
    return DoView(warning_words(line.warning), _instruction(desk, standing, line), _who(standing, line))


def warning_words(warning: SafetyMessage | None) -> str:
    """Signal word, hazard, what it could do, how to avoid it."""
    if warning is None:
        return ""
    return f"{warning.word} {warning.hazard} could {_stopped(warning.could)} {_stopped(warning.avoid)}"


def _stopped(text: str) -> str:
    return text if text.endswith((".", "!")) else f"{text}."


def _instruction(desk: Conductor, standing: Standing, line: PlanLine) -> str:
    match line.kind:
        case LineKind.HOLD if standing.hold is not None:
            return hold_words(standing.hold)
        case LineKind.WITNESS:
            return witness_words(standing) or line.text
        case LineKind.QUICK:
            return "\n".join(quick_words(item) for item in standing.quick)
        case LineKind.EMPTY:
            return "\n".join(_proofs(desk, standing))
        case _:
            return imperative(line.text)


def _proofs(desk: Conductor, standing: Standing) -> list[str]:
    """Each proof of empty; of the one that is due what it states. What it still wants stands beside ON?."""
    rows = []
    due = due_proof(standing)
    for proof in standing.proofs:
        words = proof_words(desk.plan, desk.ledger, proof)
        rows.append(f"{words.partition(': ')[0]}: {PROOFS[proof.name]}" if proof is due else words)
    return rows


def imperative(text: str) -> str:
    """The author's sentence with its verb in capitals, so that the eye finds what to do."""
    verb, space, rest = text.partition(" ")
    return f"{verb.upper()}{space}{_stopped(rest) if rest else ''}"


def _who(standing: Standing, line: PlanLine) -> str:
    return f"{line.who} {', '.join(standing.who)}".strip() if line.who is not None else ""


# -- ALONE, CEILING ------------------------------------------------------------------------------------------


def _alone(desk: Conductor, standing: Standing) -> AloneView:
    alone = standing.left_alone
    first = f"Open {standing.open_now} now." if standing.open_now else (standing.safe.acts or ("",))[0]
    planned = "as planned: " if standing.left_alone_planned and alone.futures else ""
    return AloneView(
        planned + left_alone_words(desk.plan, alone), left_alone_verdict(alone, first), alone.known and alone.at_rest
    )


def _ceiling(desk: Conductor, standing: Standing) -> CeilingView:
    plan, found = desk.plan, standing.ceiling
    now, worst, ceiling = ceiling_words(plan, found)

    def shown(absolute: float | None) -> float | None:
        return None if absolute is None else pressure_to_unit(absolute, plan.pressure_unit, plan.barometer)

    # A difference has no zero of its own: it is the way between two levels.
    lower, upper = shown(found.now), shown(None if found.now is None else found.now + (found.now_U or 0.0))
    ruler = Ruler(
        lower, None if lower is None or upper is None else upper - lower, shown(found.step_worst), shown(found.ceiling)
    )
    return CeilingView(now, worst, ceiling, ruler, distance_words(plan, found), found.judgement.value)


# -- SEE, AGREE? ---------------------------------------------------------------------------------------------


def _see(standing: Standing) -> SeeView:
    return SeeView((see_words(standing),), see_source(standing), see_if_not(standing))


def _agree(desk: Conductor, standing: Standing) -> AgreeView:
    if standing.hidden:
        return AgreeView("not yet", KEPT_BACK, "", "")
    agreement = standing.agreement
    state = {"agrees": "yes", "disagrees": "blocked"}.get(agreement.verdict if agreement is not None else "", "not yet")
    pair = agreement_pair(desk.plan, agreement).partition(" ")[2]
    age = agreement_age(standing.agreement_age_s, standing.good_for_s)
    return AgreeView(state, pair, agreement_says(desk.plan, agreement, standing.explanations), age)
