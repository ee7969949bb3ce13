"""How fast a step warms, cools and lets down, against what parts are said to bear.

Rates that an author states are the author's; without one the fastest that the source, the room or the hole can do
counts. A part that states no rate is not judged; one whose rate is `not known` is never within limits.
"""

from __future__ import annotations

from collections.abc import Iterable, Sequence

from runbook.answers import Corner, Judgement, Margin
from runbook.assess.judging import NARROW_SHARE, judge
from runbook.assess.scene import Scene
from runbook.assess.walk import VesselState, Walked, by_source
from runbook.charge.letdown import Contents, Hole, LetDown
from runbook.errors import OutsideValidity
from runbook.procedure.model import CoolTo, LetDownTo, WarmTo
from runbook.quantities import NotKnown, Range

TEMPERATURE, PRESSURE = "temperature rate", "pressure rate"
"""Kinds of these margins."""
CONNECTED = ("on", "do not know")
_SHARE = 1e-4
"""Of the charge, let out to see how the pressure begins to fall [1]."""


def rate_margins(scene: Scene, line: Walked) -> Iterable[Margin]:
    """Margins of a line's rates, at its fastest; causes 'this step' and 'heat stuck on'."""
    parts = [p for p in scene.apparatus.components if p.space == scene.charge_space]
    thermal = [(p.tag, p.temperature_rate) for p in parts if p.temperature_rate is not None]
    hydraulic = [(p.tag, p.pressure_rate) for p in parts if p.pressure_rate is not None]
    if thermal:
        step = temperature_rate(scene, line)
        if step > 0.0:
            yield from _against(scene, TEMPERATURE, "this step", step, "K/s", thermal)
        stuck = _full_power(scene, line.during)
        if stuck > 0.0:
            yield from _against(scene, TEMPERATURE, "heat stuck on", stuck, "K/s", thermal)
    if hydraulic and line.lets_down and line.before.closed:
        yield from _against(scene, PRESSURE, "this step", falling(scene, line), "Pa/s", hydraulic)


def temperature_rate(scene: Scene, line: Walked) -> float:
    """Fastest that a line changes the temperature of the wall [K/s]; an upper bound, nothing is integrated."""
    body, verb = scene.apparatus.body, line.verb
    if isinstance(verb, WarmTo | CoolTo):
        if line.rate > 0.0:
            return line.rate
        if isinstance(verb, WarmTo) and by_source(scene, verb):
            return _full_power(scene, line.during)
        gap = max(scene.room_hottest - line.before.cold, line.before.hot - scene.room_coldest)
        return gap * body.loss_to_room.high / body.heat_capacity.low
    if line.lets_down and line.before.closed:
        # What boils away takes its heat from the wall through one coupling, from a fluid as cold as it can become.
        return (line.before.hot - line.during.cold) * body.from_fluid.high / body.heat_capacity.low
    return 0.0


def falling(scene: Scene, line: Walked) -> float | None:
    """How fast pressure begins to fall when the valve is opened wide [Pa/s]; None: the bore is not stated, or no model.

    Of the most charge at its hottest: there it stands highest, and falls fastest.
    """
    tag = line.verb.through if isinstance(line.verb, LetDownTo) else ""
    valve = next((v for v in scene.apparatus.valves if v.tag == tag), None)
    if valve is None or valve.bore is None:
        return None
    volume = scene.volume[0]
    try:
        begin = scene.substance.state(line.before.hot, line.before.high_kg / volume)
        if begin.internal_energy is None:
            return None
        down = LetDown(scene.substance, volume)
        leaving = down.leaving(begin, Hole(valve.bore.high, valve.port), scene.barometer.low_Pa)
        gone = _SHARE * line.before.high_kg
        left = line.before.high_kg - gone
        energy = (line.before.high_kg * begin.internal_energy - gone * leaving.enthalpy) / left
        after = down.state(Contents(left, energy))
    except OutsideValidity:
        return None
    return (begin.pressure - after.pressure) * leaving.flow / gone


def _full_power(scene: Scene, state: VesselState) -> float:
    """Of a source that gives all it can [K/s]; zero where none is on."""
    source, body = scene.apparatus.heat_source, scene.apparatus.body
    if source is None or state.source not in CONNECTED:
        return 0.0
    return source.power.high / (body.heat_capacity.low + source.heat_capacity.low)


def _against(
    scene: Scene,
    kind: str,
    cause: str,
    worst: float | None,
    unit: str,
    parts: Sequence[tuple[str, Range | NotKnown]],
) -> Iterable[Margin]:
    at = Corner(None, scene.volume[0], scene.room_hottest)
    for tag, bears in parts:
        if worst is None or isinstance(bears, NotKnown) or bears.high is None:
            known = worst is not None
            why = f"the {kind} that {tag} bears is not known" if known else "how fast it falls cannot be computed"
            yield Margin(tag, kind, cause, worst, None, None, unit, Judgement.BLOCKED, at, why=why)
            continue
        margin = bears.high - worst
        yield Margin(tag, kind, cause, worst, bears.high, margin, unit, judge(margin, NARROW_SHARE * bears.high), at)
