"""Whether an apparatus file agrees with itself: tags, spaces and ratings that belong together.

Each finding is a route into the file and a sentence; whoever read the file knows the place.
"""

from __future__ import annotations

from collections.abc import Iterable
from typing import Final

from runbook.apparatus.instruments import class_reach
from runbook.apparatus.model import OUTSIDE, Apparatus
from runbook.quantities import Level, LevelRange, NotKnown, Range, say

Finding = tuple[tuple[str | int, ...], str]
"""Route and sentence."""
_PLACES: Final = {
    "temperature": ("wall", "fluid", "bath", "room air"),
    "mass": ("scale",),
    "liquid height": ("window",),
    "carbon dioxide": ("room air",),
    "oxygen": ("room air",),
}
"""What an instrument that reads so can be on; a pressure is of a space."""
SHARED: Final = ("bath", "room air", "scale")
"""What an instrument of the first vessel reads for those beside it too."""


def inconsistencies(apparatus: Apparatus) -> tuple[Finding, ...]:
    """Everything that cannot be as written; all of it."""
    return (
        *_tags(apparatus),
        *_spaces(apparatus),
        *_geometry(apparatus),
        *_ranges(apparatus),
        *_instruments(apparatus),
        *_dates(apparatus),
        *_beside(apparatus),
    )


def tagged(apparatus: Apparatus) -> list[tuple[tuple[str | int, ...], str]]:
    """Route and tag of everything that has one, the vessel itself left out."""
    found: list[tuple[tuple[str | int, ...], str]] = []
    for name in ("valves", "openings", "components", "relief", "instruments", "beads"):
        found += [((name, i, "tag"), one.tag) for i, one in enumerate(getattr(apparatus, name))]
    if apparatus.heat_source is not None:
        found.append((("heat_source", "tag"), apparatus.heat_source.tag))
    for n, one in enumerate(apparatus.beside):
        found.append((("beside", n, "tag"), one.tag))
        for name in ("components", "instruments"):
            found += [(("beside", n, name, i, "tag"), part.tag) for i, part in enumerate(getattr(one, name))]
    return found


def _tags(apparatus: Apparatus) -> Iterable[Finding]:
    seen = {apparatus.tag}
    for route, tag in tagged(apparatus):
        if tag in seen:
            yield route, f"the tag '{tag}' is used twice: every valve, part and instrument has its own"
        seen.add(tag)


def _spaces(apparatus: Apparatus) -> Iterable[Finding]:
    known = {*apparatus.spaces, OUTSIDE}

    def wrong(space: str) -> str | None:
        return None if space in known else f"'{space}' is not one of the spaces: {', '.join(apparatus.spaces)}"

    for i, valve in enumerate(apparatus.valves):
        for end, space in enumerate(valve.joins):
            if (message := wrong(space)) is not None:
                yield ("valves", i, "joins", end), message
        if valve.joins[0] == valve.joins[1]:
            yield ("valves", i, "joins"), "a valve joins two different spaces"
    for name in ("openings", "components", "relief"):
        for i, one in enumerate(getattr(apparatus, name)):
            message = wrong(one.space)
            if message is None and one.space == OUTSIDE:
                message = "this is of a space that holds pressure, not of the room"
            if message is not None:
                yield (name, i, "space"), message
    joined = {space for valve in apparatus.valves for space in valve.joins} | {o.space for o in apparatus.openings}
    for i, space in enumerate(apparatus.spaces):
        if space not in joined and space != OUTSIDE and (i > 0 or apparatus.valves or apparatus.openings):
            yield ("spaces", i), f"no valve and no opening leads to '{space}': take it away, or say what does"


def _geometry(apparatus: Apparatus) -> Iterable[Finding]:
    volume = apparatus.volume
    if volume.unheated is not None and volume.unheated.high >= volume.free.low:
        yield ("volume", "unheated"), "the unheated volume is part of the free volume and smaller than it"
    high = None if apparatus.window is None else apparatus.window.high
    if apparatus.shape != "upright cylinder" and high is not None and high > apparatus.diameter.high:
        yield ("window",), "the window ends above the inside top: its heights count from the inside bottom"


def _ranges(apparatus: Apparatus) -> Iterable[Finding]:
    for i, part in enumerate(apparatus.components):
        rating = part.pressure
        if isinstance(rating, LevelRange) and rating.high is None:
            yield ("components", i, "pressure"), "a pressure rating has an upper end, for example up to 200 bar(g)"
        span = part.temperature
        if isinstance(span, Range) and (span.low is None or span.high is None):
            yield (
                ("components", i, "temperature"),
                "a temperature rating has two ends; an end that nobody knows makes the whole of it 'not known'",
            )
        gap = part.difference
        if isinstance(gap, Range) and gap.high is None:
            yield ("components", i, "difference"), "a rating of a difference has an upper end: up to 110 K"


def _instruments(apparatus: Apparatus) -> Iterable[Finding]:
    for i, one in enumerate(apparatus.instruments):
        if one.reads == "pressure":
            if one.of not in apparatus.spaces or one.of == OUTSIDE:
                spaces = ", ".join(s for s in apparatus.spaces if s != OUTSIDE)
                yield ("instruments", i, "of"), f"a pressure is of a space: {spaces}"
        elif one.of not in _PLACES[one.reads]:
            yield ("instruments", i, "of"), f"a {one.reads} is of: {', '.join(_PLACES[one.reads])}"
        elif one.of == "window" and apparatus.window is None:
            yield ("instruments", i, "of"), "this vessel has no window to read it at: write 'window', or take this away"
        if one.division.value > 0.5 * one.dial.span:
            yield ("instruments", i, "division"), "the division is more than half of the dial"
        if isinstance(one.klass, str) and not isinstance(one.dial.low, Level) and not isinstance(one.dial.high, Level):
            low, high = class_reach(one.klass)
            if one.dial.low < low or one.dial.high > high:
                yield (
                    ("instruments", i, "dial"),
                    (
                        f"class {one.klass} is defined from {say(low, 'degC', 0)} to {say(high, 'degC', 0)}: "
                        "shorten the dial, or write an error instead of the class"
                    ),
                )


def _beside(apparatus: Apparatus) -> Iterable[Finding]:
    if apparatus.beside and (apparatus.valves or apparatus.openings or apparatus.relief):
        words = "only a vessel sealed for good, without valve, opening and relief, has others beside it"
        yield ("beside",), words
    for n, one in enumerate(apparatus.beside):
        for i, reads in enumerate(one.instruments):
            if reads.of not in ("window", "wall", apparatus.spaces[0]):
                yield ("beside", n, "instruments", i, "of"), "what is shared is an instrument of the first vessel"
        for route, message in inconsistencies(seen_alone(apparatus, n + 1)):
            # What the first vessel's file shares has been said of it already.
            if route[0] == "instruments" and int(route[1]) >= len(one.instruments):
                continue
            if route[0] in ("components", "instruments", "volume", "window", "proof_test"):
                yield ("beside", n, *route), message


def seen_alone(apparatus: Apparatus, number: int) -> Apparatus:
    """One vessel of an apparatus, from 0, as if the others were not there: with the bath and what reads it."""
    if number == 0:
        return apparatus.model_copy(update={"beside": ()})
    one = apparatus.beside[number - 1]
    shared = tuple(i for i in apparatus.instruments if i.of in SHARED)
    own = {name: getattr(one, name) for name in type(one).model_fields if name != "instruments"}
    return apparatus.model_copy(update={**own, "instruments": (*one.instruments, *shared), "beside": (), "beads": ()})


def _dates(apparatus: Apparatus) -> Iterable[Finding]:
    proof = apparatus.proof_test
    if not isinstance(proof, NotKnown) and proof.valid_until < proof.done:
        yield ("proof_test", "valid_until"), "the proof test ends before it was done"
    for i, device in enumerate(apparatus.relief):
        if not isinstance(device.valid_until, NotKnown) and device.valid_until < device.fitted:
            yield ("relief", i, "valid_until"), "the device's term ends before it was fitted"
