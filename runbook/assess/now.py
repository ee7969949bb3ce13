"""One live evaluation: a Question answered. No time is integrated here; a person is waiting with a full hand."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, replace

from runbook.answers import (
    Agreement,
    Answer,
    ChargeBox,
    Distance,
    LeftAlone,
    Margin,
    Observation,
    Question,
)
from runbook.apparatus.spaces import isolated
from runbook.assess.agreement import Computed, agreement, computed_pressure, read_apart, reading_U
from runbook.assess.ahead import look, standing_valves
from runbook.assess.boxes import charge_box, gas_left
from runbook.assess.corners import Worst, temperature_at_pressure
from runbook.assess.course import Held
from runbook.assess.evidence.estimate import charge_estimate
from runbook.assess.evidence.live import explained
from runbook.assess.futures import CONNECTED, hottest_body, left_alone
from runbook.assess.held import held_reach, held_vent
from runbook.assess.limits import (
    Extremes,
    closed_extremes,
    margins,
    open_extremes,
    with_rate,
    worst_of,
)
from runbook.assess.phases import phases
from runbook.assess.scene import Scene
from runbook.assess.sights import liquid_height, live_sights
from runbook.assess.walk import VesselState, Walked, hottest_of, start_state
from runbook.errors import OutsideValidity
from runbook.procedure.model import WarmTo


@dataclass(frozen=True, slots=True)
class Readings:
    """The readings of a question that the state of the vessel rests on."""

    temperature: Observation | None
    """The hottest of those that count."""
    pressure: Observation | None
    """The highest of those that count, of a gauge that is joined to the charge."""
    isolated: tuple[str, ...]
    """Gauges that were read but are isolated as the valves stand, or may be."""


def answer(scene: Scene, lines: Sequence[Walked], question: Question) -> Answer:
    """Everything the interlock leans on. Raises OutsideValidity nowhere: unknown is part of the answer."""
    box = charge_box(scene, question.charge, question.observations, question.closed != "open")
    readings = _readings(scene, question)
    after_letting_down = question.line >= 0 and lines[question.line].during.letting_down
    if box is not None and after_letting_down and question.closed != "open":
        box = gas_left(scene, box, readings.temperature, readings.pressure) or box
    state = _state(scene, lines, question, box)
    line = lines[question.line] if question.line >= 0 else None
    rate = worst_rate(scene, state, line)
    wall = _wall(scene, state, readings.temperature, rate)
    state = replace(state, hot=wall[1], cold=wall[0])
    held = line.held if line is not None else None
    reach = _reach(scene, state, readings, held)
    computed = None
    if box is not None and state.closed and readings.temperature is not None and held is None:
        # A thermometer lags downwards too.
        moving = max(rate, line.rate if line is not None else 0.0)
        computed = computed_pressure(scene, box, readings.temperature, moving)
    standing = worst_of(margins(scene, reach, state.valves, "now"))
    distance = _distance(scene, state, reach, rate, standing, held is not None)
    found_now = _timed(standing, distance)
    ahead = _ahead(scene, lines, question, box)
    alone, _ = left_alone(scene, state, with_times=False)
    proved = _proved(scene, lines, question, box, state)
    left = _pressure_left(ahead)
    apart = read_apart(lines, readings.temperature, readings.pressure)
    verdict = agreement(scene, computed, box, readings.pressure, left, apart)
    found = _assemble(
        scene,
        question,
        line,
        state,
        box,
        reach,
        computed,
        verdict,
        distance,
        found_now,
        ahead,
        alone,
        proved,
        readings,
    )
    moving = rate if state.source in ("on", "do not know") else 0.0
    return replace(
        found,
        explanations=explained(scene, question, verdict, readings.temperature, moving),
        estimate=charge_estimate(scene, question.charge, question.observations) if state.closed else None,
    )


def _assemble(
    scene: Scene,
    question: Question,
    line: Walked | None,
    state: VesselState,
    box: ChargeBox | None,
    reach: Extremes,
    computed: Computed | None,
    verdict: Agreement,
    distance: Distance,
    found_now: tuple[Margin, ...],
    ahead: tuple[Margin, ...],
    alone: LeftAlone,
    proved: bool,
    readings: Readings,
) -> Answer:
    middle = None if box is None or not state.closed else 0.5 * (box.low_kg + box.high_kg)
    read = readings.temperature.value if readings.temperature else None
    # What melts behind a hand is not as warm as the wall: there the plan's own sights stand.
    by_hand = line is not None and line.held is not None and line.seals
    sights = () if read is None or by_hand else live_sights(scene, line, state, box, read)
    highest = _highest_read(scene, readings)
    if state.letting_down and highest is not None and highest < scene.substance.triple_pressure:
        # No liquid stays at such a pressure, however warm the wall is.
        sights = tuple(one for one in sights if one.of not in ("boiling", "snow"))
    # Where a sight has the height already it is not worked out twice.
    height = next((value for one in sights for name, value, _ in one.numbers if name == "height"), None)
    if height is None and middle is not None and read is not None:
        height = liquid_height(scene, middle, read)
    in_phases = phases(
        scene,
        loaded=state.loaded,
        closed=state.closed,
        letting_down=state.letting_down,
        high_kg=state.high_kg,
        proved=bool(box and box.proved),
        hot=state.hot,
        cold=state.cold,
        pressure=highest,
        by_hand=held_vent(scene, state) is not None,
    )
    return Answer(
        key=question.key,
        now=found_now,
        ahead=ahead,
        left_alone=alone,
        agreement=verdict,
        charge=box,
        charge_proved=proved,
        valid=reach.pressure.value is not None,
        good_for_s=None if distance.seconds is None else max(0.0, 0.5 * distance.seconds),
        phases=in_phases,
        pressure=computed.pressure if computed else _in_the_open(scene, state),
        pressure_U=computed.U if computed else _barometer_U(scene, state),
        region=str(computed.region) if computed else None,
        liquid_height=height,
        distance=distance,
        sights=sights,
    )


def _state(scene: Scene, lines: Sequence[Walked], question: Question, box: ChargeBox | None) -> VesselState:
    """Where the vessel stands by the question, with the walk's bounds for what nobody has read."""
    planned = lines[question.line].during if question.line >= 0 else start_state(scene)
    closed = question.closed != "open"
    loaded = box is not None or planned.loaded
    low, high = (box.low_kg, box.high_kg) if box else (planned.low_kg, planned.high_kg)
    return replace(
        planned,
        loaded=loaded,
        closed=closed and loaded,
        letting_down=loaded and not closed and (planned.letting_down or planned.closed),
        filled=planned.filled and not closed,
        low_kg=low,
        high_kg=high,
        valves=dict(planned.valves) | dict(question.valves),
        source=question.source,
    )


def _readings(scene: Scene, question: Question) -> Readings:
    positions = dict(question.valves)
    # How warm the room is says nothing of the vessel in it.
    room = {i.tag for i in scene.apparatus.instruments if i.of == "room air"}
    walls = [o for o in question.observations if o.what == "temperature" and not o.beside and o.tag not in room]
    gauges = [o for o in question.observations if o.what == "pressure"]
    shut = tuple(o.tag for o in gauges if isolated(scene.apparatus, o.tag, positions))
    # What a gauge showed over the open vessel says nothing of the charge that has been closed in since.
    joined = [o for o in gauges if o.tag not in shut and (o.closed or question.closed == "open")]
    return Readings(
        max(walls, key=lambda o: (o.value, o.sequence), default=None),
        max(joined, key=lambda o: (o.value, o.sequence), default=None),
        shut,
    )


def worst_rate(scene: Scene, state: VesselState, line: Walked | None) -> float:
    """Worst credible warming [K/s]: the line's own rate or the source's full power, the larger; else the room."""
    source, body = scene.apparatus.heat_source, scene.apparatus.body
    if source is not None and state.source in ("on", "do not know"):
        capacity = body.heat_capacity.low + source.heat_capacity.low
        return max(source.power.high / capacity, line.rate if line is not None else 0.0)
    gap = scene.room_hottest - state.cold
    return max(0.0, gap * body.loss_to_room.high / body.heat_capacity.low) if state.closed else 0.0


def _wall(scene: Scene, state: VesselState, read: Observation | None, rate: float) -> tuple[float, float]:
    """Coldest and hottest the wetted wall can be [K]; without a reading what the walk allows."""
    if read is None:
        hot = state.hot
        if state.source in CONNECTED and scene.apparatus.heat_source is not None:
            hot = max(hot, scene.room_hottest)
        return state.cold, hot
    U = reading_U(scene, read)
    probe = scene.instrument(read.tag)
    lag = (probe.lag.high if probe.lag is not None else 0.0) if state.source in ("on", "do not know") else 0.0
    return read.value - U, read.value + U + lag * rate


def _reach(scene: Scene, state: VesselState, readings: Readings, held: Held | None) -> Extremes:
    """Extremes now: the worse of measured and computed, plus U; held: a hand lets go before it comes further."""
    if not state.bears and not (state.loaded and state.letting_down):
        return open_extremes(scene, state.hot, state.cold)
    if held is not None:
        reach = held_reach(scene, held, state, hottest_body(scene, state))
    else:
        reach = closed_extremes(scene, state.high_kg, state.hot, state.cold)
    read = readings.pressure
    if read is None:
        return reach
    U = reading_U(scene, read)
    worst = reach.pressure
    if state.letting_down:
        # With the vent open only the gauge says where the pressure is.
        return replace(reach, pressure=replace(worst, value=read.value + U, uncertainty=U))
    if worst.value is not None and read.value + U > worst.value:
        return replace(reach, pressure=Worst(read.value + U, U, worst.at))
    return reach


def _timed(found: tuple[Margin, ...], distance: Distance) -> tuple[Margin, ...]:
    """The same margins, the pressure limit that falls first knowing how long it lasts."""
    lasting = []
    for one in found:
        # Only the limit that falls first is timed; the others outlast it.
        timed = one.kind == "pressure" and one.margin is not None and distance.pressure is not None
        first = timed and (one.margin or 0.0) <= (distance.pressure or 0.0) + 1.0
        lasting.append(with_rate(one, distance.seconds if first else None))
    return tuple(lasting)


def _distance(
    scene: Scene, state: VesselState, reach: Extremes, rate: float, standing: tuple[Margin, ...], held: bool
) -> Distance:
    """To the lowest pressure limit along the worst corner's own isochore."""
    worst = reach.pressure.value
    limits = [m for m in standing if m.kind == "pressure" and m.allowed is not None]
    if worst is None or not limits:
        return Distance(None, None, None, rate)
    ceiling = min(limits, key=lambda m: m.allowed or 0.0).allowed
    if ceiling is not None and held:
        # The hand is gone before; kelvins are those that would be left if it were not.
        return Distance(ceiling - worst, _kelvins_between(scene, worst, ceiling), None, rate)
    if ceiling is None or not state.closed:
        return Distance(None if ceiling is None else ceiling - worst, None, None, rate)
    reached = temperature_at_pressure(scene, state.high_kg, ceiling, state.hot)
    if worst >= ceiling:
        return Distance(ceiling - worst, 0.0, 0.0, rate)
    if reached is None:
        return Distance(ceiling - worst, None, None, rate)
    kelvin = reached - state.hot
    # Heat off in a room that never gets there: the margin lasts for ever.
    if state.source not in ("on", "do not know") and reached > scene.room_hottest:
        return Distance(ceiling - worst, kelvin, None, rate)
    return Distance(ceiling - worst, kelvin, kelvin / rate if rate > 0.0 else None, rate)


def _kelvins_between(scene: Scene, low: float, high: float) -> float | None:
    """Of liquid beside its vapour, from one pressure [Pa] to another [K]; None beyond its curve."""
    try:
        return scene.substance.boiling_temperature(high) - scene.substance.boiling_temperature(low)
    except OutsideValidity:
        return None


def _ahead(scene: Scene, lines: Sequence[Walked], question: Question, box: ChargeBox | None) -> tuple[Margin, ...]:
    """Of entering `to`; asked again at every reading, so kept for as long as charge and valves are the same."""
    if not 0 <= question.to < len(lines):
        return ()
    high = box.high_kg if box is not None else None
    key = (question.to, high, question.valves)
    if key not in scene.looked:
        moved = list(lines)
        moved[question.to] = standing_valves(lines[question.to], dict(question.valves))
        if len(scene.looked) > 256:
            scene.looked.clear()
        scene.looked[key] = look(scene, moved, question.to, with_times=False, high_kg=high).margins
    return scene.looked[key]


def _proved(
    scene: Scene, lines: Sequence[Walked], question: Question, box: ChargeBox | None, state: VesselState
) -> bool:
    """Proved after closing, or so little at most that the step cannot fill the vessel with liquid."""
    if box is None:
        return False
    if box.proved and not box.contradiction:
        return True
    if not 0 <= question.to < len(lines) or box.contradiction:
        return False
    verb = lines[question.to].verb
    if not isinstance(verb, WarmTo):
        return False
    density = box.high_kg / scene.volume[0]
    full = scene.substance.liquid_full_temperature(density)
    if full is None:
        # At critical density and thinner liquid never fills the vessel; denser than any liquid it always does.
        return density < scene.substance.critical_density or scene.substance.is_critical(density)
    return hottest_of(scene, verb) < full


def _in_the_open(scene: Scene, state: VesselState) -> float | None:
    """An open vessel that nobody has let down stands at the room's pressure [Pa]."""
    return None if state.closed or state.letting_down else scene.barometer.middle_Pa


def _barometer_U(scene: Scene, state: VesselState) -> float | None:
    return None if _in_the_open(scene, state) is None else 0.5 * (scene.barometer.high_Pa - scene.barometer.low_Pa)


def _pressure_left(ahead: tuple[Margin, ...]) -> float | None:
    left = [m.margin for m in ahead if m.kind == "pressure"]
    known = [m for m in left if m is not None]
    return min(known) if left and len(known) == len(left) else None


def _highest_read(scene: Scene, readings: Readings) -> float | None:
    one = readings.pressure
    return None if one is None else one.value + reading_U(scene, one)
