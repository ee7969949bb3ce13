"""What is seen of a vessel as it stands, in sentences with their figures and how far to trust each.

Refuses to place a surface where the charge is not known, and to say more than one sentence within 0.1 K of
critical.
"""

from __future__ import annotations

from dataclasses import dataclass

from runbook.answers import Sight
from runbook.assess.boxes import viewed_shape
from runbook.assess.scene import Scene
from runbook.assess.sights import phrases as say
from runbook.assess.sights.beads import bead_sights
from runbook.assess.sights.frozen import frost_sight, letting_down, solid_sight
from runbook.assess.sights.marks import VISIBLE, Marks, is_seen, marks
from runbook.assess.sights.surface import (
    boiling_sight,
    contrast_sight,
    end_sight,
    near_critical,
    rain_sight,
    surface_sight,
)
from runbook.errors import RunbookError
from runbook.fluids.optics import turbidity
from runbook.fluids.state import Region, State
from runbook.procedure.model import DoStep, Parked, QuickStep, Step

NEAR_CRITICAL = 0.1
"""Within it one sentence is all that is honest [K]."""
_KNOWN = 0.2
"""A charge whose bounds are further apart than this share of it places no surface [1]."""


@dataclass(frozen=True, slots=True)
class Look:
    """What is looked at."""

    low_kg: float
    """Least charge [kg]."""
    high_kg: float
    """Most [kg]."""
    temperature: float
    """Of the wall as read [K]."""
    warming: bool | None = None
    """None: it stands."""
    heated: bool = False
    """The source is on."""
    lets_down: bool = False
    """A way out is open after the vessel was closed."""
    toward: float | None = None
    """Where the path leads [K]; None: nowhere."""

    @property
    def mass(self) -> float:
        """Middle of the bounds [kg]."""
        return 0.5 * (self.low_kg + self.high_kg)

    @property
    def known(self) -> bool:
        """Well enough to place a surface."""
        return self.mass > 0.0 and self.high_kg - self.low_kg <= _KNOWN * self.mass


def written(step: Step | Parked) -> tuple[tuple[Sight, ...], str]:
    """The author's sights of a step, and what to do if they do not come."""
    if not isinstance(step, DoStep | QuickStep):
        return (), ""
    # In a quick sequence every act says for itself what to do if it does not come.
    if_not = step.if_not or "" if isinstance(step, DoStep) else ""
    if step.see is None or step.see.words is None:
        return (), if_not
    return (Sight(step.see.words, False, if_not),), if_not


def computed(scene: Scene, look: Look) -> tuple[Sight, ...]:
    """What is seen, the most telling first. Raises nothing: what is not modelled is not said."""
    if look.lets_down:
        return letting_down(scene, look.temperature)
    frost = frost_sight(scene, look.temperature)
    around = () if frost is None else (frost,)
    if not is_seen(scene):
        return around
    if not look.known:
        if _only_gas(scene, look):
            return (Sight("No surface: at most gas is left.", True, of="no liquid", trust=say.GAS_TRUST,
                          numbers=(("most", look.high_kg, "kg"),)), *around)  # fmt: skip
        words = "How much is in it is not known well enough to say where a surface stands."
        numbers = (("least", look.low_kg, "kg"), ("most", look.high_kg, "kg"))
        return (Sight(words, True, of="meniscus", numbers=numbers, trust=say.UNKNOWN_TRUST), *around)
    try:
        return (*_inside(scene, look), *around)
    except RunbookError:
        return around


def liquid_height(scene: Scene, mass: float, temperature: float) -> float | None:
    """Height of the surface of a charge [kg] above the inside bottom [m]; None where there is none."""
    try:
        state = scene.substance.state(temperature, mass / scene.apparatus.volume.free.value)
        if state.region is not Region.LIQUID_VAPOUR or state.liquid is None:
            return None
        return viewed_shape(scene).height(state.liquid)
    except RunbookError:
        return None


def _only_gas(scene: Scene, look: Look) -> bool:
    """Even the most it can hold is one thin phase."""
    try:
        density = max(look.high_kg, 1e-6) / scene.apparatus.volume.free.value
        return scene.substance.region(look.temperature, density) in (Region.VAPOUR, Region.GAS)
    except RunbookError:
        return False


def _inside(scene: Scene, look: Look) -> tuple[Sight, ...]:
    charge = marks(scene, look.mass)
    away = look.temperature - scene.substance.critical_temperature
    if abs(away) <= NEAR_CRITICAL and (near := near_critical(scene, charge, look.warming)) is not None:
        return (near,)
    state = scene.substance.state(look.temperature, charge.density)
    solid = solid_sight(scene, state)
    if solid is not None:
        return (solid,)
    found: list[Sight | None]
    temperature = look.temperature
    if state.region is Region.LIQUID_VAPOUR:
        found = [
            surface_sight(scene, charge, temperature, (look.low_kg, look.high_kg), look.warming),
            rain_sight(scene, charge, temperature) if look.warming is False else None,
            haze_sight(scene, charge, temperature),
            contrast_sight(scene, charge, temperature),
            coming(scene, charge, temperature, look.toward) if look.warming and look.toward is not None else None,
            boiling_sight(temperature) if look.heated else None,
        ]
    else:
        found = [one_phase(charge, state), haze_sight(scene, charge, temperature)]
    height = viewed_shape(scene).full_height
    found += bead_sights(scene.substance, charge.beads, temperature, charge.density, height)
    return tuple(one for one in found if one is not None)


def one_phase(charge: Marks, state: State) -> Sight:
    """Nothing but one phase."""
    words = {
        Region.LIQUID: "No surface: liquid fills the window.",
        Region.VAPOUR: "No surface: vapour only, the last liquid has gone.",
    }.get(state.region, "No surface: one clear fluid.")
    of = "no liquid" if state.region is Region.VAPOUR else "meniscus"
    return Sight(words, True, of=of, numbers=(("density", charge.density, "kg/m3"),), trust=say.HEIGHT_TRUST)


def haze_sight(scene: Scene, charge: Marks, temperature: float) -> Sight | None:
    """The haze at a temperature [K]; None where a lamp shows none."""
    first = charge.haze_from, charge.haze_until
    low = first[0] if first[0] is not None else scene.substance.critical_temperature
    high = first[1] if first[1] is not None else scene.substance.critical_temperature
    if not low <= temperature <= high:
        return None
    found = turbidity(scene.substance, temperature, charge.density)
    if found is None or found.turbidity < 0.9 * VISIBLE:
        return None
    through = found.transmission(charge.path)
    numbers = (
        ("turbidity", found.turbidity, "1/m"),
        ("light through the cell", through, "1"),
        ("path of the light", charge.path, "m"),
        ("correlation length", found.correlation_length, "m"),
    )
    return Sight(say.haze_words(through), True, of="haze", numbers=numbers, trust=say.HAZE_TRUST)


def coming(scene: Scene, charge: Marks, temperature: float, toward: float) -> Sight | None:
    """The next thing that happens to the surface between here and there, both [K], on warming."""
    for passed in charge.passed:
        if temperature < passed.temperature <= toward and not _in_place(charge, passed.temperature):
            return end_sight(scene, charge, passed)
    end = charge.end
    if end is not None and temperature < end.temperature <= toward:
        return end_sight(scene, charge, None)
    return None


def _in_place(charge: Marks, at: float) -> bool:
    """A passing so near the end that it is part of the vanishing."""
    return charge.end is not None and charge.end.way == "in place" and charge.end.temperature - at <= NEAR_CRITICAL
