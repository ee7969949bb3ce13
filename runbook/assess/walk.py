"""The procedure walked on paper: where the vessel stands before, during and after every line.

Everything is a box: the hottest and coldest the wall may be, the least and most that may be in it. The walk
knows no limits and no margins; it only says what can be reached.
"""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass, replace

from runbook.apparatus.instruments import permissible_error
from runbook.assess.course import Held, course_of
from runbook.assess.scene import Scene
from runbook.procedure.model import (
    CoolTo,
    DoStep,
    EmptyStep,
    LetDownTo,
    Load,
    Parked,
    Path,
    QuickStep,
    Step,
    WarmTo,
)


@dataclass(frozen=True, slots=True)
class VesselState:
    """Where the vessel may be while somebody stands at a line."""

    loaded: bool
    """Something is in."""
    closed: bool
    """Every way out is shut."""
    letting_down: bool
    """A way out is open after the vessel was closed, and nobody has proved it empty."""
    low_kg: float
    """Least charge [kg]."""
    high_kg: float
    """Most charge [kg]."""
    hot: float
    """Hottest wetted wall [K]."""
    cold: float
    """Coldest wetted wall [K]."""
    valves: Mapping[str, str]
    """Positions by tag."""
    source: str
    """'on', 'off', 'unplugged', 'do not know' or 'none'."""
    filled: bool = False
    """Gas stands in it under its full pressure, though a way is open: the one to what it is filled from."""

    @property
    def bears(self) -> bool:
        """A charge presses on it."""
        return self.loaded and (self.closed or self.filled)


@dataclass(frozen=True, slots=True)
class Walked:
    """One line of the procedure on the path."""

    number: str
    part: int
    step: Step | Parked
    before: VesselState
    during: VesselState
    """Extremes reached in the line: hot and cold are its own, valves are those it leaves behind."""
    after: VesselState
    verb: Path | None
    """What it does to the charge; of a quick sequence the first path."""
    seals: bool
    warms: bool
    """By a heat source, a closed charge."""
    lets_down: bool
    rate: float
    """Fastest warming the line states [K/s]; 0 where it states none."""
    held: Held | None = None
    """In the line the vessel is closed only by a hand on a vent that springs open, which lets go of it again."""


def start_state(scene: Scene) -> VesselState:
    """Before the first line of the procedure."""
    low, high = 0.0, 0.0
    if scene.starts_loaded:
        # No record of what is in: brim-full is the worst it can be.
        low, high = (scene.charge.low_kg, scene.charge.high_kg) if scene.charge else (0.0, scene.brim_full)
    positions = dict(scene.procedure.at_start)
    source = scene.apparatus.heat_source
    state = "none" if source is None else positions.get(source.tag, "do not know")
    valves = {v.tag: positions.get(v.tag, "do not know") for v in scene.apparatus.valves}
    valves |= {o.tag: positions.get(o.tag, "do not know") for o in scene.apparatus.openings}
    if scene.cell_closed:
        valves |= {tag: "shut" for tag in outside_tags(scene)}
    loaded = scene.starts_loaded
    return VesselState(
        loaded=loaded,
        closed=loaded and is_closed(scene, valves),
        letting_down=loaded and not is_closed(scene, valves),
        low_kg=low,
        high_kg=high,
        hot=scene.room_hottest,
        cold=scene.room_coldest,
        valves=valves,
        source=state,
    )


def outside_tags(scene: Scene) -> tuple[str, ...]:
    """Valves and openings that join the charge's space to the room, of the file."""
    space = scene.charge_space
    return tuple(
        [v.tag for v in scene.apparatus.valves if {space, "outside"} == set(v.joins)]
        + [o.tag for o in scene.apparatus.openings if o.space == space]
    )


def is_closed(scene: Scene, valves: Mapping[str, str]) -> bool:
    """Whether every way out of the charge's space is shut; 'do not know' counts as shut: the worse case."""
    return all(valves.get(tag, "do not know") != "open" for tag in outside_tags(scene))


def walk(scene: Scene, box: tuple[float, float] | None = None) -> tuple[Walked, ...]:
    """Every line in order. box: least and most charge at closing [kg]; None: what the charge record says of a
    vessel loaded in an earlier run of this procedure, else as planned.

    Raises nothing: an impossible order is the writing rules' business; here it only makes wider boxes.
    """
    record = None if scene.charge is None else (scene.charge.low_kg, scene.charge.high_kg)
    sealed = box or record or scene.planned
    state = start_state(scene)
    lines: list[Walked] = []
    for index, part in enumerate(scene.procedure.parts):
        steps: list[Step | Parked] = [part.parked] if part.parked is not None else list(part.steps or ())
        for place, step in enumerate(steps):
            line = _one(scene, state, step, sealed, f"{index + 1}.{place + 1}", index)
            lines.append(line)
            state = line.after
    return tuple(lines)


def left_closed(lines: Sequence[Walked]) -> bool:
    """Whether the charge is anywhere closed in without a hand that lets go of it."""
    return any(line.during.closed and line.held is None for line in lines)


def _one(
    scene: Scene,
    before: VesselState,
    step: Step | Parked,
    sealed: tuple[float, float],
    number: str,
    part: int,
) -> Walked:
    verb = path_of(step)
    valves = dict(before.valves) | valves_of(step)
    source = _source_after(scene, before, step, verb)
    during = replace(before, valves=valves, source=source)
    course = course_of(scene.apparatus, before.valves, step)
    ends_closed = is_closed(scene, valves)
    seals = before.loaded and not before.closed and (ends_closed or course.closes)
    if isinstance(verb, Load):
        low, high = verb.load.low, verb.load.high
        gas = scene.comes_as_gas
        cold = during.cold if gas else scene.coldest_in_the_open
        during = replace(during, loaded=True, low_kg=low, high_kg=high, cold=cold, filled=gas)
    if seals:
        # Of what was let down before nobody knows how little is left; never more than was closed in first.
        low = 0.0 if before.letting_down else sealed[0]
        during = replace(
            during, closed=True, letting_down=False, low_kg=low, high_kg=sealed[1],
            hot=max(during.hot, scene.room_hottest), filled=False,
        )  # fmt: skip
    during = _moved(scene, during, verb)
    opened = (before.closed or course.closes) and not ends_closed
    lets_down = isinstance(verb, LetDownTo) or opened
    let_down = during
    if lets_down:
        cold = scene.coldest_let_down(before.high_kg, during.cold, during.hot)
        let_down = replace(during, closed=False, letting_down=True, cold=cold, filled=False)
    if not seals:
        # A sequence that closes and lets go again stands in the line closed, which is the worse of the two.
        during = let_down
    after = _after(scene, let_down, step, verb)
    return Walked(
        number=number,
        part=part,
        step=step,
        before=before,
        during=during,
        after=after,
        verb=verb,
        seals=seals,
        warms=isinstance(verb, WarmTo) and by_source(scene, verb) and before.loaded,
        lets_down=lets_down,
        rate=_rate(verb),
        held=course.held if seals or (before.loaded and not course.closes) else None,
    )


def path_of(step: Step | Parked) -> Path | None:
    """What a step does to the charge; of a quick sequence the first path in it."""
    if isinstance(step, DoStep):
        return step.path
    if isinstance(step, QuickStep):
        return next((item.path for item in step.quick if item.path is not None), None)
    return None


def valves_of(step: Step | Parked) -> dict[str, str]:
    """Positions that a step leaves behind."""
    if isinstance(step, DoStep):
        return dict(step.valves)
    if isinstance(step, QuickStep):
        merged: dict[str, str] = {}
        for item in step.quick:
            merged |= item.valves
        return merged
    return {}


def by_source(scene: Scene, verb: WarmTo | CoolTo) -> bool:
    """Whether a warming is driven by the heat source, not by the room."""
    source = scene.apparatus.heat_source
    return source is not None and verb.by_means_of == source.tag


def _source_after(scene: Scene, before: VesselState, step: Step | Parked, verb: Path | None) -> str:
    source = scene.apparatus.heat_source
    if source is None:
        return "none"
    stated = valves_of(step).get(source.tag)
    if stated is not None:
        return stated
    if isinstance(step, Parked):
        return "unplugged" if step.heat == "unplugged" else "off"
    if isinstance(verb, WarmTo) and by_source(scene, verb):
        return "on"
    # Cooling by the room is done with the source switched off, but it stays connected.
    if isinstance(verb, CoolTo) and before.source == "on":
        return "off"
    return before.source


def _moved(scene: Scene, state: VesselState, verb: Path | None) -> VesselState:
    if isinstance(verb, WarmTo):
        return replace(state, hot=max(state.hot, hottest_of(scene, verb)))
    if isinstance(verb, CoolTo):
        return replace(state, cold=min(state.cold, coldest_of(scene, verb)))
    return state


def _after(scene: Scene, state: VesselState, step: Step | Parked, verb: Path | None) -> VesselState:
    if isinstance(step, EmptyStep):
        return replace(
            state, loaded=False, closed=False, letting_down=False, low_kg=0.0, high_kg=0.0,
            hot=scene.room_hottest, cold=scene.room_coldest, filled=False,
        )  # fmt: skip
    if isinstance(verb, WarmTo):
        # The step ends with the wall at its target; from there only the room moves it.
        return replace(state, cold=min(scene.room_coldest, _target(scene, verb)[0]))
    if isinstance(verb, CoolTo):
        return replace(state, hot=max(scene.room_hottest, _target(scene, verb)[1] + _probe(scene, verb)))
    return state


def hottest_of(scene: Scene, verb: WarmTo) -> float:
    """Hottest wall of a warming [K]: target (set point if hotter) + overshoot + probe error + lag x rate."""
    assume = scene.assume
    hottest = _target(scene, verb)[1]
    if verb.set_to is not None:
        hottest = max(hottest, verb.set_to.high)
    if assume.overshoot and verb.overshoot is not None:
        hottest += verb.overshoot.high
    if not by_source(scene, verb):
        return max(hottest, scene.room_hottest)
    probe = scene.wall_probe()
    if probe is not None:
        hottest += permissible_error(probe, hottest) if assume.probe_error else 0.0
        lag = probe.lag.high if probe.lag is not None else 0.0
        hottest += lag * _rate(verb) if assume.lag else 0.0
    return hottest


def coldest_of(scene: Scene, verb: CoolTo) -> float:
    """Coldest wall of a cooling [K]: as hottest_of, downwards."""
    coldest = _target(scene, verb)[0] - _probe(scene, verb)
    if verb.set_to is not None:
        coldest = min(coldest, verb.set_to.low)
    if verb.overshoot is not None:
        coldest -= verb.overshoot.high
    return coldest


def _probe(scene: Scene, verb: WarmTo | CoolTo) -> float:
    probe = scene.wall_probe()
    return 0.0 if probe is None else permissible_error(probe, _target(scene, verb)[1])


def _target(scene: Scene, verb: WarmTo | CoolTo) -> tuple[float, float]:
    aim = verb.warm_to if isinstance(verb, WarmTo) else verb.cool_to
    if isinstance(aim, str):
        return scene.room_coldest, scene.room_hottest
    return aim.low, aim.high


def _rate(verb: Path | None) -> float:
    if isinstance(verb, (WarmTo, CoolTo)) and verb.rate is not None and verb.rate.high is not None:
        return verb.rate.high
    return 0.0
