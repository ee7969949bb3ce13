"""What every look-ahead assumes. One home for the list, so that a test can take one away and show what passes.

Nothing here can be changed by a file, a flag or a person: the program always uses ALL.
"""

from __future__ import annotations

from dataclasses import dataclass


@dataclass(frozen=True, slots=True)
class Assumptions:
    """The worst cases a look-ahead takes; each True in the program."""

    hottest_room: bool = True
    """The room reaches the hottest temperature the procedure allows; else its coldest."""
    heat_stuck_on: bool = True
    """A connected source stays on up to its cut-out; else it obeys."""
    overshoot: bool = True
    """A step passes its target by the stated overshoot, in the direction of the step."""
    lag: bool = True
    """The wall is ahead of its thermometer by lag x rate."""
    probe_error: bool = True
    """The thermometer reads low by its permissible error."""
    volume_corner: bool = True
    """The free volume is the least its tolerance allows; else as stated."""
    no_loss: bool = True
    """The charge at closing is the last reading plus the scale's error; else what the plan says."""
    equation_uncertainty: bool = True
    """The equation of state is off by its stated uncertainty."""
    air: bool = True
    """The vessel held air when it was closed."""


ALL = Assumptions()
