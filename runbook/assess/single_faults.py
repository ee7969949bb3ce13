"""One thing wrong at a time, from every step: a valve that stayed as it was, and nobody there to see it.

Heat stuck on, everybody gone and the cooling lost are in *left alone*, which goes to the hottest room and to the
source's own cut-out whatever the step says. A gauge that sticks moves nothing by itself. What is left is a valve that
a step means to move and does not: the pressure of the charge then reaches a space that was meant to be shut off, and
only something passive in that space keeps it.
"""

from __future__ import annotations

from collections.abc import Iterator, Mapping, Sequence
from dataclasses import replace
from typing import Final

from runbook.answers import Finding
from runbook.apparatus.ceiling import pressure_limits
from runbook.apparatus.model import Apparatus
from runbook.apparatus.relief import highest_opening
from runbook.apparatus.spaces import joined_spaces
from runbook.assess.corners import highest_between
from runbook.assess.futures import left_alone
from runbook.assess.scene import Scene
from runbook.assess.walk import Walked, is_closed
from runbook.procedure.document import Place
from runbook.quantities import say

ACCUMULATION: Final = 1.1
"""Share of a rating that may be reached while a relief device blows, ASME BPVC VIII-1 UG-125 [1]."""


def single_fault_findings(scene: Scene, lines: Sequence[Walked], places: Sequence[Place]) -> tuple[Finding, ...]:
    """What a valve left as it was would reach, where nothing passive keeps it; each valve and space once."""
    found: list[Finding] = []
    told: set[tuple[str, frozenset[str]]] = set()
    stuck: dict[str, str] = {}
    for line, at in zip(lines, places, strict=True):
        stuck = _left_as_they_were(line, stuck)
        for tag, was in stuck.items():
            for space, why in _reached(scene, line, tag, was):
                if (tag, space) not in told:
                    told.add((tag, space))
                    found.append(Finding("single fault", "error", *at, f"step {line.number}: {why}"))
    return tuple(found)


def _left_as_they_were(line: Walked, stuck: Mapping[str, str]) -> dict[str, str]:
    """Valve -> where it stood before a step moved it, and still stands if that failed; up to the next that moves it."""
    found = {tag: was for tag, was in stuck.items() if line.after.valves.get(tag) != was}
    for tag, now in line.after.valves.items():
        was = line.before.valves.get(tag, "do not know")
        if was not in (now, "shut"):
            found[tag] = was
    return found


def _reached(scene: Scene, line: Walked, tag: str, was: str) -> Iterator[tuple[frozenset[str], str]]:
    """(spaces, sentence) that the pressure gets into and that nothing passive keeps."""
    valves = dict(line.after.valves) | {tag: was}
    state = replace(line.after, valves=valves, closed=line.after.loaded and is_closed(scene, valves))
    if not state.closed:
        # A way out stayed open: the vessel is as it was before the step.
        return
    apparatus, own = scene.apparatus, scene.charge_space
    meant = joined_spaces(apparatus, line.after.valves, own)
    extra = joined_spaces(apparatus, valves, own) - meant
    if not extra:
        return
    during = line.during
    ends = [future.ends_Pa for future in left_alone(scene, state, with_times=False)[0].futures]
    if during.closed:
        ends.append(highest_between(scene, during.high_kg, during.cold, during.hot).value)
    known = [end for end in ends if end is not None]
    worst = max(known) if known and len(known) == len(ends) else None
    names = " and ".join(sorted(extra))
    for limit in pressure_limits(apparatus, extra):
        if limit.kind == "relief":
            continue
        if limit.level is None:
            yield extra, f"{tag} left {was}: what {limit.tag} in the {names} bears is not known"
            return
        allowed = limit.level.absolute(scene.barometer.low_Pa)
        if worst is None or worst > allowed:
            kept = _passive(apparatus, extra)
            if kept is not None and kept <= ACCUMULATION * limit.level.gauge(scene.barometer.high_Pa):
                continue
            reach = "a pressure that is not known" if worst is None else say(worst, "bar(a)", 1)
            yield extra, (
                f"{tag} left {was}: {reach} would come to {limit.tag}, which bears {say(allowed, 'bar(a)', 1)}, and "
                f"no relief in the {names} opens in time"
            )
            return


def _passive(apparatus: Apparatus, spaces: frozenset[str]) -> float | None:
    """Highest pressure [Pa, gauge] at which the first relief device in these spaces opens; None where there is none."""
    opening = [highest_opening(device).pascal for device in apparatus.relief if device.space in spaces]
    return min(opening, default=None)
