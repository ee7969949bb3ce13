"""What can be said of a substance at one temperature and density. Data, no physics."""

from __future__ import annotations

from dataclasses import dataclass
from enum import StrEnum


class Region(StrEnum):
    """What is in the vessel."""

    SOLID_VAPOUR = "solid+vapour"
    SOLID_LIQUID = "solid+liquid"
    THREE_PHASE = "solid+liquid+vapour"
    LIQUID_VAPOUR = "liquid+vapour"
    LIQUID = "liquid"
    VAPOUR = "vapour"
    SUPERCRITICAL = "supercritical"
    GAS = "gas"


@dataclass(frozen=True, slots=True)
class State:
    """A substance at one temperature and density."""

    temperature: float
    """[K]."""
    density: float
    """Mass over volume, all phases together [kg/m3]."""
    pressure: float
    """Absolute [Pa]."""
    region: Region
    """Below critical temperature a single phase is named by its density, above by its pressure."""
    solid: float | None
    """Volume fraction [1]; None in supercritical and gas, and where temperature and density do not fix it."""
    liquid: float | None
    """Volume fraction [1]; None where solid is."""
    vapour: float | None
    """Volume fraction [1]; None where solid is. The three sum to 1."""
    liquid_density: float | None
    """Of the liquid [kg/m3]; None where liquid and another phase are not both there."""
    vapour_density: float | None
    """Of the vapour [kg/m3]; None where vapour and another phase are not both there."""
    internal_energy: float | None
    """[J/kg]; None on the three-phase plateau, where temperature and density do not fix it."""
    entropy: float | None
    """[J/kg/K]; None where the internal energy is."""


@dataclass(frozen=True, slots=True)
class Landmarks:
    """Temperatures at which something happens to a charge that is warmed; None where it does not happen."""

    triple: float | None
    """Solid, liquid and vapour together [K]; None for a charge too thin ever to hold liquid."""
    liquid_full: float | None
    """Liquid fills the vessel [K]; above it the pressure climbs steeply."""
    dry: float | None
    """The last liquid (or solid) has gone [K]."""
    critical: float | None
    """The meniscus vanishes in place [K]; given within 5 % of critical density, the other two elsewhere."""
