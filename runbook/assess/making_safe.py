"""Make safe walked on paper: from every line, in every phase the vessel may then be in, it ends at rest.

Or with everybody away, where the phase says so. The heat source counts as stuck on for as long as it is connected:
switching it off is not enough where it can be stuck.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import replace

from runbook.answers import Finding, Phase, PlanLine
from runbook.assess.futures import left_alone
from runbook.assess.scene import Scene
from runbook.assess.walk import VesselState, Walked, is_closed
from runbook.procedure.document import Place
from runbook.run.safe import LEAVES
from runbook.run.sentences import phase_words


def making_safe_findings(
    scene: Scene, lines: Sequence[Walked], planned: Sequence[PlanLine], vent: str | None, places: Sequence[Place]
) -> tuple[Finding, ...]:
    """Rule 'make safe'; vent: the valve that make safe opens, None where nothing may be let out."""
    found: list[Finding] = []
    told: set[tuple[Phase, str]] = set()
    for line, plan, at in zip(lines, planned, places, strict=True):
        if any(m.margin is None or m.margin <= 0.0 for m in plan.ahead):
            # The step itself is outside, or not proved: that is told, and is mended first.
            continue
        for phase in plan.phases:
            fails = _fails(scene, line.after, phase, vent)
            # One sentence a phase and limit: the rest of the lines say nothing new.
            if fails and (phase, fails) not in told:
                told.add((phase, fails))
                found.append(
                    Finding(
                        "make safe", "error", *at,
                        f"step {line.number}: make safe in {phase_words(phase.value)} does not come to rest: {fails}",
                    )
                )  # fmt: skip
    return tuple(found)


def _fails(scene: Scene, state: VesselState, phase: Phase, vent: str | None) -> str:
    """What gives way after the acts of a phase; empty where it comes to rest or everybody is away."""
    leaves = LEAVES[phase]
    if leaves.away:
        return ""
    after = _after(scene, state, phase, vent)
    alone, margins = left_alone(scene, after, with_times=False)
    # Gas in the room is the people's business, not the vessel's rest.
    blocked = [m for m in margins if (m.margin is None or m.margin <= 0.0) and m.limit != "room"]
    if alone.at_rest or (alone.known and not blocked):
        return ""
    return f"{blocked[0].limit}, {blocked[0].kind}, with {blocked[0].cause}" if blocked else "what happens is not known"


def _after(scene: Scene, state: VesselState, phase: Phase, vent: str | None) -> VesselState:
    """The vessel as the acts leave it."""
    leaves, source = LEAVES[phase], scene.apparatus.heat_source
    gone = leaves.source_gone and source is not None and source.taken_away_in_one_motion
    valves = dict(state.valves)
    if vent is not None and leaves.vent in ("open", "shut"):
        valves[vent] = leaves.vent
    closed = state.loaded and is_closed(scene, valves)
    heat = state.source if source is None or state.source == "unplugged" else "unplugged" if gone else "off"
    return replace(
        state,
        source=heat,
        valves=valves,
        closed=closed,
        letting_down=state.loaded and not closed and (state.letting_down or state.closed),
    )
