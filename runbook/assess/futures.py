"""Left alone: where the vessel goes if nobody does anything, and when a limit falls.

Ends are exact: the hottest room the procedure allows, and, while the source is connected, its own cut-out.
Times come from the two-lump heat balance and are an estimate; with solid in they are shown as 'about'.
"""

from __future__ import annotations

from runbook.answers import Future, LeftAlone, Margin
from runbook.apparatus.model import HeatSource
from runbook.assess.heat_time import seconds_to_pressure, seconds_to_temperature
from runbook.assess.held import held_vent, let_go, stuck_margins, stuck_pressure
from runbook.assess.limits import Extremes, closed_extremes, margins, open_extremes, worst_of
from runbook.assess.open_heat import steam_rise
from runbook.assess.scene import Scene
from runbook.assess.walk import VesselState
from runbook.quantities import NotKnown

CONNECTED = ("on", "off", "do not know")
"""Source states in which it can be stuck on: plugged in is enough."""


def hottest_source(scene: Scene, source: HeatSource) -> float | None:
    """Hottest wall with the source stuck on [K]: its cut-out, else where its power meets the loss to the room.

    None where the cut-out is not known.
    """
    if isinstance(source.cut_out, NotKnown):
        return None
    if source.cut_out is not None:
        return source.cut_out.high
    balance = scene.room_hottest + source.power.high / scene.apparatus.body.loss_to_room.low
    return balance if source.hottest is None else min(balance, source.hottest.high)


def hottest_body(scene: Scene, state: VesselState) -> float | None:
    """Hottest that the body may be while somebody is at it [K]: the room's, or its connected source's.

    None where that source's cut-out is not known.
    """
    source = scene.apparatus.heat_source
    if source is None or state.source not in CONNECTED:
        return max(scene.room_hottest, state.hot)
    hottest = hottest_source(scene, source)
    return None if hottest is None else max(scene.room_hottest, state.hot, hottest)


def left_alone(
    scene: Scene, state: VesselState, with_times: bool, stuck: bool | None = None
) -> tuple[LeftAlone, tuple[Margin, ...]]:
    """Both futures of a state and all their margins, worst a limit first.

    with_times: also when the first limit falls (integrates; not for live evaluation). stuck: whether the
    source counts as stuck on; None: whenever it is connected.
    """
    vent = held_vent(scene, state)
    if vent is not None:
        return _hand_gone(scene, state, vent, with_times)
    futures: list[Future] = []
    found: list[Margin] = []
    off, off_margins = _future(scene, state, "heat off", scene.room_hottest, with_times)
    futures.append(off)
    found += off_margins
    source = scene.apparatus.heat_source
    counts = state.source in CONNECTED if stuck is None else stuck
    if source is not None and counts and scene.assume.heat_stuck_on:
        hottest = hottest_source(scene, source)
        ends = None if hottest is None else max(hottest, scene.room_hottest)
        stuck_on, stuck_margins = _future(scene, state, "heat stuck on", ends, with_times)
        futures.append(stuck_on)
        found += stuck_margins
    known = all(f.ends_Pa is not None for f in futures)
    alone = LeftAlone(all(f.at_rest for f in futures), known, tuple(futures))
    return alone, worst_of(found)


def _hand_gone(scene: Scene, state: VesselState, vent: str, with_times: bool) -> tuple[LeftAlone, tuple[Margin, ...]]:
    """Both futures of a vessel that a hand keeps shut: the vent springs open, or it sticks."""
    hottest = hottest_body(scene, state)
    opened, found = _future(scene, let_go(scene, state, vent), f"{vent} let go", hottest, with_times)
    stuck = list(stuck_margins(scene, state, vent, hottest))
    blocked = [m for m in worst_of(stuck) if m.margin is None or m.margin <= 0.0]
    ends = stuck_pressure(scene, state, hottest).value
    limit = blocked[0].limit if blocked else None
    shut = Future(f"{vent} stuck shut", None, ends, ends is not None and not blocked, limit, None)
    futures = (opened, shut)
    known = all(f.ends_Pa is not None for f in futures)
    return LeftAlone(all(f.at_rest for f in futures), known, futures), worst_of([*found, *stuck])


def _future(
    scene: Scene, state: VesselState, cause: str, ends_K: float | None, with_times: bool
) -> tuple[Future, list[Margin]]:
    if ends_K is None:
        return Future(cause, None, None, False, None, None), []
    reach = _reach(scene, state, max(state.hot, ends_K))
    found = margins(scene, reach, state.valves, cause)
    ends = _reach(scene, state, ends_K).pressure.value
    blocked = [m for m in worst_of(found) if m.margin is None or m.margin <= 0.0]
    if not blocked:
        return Future(cause, ends_K, ends, ends is not None, None, None), found
    first, after = blocked[0].limit, None
    if with_times and state.closed:
        first, after = _first_to_fall(scene, state, cause, blocked, ends_K)
    # While solid is left the time leans on constants for its heats.
    about = state.cold < scene.substance.triple_temperature
    return Future(cause, ends_K, ends, False, first, after, about), found


def _reach(scene: Scene, state: VesselState, hot: float) -> Extremes:
    if not state.bears:
        released = state.high_kg if state.letting_down else 0.0
        return open_extremes(scene, hot, state.cold, released, steam_rise(scene, state))
    return closed_extremes(scene, state.high_kg, hot, state.cold)


def _first_to_fall(
    scene: Scene, state: VesselState, cause: str, blocked: list[Margin], ends_K: float
) -> tuple[str, float | None]:
    """(tag, seconds) of the limit that falls first; 0 s where it has fallen, None where no time is known."""
    heating = cause == "heat stuck on"
    best: tuple[str, float | None] = (blocked[0].limit, None)
    for one in blocked:
        if one.allowed is None:
            continue
        after: float | None
        if one.unit == "Pa":
            after = seconds_to_pressure(scene, state, one.allowed, heating, ends_K)
        elif one.kind == "temperature":
            after = seconds_to_temperature(scene, state, one.allowed, heating, ends_K)
        else:
            after = 0.0
        if after is not None and (best[1] is None or after < best[1]):
            best = (one.limit, after)
    return best
