"""What the gauge will show, for the paper at the bench: figures of one plan that no run asks for."""

from __future__ import annotations

from dataclasses import dataclass


@dataclass(frozen=True, slots=True)
class GaugeRow:
    """One temperature of the wall and where the gauge may then stand."""

    temperature: float
    """[K]"""
    low: float | None
    """Least the gauge may show, its permissible error taken off [Pa, absolute]; None: not computed."""
    expected: float | None
    """Of the stated charge in the stated volume, without air [Pa, absolute]."""
    high: float | None
    """Most it may show: most charge, least volume, trapped air, permissible error [Pa, absolute]."""


@dataclass(frozen=True, slots=True)
class GaugeCard:
    """The card beside one gauge."""

    tag: str
    """Of the gauge on the charge's space."""
    unit: str
    """Printed on its dial."""
    low: float
    """Lower end of its dial [Pa, absolute]."""
    high: float
    """Upper end of its dial [Pa, absolute]."""
    division: float
    """[Pa]"""
    ceiling: float | None
    """Lowest pressure limit [Pa, absolute]; None: not known."""
    ceiling_by: str
    rows: tuple[GaugeRow, ...]
    """From the coldest room to the hottest that the procedure warms to."""


@dataclass(frozen=True, slots=True)
class VesselCard:
    """What hangs on one loaded vessel, and what the fire service is told of it; with or without a gauge."""

    vessel: str
    """Its tag."""
    most_kg: float
    """That is planned to be in it [kg]."""
    volume: float
    """Largest free volume [m3]."""
    hottest_place: float | None
    """Where the most charge, left alone, comes to a limit of pressure or temperature [K]; None: not known."""
    relief: tuple[tuple[str, str, float], ...]
    """Tag, kind and lowest opening pressure [Pa, absolute] of each relief device on the charge's space."""
    left_closed: bool = True
    """False: it is only ever closed by a hand that lets go again, and never stands loaded and shut."""
