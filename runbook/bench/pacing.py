"""The clock of a rehearsal, turned by the same keys on every screen of a run.

At the vessel there is no such clock and the keys do nothing. Refuses to jump where somebody is to act at once: a
latest time that passed in a jump would be nobody's lateness.
"""

from __future__ import annotations

from typing import TYPE_CHECKING, Final

from textual.binding import Binding, BindingType

from runbook.bench.viewing import next_moment

if TYPE_CHECKING:
    from runbook.bench.app import BenchApp
    from runbook.run.conductor import Conductor

PACE_KEYS: Final[tuple[BindingType, ...]] = (
    Binding("left_square_bracket", "pace('slower')", show=False),
    Binding("right_square_bracket", "pace('faster')", show=False),
    Binding("p", "pace('pause')", show=False),
    Binding("j", "pace('jump')", show=False),
)
"""For a screen that has `action_pace`."""


def turn_clock(bench: BenchApp, desk: Conductor, what: str) -> str:
    """'slower', 'faster', 'pause' or 'jump': to the next moment at which something is asked for. Why not, or empty."""
    pace = bench.pace
    if pace is None:
        return ""
    if what == "jump":
        seconds = next_moment(desk.standing())
        if seconds <= 0.0:
            return "No jump: the step on the screen is due now."
        pace.jump(seconds)
    else:
        {"slower": pace.slower, "faster": pace.faster, "pause": pace.pause}[what]()
    bench.changed()
    return ""
