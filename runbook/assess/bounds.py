"""Least, best and most charge for this vessel and this procedure, each with its reason."""

from __future__ import annotations

from runbook.answers import ChargeBounds, Margin
from runbook.assess.ahead import look
from runbook.assess.boxes import viewed_shape
from runbook.assess.room import LOWEST
from runbook.assess.scene import Scene
from runbook.assess.sights.marks import window_of
from runbook.assess.walk import Walked, left_closed, walk
from runbook.errors import RunbookError

_BELOW_CRITICAL = 0.1
"""How near to critical the surface must still stand in the window; a cell is no more even than that [K]."""
_STEP = 1e-5
"""To which charges are found [kg]."""


def charge_bounds(scene: Scene) -> ChargeBounds:
    """Bounds on the stated mass; the tolerance of the procedure is taken off each."""
    half = 0.5 * (scene.planned[1] - scene.planned[0])
    if scene.apparatus.window is None:
        most, most_reason = _most(scene, half)
        none = "this vessel has no window: no charge shows anything"
        return ChargeBounds(None, None, most, none, none, most_reason)
    lines = walk(scene)
    if any(line.held is not None for line in lines) and not left_closed(lines):
        return _melted(scene, half)
    least, least_reason = _least(scene, half)
    most, most_reason = _most(scene, half)
    best = scene.substance.critical_density * scene.apparatus.volume.free.value
    reason = f"critical density in {scene.apparatus.volume.free.value * 1e6:.0f} mL: the surface fades in place"
    if most is None or (least is not None and most < least):
        # What shows nothing is no advice, however well the vessel bears it.
        return ChargeBounds(
            least, None, most, least_reason, "no charge both shows the sight and stays within the limits", most_reason
        )
    if best > most:
        best, reason = most, "critical density would be more than the most"
    return ChargeBounds(least, best, most, least_reason, reason, most_reason)


def _melted(scene: Scene, half: float) -> ChargeBounds:
    """Of a charge that is closed in by hand alone, to be seen melting: its liquid has to reach the window."""
    most, most_reason = _most(scene, half)
    what = "every charge between least and most shows solid, liquid and vapour together"
    try:
        both = scene.substance.saturation(scene.substance.triple_temperature)
        share = viewed_shape(scene).volume_below(window_of(scene).low)
    except RunbookError as error:
        return ChargeBounds(None, None, most, str(error), what, most_reason)
    density = both.vapour_density + share * (both.liquid_density - both.vapour_density)
    least = density * scene.volume[1] + half
    return ChargeBounds(least, None, most, "with less the liquid stays below the window", what, most_reason)


def sealing_line(lines: tuple[Walked, ...]) -> int | None:
    """Index of the first line that closes the last vent; None where none does."""
    return next((i for i, line in enumerate(lines) if line.seals), None)


def first_blocked(scene: Scene, high_kg: float) -> Margin | None:
    """The margin that refuses a charge of at most high_kg [kg]; None where none does.

    Judged at closing, which commits to all that follows; of a loaded vessel at every line.
    """
    lines = walk(scene, (high_kg, high_kg))
    sealing = sealing_line(lines)
    indices = [sealing] if sealing is not None else [i for i, one in enumerate(lines) if not one.lets_down]
    found = [m for i in indices for m in look(scene, lines, i, with_times=False, high_kg=high_kg).margins]
    # A charge that holds less than the room does so for being too small: it says nothing of the most.
    blocked = [m for m in found if (m.margin is None or m.margin <= 0.0) and m.kind != LOWEST]
    # Temperatures do not change with the charge: a vessel blocked by them has no most, and check says why.
    return next((m for m in blocked if m.kind == "pressure"), blocked[0] if blocked else None)


def _most(scene: Scene, half: float) -> tuple[float | None, str]:
    top = scene.brim_full
    refused = first_blocked(scene, 1e-4)
    if refused is not None:
        return None, f"{refused.limit}, {refused.kind}, refuses every charge" + (
            f": {refused.why}" if refused.why else ""
        )
    if first_blocked(scene, top) is None:
        return top - half, "brim-full of dry ice"
    low, high = 1e-4, top
    while high - low > _STEP:
        middle = 0.5 * (low + high)
        low, high = (middle, high) if first_blocked(scene, middle) is None else (low, middle)
    refused = first_blocked(scene, high)
    if refused is None:
        return low - half, ""
    if refused.why:
        return low - half, refused.why
    at = "" if refused.at is None else f" at {refused.at.temperature_K - 273.15:.1f} degC"
    return low - half, f"{refused.limit} by {refused.cause}{at}"


def _least(scene: Scene, half: float) -> tuple[float | None, str]:
    """Charge whose surface still stands in the window 0.1 K below critical, in the largest volume [kg]."""
    fluid = scene.substance
    try:
        both = fluid.saturation(fluid.critical_temperature - _BELOW_CRITICAL)
        share = viewed_shape(scene).volume_below(window_of(scene).low)
    except RunbookError as error:
        return None, str(error)
    density = both.vapour_density + share * (both.liquid_density - both.vapour_density)
    return (
        density * scene.volume[1] + half,
        "with less the surface sinks below the window before it fades",
    )
