"""Several vessels in one bath as one plan and one answer: the worst of each, every limit under its own tag.

Each vessel is judged alone, by what is judged of any vessel; a step is taken with all of them, so what is unknown or
blocked of one is so of the step. Sights say which vessel they are of.
"""

from __future__ import annotations

from collections.abc import Iterable, Iterator, Sequence
from dataclasses import replace
from typing import TypeVar

from runbook.answers import (
    Agreement,
    Answer,
    ChargeBox,
    Distance,
    Effect,
    Finding,
    Future,
    Hold,
    LeftAlone,
    Margin,
    Need,
    Observation,
    Plan,
    PlanLine,
    Question,
    Sight,
    VesselBeside,
)
from runbook.assess.scene import Scene, open_scene, refuse_unbound
from runbook.assess.walk import Walked, walk
from runbook.procedure.reader import Loaded
from runbook.procedure.several import seen_from_each

T = TypeVar("T")
Scenes = tuple[tuple[Scene, tuple[Walked, ...]], ...]
"""Of each vessel its scene and its walk, the first one first."""
_WORST_EFFECT = (Effect.RAISES, Effect.UNKNOWN, Effect.LOWERS, Effect.KEEPS)
_WORST_VERDICT = ("outside limits", "not proved", "within limits")
_WORST_AGREEMENT = ("disagrees", "cannot tell", "no reading", "agrees")


def open_all(
    loaded: Loaded,
    reading_Pa: float | None,
    charge: ChargeBox | None = None,
    *,
    height_m: float | None = None,
    hottest_K: float | None = None,
    cell_closed: bool = False,
) -> Scenes:
    """Every vessel of a procedure, opened as open_scene opens one; charge and cell_closed are the first one's.

    Raises as open_scene does; what is wrong with the files is told of them as they stand, not of one vessel's view.
    """
    if loaded.apparatus.beside:
        refuse_unbound(loaded)
    opened = [
        open_scene(
            view, reading_Pa, charge if n == 0 else None,
            height_m=height_m, hottest_K=hottest_K, cell_closed=cell_closed and n == 0,
        )
        for n, view in enumerate(seen_from_each(loaded))
    ]  # fmt: skip
    return tuple((scene, walk(scene)) for scene in opened)


def merged_plan(plans: Sequence[Plan], writing: tuple[Finding, ...]) -> Plan:
    """One plan of all vessels, else the first one's; writing: findings of the files as they are written."""
    first = plans[0]
    if len(plans) == 1:
        return first
    found = (*writing, *_findings(plans))
    worst = min((p.verdict for p in plans), key=_WORST_VERDICT.index)
    if worst == "within limits" and any(f.severity == "error" for f in writing):
        worst = "not proved"
    # A ceiling that nobody knows is the lowest of all.
    lowest = min(plans, key=lambda p: -1.0 if p.ceiling is None else p.ceiling)
    return replace(
        first,
        verdict=worst,
        findings=found,
        ceiling=lowest.ceiling,
        ceiling_by=lowest.ceiling_by,
        certificates=_once(c for p in plans for c in p.certificates),
        instruments=_once(i for p in plans for i in p.instruments),
        lines=tuple(_line([p.lines[i] for p in plans], [p.vessel for p in plans]) for i in range(len(first.lines))),
        telling=_once(t for p in plans for t in p.telling),
        beside=tuple(VesselBeside(p.vessel, p.apparatus, p.planned_kg) for p in plans[1:]),
    )


def _findings(plans: Sequence[Plan]) -> Iterator[Finding]:
    """Of each vessel, with its tag; what all of them share is said once, and of none."""
    shared = set(plans[0].findings).intersection(*(p.findings for p in plans[1:]))
    yield from (one for one in plans[0].findings if one in shared)
    for plan in plans:
        for one in plan.findings:
            if one not in shared:
                tagged = one.message.startswith(f"{plan.vessel}:")
                yield one if tagged else replace(one, message=f"{plan.vessel}: {one.message}")


def merged_answer(answers: Sequence[Answer], vessels: Sequence[str], key: str) -> Answer:
    """One answer of all vessels; vessels: their tags; key: of the question that was asked of all."""
    first = answers[0]
    if len(answers) == 1:
        return first
    good = [a.good_for_s for a in answers if a.good_for_s is not None]
    return replace(
        first,
        key=key,
        now=_margins(a.now for a in answers),
        ahead=_margins(a.ahead for a in answers),
        left_alone=_left_alone([a.left_alone for a in answers]),
        agreement=_agreement([a.agreement for a in answers]),
        # Side by side each has its own height to be proved by, also what no liquid could ever fill by its file.
        charge_proved=all(a.charge_proved and a.charge is not None and a.charge.proved for a in answers),
        valid=all(a.valid for a in answers),
        good_for_s=min(good, default=None),
        phases=_once(phase for a in answers for phase in a.phases),
        distance=_distance([a.distance for a in answers]),
        sights=_sights([a.sights for a in answers], vessels),
        explanations=_once(e for a in answers for e in a.explanations),
    )


def asked_of(scene: Scene, question: Question, first: bool) -> Question:
    """The question as one vessel hears it: what was read of it and of the bath, and its own charge."""
    own = {one.tag for one in scene.apparatus.instruments}
    return replace(
        question,
        charge=question.charge if first else scene.charge,
        observations=_own(question.observations, own),
        history=tuple(past for past in question.history if past.tag in own),
    )


def _own(seen: Iterable[Observation], tags: set[str]) -> tuple[Observation, ...]:
    return tuple(one for one in seen if one.tag in tags)


def _line(lines: Sequence[PlanLine], vessels: Sequence[str]) -> PlanLine:
    first = lines[0]
    return replace(
        first,
        effects=tuple(
            (hazard, min((dict(one.effects)[hazard] for one in lines), key=_WORST_EFFECT.index))
            for hazard, _ in first.effects
        ),
        committing=any(one.committing for one in lines),
        leans_on=_once(what for one in lines for what in one.leans_on),
        entry_needs=_needs(one.entry_needs for one in lines),
        needs_charge_proof=any(one.needs_charge_proof for one in lines),
        reads=_needs(one.reads for one in lines),
        hold=_hold([one.hold for one in lines]),
        read_after=_needs(one.read_after for one in lines),
        ahead=_margins(one.ahead for one in lines),
        left_alone=_left_alone([one.left_alone for one in lines]),
        phases=_once(phase for one in lines for phase in one.phases),
        sights=_sights([one.sights for one in lines], vessels),
    )


def _needs(given: Iterable[tuple[Need, ...]]) -> tuple[Need, ...]:
    """Each instrument once, asked as often as the one that asks most."""
    found: dict[str, Need] = {}
    for need in (one for needs in given for one in needs):
        before = found.get(need.tag)
        found[need.tag] = need if before is None or need.fresh_s < before.fresh_s else before
    return tuple(found.values())


def _hold(holds: Sequence[Hold | None]) -> Hold | None:
    return next((one for one in holds if one is not None and one.read is not None), holds[0])


def _margins(given: Iterable[tuple[Margin, ...]]) -> tuple[Margin, ...]:
    """All of them: unknown first, then the smallest share of what is allowed."""

    def share(one: Margin) -> float:
        if one.margin is None:
            return -float("inf")
        return one.margin / abs(one.allowed) if one.allowed else one.margin

    return tuple(sorted(_once(one for margins in given for one in margins), key=share))


def _left_alone(given: Sequence[LeftAlone]) -> LeftAlone:
    futures: dict[str, Future] = {}
    for one in (future for alone in given for future in alone.futures):
        before = futures.get(one.cause)
        futures[one.cause] = one if before is None or _worse(one, before) else before
    return LeftAlone(all(a.at_rest for a in given), all(a.known for a in given), tuple(futures.values()))


def _worse(one: Future, other: Future) -> bool:
    if one.at_rest != other.at_rest:
        return not one.at_rest
    # What cannot be computed is the worst of all.
    a, b = (float("inf") if x.ends_Pa is None else x.ends_Pa for x in (one, other))
    return a > b


def _agreement(given: Sequence[Agreement]) -> Agreement:
    return min(given, key=lambda one: _WORST_AGREEMENT.index(one.verdict))


def _distance(given: Sequence[Distance]) -> Distance:
    """Of the vessel that is nearest to its ceiling; one that is unknown is nearer than any."""
    return min(given, key=lambda one: -1.0 if one.pressure is None else one.pressure)


def _sights(given: Sequence[tuple[Sight, ...]], vessels: Sequence[str]) -> tuple[Sight, ...]:
    """What is computed says of which vessel; the author's words stand once."""
    found = []
    for vessel, sights in zip(vessels, given, strict=True):
        found += [replace(one, words=f"{vessel}: {one.words}") if one.computed else one for one in sights]
    return _once(found)


def _once(given: Iterable[T]) -> tuple[T, ...]:
    return tuple(dict.fromkeys(given))
