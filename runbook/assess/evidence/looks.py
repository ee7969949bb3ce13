"""Readings of one moment put together: a temperature, how fast it moved, and what was read beside it.

Refuses to place a pressure or a height beside a temperature that was read too long before or after it.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from math import inf
from typing import Final

from runbook.answers import Past

TOGETHER_S: Final = 120.0
"""A temperature at most this far from it in time belongs to a reading [s]."""
CLOSE_S: Final = 360.0
"""Two temperatures at most this far apart give a rate [s]."""
APART_S: Final = 30.0
"""Nearer together, the rate of two temperatures is mostly their divisions [s]."""
BLUR_S: Final = 1800.0
"""After so long without a reading nothing is left of an earlier rate [s]."""
STILL_K: Final = 0.3
"""A temperature that moved by less between two readings stood still [K]."""
STILL_S: Final = 240.0
"""The time between them must be at least this for it to count as standing still [s]."""


@dataclass(frozen=True, slots=True)
class Look:
    """What was read together."""

    at_s: float
    """[s]"""
    temperature: float
    """As shown by the thermometer [K]."""
    rate: float = 0.0
    """How fast the shown temperature moved [K/s]."""
    rate_bound: float = 0.0
    """How far the rate may be off, half-width [K/s]."""
    came_at: float = 0.0
    """The rate before it stood still [K/s]."""
    still_s: float = inf
    """How long it has stood still since [s]; 0 while it moves."""
    pressure: float | None = None
    """Absolute [Pa]."""
    height: float | None = None
    """Of the liquid above the inside bottom [m]."""
    mass: float | None = None
    """Of the charge, the closed vessel weighed [kg]."""


def looks(
    history: Sequence[Past], gauge: str | None, thermometer: str | None, fastest: float = 0.0
) -> tuple[Look, ...]:
    """The looks of a history in the order of time, for one gauge and one thermometer by tag.

    fastest: how fast the wall may move where two readings do not say it [K/s]; 0: it stands still.
    Masses need no temperature; every other reading without one beside it is left out.
    """
    walls = sorted((p for p in history if p.tag == thermometer), key=lambda p: p.at_s)
    others = [p for p in history if p.what in ("liquid height", "mass") or (p.what == "pressure" and p.tag == gauge)]
    found: dict[float, Look] = {}
    for one in sorted(others, key=lambda p: p.at_s):
        index = _nearest(walls, one.at_s)
        if index is None:
            continue
        apart = one.at_s - walls[index].at_s
        if one.what != "mass" and abs(apart) > TOGETHER_S:
            continue
        base = _moved(walls, index, fastest)
        # Beside a moving temperature a later reading is of a later temperature.
        shift = 0.0 if one.what == "mass" else base.rate * apart
        key = walls[index].at_s if abs(apart) <= TOGETHER_S and base.rate == 0.0 else one.at_s
        before = found.get(key)
        look = before if before is not None else _at(base, one.at_s, base.temperature + shift)
        found[key] = _with(look, one)
    return tuple(found[key] for key in sorted(found))


def _nearest(walls: Sequence[Past], at_s: float) -> int | None:
    if not walls:
        return None
    return min(range(len(walls)), key=lambda i: abs(walls[i].at_s - at_s))


def _moved(walls: Sequence[Past], index: int, fastest: float) -> Look:
    """The temperature of that index with its rate, from its neighbours in time."""
    here = walls[index]
    before = next((w for w in reversed(walls[:index]) if here.at_s - w.at_s >= APART_S), None)
    after = next((w for w in walls[index + 1 :] if w.at_s - here.at_s >= APART_S), None)
    if before is not None and _stood_still(before, here):
        came = _moved(walls, walls.index(before), 0.0).rate
        return Look(here.at_s, here.value, came_at=came, still_s=here.at_s - before.at_s)
    behind, ahead = _slope(before, here), _slope(here, after)
    if behind is not None and ahead is not None:
        rate, bound = 0.5 * (behind + ahead), max(0.1 * abs(behind), 0.25 * abs(ahead - behind))
    elif behind is not None:
        # That of the time before: it may have changed since.
        rate, bound = behind, 0.2 * abs(behind)
    elif ahead is not None:
        # The first that moves: a thermometer that lags shows less than the later rate as yet.
        rate, bound = 0.7 * ahead, 0.3 * abs(ahead)
    elif before is not None and here.at_s - before.at_s <= BLUR_S:
        # It came here some time in between, and may have come to rest meanwhile.
        rate = bound = 0.5 * (here.value - before.value) / (here.at_s - before.at_s)
    else:
        rate = bound = 0.5 * fastest
    return Look(here.at_s, here.value, rate, abs(bound), still_s=inf if bound == 0.0 else 0.0)


def _stood_still(before: Past, here: Past) -> bool:
    return abs(here.value - before.value) < STILL_K and here.at_s - before.at_s >= STILL_S


def _slope(early: Past | None, late: Past | None) -> float | None:
    """Of two readings near enough in time to say it [K/s]; None where they stand still or say nothing."""
    if early is None or late is None or late.at_s - early.at_s > CLOSE_S or _stood_still(early, late):
        return None
    return (late.value - early.value) / (late.at_s - early.at_s)


def _at(base: Look, at_s: float, temperature: float) -> Look:
    return Look(at_s, temperature, base.rate, base.rate_bound, base.came_at, base.still_s)


def _with(look: Look, one: Past) -> Look:
    pressure = one.value if one.what == "pressure" else look.pressure
    height = one.value if one.what == "liquid height" else look.height
    mass = one.value if one.what == "mass" else look.mass
    return Look(
        look.at_s,
        look.temperature,
        look.rate,
        look.rate_bound,
        look.came_at,
        look.still_s,
        pressure,
        height,
        mass,
    )
