"""A vent that springs open, held shut by hand: what holding it may reach, and what happens when the hand is gone.

Nobody there means that it opens. Should it stick, or be plugged by snow, only a relief device on the charge's own
space is left: that end is judged against 110 % of the vessel's rating (ASME BPVC VIII-1 UG-125), never against the
ceiling that is run below.
"""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import replace

from runbook.answers import Corner, Judgement, Margin
from runbook.apparatus.ceiling import pressure_limits
from runbook.apparatus.instruments import permissible_error
from runbook.apparatus.relief import highest_opening
from runbook.apparatus.spaces import springs_open
from runbook.assess.corners import Worst, highest_pressure
from runbook.assess.course import Held
from runbook.assess.judging import judge
from runbook.assess.limits import Extremes
from runbook.assess.scene import Scene
from runbook.assess.walk import VesselState, is_closed
from runbook.charge.rising import Warming, highest_rise
from runbook.errors import OutsideValidity

ACCUMULATION = 1.1
"""Share of its opening pressure that a relief device may be passed by while it flows, and that MAWP may be passed
by then: ASME BPVC VIII-1 UG-125 [1]."""


RELIEVED = "relieved pressure"
"""Kind of a margin that a relief device is counted on for: it is not the ceiling that it stands against."""


def held_vent(scene: Scene, state: VesselState) -> str | None:
    """Tag of a valve whose letting go opens this closed vessel; None where no hand keeps it shut.

    What nobody has stated counts as held: it is shut, or would be open already.
    """
    if not state.loaded or not state.closed:
        return None
    sprung = sorted(tag for tag in springs_open(scene.apparatus) if state.valves.get(tag) != "open")
    return sprung[0] if sprung else None


def let_go(scene: Scene, state: VesselState, vent: str) -> VesselState:
    """The vessel after the hand has gone."""
    valves = dict(state.valves) | {vent: "open"}
    closed = is_closed(scene, valves)
    return replace(
        state, valves=valves, closed=closed, letting_down=not closed, cold=min(state.cold, scene.coldest_in_the_open)
    )


def held_reach(scene: Scene, held: Held, state: VesselState, hottest: float | None) -> Extremes:
    """What a sequence reaches in which a hand lets go at a level; hottest: the body may be [K], None: not known.

    The level, the gauge's error, and what the charge climbs by until the hand is gone, whatever there is of it.
    """
    gauge = scene.instrument(held.gauge)
    level = held.level.absolute(scene.barometer.high_Pa)
    level += permissible_error(gauge, level) + gauge.division.value / 2.0
    return Extremes(
        _risen(scene, state.high_kg, level, hottest, held.seconds),
        scene.barometer.low_Pa,
        state.hot if hottest is None else max(state.hot, hottest),
        scene.coldest_in_the_open,
        released=state.high_kg,
    )


def _risen(scene: Scene, high_kg: float, level: float, hottest: float | None, seconds: float) -> Worst:
    volume = scene.volume[0]
    if hottest is None:
        return _not_known(scene, high_kg)
    at = Corner(high_kg, volume, hottest)
    warming = Warming(hottest, scene.apparatus.body.from_fluid.high, seconds)
    key = (high_kg, level, hottest, seconds)
    if key not in scene.risen:
        try:
            scene.risen[key] = highest_rise(scene.substance, volume, high_kg, level, warming)
        except OutsideValidity as error:
            scene.risen[key] = str(error)
    found = scene.risen[key]
    if isinstance(found, str):
        return Worst(None, 0.0, at, found)
    off = scene.substance.data.saturation_uncertainty * found if scene.assume.equation_uncertainty else 0.0
    return Worst(found + off, off, at)


def _not_known(scene: Scene, high_kg: float) -> Worst:
    why = "nobody knows how hot the connected source makes it"
    return Worst(None, 0.0, Corner(high_kg, scene.volume[0], scene.room_hottest), why)


def stuck_pressure(scene: Scene, state: VesselState, hottest: float | None) -> Worst:
    """Where the vessel ends when a vent that should open does not [Pa]: by the charge, or by its relief device."""
    mass = state.high_kg
    by_charge = _not_known(scene, mass) if hottest is None else highest_pressure(scene, mass, hottest)
    opens = [highest_opening(d) for d in scene.apparatus.relief if d.space == scene.charge_space]
    if not opens:
        return by_charge
    relieved = ACCUMULATION * min(one.pascal for one in opens) + scene.barometer.high_Pa
    if by_charge.value is not None and by_charge.value < relieved:
        return by_charge
    return Worst(relieved, 0.0, by_charge.at)


def stuck_margins(scene: Scene, state: VesselState, vent: str, hottest: float | None) -> Iterator[Margin]:
    """Margins of that end: 110 % of the vessel's rating, and every part's own rating."""
    worst, cause = stuck_pressure(scene, state, hottest), f"{vent} stuck shut"
    for limit in pressure_limits(scene.apparatus, [scene.charge_space]):
        if limit.kind in ("relief", "gauge full scale"):
            continue
        if limit.level is None:
            why = f"the rating of {limit.tag} is not known"
            yield Margin(
                limit.tag, RELIEVED, cause, worst.value, None, None, "Pa", Judgement.BLOCKED, worst.at, why=why
            )
            continue
        share = ACCUMULATION if limit.kind == "mawp" else 1.0
        allowed = share * limit.level.gauge(scene.barometer.low_Pa) + scene.barometer.low_Pa
        margin = None if worst.value is None else allowed - worst.value
        yield Margin(
            limit.tag, RELIEVED, cause, worst.value, allowed, margin, "Pa", judge(margin, worst.uncertainty),
            worst.at, why=worst.why,
        )  # fmt: skip
