"""Every pressure limit of the spaces that are one, and the lowest that governs.

A limit that is not known stands first: it can be anything, so nothing may be higher than it.
"""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import dataclass
from typing import Final, Literal

from runbook.apparatus import relief
from runbook.apparatus.model import Apparatus, Component
from runbook.quantities import Level, NotKnown

STANDARD_ATMOSPHERE: Final = 101325.0
"""Only to put gauge and absolute limits into one order [Pa]; ISO 2533."""


@dataclass(frozen=True, slots=True)
class PressureLimit:
    """One upper limit of pressure."""

    tag: str
    """Of the part, device or gauge; for the vessel's own rating the vessel's tag."""
    what: str
    """In words."""
    level: Level | None
    """None: not known."""
    kind: Literal["mawp", "component", "relief", "gauge full scale"]


def pressure_limits(apparatus: Apparatus, spaces: Iterable[str]) -> tuple[PressureLimit, ...]:
    """Limits of these spaces taken as one, the lowest first and what is not known before all."""
    joined = frozenset(spaces)
    found = [*_mawp(apparatus, joined), *_components(apparatus, joined)]
    found += [
        PressureLimit(device.tag, device.kind, relief.ceiling(device), "relief")
        for device in apparatus.relief
        if device.space in joined
    ]
    found += [
        PressureLimit(one.tag, "full scale of the gauge", one.dial.high, "gauge full scale")
        for one in apparatus.instruments
        if one.of in joined and isinstance(one.dial.high, Level)
    ]
    return tuple(sorted(found, key=_order))


def ceiling(apparatus: Apparatus, spaces: Iterable[str]) -> PressureLimit | None:
    """The limit that governs these spaces taken as one; None where nothing limits them."""
    return next(iter(pressure_limits(apparatus, spaces)), None)


def _order(limit: PressureLimit) -> float:
    return float("-inf") if limit.level is None else limit.level.absolute(STANDARD_ATMOSPHERE)


def _mawp(apparatus: Apparatus, joined: frozenset[str]) -> Iterable[PressureLimit]:
    if apparatus.spaces[0] in joined:
        rating = apparatus.mawp.rating
        level = None if isinstance(rating, NotKnown) else rating
        yield PressureLimit(apparatus.tag, "maximum allowable working pressure", level, "mawp")


def _components(apparatus: Apparatus, joined: frozenset[str]) -> Iterable[PressureLimit]:
    for part in apparatus.components:
        if part.space in joined:
            yield PressureLimit(part.tag, part.what, _upper(part), "component")


def _upper(part: Component) -> Level | None:
    return None if isinstance(part.pressure, NotKnown) else part.pressure.high
