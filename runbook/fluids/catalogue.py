"""The fluids this program knows: names, validity, how far to trust each equation. Data, no physics.

A fluid is added here, with its source; nothing elsewhere asks for a fluid by name.
"""

from __future__ import annotations

from dataclasses import dataclass

from runbook.errors import InputUnusable


@dataclass(frozen=True, slots=True)
class FluidData:
    """What has to be known of a fluid besides its equation of state."""

    name: str
    """Canonical name, as it is printed and written in records."""
    aliases: tuple[str, ...]
    """Other spellings accepted; compared without regard to case."""
    library_name: str
    """What the property library calls it."""
    source: str
    """Publication of the equation of state."""
    max_temperature: float
    """Upper end of the equation's validity [K]; the library accepts more, in silence."""
    max_pressure: float
    """Upper end of the equation's validity [Pa]."""
    saturation_uncertainty: float
    """Of the saturation pressure, relative [1]; a bound as its authors state it."""
    dense_uncertainty: float
    """Of the density where the vessel is filled by one dense phase, relative [1]; a bound, taken
    wider than the authors' figure because the pressure of a full vessel hangs on it."""
    thin_uncertainty: float
    """Of the density of vapour and gas below critical density, relative [1]."""
    freezes_to: str | None
    """Which solid model continues it below the triple point; None: refused there."""


FLUIDS: tuple[FluidData, ...] = (
    FluidData(
        name="carbon dioxide",
        aliases=("CO2", "carbondioxide", "R744"),
        library_name="CarbonDioxide",
        source="Span and Wagner 1996, J. Phys. Chem. Ref. Data 25, 1509",
        max_temperature=1100.0,
        max_pressure=800.0e6,
        saturation_uncertainty=0.00012,
        dense_uncertainty=0.002,
        thin_uncertainty=0.0005,
        freezes_to="dry ice",
    ),
)


def find(name: str) -> FluidData:
    """The fluid of that name or alias.

    Raises InputUnusable, naming the known fluids.
    """
    wanted = name.strip().casefold()
    for fluid in FLUIDS:
        if wanted == fluid.name.casefold() or wanted in (alias.casefold() for alias in fluid.aliases):
            return fluid
    known = ", ".join(fluid.name for fluid in FLUIDS)
    raise InputUnusable(f"no fluid is known as '{name}': write one of {known}")
