"""How fast a rehearsal goes, and what its simulated dials show."""

from __future__ import annotations

from typing import TYPE_CHECKING, Protocol

if TYPE_CHECKING:
    from runbook.run.state import Ledger


class Pace(Protocol):
    """The clock and the vessel of a rehearsal as the screens see them."""

    @property
    def words(self) -> str:
        """Speed or pause in a few characters, for the header."""
        ...

    def faster(self) -> None:
        """One step faster."""
        ...

    def slower(self) -> None:
        """One step slower."""
        ...

    def pause(self) -> None:
        """Stop the clock, or let it go on."""
        ...

    def jump(self, seconds: float) -> None:
        """This much later at once [s]."""
        ...

    def follow(self, ledger: Ledger) -> None:
        """Bring the simulated vessel to the present moment and to what has been done."""
        ...

    @property
    def seen(self) -> str:
        """What stands in the simulated vessel, for whoever looks into it; empty: nothing."""
        ...

    def dial(self, tag: str) -> str | None:
        """What the simulated dial shows, as one would type it; None: it cannot be read now."""
        ...

    def played(self, name: str) -> str | None:
        """The signing number of a person the rehearsal plays; None: a real one, or one who has left."""
        ...

    def trouble(self, fault: str) -> None:
        """Let one more thing go wrong, as --fault names it. Raises InputUnusable."""
        ...

    def news(self) -> list[tuple[str, str]]:
        """Name and words of faults that have begun since somebody last asked."""
        ...
