"""A procedure of several vessels in one bath, seen from each: the same steps, and of the readings only its own.

Everything that judges one vessel then serves all of them. Nothing is judged here.
"""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import replace
from typing import Final

from runbook.apparatus.consistency import seen_alone
from runbook.apparatus.model import Apparatus
from runbook.procedure.document import Place, Route
from runbook.procedure.model import DoStep, HoldStep, Part, Procedure, QuickStep, Step
from runbook.procedure.reader import Loaded
from runbook.procedure.reading import ReadStep

_LISTS: Final = ("read", "read_after")
_READS: Final = ("parts", 0, "steps", 0, "read")
"""A route to a list of readings."""


def whole(apparatus: Apparatus) -> Apparatus:
    """The first vessel with every part and instrument of those beside it, for rules that look for tags."""
    if not apparatus.beside:
        return apparatus
    return apparatus.model_copy(
        update={
            name: (*getattr(apparatus, name), *(part for one in apparatus.beside for part in getattr(one, name)))
            for name in ("components", "instruments")
        }
    )


def seen_from_each(loaded: Loaded) -> tuple[Loaded, ...]:
    """The two files as each vessel sees them, the first one first; the files themselves where there is but one."""
    if not loaded.apparatus.beside:
        return (loaded,)
    return tuple(_seen(loaded, number) for number in range(1 + len(loaded.apparatus.beside)))


def _seen(loaded: Loaded, number: int) -> Loaded:
    apparatus = seen_alone(loaded.apparatus, number)
    charge = loaded.procedure.charge if number == 0 else loaded.procedure.beside[apparatus.tag]
    tags = {one.tag for one in apparatus.instruments}
    others = {one.tag for one in whole(loaded.apparatus).instruments} - tags
    parts = tuple(_with_steps(part, others) for part in loaded.procedure.parts)
    procedure = loaded.procedure.model_copy(update={"charge": charge, "beside": {}, "parts": parts})
    return replace(
        loaded,
        one_of_several=True,
        procedure=procedure,
        apparatus=apparatus,
        positions=_moved(loaded.positions, loaded.procedure, others) | _of_charge(loaded, number, apparatus.tag),
        apparatus_positions=_of_vessel(loaded.apparatus_positions, loaded.apparatus, number),
    )


def _with_steps(part: Part, others: set[str]) -> Part:
    return part.model_copy(update={"steps": tuple(_own(step, others) for step in part.steps)})


def _own(step: Step, others: set[str]) -> Step:
    """The step without what is read on other vessels."""
    if isinstance(step, DoStep):
        return step.model_copy(update={"read": tuple(r for r in step.read if r.with_ not in others)})
    if isinstance(step, QuickStep):
        return step.model_copy(update={"read_after": tuple(r for r in step.read_after if r.with_ not in others)})
    if isinstance(step, HoldStep) and step.hold.read is not None and step.hold.read.with_ in others:
        return step.model_copy(update={"hold": step.hold.model_copy(update={"read": None})})
    return step


def _moved(places: dict[Route, Place], procedure: Procedure, others: set[str]) -> dict[Route, Place]:
    """Places by the routes of lists of readings from which some are gone."""
    now = {(*route, old): new for route, reads in _lists(procedure) for old, new in _kept(reads, others)}
    long = len(_READS)
    found = {}
    for route, place in places.items():
        if len(route) <= long or route[long - 1] not in _LISTS:
            found[route] = place
        elif (at := now.get(route[: long + 1])) is not None:
            found[(*route[:long], at, *route[long + 1 :])] = place
    return found


def _kept(reads: tuple[ReadStep, ...], others: set[str]) -> Iterator[tuple[int, int]]:
    """Old and new index of each reading that stays."""
    stay = [i for i, read in enumerate(reads) if read.with_ not in others]
    yield from ((old, new) for new, old in enumerate(stay))


def _lists(procedure: Procedure) -> Iterator[tuple[Route, tuple[ReadStep, ...]]]:
    for p, part in enumerate(procedure.parts):
        for s, step in enumerate(part.steps):
            if isinstance(step, DoStep):
                yield ("parts", p, "steps", s, "read"), step.read
            elif isinstance(step, QuickStep):
                yield ("parts", p, "steps", s, "read_after"), step.read_after


def _of_charge(loaded: Loaded, number: int, tag: str) -> dict[Route, Place]:
    """Where the charge of a vessel beside the first stands."""
    if number == 0:
        return {}
    return {
        ("charge", *route[2:]): place for route, place in loaded.positions.items() if route[:2] == ("beside", tag)
    }


def _of_vessel(places: dict[Route, Place], apparatus: Apparatus, number: int) -> dict[Route, Place]:
    if number == 0:
        return places
    own = len(apparatus.beside[number - 1].instruments)
    found = {r: p for r, p in places.items() if r[:1] != ("instruments",) and r[:1] != ("components",)}
    found |= {r[2:]: p for r, p in places.items() if r[:2] == ("beside", number - 1) and len(r) > 2}
    shared = [i for i, one in enumerate(apparatus.instruments) if one in seen_alone(apparatus, number).instruments]
    for new, old in enumerate(shared):
        found |= {("instruments", own + new, *r[2:]): p for r, p in places.items() if r[:2] == ("instruments", old)}
    return found
