"""Which spaces are one, as the valves stand.

What nobody knows counts as the worse of the two: a valve in doubt joins where pressure could pass, and does
not lead out where gas should.
"""

from __future__ import annotations

from collections.abc import Iterable, Mapping

from runbook.apparatus.model import OUTSIDE, Apparatus

MAY_PASS = frozenset({"open", "do not know"})
"""Positions through which pressure may pass."""
PASSES = frozenset({"open"})
"""Positions through which gas does pass."""


def joined_spaces(apparatus: Apparatus, positions: Mapping[str, str], start: str) -> frozenset[str]:
    """Every space that may be one with `start`, itself included; the room is never passed through.

    positions: 'open', 'shut' or 'do not know' by tag; a tag that is missing is not known.
    """
    return _reach(apparatus, positions, start, MAY_PASS)


def is_closed(apparatus: Apparatus, positions: Mapping[str, str], start: str | None = None) -> bool:
    """Whether no way that is known to be open leads from a space (the charge's, where none is named) outside."""
    return OUTSIDE not in _reach(apparatus, positions, start or apparatus.spaces[0], PASSES)


def isolated(apparatus: Apparatus, tag: str, positions: Mapping[str, str]) -> bool:
    """Whether a gauge does not, or may not, read the charge: no way known to be open leads to its space.

    False for an instrument that reads no space. Raises KeyError for a tag that is no instrument's.
    """
    space = next((i.of for i in apparatus.instruments if i.tag == tag), None)
    if space is None:
        raise KeyError(tag)
    if space not in apparatus.spaces:
        return False
    return space not in _reach(apparatus, positions, apparatus.spaces[0], PASSES)


def trapped(apparatus: Apparatus, positions: Mapping[str, str]) -> tuple[frozenset[str], ...]:
    """Groups of spaces, shut off from the room, that no relief device serves; in the order of the file.

    Liquid caught in such a space has nowhere to go when it warms.
    """
    relieved = {device.space for device in apparatus.relief}
    found: list[frozenset[str]] = []
    for space in apparatus.spaces:
        if space == OUTSIDE or any(space in group for group in found):
            continue
        group = _reach(apparatus, positions, space, PASSES)
        if OUTSIDE not in group and not group & relieved:
            found.append(group)
    return tuple(found)


def ways_out(apparatus: Apparatus, space: str) -> tuple[str, ...]:
    """Tags of the valves and openings between a space and the room."""
    valves = [v.tag for v in apparatus.valves if set(v.joins) == {space, OUTSIDE}]
    return (*valves, *(o.tag for o in apparatus.openings if o.space == space))


def springs_open(apparatus: Apparatus) -> frozenset[str]:
    """Tags of the valves between the charge's space and the room that open when a hand lets go of them."""
    ways = set(ways_out(apparatus, apparatus.spaces[0]))
    return frozenset(v.tag for v in apparatus.valves if v.let_go == "opens" and v.tag in ways)


def _reach(apparatus: Apparatus, positions: Mapping[str, str], start: str, through: frozenset[str]) -> frozenset[str]:
    seen, todo = {start}, [start]
    while todo:
        here = todo.pop()
        if here == OUTSIDE:
            continue
        for there in _beyond(apparatus, positions, here, through):
            if there not in seen:
                seen.add(there)
                todo.append(there)
    return frozenset(seen)


def _beyond(apparatus: Apparatus, positions: Mapping[str, str], here: str, through: frozenset[str]) -> Iterable[str]:
    for valve in apparatus.valves:
        if here in valve.joins and positions.get(valve.tag, "do not know") in through:
            yield valve.joins[1] if valve.joins[0] == here else valve.joins[0]
    for opening in apparatus.openings:
        if opening.space == here and positions.get(opening.tag, "do not know") in through:
            yield OUTSIDE
