"""Every line of a procedure in order, with its route in the file. What the rules walk over."""

from __future__ import annotations

from collections.abc import Iterable, Iterator
from dataclasses import dataclass

from runbook.procedure.document import Route
from runbook.procedure.model import DoStep, HoldStep, Path, Procedure, QuickStep, ReadStep, Step


@dataclass(frozen=True, slots=True)
class Line:
    """One step where it stands."""

    route: Route
    part: int
    step: Step


@dataclass(frozen=True, slots=True)
class Found:
    """One finding before it is located."""

    rule: str
    """Readable name."""
    route: Route
    message: str
    severity: str = "error"
    """error | warning | advice."""


def lines_of(procedure: Procedure) -> tuple[Line, ...]:
    """Every step of every part; a part that is parked has none."""
    return tuple(
        Line(("parts", i, "steps", k), i, step)
        for i, part in enumerate(procedure.parts)
        for k, step in enumerate(part.steps)
    )


def readings_of(line: Line) -> Iterator[tuple[Route, ReadStep]]:
    """Every reading that a line asks for."""
    step = line.step
    if isinstance(step, DoStep):
        for i, read in enumerate(step.read):
            yield (*line.route, "read", i), read
    elif isinstance(step, QuickStep):
        for i, read in enumerate(step.read_after):
            yield (*line.route, "read_after", i), read
    elif isinstance(step, HoldStep) and step.hold.read is not None:
        yield (*line.route, "hold", "read"), step.hold.read


def acts_of(line: Line) -> Iterator[tuple[Route, dict[str, str], Path | None, str]]:
    """Every act of a line in order: route, valve positions it leaves, its path, its text."""
    step = line.step
    if isinstance(step, DoStep):
        yield line.route, dict(step.valves), step.path, step.do
    elif isinstance(step, QuickStep):
        for i, item in enumerate(step.quick):
            yield (*line.route, "quick", i), dict(item.valves), item.path, item.do


def texts_of(procedure: Procedure) -> Iterator[tuple[Route, str]]:
    """Every sentence that tells somebody to do something."""
    for line in lines_of(procedure):
        step = line.step
        for route, _, _, text in acts_of(line):
            yield (*route, "do"), text
        if isinstance(step, QuickStep):
            for i, item in enumerate(step.quick):
                yield (*line.route, "quick", i, "if_not"), item.if_not
        if isinstance(step, DoStep) and step.if_not is not None:
            yield (*line.route, "if_not"), step.if_not
        for route, read in readings_of(line):
            if read.if_not is not None:
                yield (*route, "if_not"), read.if_not
    for i, also in enumerate(procedure.make_safe_also):
        yield ("make_safe_also", i, "do"), also.do


def listed(words: Iterable[str]) -> str:
    """'a, b, c', or 'none'."""
    return ", ".join(words) or "none"
