"""What is asked of the physics once, before a run: bind this procedure to its vessel, this room and this charge."""

from __future__ import annotations

from dataclasses import dataclass

from runbook.answers.margins import ChargeBox


@dataclass(frozen=True, slots=True)
class BindRequest:
    """A procedure to be bound. Everything a Plan depends on besides the two files themselves."""

    procedure_path: str
    """The procedure file; the apparatus is the one it names."""
    on: str
    """ISO date on which certificates are judged."""
    barometer_Pa: float | None = None
    """Read in the room [Pa]; None: worked out from the height."""
    height_m: float | None = None
    """Of the room above sea level [m], where it differs from the apparatus file's; None: as written there."""
    room_hottest_K: float | None = None
    """Hottest the room is allowed to become [K], where it differs from the file's; None: as written there."""
    charge: ChargeBox | None = None
    """What the vessel's charge record says is in it; None: nothing."""
    part: int = 0
    """The part of the day that is begun with, from 0."""
    cell_closed: bool = False
    """The vessel is closed when the run begins."""
