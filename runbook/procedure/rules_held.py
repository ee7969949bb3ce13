"""A vent that springs open is shut by a hand, and only for as long as the hand is there."""

from __future__ import annotations

from collections.abc import Iterator

from runbook.apparatus.model import Apparatus
from runbook.apparatus.spaces import springs_open, ways_out
from runbook.procedure.lines import Found, Line, acts_of, lines_of, listed
from runbook.procedure.model import LetRiseTo, Procedure, QuickStep
from runbook.quantities import Level

_ATMOSPHERE = 101325.0
"""Brings an absolute and a gauge level together where a file mixes them [Pa]."""


def held_by_hand(procedure: Procedure, apparatus: Apparatus) -> Iterator[Found]:
    """Rules 'held by hand', and 'wrong instrument' and 'reading outside dial' of the gauge that is watched."""
    sprung = springs_open(apparatus)
    left = sorted(tag for tag in sprung if procedure.at_start.get(tag) == "shut")
    if left:
        yield Found("held by hand", ("at_start",), f"{listed(left)} springs open: nobody holds it shut at the start")
    for line in lines_of(procedure):
        yield from _left_shut(line, sprung)
        yield from _rises(line, apparatus, sprung)


def _left_shut(line: Line, sprung: frozenset[str]) -> Iterator[Found]:
    """Where a line ends with such a vent shut, a hand would have to stay there for all that follows."""
    ends: dict[str, str] = {}
    for _, valves, _, _ in acts_of(line):
        ends |= valves
    left = sorted(tag for tag in sprung if ends.get(tag) == "shut")
    if left:
        yield Found(
            "held by hand",
            line.route,
            f"{listed(left)} springs open when it is let go: hold it shut in a quick sequence that also lets go of it",
        )


def _rises(line: Line, apparatus: Apparatus, sprung: frozenset[str]) -> Iterator[Found]:
    shut: set[str] = set()
    ways = set(ways_out(apparatus, apparatus.spaces[0]))
    for route, valves, path, _ in acts_of(line):
        shut = (shut | {t for t, p in valves.items() if p == "shut"}) - {t for t, p in valves.items() if p == "open"}
        if not isinstance(path, LetRiseTo):
            continue
        if not isinstance(line.step, QuickStep) or not shut & sprung & ways:
            yield Found(
                "held by hand",
                (*route, "path"),
                "let_rise_to stands in a quick sequence, behind the act that shuts a vent which springs open",
            )
        yield from _gauge((*route, "path"), path, apparatus)


def _gauge(route: tuple[str | int, ...], path: LetRiseTo, apparatus: Apparatus) -> Iterator[Found]:
    able = [i for i in apparatus.instruments if i.reads == "pressure" and i.of == apparatus.spaces[0]]
    gauge = next((i for i in able if i.tag == path.read_on), None)
    if gauge is None:
        yield Found(
            "wrong instrument",
            (*route, "read_on"),
            f"'{path.read_on}' is no gauge on the space that holds the charge: {listed(i.tag for i in able)}",
        )
    elif isinstance(gauge.dial.high, Level):
        level = path.let_rise_to.gauge(_ATMOSPHERE)
        if not 0.0 < level < gauge.dial.high.gauge(_ATMOSPHERE):
            yield Found("reading outside dial", (*route, "let_rise_to"), f"this cannot be read on {gauge.tag}")
