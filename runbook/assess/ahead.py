"""Look-ahead: every margin of entering a line, before anybody enters it.

For a line that commits, everything that follows counts too, up to the next state at rest. Closing the last
vent commits to the whole of what the procedure does with that charge, since only letting it down takes it
back: so it is refused while the vessel is still open.
"""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass, replace

from runbook.answers import LeftAlone, Margin
from runbook.assess.barred import barred_margins
from runbook.assess.futures import hottest_body, left_alone
from runbook.assess.held import held_reach, stuck_margins
from runbook.assess.limits import closed_extremes, margins, open_extremes, worst_of
from runbook.assess.open_heat import steam_rise
from runbook.assess.rates import rate_margins
from runbook.assess.scene import Scene
from runbook.assess.walk import VesselState, Walked, by_source
from runbook.procedure.model import OpenContainment, WarmTo


@dataclass(frozen=True, slots=True)
class Look:
    """What a look-ahead found."""

    margins: tuple[Margin, ...]
    """Worst a limit and kind, the smallest share of its limit first."""
    left_alone: LeftAlone
    """After the line."""


def commits(scene: Scene, line: Walked) -> bool:
    """Cannot be taken back at will: closes the last vent, switches heat on, breaks containment."""
    if line.seals or isinstance(line.verb, OpenContainment):
        return True
    return isinstance(line.verb, WarmTo) and by_source(scene, line.verb)


def look(scene: Scene, lines: Sequence[Walked], index: int, with_times: bool, high_kg: float | None = None) -> Look:
    """All margins of entering line `index`. high_kg: most charge [kg], replacing the walk's once closed."""
    line = _with_charge(lines[index], high_kg)
    found = [*path_margins(scene, line, "this step"), *rate_margins(scene, line)]
    alone, alone_margins = left_alone(scene, line.after, with_times)
    found += alone_margins
    if line.seals:
        found += _committed(scene, lines, index, high_kg)
    return Look(worst_of(found), alone)


def path_margins(scene: Scene, line: Walked, cause: str) -> list[Margin]:
    """Margins of what the line itself reaches, and of what its fluid itself bars."""
    return [*_reached(scene, line, cause), *barred_margins(scene, line, cause)]


def _reached(scene: Scene, line: Walked, cause: str) -> list[Margin]:
    during = line.during
    if line.held is not None:
        hottest = hottest_body(scene, during)
        reach = held_reach(scene, line.held, during, hottest)
        return [
            *margins(scene, reach, during.valves, cause),
            *stuck_margins(scene, during, line.held.vent, hottest),
        ]
    if line.lets_down and line.before.closed:
        # Gas goes to the room, the wall may reach dry ice; the pressure starts where it stood.
        start = closed_extremes(scene, line.before.high_kg, line.before.hot, line.before.cold)
        # The room is at the other end of the valve.
        lowest = scene.barometer.low_Pa
        reach = replace(start, cold=during.cold, lowest_pressure=lowest, released=line.before.high_kg)
        return margins(scene, reach, line.before.valves, cause)
    if during.bears:
        reach = closed_extremes(scene, during.high_kg, during.hot, during.cold)
    else:
        released = during.high_kg if during.loaded and not line.before.loaded else 0.0
        reach = open_extremes(scene, during.hot, during.cold, released, steam_rise(scene, during))
    return margins(scene, reach, during.valves, cause)


def _committed(scene: Scene, lines: Sequence[Walked], index: int, high_kg: float | None) -> list[Margin]:
    if lines[index].lets_down:
        # It lets go again of what it closes: the next closing is judged when it comes.
        return []
    found: list[Margin] = []
    connected = False
    judged: tuple[object, ...] = ()
    for later in lines[index + 1 :]:
        if later.lets_down:
            break
        connected = connected or later.during.source in ("on", "off", "do not know")
        # Most steps leave the vessel as it is: what has just been judged is not judged again.
        state = (later.before.loaded, later.during, later.after, connected)
        if state == judged:
            continue
        judged = state
        line = _with_charge(later, high_kg)
        found += path_margins(scene, line, line.number)
        _, margins_alone = left_alone(scene, line.after, with_times=False, stuck=connected)
        found += margins_alone
    return found


def _with_charge(line: Walked, high_kg: float | None) -> Walked:
    if high_kg is None:
        return line

    def filled(state: VesselState) -> VesselState:
        return replace(state, high_kg=high_kg) if state.loaded and state.closed else state

    return replace(line, before=filled(line.before), during=filled(line.during), after=filled(line.after))


def standing_valves(line: Walked, valves: Mapping[str, str]) -> Walked:
    """The line with valves standing as stated; those the line itself sets keep what it leaves behind."""
    changed = {t: p for t, p in line.during.valves.items() if line.before.valves.get(t) != p}
    positions = dict(valves) | changed
    return replace(
        line,
        before=replace(line.before, valves=dict(valves)),
        during=replace(line.during, valves=positions),
        after=replace(line.after, valves=positions),
    )
