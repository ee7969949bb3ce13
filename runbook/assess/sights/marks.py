"""What depends only on how much is in the vessel: worked out once a charge, so that a live answer is cheap.

Refuses nothing: what the models do not reach is None, and no sight comes of it.
"""

from __future__ import annotations

from dataclasses import dataclass
from itertools import pairwise
from math import log10, pi

from runbook.assess.boxes import viewed_shape
from runbook.assess.scene import Scene
from runbook.assess.sights.beads import BeadMarks, bead_marks
from runbook.charge.geometry import Shape, ShapeKind
from runbook.charge.meniscus import Ending, Passage, Window, ending, passages, standing
from runbook.errors import RunbookError
from runbook.fluids.optics import SCALING_WITHIN, index_of, turbidity
from runbook.fluids.roots import bracketed_root
from runbook.fluids.substance import Substance

VISIBLE = 0.4
"""Turbidity [1/m] from which a lamp from the side shows a haze: our choice, about 1 K below the critical point of
carbon dioxide; common practice says 1 to 2 K on both sides."""
FAINT = 0.05
"""Step of the index [1] under which a surface without a lamp behind it is faint: our choice; it throws back a
twentieth of a per cent of the light."""
_WIDEST = 6.0
"""Farther from critical than this no haze is looked for [K]."""
_TRUE_SLOPE, _ALLOWED = 0.326, 0.03
"""Exponent of the coexistence curve in nature (three-dimensional Ising), and how far an equation may be off it
between 1 K and 0.1 K below critical before it counts as flattening too early [1]."""


@dataclass(frozen=True, slots=True)
class Marks:
    """Temperatures [K] at which something changes to the eye as one charge warms; None where nothing does."""

    density: float
    """[kg/m3]."""
    end: Ending | None
    ends_in_view: bool
    """A tenth of a kelvin before it vanishes in place the surface stands in the window."""
    passed: tuple[Passage, ...]
    faint_from: float | None
    haze_from: float | None
    """Below critical."""
    haze_until: float | None
    """Above critical."""
    beads: tuple[BeadMarks, ...]
    flattens: bool
    """The equation's dome is too flat within 0.5 K of critical."""
    path: float
    """Of the light through the vessel [m]."""


def marks(scene: Scene, mass: float) -> Marks:
    """Of a charge [kg], kept in the scene."""
    if mass not in scene.seen:
        if len(scene.seen) > 32:
            scene.seen.clear()
        scene.seen[mass] = _marks(scene, mass)
    return scene.seen[mass]


def is_seen(scene: Scene) -> bool:
    """Whether anything of the inside is seen at all: the vessel has a window."""
    return scene.apparatus.window is not None


def window_of(scene: Scene) -> Window:
    """The span of the window, whose ends the file's model demands; of a vessel without one, where is_seen is False,
    all of the inside."""
    span = scene.apparatus.window
    if span is None:
        return Window(0.0, viewed_shape(scene).full_height)
    return Window(span.low or 0.0, span.high if span.high is not None else viewed_shape(scene).full_height)


def light_path(shape: Shape) -> float:
    """How far light goes through the vessel [m]: along a lying cylinder, across all else."""
    if shape.kind is ShapeKind.LYING_CYLINDER:
        return shape.volume / (0.25 * pi * shape.diameter**2)
    return shape.diameter


def _marks(scene: Scene, mass: float) -> Marks:
    fluid, shape = scene.substance, viewed_shape(scene)
    density = mass / scene.apparatus.volume.free.value
    try:
        end = ending(fluid, shape, window_of(scene), density)
        passed = passages(fluid, shape, window_of(scene), density)
    except RunbookError:
        end, passed = None, ()
    last = None if end is None else end.temperature
    return Marks(
        density=density,
        end=end,
        ends_in_view=_in_view(scene, density),
        passed=passed,
        faint_from=_faint(fluid, last),
        haze_from=_haze(fluid, density, -1.0),
        haze_until=_haze(fluid, density, 1.0),
        beads=tuple(bead_marks(fluid, bead, density, last, shape.full_height) for bead in scene.apparatus.beads),
        flattens=_flattens(fluid),
        path=light_path(shape),
    )


def _in_view(scene: Scene, density: float) -> bool:
    window = window_of(scene)
    try:
        now = standing(scene.substance, viewed_shape(scene), density, scene.substance.critical_temperature - 0.1)
    except RunbookError:
        return False
    return now is not None and window.low <= now.height <= window.high


def _faint(fluid: Substance, last: float | None) -> float | None:
    """Where the step of the index has become small, if the surface lasts till there."""
    critical = fluid.critical_temperature
    if last is None or index_of(fluid, fluid.critical_density) is None:
        return None

    def excess(x: float) -> float:
        both = fluid.saturation(critical - 10.0**x)
        dense, thin = index_of(fluid, both.liquid_density), index_of(fluid, both.vapour_density)
        assert dense is not None, "the refractivity is known"
        assert thin is not None, "the refractivity is known"
        return dense - thin - FAINT

    far, near = log10(critical - fluid.triple_temperature), -3.0
    if excess(far) < 0.0 or excess(near) > 0.0:
        return None
    at = critical - float(10.0 ** bracketed_root(excess, far, near, 1e-4))
    return at if at < last else None


def _haze(fluid: Substance, density: float, side: float) -> float | None:
    """Farthest temperature from critical on one side at which a haze is seen."""
    critical = fluid.critical_temperature

    def excess(away: float) -> float:
        found = turbidity(fluid, critical + side * away, density)
        return -VISIBLE if found is None else found.turbidity - VISIBLE

    nodes = [_WIDEST * (1.0 - k / 24.0) for k in range(24)]
    nodes = [n for n in nodes if n > SCALING_WITHIN] + [0.999 * SCALING_WITHIN, 0.1]
    before = excess(nodes[0])
    for outer, inner in pairwise(nodes):
        value = excess(inner)
        if before < 0.0 <= value:
            # The two laws meet with a small step: there the root is where they meet.
            return critical + side * bracketed_root(excess, outer, inner, 1e-3, before, value)
        before = value
    return None


def _flattens(fluid: Substance) -> bool:
    """Whether the equation's dome closes faster than nature's between 1 K and 0.1 K below critical."""
    wide, narrow = (
        both.liquid_density - both.vapour_density
        for both in (fluid.saturation(fluid.critical_temperature - away) for away in (1.0, 0.1))
    )
    return log10(wide / narrow) > _TRUE_SLOPE + _ALLOWED
