"""One line of the plan: a step with its margins, hazards, sights and way back."""

from __future__ import annotations

from collections.abc import Sequence

from runbook.answers import (
    Empty,
    Hold,
    LineKind,
    Phase,
    PlanLine,
    QuickItem,
    SafetyMessage,
    Witness,
)
from runbook.assess.ahead import commits, look
from runbook.assess.hazards import effects
from runbook.assess.held import held_vent
from runbook.assess.needs import entry_needs, need_of, proved_by_height_alone, seal_items
from runbook.assess.phases import phases
from runbook.assess.scene import Scene
from runbook.assess.sights import line_sights
from runbook.assess.walk import Walked
from runbook.procedure.model import (
    CoolTo,
    DoStep,
    EmptyStep,
    HoldStep,
    LetDownTo,
    LetRiseTo,
    OpenContainment,
    Parked,
    QuickStep,
    Step,
    WarmTo,
    WitnessStep,
)
from runbook.procedure.model import QuickItem as QuickAct
from runbook.quantities import say_level


def plan_line(scene: Scene, walked: Sequence[Walked], index: int) -> PlanLine:
    """Line `index` of the walk, bound."""
    line = walked[index]
    step = line.step
    ahead = look(scene, walked, index, with_times=True)
    line_effects = effects(scene, line)
    sights, if_not = line_sights(scene, line)
    return PlanLine(
        number=line.number,
        part=line.part,
        kind=kind_of(step),
        text=text_of(step),
        who=step.who if isinstance(step, DoStep) else None,
        warning=_warning(step),
        effects=line_effects,
        committing=commits(scene, line),
        leans_on=_leans_on(scene, line),
        entry_needs=entry_needs(scene, walked, index),
        needs_charge_proof=line.warms and line.during.closed,
        opens_containment=_opens(scene, line),
        reads=tuple(need_of(scene, r) for r in step.read) if isinstance(step, DoStep) else (),
        hold=_hold(scene, step),
        witness=_witness(step),
        quick=_quick(scene, line),
        read_after=tuple(need_of(scene, r) for r in step.read_after) if isinstance(step, QuickStep) else (),
        empty=_empty(step),
        valves=_valves(scene, step),
        source=line.during.source if line.during.source != line.before.source else None,
        seals=line.seals,
        ahead=ahead.margins,
        left_alone=ahead.left_alone,
        phases=_phases(scene, walked, index),
        way_back=_way_back(scene, line),
        sights=sights,
        if_not=if_not,
        lasts_s=_lasts(line),
        falls=line.lets_down or isinstance(line.verb, CoolTo),
    )


def _phases(scene: Scene, walked: Sequence[Walked], index: int) -> tuple[Phase, ...]:
    """As the line leaves the vessel; of one that lets go of what it closes, closed as well."""
    line, proved = walked[index], _proved_by(walked, index)
    states = (line.during, line.after) if line.held is not None else (line.after,)
    found: list[Phase] = []
    for state in states:
        found += phases(
            scene,
            loaded=state.loaded,
            closed=state.closed,
            letting_down=state.letting_down,
            high_kg=state.high_kg,
            proved=proved,
            hot=state.hot,
            cold=state.cold,
            pressure=None,
            by_hand=held_vent(scene, state) is not None,
        )
    return tuple(dict.fromkeys(found))


def kind_of(step: Step | Parked) -> LineKind:
    """What a step asks of the person before it."""
    kinds = {
        HoldStep: LineKind.HOLD,
        WitnessStep: LineKind.WITNESS,
        QuickStep: LineKind.QUICK,
        EmptyStep: LineKind.EMPTY,
        Parked: LineKind.PARKED,
    }
    return kinds.get(type(step), LineKind.DO)


def text_of(step: Step | Parked) -> str:
    """One imperative sentence, the author's own where the author wrote one."""
    if isinstance(step, DoStep):
        return step.do
    if isinstance(step, HoldStep):
        return f"Stop: {step.hold.signed_by} signs before anything else is done"
    if isinstance(step, WitnessStep):
        return f"Call {step.witness.called}"
    if isinstance(step, QuickStep):
        return "; ".join(item.do for item in step.quick)
    if isinstance(step, EmptyStep):
        e = step.show_empty
        isolated = f"{e.isolator} open and " if e.isolator else ""
        return (
            f"Show that the vessel is empty: {e.vent} open and clear; {e.wall} warm again; "
            f"with {isolated}{e.vent} shut {e.low_gauge} stands still; {e.vent} open again and tagged"
        )
    return f"Leave the vessel at rest: heat {step.heat}, shield {step.shield}, key with {step.key_with}"


def _leans_on(scene: Scene, line: Walked) -> tuple[str, ...]:
    if line.warms and (not line.during.closed or proved_by_height_alone(scene)):
        # In the open there is no pressure to agree on; nor is there one where no gauge can be.
        return ()
    if line.warms:
        return ("temperature", "charge")
    if scene.comes_as_gas and line.lets_down and line.before.closed and line.before.low_kg <= 0.0:
        # Some of the gas has gone before, and nobody knows how much: there is nothing the gauge could agree with.
        return ()
    if line.lets_down and not line.seals:
        return ("pressure",)
    return ()


def _opens(scene: Scene, line: Walked) -> bool:
    openings = {o.tag for o in scene.apparatus.openings}
    opened = {t for t, p in line.during.valves.items() if p == "open" and line.before.valves.get(t) != "open"}
    was_filled = line.before.closed or line.before.letting_down
    return isinstance(line.verb, OpenContainment) or (bool(opened & openings) and was_filled)


def _proved_by(walked: Sequence[Walked], index: int) -> bool:
    """A weighing or height after closing stands before this line: while it lasts nothing is proved yet."""
    for line in walked[:index]:
        if not line.after.closed:
            continue
        step = line.step
        asked: tuple[object, ...] = ()
        if isinstance(step, DoStep):
            asked = step.read
        elif isinstance(step, QuickStep):
            asked = step.read_after
        elif isinstance(step, HoldStep) and step.hold.read is not None:
            asked = (step.hold.read,)
        if any(getattr(r, "what", "") in ("mass", "liquid height") for r in asked):
            return True
    return False


def _warning(step: Step | Parked) -> SafetyMessage | None:
    if not isinstance(step, DoStep | QuickStep) or step.warning is None:
        return None
    w = step.warning
    return SafetyMessage(w.word, w.hazard, w.could, w.avoid)


def _hold(scene: Scene, step: Step | Parked) -> Hold | None:
    if not isinstance(step, HoldStep):
        return None
    read = step.hold.read
    return Hold(step.hold.signed_by, step.hold.because, None if read is None else need_of(scene, read))


def _witness(step: Step | Parked) -> Witness | None:
    if not isinstance(step, WitnessStep):
        return None
    return Witness(step.witness.called, step.witness.because, step.witness.wait.value)


def _quick(scene: Scene, line: Walked) -> tuple[QuickItem, ...]:
    step = line.step
    if not isinstance(step, QuickStep):
        return ()
    sealing = seal_items(scene, line)
    return tuple(
        QuickItem(_quick_text(scene, i), i.latest.value, i.if_not, tuple(sorted(i.valves.items())), n in sealing)
        for n, i in enumerate(step.quick)
    )


def _quick_text(scene: Scene, item: QuickAct) -> str:
    """The author's words; where a hand holds a vent shut also how far it may come."""
    if not isinstance(item.path, LetRiseTo):
        return item.do
    unit = scene.instrument(item.path.read_on).dial.unit
    level = say_level(item.path.let_rise_to, unit, scene.barometer.middle_Pa)
    return f"{item.do}; let go at {level} on {item.path.read_on} at the latest"


def _empty(step: Step | Parked) -> Empty | None:
    if not isinstance(step, EmptyStep):
        return None
    e = step.show_empty
    return Empty(e.low_gauge, e.isolator or "", e.wall, e.vent)


def _valves(scene: Scene, step: Step | Parked) -> tuple[tuple[str, str], ...]:
    source = scene.apparatus.heat_source
    if not isinstance(step, DoStep):
        return ()
    return tuple(sorted((t, p) for t, p in step.valves.items() if source is None or t != source.tag))


def _way_back(scene: Scene, line: Walked) -> str:
    source = scene.apparatus.heat_source
    gauge = next((i.tag for i in scene.apparatus.instruments if i.reads == "pressure"), None)
    then = f" Then read {gauge}." if gauge else ""
    if line.warms and source is not None:
        return f"HEAT OFF: switch {source.tag} off." + then
    if line.held is not None:
        return f"LET GO of {line.held.vent}." + then
    if line.lets_down:
        tag = line.verb.through if isinstance(line.verb, LetDownTo) else "the vent"
        return f"SHUT {tag} only if the vessel is at rest with it shut; else leave it open and step back." + then
    return "STOP. Do nothing further in this step." + then


def _lasts(line: Walked) -> float | None:
    if isinstance(line.verb, WarmTo) and line.rate > 0.0:
        return max(0.0, line.during.hot - line.before.cold) / line.rate
    if isinstance(line.step, WitnessStep):
        return line.step.witness.wait.value
    return None
