"""Charge, body, source and room as lumps: one implicit step of the heat between them, with what came from outside.

Whoever moves heat, closed, open or empty, left alone or rehearsed, does it by this step: implicit in the temperatures
and exact in the energies, so what leaves one lump enters the next, nothing is made or lost, and no step can overshoot
however strong a coupling. Knows nothing of phases: how warm the charge is, and how much heat it takes up a kelvin, is
told.
"""

from __future__ import annotations

from dataclasses import dataclass, replace
from math import inf
from typing import Final

from runbook.errors import InputUnusable

FAR_SHARE: Final = 0.25
"""Of a body that its source touches on one side: ends, windows and what is screwed into them; an estimate [1]."""
_ACROSS_S: Final = 200.0
"""How long the far side takes to follow by two thirds [s]: half the square of 4 cm over what stainless steel conducts,
4 mm2/s; an estimate, as no file states it."""


@dataclass(frozen=True, slots=True)
class HeatPath:
    """Heat capacities and couplings between the lumps."""

    body_heat_capacity: float
    """Of the vessel [J/K]; zero or more."""
    from_fluid: float
    """Between charge and body [W/K]; positive."""
    loss_to_room: float
    """Between body and room [W/K]; zero or more."""
    source_heat_capacity: float
    """Of the source itself [J/K]; zero: its power goes straight into the body."""
    source_power: float
    """Most that it gives [W]; zero or more."""
    source_limit_K: float | None
    """Its cut-out, or the hottest it can be [K]; None: nothing limits it."""
    source_coupling: float = 5.0
    """Between source and body [W/K]; positive; an estimate where nobody measured."""
    far_share: float = 0.0
    """Share of the body that the source does not touch, of its heat capacity, its contact with the charge and its loss
    alike [1]; zero or more, below one. Zero: the body is one lump."""
    between: float = inf
    """Between the two sides of the body [W/K]; positive; of no meaning where the body is one lump."""

    def __post_init__(self) -> None:
        least = (self.body_heat_capacity, self.loss_to_room, self.source_heat_capacity, self.source_power)
        if not (all(0.0 <= x < inf for x in least) and min(self.from_fluid, self.source_coupling) > 0.0):
            raise InputUnusable("heat capacities, losses and power are zero or more, couplings above zero")
        if self.far_share != 0.0 and not (0.0 < self.far_share < 1.0 and 0.0 < self.between < inf):
            raise InputUnusable("a far side is a share of the body between 0 and 1, coupled to the near one")


@dataclass(frozen=True, slots=True)
class Lumps:
    """Where the heat is now, and what came from outside on the way here."""

    fluid_energy: float
    """Internal energy of the charge [J/kg]."""
    body_K: float
    """Temperature of the body, where it has two sides of the one that the source touches [K]."""
    source_K: float
    """Temperature of the source [K]; that of the body where the source has no heat capacity."""
    far_K: float | None = None
    """Temperature of the side that the source does not touch [K]; None: the body is one lump."""
    from_room: float = 0.0
    """Heat that the room gave since these lumps began [J]; negative: it took."""
    from_source: float = 0.0
    """Energy that the source was fed since these lumps began [J]; zero or more."""


def two_sided(path: HeatPath) -> HeatPath:
    """The same body with a far side: its heat capacity, its contact and its loss are shared out, and stay as they are.

    As it is where nothing heats it: the room warms both sides alike. Left alone counts on one lump, which is as early:
    the heat that one side has more the other has less.
    """
    if path.source_power <= 0.0 or path.body_heat_capacity <= 0.0:
        return path
    return replace(path, far_share=FAR_SHARE, between=FAR_SHARE * path.body_heat_capacity / _ACROSS_S)


Heating = bool | float
"""False: off. True: on, up to the cut-out. A number: on, up to that temperature of the source [K]."""


def driven_to(path: HeatPath, heating: Heating) -> float | None:
    """Hottest that the source is driven to [K]; None where it is off."""
    if heating is False:
        return None
    asked = inf if heating is True else float(heating)
    return asked if path.source_limit_K is None else min(asked, path.source_limit_K)


def stored(lumps: Lumps, mass: float, path: HeatPath) -> float:
    """All the heat in charge, body and source [J], from where the charge's energy is counted and from 0 K."""
    far = lumps.body_K if lumps.far_K is None else lumps.far_K
    mean = lumps.body_K + path.far_share * (far - lumps.body_K)
    metal = path.body_heat_capacity * mean + path.source_heat_capacity * lumps.source_K
    return mass * lumps.fluid_energy + metal


def exchanged(
    lumps: Lumps,
    mass: float,
    fluid_K: float,
    takes_up: float,
    path: HeatPath,
    room_K: float,
    limit: float | None,
    h: float,
    contact: float = 1.0,
) -> Lumps:
    """The lumps after one implicit step of h [s].

    mass of the charge [kg], its temperature [K] and what it takes up [J/K], infinite where it does not warm; limit:
    hottest that the source is driven to [K], None where it is off; contact: share of the coupling to the charge [1].
    Without charge the mass is zero, and contact has to be.
    """
    share = path.far_share
    k = contact * path.from_fluid
    k_far, k_near = share * k, (1.0 - share) * k
    # The charge's own warming within the step weakens the coupling; while solid melts it does not warm.
    soft = 0.0 if takes_up == inf or k == 0.0 else h / (takes_up + h * k)
    fixed = 1.0 - soft * k
    stiff, pull = _side(lumps.body_K, 1.0 - share, k_near, soft, fixed * fluid_K, path, room_K, h)
    if share > 0.0:
        far_K = lumps.body_K if lumps.far_K is None else lumps.far_K
        stiff_far, pull_far = _side(far_K, share, k_far, soft, fixed * fluid_K, path, room_K, h)
        across = path.between + soft * k_near * k_far
        stiff_far += path.between
        near, source, fed = _near_and_source(
            lumps, path, stiff + path.between - across * across / stiff_far, pull + across * pull_far / stiff_far,
            limit, h,
        )  # fmt: skip
        far = (pull_far + across * near) / stiff_far
    else:
        near, source, fed = _near_and_source(lumps, path, stiff, pull, limit, h)
        far = near
    mean = near + share * (far - near)
    gained = h * k * fixed * (mean - fluid_K)
    return Lumps(
        fluid_energy=lumps.fluid_energy + gained / mass if mass > 0.0 else lumps.fluid_energy,
        body_K=near,
        source_K=source,
        far_K=far if share > 0.0 else None,
        from_room=lumps.from_room + h * path.loss_to_room * (room_K - mean),
        from_source=lumps.from_source + fed,
    )


def _side(
    kelvin: float, share: float, k: float, soft: float, fluid: float, path: HeatPath, room_K: float, h: float
) -> tuple[float, float]:
    """What holds one side of the body where it is [W/K], and what it is pulled by [W]; the other side left out."""
    store, loss = share * path.body_heat_capacity / h, share * path.loss_to_room
    return store + k * (1.0 - soft * k) + loss, store * kelvin + k * fluid + loss * room_K


def _near_and_source(
    lumps: Lumps, path: HeatPath, stiff: float, pull: float, limit: float | None, h: float
) -> tuple[float, float, float]:
    """Temperatures [K] of the source's side of the body and of the source after h [s], and what it was fed [J].

    stiff [W/K] and pull [W]: of all but the source. limit: hottest that the source is driven to [K], None where it is
    off. Driven past it within the step, the source is held at it, unless it is above it already: then it gives nothing.
    """
    power = 0.0 if limit is None else path.source_power
    if path.source_heat_capacity == 0.0:
        cold, hot = pull / stiff, (pull + power) / stiff
        body = hot if limit is None or hot <= limit else max(cold, limit)
        return body, body, h * (stiff * body - pull) if body > cold else 0.0
    store, coupling = path.source_heat_capacity / h, path.source_coupling
    shared = coupling * store / (store + coupling)

    def free(watt: float) -> tuple[float, float]:
        body = (pull + shared * (lumps.source_K + watt / store)) / (stiff + shared)
        return body, (store * lumps.source_K + watt + coupling * body) / (store + coupling)

    body, source = free(power)
    if limit is None or source <= limit:
        return body, source, h * power
    body, source = free(0.0)
    if source >= limit:
        return body, source, 0.0
    body = (pull + coupling * limit) / (stiff + coupling)
    return body, limit, h * (store * (limit - lumps.source_K) + coupling * (limit - body))
