"""How hot the place may be in which a loaded vessel is left, by every limit that heat brings nearer.

Refuses to say (None) where a rating is not known or the models end.
"""

from __future__ import annotations

from runbook.assess.corners import temperature_at_pressure
from runbook.assess.limits import closed_extremes, margins
from runbook.assess.scene import Scene
from runbook.errors import OutsideValidity


def hottest_place(scene: Scene, most_kg: float) -> float | None:
    """Lowest temperature [K] at which the most charge [kg], closed in, comes to a limit of pressure or temperature."""
    shut = {v.tag: "shut" for v in scene.apparatus.valves}
    try:
        reach = closed_extremes(scene, most_kg, scene.room_hottest, scene.room_coldest)
    except OutsideValidity:
        return None
    found = margins(scene, reach, shut, "")
    pressures = [m.allowed for m in found if m.kind == "pressure"]
    temperatures = [m.allowed for m in found if m.kind == "temperature"]
    known = [a for a in pressures if a is not None]
    bears = [a for a in temperatures if a is not None]
    if not known or len(known) < len(pressures) or len(bears) < len(temperatures):
        return None
    reached = temperature_at_pressure(scene, most_kg, min(known), 0.0)
    return min((*bears, *(() if reached is None else (reached,))), default=None)
