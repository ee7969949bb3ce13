"""How a chosen charge is brought in and proved: scale reading, dry ice to bring, height, hottest source and place."""

from __future__ import annotations

from dataclasses import dataclass, replace
from math import ceil

from runbook.apparatus.instruments import permissible_error
from runbook.assess.bounds import first_blocked
from runbook.assess.boxes import viewed_shape
from runbook.assess.choice.sight import Choice, largest
from runbook.assess.scene import Scene
from runbook.assess.sights.marks import is_seen, window_of
from runbook.charge.filling import mass_from_height
from runbook.errors import RunbookError
from runbook.quantities import Bounded

HANDLING = 0.25
"""Share of the solid lost in the box and on the way, common practice [1]."""
_PACKS = 0.05
"""[kg] to which what is brought is rounded up."""


@dataclass(frozen=True, slots=True)
class Ice:
    """Solid to bring."""

    charge: float
    """Sealed in [kg]."""
    cooling: float
    """Sublimed in cooling the body from the hottest room [kg]."""
    handling: float
    """[kg]"""

    @property
    def bring(self) -> float:
        """All of it, rounded up [kg]."""
        return ceil((self.charge + self.cooling + self.handling) / _PACKS - 1e-9) * _PACKS


@dataclass(frozen=True, slots=True)
class Height:
    """The surface that proves the charge at rest in the room."""

    low: float
    """Of the least charge at the worst corner [m]."""
    middle: float
    """[m]"""
    high: float
    """[m]"""
    temperature: float
    """Of the room it is read in, the middle of the two ends [K]."""
    seen: bool
    """All of that lies in the window."""
    proves: float | None
    """Within how much a reading of the height tells the charge, half-width [kg]; None: no instrument reads it."""


def ice(choice: Choice, mass: float) -> Ice | None:
    """Solid to bring for a charge [kg]; None where the fluid is not loaded as a solid that lies in the open."""
    fluid = choice.fluid
    if fluid.solid is None or fluid.triple_pressure < 101325.0 or fluid.data.hazards.release_forbidden:
        return None
    cold = fluid.boiling_temperature(101325.0)
    body = choice.apparatus.body.heat_capacity.high
    cooling = body * (choice.wanted.room_hottest - cold) / fluid.solid.heat_of_sublimation(cold)
    return Ice(mass, cooling, HANDLING * (mass + cooling))


def height(choice: Choice, mass: float) -> Height | None:
    """Where the surface stands at rest; None where there is none in that room."""
    scene = choice.scene(mass)
    shape, fluid = viewed_shape(scene), choice.fluid
    middle = 0.5 * (choice.wanted.room_coldest + choice.wanted.room_hottest)
    try:
        found = []
        for kg, volume in (
            (mass, choice.volume),
            (mass - choice.half, scene.volume[1]),
            (mass + choice.half, scene.volume[0]),
        ):
            state = fluid.state(middle, kg / volume)
            if state.liquid is None or not 0.0 < state.liquid < 1.0 or state.solid:
                return None
            found.append(shape.height(state.liquid))
    except RunbookError:
        return None
    low, high = min(found), max(found)
    window = window_of(scene)
    seen = is_seen(scene) and window.low <= low and high <= window.high
    return Height(low, found[0], high, middle, seen, _proves(choice, scene, found[0], middle))


def _proves(choice: Choice, scene: Scene, at: float, temperature: float) -> float | None:
    ruler = next((i for i in choice.apparatus.instruments if i.reads == "liquid height"), None)
    probe = scene.wall_probe()
    if ruler is None or probe is None:
        return None
    try:
        told = mass_from_height(
            choice.fluid,
            viewed_shape(scene),
            at,
            temperature,
            height_error=permissible_error(ruler, at) + ruler.division.value / 2.0,
            temperature_error=permissible_error(probe, temperature) + probe.division.value / 2.0,
            volume_error=choice.apparatus.volume.free.plus_minus,
        )
    except RunbookError:
        return None
    return 0.5 * (told.greatest - told.least)


def most_for_source(choice: Choice, hottest: float) -> float | None:
    """Most charge [kg] with a source that can become that hot [K] whatever happens; None where there is none."""
    source = choice.apparatus.heat_source
    if source is None:
        return None
    changed = choice.apparatus.model_copy(
        update={"heat_source": source.model_copy(update={"cut_out": Bounded(hottest), "hottest": Bounded(hottest)})}
    )
    wanted = replace(choice.wanted, warm_to=min(choice.wanted.warm_to, hottest))
    other = Choice(changed, choice.file, wanted, choice.sight)
    scene = other.scene(choice.fluid.critical_density * choice.volume)
    found = largest(1e-4, scene.brim_full, lambda high: first_blocked(scene, high) is None, 1e-5)
    return None if found is None else found - choice.half
