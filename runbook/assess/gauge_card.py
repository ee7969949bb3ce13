"""What hangs at the bench: what the gauge will show at each temperature of the lesson, and the tag of the vessel.

Of a sealed charge at rest: while the wall warms, the gauge stands lower by what the thermometer is ahead.
"""

from __future__ import annotations

from math import ceil, floor

from runbook.answers import GaugeCard, GaugeRow, VesselCard
from runbook.apparatus.ceiling import ceiling
from runbook.apparatus.instruments import permissible_error
from runbook.apparatus.model import Instrument
from runbook.apparatus.relief import lowest_opening
from runbook.apparatus.spaces import joined_spaces
from runbook.assess.corners import highest_pressure
from runbook.assess.hottest_place import hottest_place
from runbook.assess.scene import Scene
from runbook.assess.walk import Walked, hottest_of, left_closed
from runbook.errors import OutsideValidity
from runbook.procedure.model import WarmTo
from runbook.quantities import Level

_ROWS = 16
"""More lines than this nobody finds their way in."""
_STEPS = (1.0, 2.0, 5.0, 10.0, 20.0, 50.0)
"""[K] distances of the rows, the first that needs no more than _ROWS."""


def gauge_card(scene: Scene, lines: tuple[Walked, ...]) -> GaugeCard | None:
    """The card of the first gauge on the charge's space, for the charge as planned; None where there is none."""
    apparatus, space = scene.apparatus, scene.charge_space
    gauge = next((i for i in apparatus.instruments if i.reads == "pressure" and i.of == space), None)
    if gauge is None:
        return None
    level, by = _ceiling(scene)
    hottest = max([scene.room_hottest, *(hottest_of(scene, w.verb) for w in lines if isinstance(w.verb, WarmTo))])
    return GaugeCard(
        tag=gauge.tag,
        unit=gauge.dial.unit,
        low=_absolute(gauge.dial.low, scene),
        high=_absolute(gauge.dial.high, scene),
        division=gauge.division.value,
        ceiling=None if level is None else level.absolute(scene.barometer.middle_Pa),
        ceiling_by=by,
        rows=tuple(_row(scene, gauge, t) for t in _temperatures(scene.room_coldest, hottest)),
    )


def vessel_card(scene: Scene, lines: tuple[Walked, ...]) -> VesselCard:
    """The card of a vessel with the charge as planned, whether a gauge reads it or not."""
    return VesselCard(
        vessel=scene.apparatus.tag,
        most_kg=scene.planned[1],
        volume=scene.volume[1],
        hottest_place=hottest_place(scene, scene.planned[1]),
        relief=tuple(
            (r.tag, r.kind, lowest_opening(r).absolute(scene.barometer.low_Pa))
            for r in scene.apparatus.relief
            if r.space == scene.charge_space
        ),
        left_closed=left_closed(lines) or not any(line.held for line in lines),
    )


def _ceiling(scene: Scene) -> tuple[Level | None, str]:
    """Lowest limit of the charge's space with every valve shut, and its tag."""
    shut = {v.tag: "shut" for v in scene.apparatus.valves}
    lowest = ceiling(scene.apparatus, joined_spaces(scene.apparatus, shut, scene.charge_space))
    return (None, "") if lowest is None else (lowest.level, lowest.tag)


def _temperatures(low: float, high: float) -> list[float]:
    """Round temperatures [K] from below low to above high."""
    first, last = low - 273.15, high - 273.15
    step = next((s for s in _STEPS if ceil(last / s) - floor(first / s) < _ROWS), _STEPS[-1])
    return [273.15 + step * k for k in range(floor(first / step), ceil(last / step) + 1)]


def _row(scene: Scene, gauge: Instrument, temperature: float) -> GaugeRow:
    low_kg, high_kg = scene.planned
    largest = scene.volume[1]
    try:
        expected = scene.substance.pressure(temperature, 0.5 * (low_kg + high_kg) / scene.apparatus.volume.free.value)
        low = scene.substance.pressure(temperature, low_kg / largest)
    except (OutsideValidity, ZeroDivisionError):
        return GaugeRow(temperature, None, None, None)
    error = permissible_error(gauge, expected) + gauge.division.value / 2.0
    high = highest_pressure(scene, high_kg, temperature).value
    return GaugeRow(temperature, low - error, expected, None if high is None else high + error)


def _absolute(value: float | Level, scene: Scene) -> float:
    return value.absolute(scene.barometer.middle_Pa) if isinstance(value, Level) else float(value)
