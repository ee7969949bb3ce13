"""Beads of known density: where each one is, and at which temperatures it sinks, hovers or rises.

A bead is a densitometer that a class can see. It hovers where it cannot be told from the fluid around it: within
its own bound, the equation's, and what gravity makes of the density between top and bottom.
"""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass
from math import log10

from runbook.answers import Sight
from runbook.apparatus.model import Bead
from runbook.errors import RunbookError
from runbook.fluids.roots import bracketed_root
from runbook.fluids.substance import Region, Substance

_EQUATION = 0.002
"""Of the equation's density near critical, relative [1]; the file's figure is that of the dense fluid."""
_GRAVITY = 9.80665
"""[m/s2]"""
_AFTER = 5.0
"""[K] after the end of the meniscus in which a bead that hovers is followed."""
TRUST = "As good as the bead's own density; a bead of 1 % less stands elsewhere within 0.2 K of critical."


@dataclass(frozen=True, slots=True)
class BeadMarks:
    """One bead beside one charge that warms; temperatures [K], None where it does not happen."""

    tag: str
    colour: str
    low: float
    """Least density [kg/m3]."""
    high: float
    """Greatest density [kg/m3]."""
    sinks_at: float | None
    """The liquid has become thinner than the bead: from the surface to the bottom."""
    rises_at: float | None
    """The vapour has become denser than the bead: from the surface to the top."""
    let_go_at: float | None
    """The surface it floated on has ended."""
    hovers_until: float | None
    """After that: from here on it can be told from the fluid."""

    @property
    def name(self) -> str:
        """'the red bead K1'."""
        return f"the {self.colour} bead {self.tag}"

    @property
    def middle(self) -> float:
        """[kg/m3]."""
        return 0.5 * (self.low + self.high)


def bead_marks(fluid: Substance, bead: Bead, density: float, last: float | None, height: float) -> BeadMarks:
    """Of one bead in a charge of that density [kg/m3] whose meniscus ends at `last` [K], in a vessel that high [m]."""
    low, high = bead.density.low, bead.density.high
    middle = bead.density.value
    sinks = rises = let_go = until = None
    if last is not None:
        sinks = _crossing(fluid, last, lambda t: fluid.saturation(t).liquid_density - middle)
        rises = _crossing(fluid, last, lambda t: fluid.saturation(t).vapour_density - middle)
        floated = sinks is None and rises is None and _floats(fluid, middle)
        let_go = last if floated else None
        if let_go is not None:
            until = _hovers_until(fluid, density, (low, high), height, let_go)
    return BeadMarks(bead.tag, bead.colour, low, high, sinks, rises, let_go, until)


def bead_sights(
    fluid: Substance, many: tuple[BeadMarks, ...], temperature: float, density: float, height: float
) -> tuple[Sight, ...]:
    """Where each bead is now. density of the charge [kg/m3], height of the inside [m]. Raises OutsideValidity."""
    if not many:
        return ()
    region = fluid.region(temperature, density)
    if region is Region.LIQUID_VAPOUR:
        both = fluid.saturation(temperature)
        return tuple(_in_two(bead, both.liquid_density, both.vapour_density, temperature) for bead in many)
    if region in (Region.SOLID_VAPOUR, Region.SOLID_LIQUID, Region.THREE_PHASE):
        return ()
    half = _blur(fluid, temperature, density, height)
    return tuple(_in_one(bead, density, half) for bead in many)


def _in_two(bead: BeadMarks, liquid: float, vapour: float, temperature: float) -> Sight:
    slack = _EQUATION * liquid
    if bead.low > liquid + slack:
        where = "lies on the bottom, under the liquid"
    elif bead.high >= liquid - slack:
        where = "hovers in the liquid, or creeps up or down"
    elif bead.low > vapour:
        where = "floats on the surface"
    else:
        where = "has risen to the top"
    numbers = (("liquid", liquid, "kg/m3"), ("vapour", vapour, "kg/m3"), ("temperature", temperature, "K"))
    return bead_sight(f"{_capital(bead.name)} {where}.", bead, numbers)


def _in_one(bead: BeadMarks, density: float, half: float) -> Sight:
    if bead.low > density + half:
        where = "sinks to the bottom"
    elif bead.high < density - half:
        where = "rises to the top"
    else:
        where = "hovers, or creeps up or down"
    numbers = (("fluid", density, "kg/m3"), ("fluid, top to bottom", 2.0 * half, "kg/m3"))
    return bead_sight(f"{_capital(bead.name)} {where}.", bead, numbers)


def bead_sight(words: str, bead: BeadMarks, numbers: tuple[tuple[str, float, str], ...]) -> Sight:
    """A sentence about a bead, its density among the figures."""
    own = (("bead, least", bead.low, "kg/m3"), ("bead, most", bead.high, "kg/m3"))
    return Sight(words, True, of="beads", numbers=own + numbers, trust=TRUST)


def bead_path(bead: BeadMarks, warming: bool) -> tuple[tuple[float, Sight], ...]:
    """(temperature [K], sight) of everything one bead does on the way, unordered."""
    found = []
    name = _capital(bead.name)
    if bead.sinks_at is not None:
        words = "leaves the surface and sinks" if warming else "rises from the bottom to the surface"
        found.append((bead.sinks_at, f"{name} {words}."))
    if bead.rises_at is not None:
        words = "leaves the surface and rises" if warming else "comes down from the top to the surface"
        found.append((bead.rises_at, f"{name} {words}."))
    if bead.let_go_at is not None and bead.hovers_until is not None:
        words = "hovers where the surface was" if warming else "comes to float on the surface"
        found.append((bead.let_go_at, f"{name} {words}."))
        found.append((bead.hovers_until, f"{name} {'stops' if warming else 'begins'} to hover."))
    return tuple((at, bead_sight(words, bead, (("temperature", at, "K"),))) for at, words in found)


def _capital(words: str) -> str:
    return words[0].upper() + words[1:]


def _floats(fluid: Substance, density: float) -> bool:
    """Between vapour and liquid at the triple point: with neither crossed, it is so to the end."""
    both = fluid.saturation(fluid.triple_temperature)
    return both.vapour_density < density < both.liquid_density


def _crossing(fluid: Substance, last: float, excess: Callable[[float], float]) -> float | None:
    """Where a saturated density passes the bead's, before the meniscus ends."""
    critical, triple = fluid.critical_temperature, fluid.triple_temperature
    far, near = log10(critical - triple), log10(max(critical - last, 1e-6))

    def along(x: float) -> float:
        return excess(max(critical - 10.0**x, triple))

    at_far, at_near = along(far), along(near)
    if (at_far > 0.0) == (at_near > 0.0):
        return None
    return critical - float(10.0 ** bracketed_root(along, far, near, 1e-6, at_far, at_near))


def _blur(fluid: Substance, temperature: float, density: float, height: float) -> float:
    """Half of what the density [kg/m3] may differ by between the middle and an end, the equation's error added."""
    slope = fluid.dp_ddensity(temperature, density)
    column = density * _GRAVITY * 0.5 * height
    # Close to critical the straight line runs away; no column is denser than the dome is wide there.
    gravity = min(column / slope, 0.15 * density) if slope > 0.0 else 0.15 * density
    return gravity + _EQUATION * density


def _hovers_until(
    fluid: Substance, density: float, bead: tuple[float, float], height: float, start: float
) -> float | None:
    """Where a bead that hovers after the surface has ended can be told from the fluid; None: it does not hover, or
    does so all the way."""
    low, high = bead
    gap = max(low - density, density - high)

    def excess(temperature: float) -> float:
        return _blur(fluid, temperature, density, height) - gap

    first = max(start, fluid.critical_temperature) + 0.01
    try:
        at_first, at_last = excess(first), excess(first + _AFTER)
        if at_first <= 0.0 or at_last >= 0.0:
            return None
        return bracketed_root(excess, first, first + _AFTER, 1e-3, at_first, at_last)
    except RunbookError:
        return None
