"""The charge as a best estimate from all that was read: weighings, heights, pressure where it says anything.

For people and for evidence. Limits are judged with the charge box, which comes down only on two people's
measurements; this number never moves it. Parts that contradict each other make the estimate wider, never narrower.
"""

from __future__ import annotations

from collections.abc import Sequence
from math import hypot, sqrt
from typing import Final

from runbook.answers import ChargeBox, ChargeEstimate, ChargePart, Observation
from runbook.apparatus.instruments import expanded_uncertainty, permissible_error
from runbook.assess.agreement import reading_U
from runbook.assess.boxes import viewed_shape
from runbook.assess.evidence.given import RECTANGULAR, weighed_bounds
from runbook.assess.scene import Scene
from runbook.errors import RunbookError

BLIND: Final = 0.25
"""A pressure whose charge is uncertain by more than this share says nothing of it [1]."""
_STEPS: Final = 4
"""Newton steps from what else is known; where pressure is not blind it is smooth enough for them."""


def charge_estimate(
    scene: Scene, record: ChargeBox | None, observations: Sequence[Observation]
) -> ChargeEstimate | None:
    """Of a vessel that is closed; None where nothing was weighed, read or recorded.

    record: what the charge record said when the run was opened.
    """
    parts = [*_weighings(scene, record, observations), *_heights(scene, observations)]
    blind: tuple[str, ...] = ()
    if any(o.what == "pressure" for o in observations):
        found = _pressure(scene, observations, _together(parts)) if parts else None
        if found is None:
            blind = ("pressure",)
        else:
            parts.append(found)
    return _combined(parts, blind)


def _combined(parts: Sequence[ChargePart], blind: tuple[str, ...]) -> ChargeEstimate | None:
    """Weighted by 1/U2; widened where the parts scatter by more than their U (Birge 1932)."""
    if not parts:
        return None
    kg = _together(parts)
    U = 1.0 / sqrt(sum(1.0 / part.U**2 for part in parts))
    if len(parts) > 1:
        scatter = sum(((part.kg - kg) / (0.5 * part.U)) ** 2 for part in parts) / (len(parts) - 1)
        U *= max(1.0, sqrt(scatter))
    return ChargeEstimate(kg, U, tuple(parts), blind)


def _together(parts: Sequence[ChargePart]) -> float:
    return sum(part.kg / part.U**2 for part in parts) / sum(1.0 / part.U**2 for part in parts)


def _weighings(scene: Scene, record: ChargeBox | None, observations: Sequence[Observation]) -> list[ChargePart]:
    """The last before closing, else the record; and the mean of those of the closed vessel.

    One balance, so its error is not divided by how often it was read.
    """
    found = []
    masses = [o for o in observations if o.what == "mass"]
    weighed = weighed_bounds(scene, tuple(masses))
    if weighed is not None:
        low, high, _ = weighed
        found.append(ChargePart("weighing at closing", 0.5 * (low + high), RECTANGULAR * (high - low)))
    elif record is not None and record.high_kg > record.low_kg:
        half = 0.5 * (record.high_kg - record.low_kg)
        found.append(ChargePart("charge record", record.low_kg + half, 2.0 * RECTANGULAR * half))
    closed = [o for o in masses if o.closed]
    if closed:
        found.append(ChargePart("weighing", sum(o.value for o in closed) / len(closed), _U(scene, closed[-1])))
    return found


def _heights(scene: Scene, observations: Sequence[Observation]) -> list[ChargePart]:
    """The mean of all heights that a temperature stands beside."""
    walls = [o for o in observations if o.what == "temperature"]
    found = []
    for one in observations:
        if one.what == "liquid height" and one.closed and walls:
            beside = min(walls, key=lambda o: abs(o.sequence - one.sequence))
            key = (one.value, beside.value)
            if key not in scene.estimated_by_height:
                scene.estimated_by_height[key] = _from_height(scene, one, beside)
            part = scene.estimated_by_height[key]
            if part is not None:
                found.append(part)
    if not found:
        return []
    mean = sum(kg for kg, _ in found) / len(found)
    return [ChargePart("height", mean, max(U for _, U in found))]


def _from_height(scene: Scene, height: Observation, wall: Observation) -> tuple[float, float] | None:
    """Charge and U [kg] of one height; None where it has no meaning."""
    shape = viewed_shape(scene)

    def mass(h: float, temperature: float) -> float:
        both = scene.substance.saturation(temperature)
        share = shape.volume_below(min(shape.full_height, max(0.0, h)))
        return shape.volume * (share * both.liquid_density + (1.0 - share) * both.vapour_density)

    try:
        kg = mass(height.value, wall.value)
        by_height = mass(height.value + 0.5 * _U(scene, height), wall.value) - kg
        by_wall = mass(height.value, wall.value + 0.5 * _U(scene, wall)) - kg
    except RunbookError:
        return None
    by_volume = RECTANGULAR * scene.apparatus.volume.free.plus_minus / shape.volume * kg
    return kg, 2.0 * hypot(by_height, by_wall, by_volume)


def _pressure(scene: Scene, observations: Sequence[Observation], near: float) -> ChargePart | None:
    """Charge that the last pressure means beside the last temperature; None where it says nothing of it.

    near: charge by the other readings [kg].
    """
    gauges = [o for o in observations if o.what == "pressure" and o.closed]
    walls = [o for o in observations if o.what == "temperature"]
    if not gauges or not walls:
        return None
    read, wall = max(gauges, key=lambda o: o.sequence), max(walls, key=lambda o: o.sequence)
    fluid, volume = scene.substance, scene.apparatus.volume.free
    kg = near
    try:
        for _ in range(_STEPS):
            density = kg / volume.value
            by_density = fluid.dp_ddensity(wall.value, density)
            if not by_density > 0.0:
                return None
            by_wall, equation = fluid.dp_dT(wall.value, density), fluid.pressure_uncertainty(wall.value, density)
            band = hypot(reading_U(scene, read), by_wall * reading_U(scene, wall), equation)
            if not band * volume.value / by_density < BLIND * near:
                return None
            kg += (read.value - fluid.pressure(wall.value, density)) * volume.value / by_density
    except RunbookError:
        return None
    by_volume = 2.0 * RECTANGULAR * volume.plus_minus / volume.value * kg
    return ChargePart("pressure", kg, hypot(band * volume.value / by_density, by_volume))


def _U(scene: Scene, one: Observation) -> float:
    instrument = scene.instrument(one.tag)
    return expanded_uncertainty(permissible_error(instrument, one.value), 0.5 * instrument.division.value)
