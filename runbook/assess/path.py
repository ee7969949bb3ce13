"""The path of the planned charge in temperature and pressure, for pictures: no margin is judged from it."""

from __future__ import annotations

from runbook.assess.futures import hottest_body
from runbook.assess.held import held_reach
from runbook.assess.scene import Scene
from runbook.assess.walk import Walked, left_closed
from runbook.errors import OutsideValidity

_POINTS = 48
"""Enough for a picture of characters."""


def planned_path(scene: Scene, lines: tuple[Walked, ...]) -> tuple[tuple[float, float], ...]:
    """(temperature [K], pressure [Pa]) along the isochore of the planned charge in the stated volume.

    From the coldest to the hottest wall that a closed line of the procedure reaches; points beyond the models
    are left out; empty where the charge is not known or nothing is ever closed.
    """
    closed = [line.during for line in lines if line.during.closed]
    low_kg, high_kg = scene.planned
    density = 0.5 * (low_kg + high_kg) / scene.apparatus.volume.free.value
    if not closed or not low_kg > 0.0:
        return ()
    cold, hot = min(s.cold for s in closed), max(s.hot for s in closed)
    if not left_closed(lines):
        # A hand lets go long before it has come to the room.
        reach = [held_reach(scene, x.held, x.during, hottest_body(scene, x.during)) for x in lines if x.held]
        tops = [r.pressure.value for r in reach if r.pressure.value is not None]
        try:
            hot = min(hot, scene.substance.boiling_temperature(max(tops)))
        except (ValueError, OutsideValidity):
            return ()
    found = []
    for k in range(_POINTS + 1):
        temperature = cold + (hot - cold) * k / _POINTS
        try:
            found.append((temperature, scene.substance.pressure(temperature, density)))
        except OutsideValidity:
            continue
    return tuple(found)
