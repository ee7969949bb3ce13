"""What is in the simulated vessel, what hands have set, and what came and went: data, and the books kept on it.

Whatever changes the charge goes through here, so that nothing leaves uncounted. Knows no physics.
"""

from __future__ import annotations

from dataclasses import dataclass, replace

from runbook.charge.letdown import Hole
from runbook.charge.lumps import Lumps


@dataclass(frozen=True, slots=True)
class Relieving:
    """The relief device of the simulated vessel."""

    opens_at: float
    """Absolute [Pa]; infinite where it does not open at all."""
    reseats: bool
    """A valve shuts again; a disc does not."""


@dataclass(frozen=True, slots=True)
class Controls:
    """What hands, and faults, have set."""

    vent_open: bool
    """Any way out to the room."""
    bore: float
    """Bore of the widest one open [m]."""
    heating: bool | float
    """False off; True on up to the cut-out; a number: set point of the source [K]."""
    room_K: float
    """[K]"""
    barometer: float
    """[Pa]"""
    port: str = "top"
    """Where that way out takes from."""
    leak: float = 0.0
    """Bore of a leak [m]; 0: tight."""
    loss: float = 1.0
    """Share of the body's loss to the room that is left [1]."""

    @property
    def holes(self) -> tuple[Hole, ...]:
        """Every way out but the relief."""
        ways = [Hole(self.bore, self.port)] if self.vent_open and self.bore > 0.0 else []
        return (*ways, Hole(self.leak, "top")) if self.leak > 0.0 else tuple(ways)


@dataclass(frozen=True, slots=True)
class Tally:
    """What came into a vessel and went out of it since it stood there empty and was first looked at."""

    mass_in: float = 0.0
    """Loaded by hand [kg]."""
    mass_out: float = 0.0
    """Given to the room [kg]."""
    energy_in: float = 0.0
    """With what was loaded, and with water that hands changed [J]."""
    energy_out: float = 0.0
    """With what left [J]; enthalpy where the vessel drove it out, and its own energy where air took its place."""
    from_room: float = 0.0
    """Heat [J]; negative: the room took it."""
    from_source: float = 0.0
    """What the source was fed [J]."""

    @property
    def energy(self) -> float:
        """What all of it makes together [J]."""
        return self.energy_in - self.energy_out + self.from_room + self.from_source


@dataclass(frozen=True, slots=True)
class Vessel:
    """What is in the simulated vessel now."""

    mass: float
    """Of the charge [kg]; 0 when empty."""
    energy: float
    """Internal energy of the charge [J/kg]."""
    body_K: float
    """Where it has two sides, of the one that the source touches [K]."""
    source_K: float
    """[K]"""
    in_the_open: bool
    """Solid or liquid lies in the open vessel at the room's pressure."""
    air: float = 0.0
    """Closed in with the charge [mol]."""
    relief_open: bool = False
    """A relief device stands open."""
    far_K: float | None = None
    """Of the side that the source does not touch [K]; None: as body_K."""
    tally: Tally = Tally()

    @property
    def released(self) -> float:
        """Gas given to the room so far [kg]."""
        return self.tally.mass_out


def warmed(vessel: Vessel, after: Lumps) -> Vessel:
    """The vessel after a step of its lumps, and what it had from outside counted."""
    return replace(
        vessel,
        energy=after.fluid_energy,
        body_K=after.body_K,
        source_K=after.source_K,
        far_K=after.far_K,
        tally=replace(vessel.tally, from_room=after.from_room, from_source=after.from_source),
    )


def after_leaving(vessel: Vessel, gone: float, carried: float) -> Vessel:
    """After so much [kg] has left with so much energy [J]; not all of it."""
    left, tally = vessel.mass - gone, vessel.tally
    return replace(
        vessel,
        mass=left,
        energy=(vessel.mass * vessel.energy - carried) / left,
        # Air leaves with the vapour it is in.
        air=vessel.air * (left / vessel.mass),
        tally=replace(tally, mass_out=tally.mass_out + gone, energy_out=tally.energy_out + carried),
    )


def let_out(vessel: Vessel) -> Vessel:
    """After the last gas has left, and the room's air taken its place: what air does there is not counted."""
    tally = vessel.tally
    out, carried = tally.mass_out + vessel.mass, tally.energy_out + vessel.mass * vessel.energy
    return replace(
        vessel, mass=0.0, energy=0.0, in_the_open=False, air=0.0,
        tally=replace(tally, mass_out=out, energy_out=carried),
    )  # fmt: skip
