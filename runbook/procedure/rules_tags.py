"""Every tag a procedure uses is in the apparatus file, and is a thing of the kind wanted there."""

from __future__ import annotations

import re
from collections.abc import Iterable, Iterator
from typing import Final

from runbook.apparatus.model import OUTSIDE, Apparatus
from runbook.procedure.document import Route
from runbook.procedure.lines import Found, acts_of, lines_of, listed, readings_of, texts_of
from runbook.procedure.model import (
    CoolTo,
    EmptyStep,
    KeepAt,
    LetDownTo,
    OpenContainment,
    Path,
    Procedure,
    Purge,
    WarmTo,
)
from runbook.procedure.problems import nearest

BY_THE_ROOM: Final = ("room air", "cold water", "lukewarm water")
"""What warms or cools besides a heat source of the file."""
_WRITTEN_TAG: Final = re.compile(r"\b[A-Z]{1,3}[0-9]{1,2}\b")
_FORMULA: Final = frozenset({"CO2", "N2", "O2", "H2", "SF6", "NH3", "N2O", "CH4"})
"""Words that look like tags and are not."""


def unknown_tags(procedure: Procedure, apparatus: Apparatus) -> Iterator[Found]:
    """Rules 'unknown tag', 'position', 'start position' and 'wrong instrument'."""
    kinds = _kinds(apparatus)
    yield from _at_start(procedure, kinds)
    yield from _beside(procedure, apparatus)
    for line in lines_of(procedure):
        for route, valves, path, _ in acts_of(line):
            yield from _positions((*route, "valves"), valves, kinds)
            if path is not None:
                yield from _of_path((*route, "path"), path, apparatus, kinds)
        for route, read in readings_of(line):
            yield from _instrument((*route, "with"), read.with_, read.what, apparatus)
        if isinstance(line.step, EmptyStep):
            yield from _empty((*line.route, "show_empty"), line.step, apparatus)
    yield from _in_text(procedure, kinds, apparatus)


def _kinds(apparatus: Apparatus) -> dict[str, str]:
    """What can be put into a position, by tag."""
    kinds = {v.tag: "valve" for v in apparatus.valves} | {o.tag: "opening" for o in apparatus.openings}
    if apparatus.heat_source is not None:
        kinds[apparatus.heat_source.tag] = "heat source"
    return kinds


def _beside(procedure: Procedure, apparatus: Apparatus) -> Iterable[Found]:
    """Every vessel beside the first has its charge, and comes loaded: nobody loads a vessel that is sealed for good."""
    there = [one.tag for one in apparatus.beside]
    for tag, charge in procedure.beside.items():
        if tag not in there:
            yield _unknown(("beside", tag), tag, there, "vessel beside the first")
        elif charge.loaded_as != "already loaded":
            yield Found("position", ("beside", tag, "loaded_as"), f"{tag} is sealed for good: it comes already loaded")
    if missing := [tag for tag in there if tag not in procedure.beside]:
        route = ("beside",) if procedure.beside else ("apparatus",)
        yield Found("unknown tag", route, f"beside: does not say what is in {listed(missing)}")


def _at_start(procedure: Procedure, kinds: dict[str, str]) -> Iterable[Found]:
    yield from _positions(("at_start",), dict(procedure.at_start), kinds)
    missing = [tag for tag in kinds if tag not in procedure.at_start]
    if missing:
        yield Found(
            "start position",
            ("at_start",),
            f"at_start does not say how {listed(missing)} {'stands' if len(missing) == 1 else 'stand'}",
        )


def _positions(route: Route, positions: dict[str, str], kinds: dict[str, str]) -> Iterable[Found]:
    for tag, position in positions.items():
        kind = kinds.get(tag)
        if kind is None:
            yield _unknown((*route, tag), tag, kinds, "valve, opening or heat source")
            continue
        wanted = ("on", "off", "unplugged") if kind == "heat source" else ("open", "shut")
        if position not in wanted:
            yield Found("position", (*route, tag), f"{tag} is a {kind}: it is {' or '.join(wanted)}, not {position}")


def _of_path(route: Route, path: Path, apparatus: Apparatus, kinds: dict[str, str]) -> Iterable[Found]:
    if isinstance(path, WarmTo | CoolTo | KeepAt):
        source = apparatus.heat_source
        known = [*([] if source is None else [source.tag]), *BY_THE_ROOM]
        if path.by_means_of not in known:
            yield _unknown((*route, "by_means_of"), path.by_means_of, known, "heat source")
    elif isinstance(path, LetDownTo | Purge):
        valves = [v.tag for v in apparatus.valves]
        if path.through not in valves:
            yield _unknown((*route, "through"), path.through, valves, "valve")
    elif isinstance(path, OpenContainment) and path.open_containment is not None:
        ways = [t for t, kind in kinds.items() if kind == "opening"]
        if path.open_containment not in ways:
            yield _unknown((*route, "open_containment"), path.open_containment, ways, "opening")


def _instrument(route: Route, tag: str, what: str, apparatus: Apparatus) -> Iterable[Found]:
    one = next((i for i in apparatus.instruments if i.tag == tag), None)
    if one is None:
        yield _unknown(route, tag, [i.tag for i in apparatus.instruments], "instrument")
    elif one.reads != what:
        able = listed(i.tag for i in apparatus.instruments if i.reads == what)
        yield Found("wrong instrument", route, f"{tag} reads {one.reads}, not {what}: that is read with {able}")


def _empty(route: Route, step: EmptyStep, apparatus: Apparatus) -> Iterable[Found]:
    empty = step.show_empty
    yield from _instrument((*route, "low_gauge"), empty.low_gauge, "pressure", apparatus)
    yield from _instrument((*route, "wall"), empty.wall, "temperature", apparatus)
    valves = {v.tag: v for v in apparatus.valves}
    for key, tag in (("isolator", empty.isolator), ("vent", empty.vent)):
        if tag is not None and tag not in valves:
            yield _unknown((*route, key), tag, valves, "valve")
    vent, isolator = valves.get(empty.vent), valves.get(empty.isolator or "")
    if vent is not None and set(vent.joins) != {apparatus.spaces[0], OUTSIDE}:
        yield Found("unknown tag", (*route, "vent"), f"{vent.tag} does not lead from the charge's space outside")
    gauge = next((i for i in apparatus.instruments if i.tag == empty.low_gauge), None)
    if empty.isolator is None and gauge is not None and gauge.of != apparatus.spaces[0]:
        yield Found("unknown tag", route, f"{gauge.tag} is not on the vessel itself: name the isolator before it")
    if isolator is not None and gauge is not None and set(isolator.joins) != {apparatus.spaces[0], gauge.of}:
        yield Found("unknown tag", (*route, "isolator"), f"{isolator.tag} does not join the charge to {gauge.tag}")


def _in_text(procedure: Procedure, kinds: dict[str, str], apparatus: Apparatus) -> Iterable[Found]:
    lists = (apparatus.components, apparatus.relief, apparatus.instruments)
    known = {*kinds, apparatus.tag, *_FORMULA, *(one.tag for group in lists for one in group)}
    for route, text in texts_of(procedure):
        for tag in dict.fromkeys(_WRITTEN_TAG.findall(text)):
            if tag not in known:
                yield Found(
                    "unknown tag", route, f"the text names {tag}, which is not in the apparatus file", "warning"
                )
    for line in lines_of(procedure):
        for route, valves, _, text in acts_of(line):
            said = re.match(r"(Shut|Open)\s+([A-Za-z]+[0-9]+)\b", text)
            if said is not None and kinds.get(said[2]) in ("valve", "opening"):
                position = "shut" if said[1] == "Shut" else "open"
                if valves.get(said[2]) != position:
                    yield Found(
                        "text and valves",
                        (*route, "do"),
                        f"the text says {said[0]}, but 'valves' does not: write valves: {{{said[2]}: {position}}}",
                    )


def _unknown(route: Route, tag: str, known: Iterable[str], kind: str) -> Found:
    names = list(known)
    return Found("unknown tag", route, f"'{tag}' is no {kind} of this apparatus{nearest(tag, names)}: {listed(names)}")
