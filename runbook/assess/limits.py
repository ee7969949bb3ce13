"""From extremes of pressure and temperature to margins against every rating that counts.

A rating written `not known`, and a value the models do not reach, give a margin of None, which is blocked.
"""

from __future__ import annotations

from collections.abc import Iterable, Mapping
from dataclasses import dataclass, replace

from runbook.answers import Corner, Judgement, Margin
from runbook.apparatus.ceiling import pressure_limits
from runbook.apparatus.spaces import joined_spaces
from runbook.assess.corners import Worst, highest_between
from runbook.assess.judging import NARROW_SECONDS, NARROW_SHARE, judge
from runbook.assess.room import gas_margins, outside_margins
from runbook.assess.scene import Scene
from runbook.errors import OutsideValidity
from runbook.quantities import Level, NotKnown, Range

_UNVENTED = "how much steam its open way lets out is not known: write the bore of its valve"


@dataclass(frozen=True, slots=True)
class Extremes:
    """What the vessel may reach over some stretch."""

    pressure: Worst
    """Highest [Pa]."""
    lowest_pressure: float
    """Lowest [Pa]."""
    hot: float
    """Hottest wetted wall [K]."""
    cold: float
    """Coldest wetted wall [K]."""
    released: float = 0.0
    """Gas that may get into the room [kg]."""


def closed_extremes(scene: Scene, high_kg: float, hot: float, cold: float) -> Extremes:
    """Of a closed charge of at most high_kg [kg] with walls between cold and hot [K]."""
    return Extremes(highest_between(scene, high_kg, cold, hot), lowest_pressure(scene, high_kg, cold), hot, cold)


def lowest_pressure(scene: Scene, high_kg: float, cold: float) -> float:
    """Lowest that a closed charge [kg] may come to with a wall at cold [K]: trapped air is not counted on [Pa]."""
    low = scene.barometer.low_Pa
    if cold >= scene.coldest_in_the_open and scene.substance.triple_pressure > scene.barometer.high_Pa:
        return low
    try:
        return min(low, scene.substance.pressure(cold, max(high_kg, 1e-9) / scene.volume[1]))
    except OutsideValidity:
        return 0.0


def open_extremes(scene: Scene, hot: float, cold: float, released: float = 0.0, rise: float | None = 0.0) -> Extremes:
    """Of an open vessel with walls between cold and hot [K] that gives released [kg] to the room.

    rise: how far its steam brings it above the room's pressure [Pa]; None: that is not known.
    """
    at = Corner(None, scene.volume[0], hot)
    worst = Worst(scene.barometer.high_Pa + rise, 0.0, at) if rise is not None else Worst(None, 0.0, at, _UNVENTED)
    return Extremes(worst, scene.barometer.low_Pa, hot, cold, released)


def margins(scene: Scene, reach: Extremes, positions: Mapping[str, str], cause: str) -> list[Margin]:
    """Every margin of these extremes with valves standing so ('do not know' counts as open)."""
    found = list(_pressures(scene, reach, positions, cause))
    found += _temperatures(scene, reach, cause)
    found += outside_margins(scene, reach, cause)
    found += gas_margins(scene, reach, cause)
    return found


def worst_of(many: Iterable[Margin]) -> tuple[Margin, ...]:
    """The worst margin a limit and kind, smallest share of its limit first, unknown before all."""
    kept: dict[tuple[str, str], Margin] = {}
    for one in many:
        key = (one.limit, one.kind)
        if key not in kept or share(one) < share(kept[key]):
            kept[key] = one
    return tuple(sorted(kept.values(), key=share))


def share(one: Margin) -> float:
    """Margin as a share of its limit [1]; -inf where unknown. Temperatures: of 100 K."""
    if one.margin is None or one.allowed is None:
        return float("-inf")
    return one.margin / (100.0 if one.unit == "K" else max(abs(one.allowed), 1e-9))


def with_rate(one: Margin, lasts_s: float | None) -> Margin:
    """The same margin, knowing how long it lasts [s]; None: for ever."""
    short = lasts_s is not None and lasts_s < NARROW_SECONDS
    narrowed = Judgement.NARROW if short and one.judgement is Judgement.CLEAR else one.judgement
    return replace(one, lasts_s=lasts_s, judgement=narrowed)


def _pressures(scene: Scene, reach: Extremes, positions: Mapping[str, str], cause: str) -> Iterable[Margin]:
    spaces = joined_spaces(scene.apparatus, positions, scene.charge_space)
    for limit in pressure_limits(scene.apparatus, spaces):
        worst = reach.pressure
        if limit.level is None:
            yield Margin(
                limit.tag, "pressure", cause, worst.value, None, None, "Pa", Judgement.BLOCKED, worst.at,
                why=f"the rating of {limit.tag} is not known",
            )  # fmt: skip
            continue
        allowed = limit.level.absolute(scene.barometer.low_Pa)
        margin = None if worst.value is None else allowed - worst.value
        threshold = max(worst.uncertainty, NARROW_SHARE * limit.level.gauge(scene.barometer.high_Pa))
        yield Margin(
            limit.tag, "pressure", cause, worst.value, allowed, margin, "Pa", judge(margin, threshold),
            worst.at, why=worst.why,
        )  # fmt: skip


def _temperatures(scene: Scene, reach: Extremes, cause: str) -> list[Margin]:
    found: list[Margin] = []
    volume = scene.volume[0]
    hot, cold = Corner(None, volume, reach.hot), Corner(None, volume, reach.cold)
    for part in scene.apparatus.components:
        if isinstance(part.temperature, NotKnown):
            found.append(_unknown(part.tag, "temperature", cause, reach.hot, hot))
        else:
            found += _between(part.tag, part.temperature, reach, cause, hot, cold)
        if isinstance(part.difference, NotKnown):
            found.append(_unknown(part.tag, "difference", cause, reach.hot - reach.cold, cold))
        elif part.difference is not None and part.difference.high is not None:
            # A wetted face at one extreme while the dry face is in the room, or still at the other extreme.
            gap = max(reach.hot, scene.room_hottest) - min(reach.cold, scene.room_coldest)
            allowed = part.difference.high
            found.append(_upper(part.tag, "difference", cause, gap, allowed, NARROW_SHARE * allowed, cold))
    for device in scene.apparatus.relief:
        if device.space == scene.charge_space and device.at_temperature is not None:
            top = device.at_temperature.high
            if top is not None:
                found.append(_upper(device.tag, "temperature", cause, reach.hot, top, 2.0, hot))
    probe = scene.wall_probe()
    if probe is not None:
        low, high = probe.dial.low, probe.dial.high
        if not isinstance(low, Level) and not isinstance(high, Level):
            found += _between(probe.tag, Range(low, high), reach, cause, hot, cold)
    return found


def _between(tag: str, rating: Range, reach: Extremes, cause: str, hot: Corner, cold: Corner) -> list[Margin]:
    found = []
    ends = [e for e in (rating.low, rating.high) if e is not None]
    threshold = NARROW_SHARE * (max(ends) - min(ends)) if len(ends) == 2 else 2.0
    if rating.high is not None:
        found.append(_upper(tag, "temperature", cause, reach.hot, rating.high, threshold, hot))
    if rating.low is not None:
        margin = reach.cold - rating.low
        found.append(
            Margin(
                tag,
                "lowest temperature",
                cause,
                reach.cold,
                rating.low,
                margin,
                "K",
                judge(margin, threshold),
                cold,
            )
        )
    return found


def _upper(
    tag: str, kind: str, cause: str, worst: float, allowed: float, threshold: float, at: Corner | None
) -> Margin:
    margin = allowed - worst
    return Margin(tag, kind, cause, worst, allowed, margin, "K", judge(margin, threshold), at)


def _unknown(tag: str, kind: str, cause: str, worst: float, at: Corner) -> Margin:
    return Margin(
        tag, kind, cause, worst, None, None, "K", Judgement.BLOCKED, at,
        why=f"the {kind} rating of {tag} is not known",
    )  # fmt: skip
