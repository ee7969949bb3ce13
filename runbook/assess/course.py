"""What a step does on its way: a sequence that closes the vessel and lets go again leaves it open, and was closed.

Judged by its end alone it would look as if nothing had been done. So is the proof of empty, which shuts the vent for a
while. Knows words and valves; no physics.
"""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass

from runbook.apparatus.model import Apparatus
from runbook.apparatus.spaces import springs_open, ways_out
from runbook.procedure.model import EmptyStep, LetRiseTo, Parked, QuickStep, Step
from runbook.quantities import Level
from runbook.run.proofs import RISE

_PROVING_S = 10.0
"""How soon a hand lets go while a gauge is watched that has to stand still; no file says it [s]."""
_ATMOSPHERE = 101325.0
"""Only to compare levels with each other [Pa]."""


@dataclass(frozen=True, slots=True)
class Held:
    """A vent that springs open, held shut by hand up to a level and then let go, each time the vessel is closed."""

    vent: str
    """Tag of the valve."""
    gauge: str
    """Tag of the gauge that is watched."""
    level: Level
    """What it shows at the most; the highest of those in the step."""
    seconds: float
    """How soon the hand has let go after that; the longest of those in the step [s]."""


@dataclass(frozen=True, slots=True)
class Course:
    """What happened between the beginning and the end of a step."""

    closes: bool
    """Every way out was shut at some moment in it."""
    held: Held | None
    """None: it was closed otherwise than by a hand that lets go in the same sequence."""


STRAIGHT = Course(False, None)
"""Of a step whose end says everything."""


def course_of(apparatus: Apparatus, before: Mapping[str, str], step: Step | Parked) -> Course:
    """The course of a step that begins with valves standing so."""
    sprung = springs_open(apparatus)
    if isinstance(step, EmptyStep) and step.show_empty.vent in sprung:
        proof = step.show_empty
        return Course(False, Held(proof.vent, proof.low_gauge, Level(RISE, "gauge"), _PROVING_S))
    if not isinstance(step, QuickStep):
        return STRAIGHT
    ways = ways_out(apparatus, apparatus.spaces[0])
    valves = dict(before)
    closes, by_hand = False, True
    vent: str | None = None
    rises: list[LetRiseTo] = []
    risen = False
    for item in step.quick:
        was_closed = all(valves.get(tag) != "open" for tag in ways)
        valves |= item.valves
        closed = all(valves.get(tag) != "open" for tag in ways)
        if closed and not was_closed:
            closes, risen = True, False
            vent = next((t for t, position in item.valves.items() if position == "shut" and t in sprung), None)
        if closed and isinstance(item.path, LetRiseTo):
            rises.append(item.path)
            risen = True
        if was_closed and not closed:
            by_hand = by_hand and risen and vent is not None and item.valves.get(vent) == "open"
    left_closed = all(valves.get(tag) != "open" for tag in ways)
    if not closes or left_closed or not by_hand or vent is None:
        return Course(closes, None)
    highest = max(rises, key=lambda one: one.let_rise_to.absolute(_ATMOSPHERE))
    slowest = max(one.let_go_within.high for one in rises)
    return Course(True, Held(vent, highest.read_on, highest.let_rise_to, slowest))
