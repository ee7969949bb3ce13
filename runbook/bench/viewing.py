"""From the standing of a run to what stands on its screen: places for sentences, no sentence of its own about the run.

What a signer must not see before their own reading is in is left out here too: the surface in the picture and
the sight in words give a height away as surely as a number does.
"""

from __future__ import annotations

from datetime import UTC, datetime
from typing import Final

from runbook.answers import LineKind, PlanLine, SafetyMessage
from runbook.bench.picturing import picture_of
from runbook.bench.view import (
    AgreeView,
    AloneView,
    AskView,
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
from runbook.run.reasons import Code, Reason
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
    next_words,
    permission_words,
    proof_words,
    quick_words,
    reasons_words,
    unknown_words,
    wanted_words,
    witness_words,
)
from runbook.run.sight_words import KEPT_BACK, see_if_not, see_source, see_words
from runbook.run.standing import Standing

_STATES: Final = {"yes": "yes", "finished": "yes", "not yet": "not yet"}
"""Permission -> how it is painted; everything else is painted as blocked."""
_TAG: Final = "\0"
"""Stands for the instrument while sentences are compared."""
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
    """How long until something is asked for [s]; for the jump of a rehearsal."""
    waits = [w.due_s - _EARLY_S for w in standing.wanted if w.due_s > 0.0]
    waits += [standing.witness[1] + 1.0] if standing.witness is not None else []
    waits += [item.left_s - _EARLY_S for item in standing.quick if item.left_s is not None]
    return max(1.0, min(waits, default=_JUMP_S))


def run_view(desk: Conductor, mark: str) -> RunView:
    """All six bands as they stand now."""
    standing = desk.standing()
    return RunView(
        header=_header(desk, standing, mark),
        do=_do(desk, standing),
        ask=_ask(desk, standing),
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
            ledger = desk.ledger
            return "\n".join(proof_words(desk.plan, ledger, proof) for proof in standing.proofs)
        case _:
            return imperative(line.text)


def imperative(text: str) -> str:
    """The author's sentence with its verb in capitals, so that the eye finds what to do."""
    verb, space, rest = text.partition(" ")
    return f"{verb.upper()}{space}{_stopped(rest) if rest else ''}"


def _who(standing: Standing, line: PlanLine) -> str:
    return f"{line.who} {', '.join(standing.who)}".strip() if line.who is not None else ""


# -- ON? -----------------------------------------------------------------------------------------------------


def _ask(desk: Conductor, standing: Standing) -> AskView:
    word = permission_words(standing).partition(" ")[2]
    asked = {w.need.tag for w in standing.wanted}
    # A reading that is wanted is said with its time, not twice.
    reasons = tuple(r for r in standing.reasons if r.code is not Code.READING_WANTED or r.tag not in asked)
    if first := _before_signing(standing):
        # The signature comes after these.
        reasons = (*first, *(r for r in reasons if r.code is not Code.NOT_SIGNED))
    items = list(reasons_words(desk.plan, desk.ledger, reasons))
    if standing.permission in ("yes", "blocked") and not standing.turned_back:
        items.insert(0, (next_words(standing), ""))
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
    if standing.take_up or (line is not None and line.kind is LineKind.EMPTY and not standing.wanted):
        return "F8 state"
    if _before_signing(standing):
        return "F3 read"
    if line is not None and line.kind is LineKind.HOLD and not (standing.hold and standing.hold.signed_by):
        return "F4 sign hold"
    if standing.witness is not None:
        return "F4 is here"
    if standing.wanted:
        return "F3 read"
    if standing.permission == "blocked":
        # At rest there is time for the reading that clears it, for instance on a scale that falls.
        return "F3 read" if standing.left_alone.known and standing.left_alone.at_rest else "F9 make safe"
    return ""


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
