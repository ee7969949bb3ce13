"""What a quick sequence does on its way: one that closes the vessel and lets go again leaves it open, and was closed.

Judged by its end alone it would look as if nothing had been done. Knows words and valves; no physics.
"""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass

from runbook.apparatus.model import Apparatus
from runbook.apparatus.spaces import springs_open, ways_out
from runbook.procedure.model import LetRiseTo, QuickStep, Step
from runbook.procedure.model import Parked as ParkedPart


@dataclass(frozen=True, slots=True)
class Held:
    """A vent that springs open, held shut by hand up to a level and then let go, each time the vessel is closed."""

    vent: str
    """Tag of the valve."""
    rise: LetRiseTo
    """The highest of those in the sequence."""


@dataclass(frozen=True, slots=True)
class Course:
    """What happened between the beginning and the end of a step."""

    closes: bool
    """Every way out was shut at some moment in it."""
    held: Held | None
    """None: it was closed otherwise than by a hand that lets go in the same sequence."""


STRAIGHT = Course(False, None)
"""Of a step whose end says everything."""


def course_of(apparatus: Apparatus, before: Mapping[str, str], step: Step | ParkedPart) -> Course:
    """The course of a step that begins with valves standing so; only a quick sequence has one."""
    if not isinstance(step, QuickStep):
        return STRAIGHT
    ways = ways_out(apparatus, apparatus.spaces[0])
    sprung = springs_open(apparatus)
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
    return Course(True, Held(vent, max(rises, key=lambda one: one.let_rise_to.absolute(101325.0))))
