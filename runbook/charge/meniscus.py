"""Where the meniscus of a sealed charge stands, which way it moves, and where and when it ends, on warming.

One density decides it all: a charge below critical density dries out, one above it becomes liquid-full, one near
it loses the surface where it stands. What the window's span cuts off comes on top: a surface leaves the window
before it leaves the vessel. Refuses nothing; a charge that never shows a meniscus has no end.
"""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass
from math import log10

from runbook.charge.geometry import Shape
from runbook.fluids.roots import bracketed_root
from runbook.fluids.substance import Substance

_NEAREST = -7.0
"""log10 of the distance to critical [K] at which the search ends."""
_POINTS = 72
"""Between the triple point and there, evenly in that logarithm."""
_STEP = 0.05
"""Between the two heights from which the movement is taken [K]."""


@dataclass(frozen=True, slots=True)
class Window:
    """What of the inside can be seen."""

    low: float
    """Lowest visible height above the inside bottom [m]."""
    high: float
    """Highest visible height [m]; above low."""


@dataclass(frozen=True, slots=True)
class Passage:
    """The surface passing an edge of the window while the charge warms."""

    temperature: float
    """[K]."""
    edge: str
    """'top' or 'bottom'."""
    into: bool
    """Into the window; False: out of it."""


@dataclass(frozen=True, slots=True)
class Ending:
    """How a meniscus ends on warming."""

    way: str
    """'top' (liquid-full), 'bottom' (dry) or 'in place'."""
    temperature: float
    """At which the last of it has gone from the vessel [K]."""
    from_window: float | None
    """At which it leaves the window for good [K]; None: it is in the window to the end, or never was."""
    seen: bool
    """It stood in the window at some temperature."""


@dataclass(frozen=True, slots=True)
class Movement:
    """Where the surface stands and which way it goes as the charge warms."""

    height: float
    """Above the inside bottom [m]."""
    per_kelvin: float
    """[m/K]; positive: it rises on warming."""
    per_density: float
    """What a denser charge would add to the height, to first order [m per kg/m3]."""


def standing(substance: Substance, shape: Shape, density: float, temperature: float) -> Movement | None:
    """Height and movement at a charge's density [kg/m3] and temperature [K]; None where there is no surface.

    Raises OutsideValidity.
    """
    if not substance.triple_temperature <= temperature < substance.critical_temperature:
        return None
    both = substance.saturation(temperature)
    step = both.liquid_density - both.vapour_density
    share = (density - both.vapour_density) / step
    if not 0.0 <= share <= 1.0:
        return None
    height = shape.height(share)
    slope = _rise(shape, height)
    # From below, so that near the end of the meniscus there are still two heights.
    below = max(substance.triple_temperature, temperature - _STEP)
    moved = 0.0
    if temperature > below:
        moved = slope * (share - _share(substance, density, below)) / (temperature - below)
    return Movement(height, moved, slope / step)


def _rise(shape: Shape, height: float) -> float:
    """Height [m] that a share of the volume [1] adds, at a height [m]; of a round end, a little inside it."""
    end = shape.full_height
    half = 1e-3 * end
    low, high = max(0.0, height - half), min(end, height + half)
    return (high - low) / (shape.volume_below(high) - shape.volume_below(low))


def ending(substance: Substance, shape: Shape, window: Window, density: float) -> Ending | None:
    """How the meniscus of a charge of that density [kg/m3] ends on warming; None: it never has one."""
    last = _leaves_vessel(substance, density)
    if last is None:
        return None
    found = passages(substance, shape, window, density)
    out = [p.temperature for p in found if not p.into]
    inside_at_first = window.low <= _height(substance, shape, density, substance.triple_temperature) <= window.high
    seen = bool(found) or inside_at_first
    # Within the critical band everything that can be told apart by eye happens in place.
    if substance.is_critical(density):
        return Ending("in place", substance.critical_temperature, out[-1] if out else None, seen)
    way = "top" if density > substance.critical_density else "bottom"
    return Ending(way, last, out[-1] if out else None, seen)


def passages(substance: Substance, shape: Shape, window: Window, density: float) -> tuple[Passage, ...]:
    """Every passing of an edge of the window while a charge of that density [kg/m3] warms from the triple point."""
    last = _leaves_vessel(substance, density)
    if last is None:
        return ()
    found: list[Passage] = []
    for edge, height in (("bottom", window.low), ("top", window.high)):
        wanted = shape.volume_below(min(height, shape.full_height))
        if not 0.0 < wanted < 1.0:
            continue
        for temperature, rising in _crossings(substance, density, wanted, last):
            found.append(Passage(temperature, edge, rising == (edge == "bottom")))
    return tuple(sorted(found, key=lambda p: p.temperature))


def _crossings(substance: Substance, density: float, wanted: float, last: float) -> list[tuple[float, bool]]:
    """(temperature [K], the share rises through it) where the liquid's share of the volume is `wanted` [1]."""
    critical = substance.critical_temperature
    far, near = log10(critical - substance.triple_temperature), log10(max(critical - last, 10.0**_NEAREST))

    def excess(x: float) -> float:
        return _share(substance, density, max(critical - 10.0**x, substance.triple_temperature)) - wanted

    nodes = [far + (near - far) * k / _POINTS for k in range(_POINTS + 1)]
    values = [excess(x) for x in nodes]
    found = []
    for k in range(_POINTS):
        if (values[k] > 0.0) != (values[k + 1] > 0.0):
            root = bracketed_root(excess, nodes[k], nodes[k + 1], 1e-9, values[k], values[k + 1])
            found.append((critical - 10.0**root, values[k + 1] > values[k]))
    return found


def _leaves_vessel(substance: Substance, density: float) -> float | None:
    """Temperature [K] at which liquid fills the vessel or has gone from it, on warming; None: no liquid ever."""
    critical, triple = substance.critical_temperature, substance.triple_temperature
    first = substance.saturation(triple)
    if not first.vapour_density < density < first.liquid_density:
        return None
    full = density > substance.critical_density

    def excess(x: float) -> float:
        both = substance.saturation(max(critical - 10.0**x, triple))
        return (both.liquid_density if full else both.vapour_density) - density

    return _before(excess, log10(critical - triple), critical)


def _before(excess: Callable[[float], float], far: float, critical: float) -> float:
    at_far, at_near = excess(far), excess(_NEAREST)
    if (at_far > 0.0) == (at_near > 0.0):
        return critical
    return critical - float(10.0 ** bracketed_root(excess, far, _NEAREST, 1e-9, at_far, at_near))


def _share(substance: Substance, density: float, temperature: float) -> float:
    """Liquid's share of the volume [1]; below 0 and above 1 where there is no surface."""
    both = substance.saturation(temperature)
    return (density - both.vapour_density) / (both.liquid_density - both.vapour_density)


def _height(substance: Substance, shape: Shape, density: float, temperature: float) -> float:
    return shape.height(min(1.0, max(0.0, _share(substance, density, temperature))))
