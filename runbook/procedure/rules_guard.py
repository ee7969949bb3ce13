"""What stands around a step that raises a hazard: a hold before it, a warning on it, nothing tightened after it."""

from __future__ import annotations

import re
from collections.abc import Iterator
from typing import Final

from runbook.apparatus.model import Apparatus
from runbook.apparatus.spaces import is_closed
from runbook.procedure.document import Route
from runbook.procedure.lines import Found, Line, acts_of, lines_of
from runbook.procedure.model import (
    DoStep,
    EmptyStep,
    HoldStep,
    LetDownTo,
    Load,
    OpenContainment,
    Path,
    Procedure,
    Purge,
    QuickStep,
    Seal,
    WarmTo,
)

_TIGHTEN: Final = re.compile(r"^(tighten|torque|retighten|nip|screw)\b|\btighten", re.IGNORECASE)


def guards(procedure: Procedure, apparatus: Apparatus) -> Iterator[Found]:
    """Rules 'hold missing', 'warning missing', 'tightened under pressure' and 'let down from below'."""
    lines = lines_of(procedure)
    for i, line in enumerate(lines):
        for route, _, path, _ in acts_of(line):
            yield from _hold(procedure, apparatus, lines, i, route, path)
            yield from _port(apparatus, route, path)
        yield from _warning(apparatus, line)
    yield from _tightened(procedure, apparatus, lines)


def _raises(apparatus: Apparatus, path: Path | None) -> str:
    """What a path brings about, in words; empty where it raises nothing by itself."""
    source = apparatus.heat_source
    if isinstance(path, Seal):
        return "closes the vessel"
    if isinstance(path, WarmTo) and source is not None and path.by_means_of == source.tag:
        return "switches the heat on"
    if isinstance(path, LetDownTo | Purge):
        return "lets gas out"
    if isinstance(path, OpenContainment):
        return "opens the vessel"
    return ""


def _hold(
    procedure: Procedure, apparatus: Apparatus, lines: tuple[Line, ...], i: int, route: Route, path: Path | None
) -> Iterator[Found]:
    does = _raises(apparatus, path)
    if not does:
        return
    part = lines[i].route[:2]
    for before in reversed(lines[:i]):
        if before.route[:2] != part:
            break
        if isinstance(before.step, HoldStep | EmptyStep):
            return
    yield Found(
        "hold missing",
        (*route, "path"),
        f"this {does}, and nobody has signed since the part began: put a hold before it",
        "warning",
    )


LOADS: Final = "loads what is cold or under pressure"
"""What every loading does, of a fluid that boils below the room's temperature."""


def _warning(apparatus: Apparatus, line: Line) -> Iterator[Found]:
    if not isinstance(line.step, DoStep | QuickStep) or line.step.warning is not None:
        return
    for route, _, path, _ in acts_of(line):
        does = LOADS if isinstance(path, Load) else _raises(apparatus, path)
        if does:
            yield Found(
                "warning missing", route, f"this {does}: say what can hurt and how to avoid it, in a warning", "warning"
            )
            return


def _tightened(procedure: Procedure, apparatus: Apparatus, lines: tuple[Line, ...]) -> Iterator[Found]:
    positions: dict[str, str] = dict(procedure.at_start)
    charged = procedure.charge == "already loaded" or getattr(procedure.charge, "loaded_as", "") == "already loaded"
    for line in lines:
        for route, valves, path, text in acts_of(line):
            if charged and is_closed(apparatus, positions) and _TIGHTEN.search(text):
                yield Found(
                    "tightened under pressure",
                    (*route, "do"),
                    "nothing is tightened while the vessel is closed on a charge: let it down first",
                )
            charged = charged or isinstance(path, Load)
            positions |= valves
        if isinstance(line.step, EmptyStep):
            charged = False


def _port(apparatus: Apparatus, route: Route, path: Path | None) -> Iterator[Found]:
    if not isinstance(path, LetDownTo):
        return
    valve = next((v for v in apparatus.valves if v.tag == path.through), None)
    if valve is not None and valve.port != "top":
        yield Found(
            "let down from below",
            (*route, "path", "through"),
            f"{valve.tag} takes from the {valve.port}: liquid would leave, plug the outlet and chill the seals. "
            "Let down through a port on top",
        )
