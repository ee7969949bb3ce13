"""The standard demonstration in one vessel, made in memory: load, close, come to the room, warm, cool, let down.

So that a charge is chosen by the very rules that judge a procedure, and not by a second set of them. What a file would
say of the room and of tolerances is assumed here, and every assumption is said.
"""

from __future__ import annotations

from dataclasses import dataclass
from datetime import date
from typing import Any

from runbook.answers import ChargeBox
from runbook.apparatus.instruments import permissible_error
from runbook.apparatus.model import Apparatus
from runbook.apparatus.spaces import ways_out
from runbook.assess.scene import Scene, open_scene
from runbook.fluids.catalogue import find
from runbook.procedure.model import Procedure
from runbook.procedure.reader import Loaded
from runbook.quantities import Bounded, NotKnown

_OVERSHOOT = 2.0
"""How far a warming may pass its target [K]."""


@dataclass(frozen=True, slots=True)
class Wanted:
    """What is asked of the vessel."""

    fluid: str
    """Name or alias."""
    room_hottest: float
    """[K]"""
    room_coldest: float
    """[K]"""
    room_volume: float
    """[m3]"""
    tolerance: float | None
    """Of the charge, half-width [kg]; None: what the scale allows."""
    warm_to: float
    """Hottest that the demonstration means to go [K]."""


def tolerance(apparatus: Apparatus, critical_kg: float, asked: float | None) -> float:
    """Half-width of the charge [kg]: as asked, else four times the scale's error, but 1.5 % of a critical charge."""
    if asked is not None:
        return asked
    scale = next((i for i in apparatus.instruments if i.reads == "mass"), None)
    error = 0.0 if scale is None else permissible_error(scale, critical_kg)
    return max(4.0 * error, 0.015 * critical_kg)


def hottest_target(apparatus: Apparatus, room_hottest: float) -> float:
    """Hottest that the source may be set to [K]: under its cut-out, by what a warming may pass its target."""
    source = apparatus.heat_source
    if source is None:
        return room_hottest
    if source.cut_out is not None and not isinstance(source.cut_out, NotKnown):
        return source.cut_out.low - _OVERSHOOT
    return room_hottest if source.hottest is None else source.hottest.value


def standard_scene(
    apparatus: Apparatus, file: str, wanted: Wanted, mass: float, half: float, barometer_Pa: float | None = None
) -> Scene:
    """The scene of the standard demonstration with a mass [kg] planned to within half [kg].

    Raises InputUnusable for an unknown fluid.
    """
    procedure = Procedure.model_validate(_plain(apparatus, wanted, mass, half))
    loaded = Loaded(procedure, apparatus, {}, {}, {}, file, file, "", "", "", "")
    charge = None
    if not _ways_in(apparatus, wanted):
        charge = ChargeBox(mass - half, mass + half, False, ("plan",))
    return open_scene(loaded, barometer_Pa, charge)


def _plain(apparatus: Apparatus, wanted: Wanted, mass: float, half: float) -> dict[str, Any]:
    """As the reader would hand it over."""
    source = apparatus.heat_source
    ways = _ways_in(apparatus, wanted)
    positions: dict[str, str] = {v.tag: "shut" for v in apparatus.valves} | {tag: "open" for tag in ways}
    if source is not None:
        positions[source.tag] = "unplugged"
    box = Bounded(mass, half)
    parts = ({"name": "load", "steps": _loading(ways, box)},) if ways else ()
    warming = _warming(apparatus, wanted)
    return {
        "format": "procedure 1",
        "name": "standard demonstration",
        "issue": {"number": 1, "date": date(2031, 1, 1), "written_by": "a", "checked_by": "b",
                  "review_by": date(2032, 1, 1)},
        "apparatus": "vessel.yaml",
        "fluid": wanted.fluid,
        "charge": {"mass": box, "loaded_as": "dry ice" if ways else "already loaded"},
        "room": {"hottest": Bounded(wanted.room_hottest), "coldest": Bounded(wanted.room_coldest),
                 "volume": Bounded(wanted.room_volume), "air_changes": Bounded(0.0)},
        "roles": ("performer", "second"),
        "at_start": positions,
        "parts": (*parts, {"name": "lesson", "steps": warming}),
    }  # fmt: skip


def _ways_in(apparatus: Apparatus, wanted: Wanted) -> list[str]:
    """What it is loaded through with the room beside it; what may not get out there is as if loaded already."""
    return [] if find(wanted.fluid).hazards.release_forbidden else list(ways_out(apparatus, apparatus.spaces[0]))


def _loading(ways: list[str], box: Bounded) -> tuple[dict[str, Any], ...]:
    """In, and every way out shut, the last of them as the act that closes."""
    *first, last = ways
    shut = tuple({"do": f"Shut {tag}", "valves": {tag: "shut"}} for tag in first)
    seal = {"do": f"Shut {last}", "path": "seal", "valves": {last: "shut"}, "latest": Bounded(600.0), "if_not": "Open."}
    return (
        {"do": "Load", "path": {"load": box}},
        *shut,
        {"quick": (seal,)},
        {"do": "Wait", "path": {"warm_to": "room temperature", "by_means_of": "room air"}},
    )


def _warming(apparatus: Apparatus, wanted: Wanted) -> tuple[dict[str, Any], ...]:
    source = apparatus.heat_source
    if source is None:
        return ({"do": "Look"},)
    warm = {"warm_to": Bounded(wanted.warm_to), "by_means_of": source.tag, "overshoot": Bounded(_OVERSHOOT)}
    return (
        {"do": "Plug in", "valves": {source.tag: "off"}},
        {"do": "Warm", "path": warm},
        {"do": "Cool", "path": {"cool_to": "room temperature", "by_means_of": "room air"}},
        {"do": "Unplug", "valves": {source.tag: "unplugged"}},
    )
