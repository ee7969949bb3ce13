"""Where a part does not fit: from which temperature of vessel or source it would, and if from none, what holds it up.

Asked of the lots that are least likely to fit and as many others. That a vessel may stand that warm is not judged here:
the warming has to be written as a step of a part before, and checked like any other.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from math import floor
from typing import Final

from runbook.answers import Plan
from runbook.assess.walk import by_source
from runbook.errors import OutsideValidity
from runbook.procedure.model import WarmTo
from runbook.rehearsal.lesson import Lesson
from runbook.rehearsal.lots import Lot
from runbook.rehearsal.timeline import PartTimes

_LOTS: Final = 20
"""Lots that are asked."""
_SHORT: Final = 0.5
"""A vessel is not begun nearer to the target of its warming than this [K]: there would be nothing to see."""


@dataclass(frozen=True, slots=True)
class Warming:
    """What warming beforehand would do for one part."""

    of: str
    """'vessel' or 'source'."""
    start_K: float
    """The least whole degree Celsius from which as many lots fit as can; where warming does nothing, the hottest that
    was tried [K]."""
    fits_in: int
    fits_cold: int
    """Lots that fit without."""
    runs: int
    """Lots that were asked."""


def warmings(plan: Plan, part: PartTimes, lots: Sequence[Lot]) -> tuple[Warming, ...]:
    """For a part that does not always fit, of the vessel and of the source; empty where nothing could be warmed."""
    if part.declared_s is None or part.fits_in == part.runs or not lots:
        return ()
    found = []
    asked = lots[1 : 1 + _LOTS]
    lines = [line for line in lots[0].lines if line.part == part.index]
    target = next((w.verb for w in lines if isinstance(w.verb, WarmTo) and by_source(lots[0].scene, w.verb)), None)
    if target is None or isinstance(target.warm_to, str) or not lines[0].before.closed:
        return ()
    cold = sum(_fits(lot, part, None, None) for lot in asked)
    for of, hottest in (("vessel", target.warm_to.value - _SHORT), ("source", (target.set_to or target.warm_to).value)):
        found.append(_least(of, hottest, cold, part, asked))
    return tuple(found)


def _least(of: str, hottest: float, cold: int, part: PartTimes, asked: Sequence[Lot]) -> Warming:
    """The coolest start that does as much as the hottest."""

    def fits(kelvin: float) -> int:
        # Of a vessel that is warm the source is too: it is wrapped around it.
        vessel = kelvin if of == "vessel" else None
        return sum(_fits(lot, part, vessel, kelvin) for lot in asked)

    top = floor(hottest - 273.15)
    best = fits(top + 273.15)
    low, high = floor(asked[0].scene.room_coldest - 273.15), top
    while best > cold and high - low > 1:
        middle = (low + high) // 2
        low, high = (low, middle) if fits(middle + 273.15) >= best else (middle, high)
    return Warming(of, high + 273.15, best, cold, len(asked))


def _fits(lot: Lot, part: PartTimes, start_K: float | None, source_K: float | None) -> bool:
    # Nobody cools a vessel down to the temperature that it is to be warmed to.
    vessel = None if start_K is None else max(start_K, lot.room_K)
    source = None if source_K is None else max(source_K, lot.room_K)
    try:
        ends = Lesson(lot, part.index, vessel, source).go(part.index).ends_s
    except OutsideValidity:
        return False
    return ends is not None and part.declared_s is not None and ends <= part.declared_s
