"""Heat under an open vessel: what boils away has to find its way out, and a liquefied gas must not be driven at all.

A liquid that boils above the room's temperature may be boiled in the open: a hand can leave it any time. Its steam
raises the pressure by what its way out takes. Refuses to say (None) where no bore of an open way is stated.
"""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from math import pi

from runbook.answers import Finding
from runbook.apparatus.model import OUTSIDE
from runbook.assess.scene import Scene
from runbook.assess.walk import VesselState, Walked
from runbook.errors import OutsideValidity
from runbook.procedure.document import Place

_CONTRACTION = 0.6
"""Of a sharp-edged hole [1], the least of common holes: common practice."""


def steam_rise(scene: Scene, state: VesselState) -> float | None:
    """How far above the room's the pressure of an open vessel comes while its source boils it [Pa].

    0 where nothing can boil; None where it cannot be said. Steam of the source's full power through the open bores,
    taken as no denser than in the room: an upper bound.
    """
    source = scene.apparatus.heat_source
    if source is None or not state.loaded or state.closed or state.source not in ("on", "off", "do not know"):
        return 0.0
    if not scene.stays_liquid:
        # What boils in the room anyhow is warmed by it first; such a warming is an error of its own.
        return 0.0
    if any(state.valves.get(one.tag) == "open" for one in scene.apparatus.openings):
        return 0.0
    bores = [
        valve.bore.low
        for valve in scene.apparatus.valves
        if valve.bore is not None and OUTSIDE in valve.joins and state.valves.get(valve.tag) == "open"
    ]
    if not bores:
        return None
    try:
        both = scene.substance.saturation(scene.substance.boiling_temperature(scene.barometer.low_Pa))
    except OutsideValidity:
        return None
    heat = both.vapour_energy - both.liquid_energy + both.pressure * (1 / both.vapour_density - 1 / both.liquid_density)
    area = _CONTRACTION * 0.25 * pi * sum(bore**2 for bore in bores)
    return float((source.power.high / heat / area) ** 2 / (2.0 * both.vapour_density))


def open_heat_findings(scene: Scene, lines: Sequence[Walked], places: Sequence[Place]) -> Iterator[Finding]:
    """Rule 'order': a source that warms a charge in the open, of a fluid that boils away in the room by itself."""
    if scene.stays_liquid:
        return
    for line, at in zip(lines, places, strict=True):
        if line.warms and not line.before.closed:
            yield Finding(
                "order", "error", *at,
                f"step {line.number}: the heat source warms a charge that is not sealed, and it boils in the room "
                "already: warm it after it is sealed",
            )  # fmt: skip
