"""What hands have set on the simulated bench, by what the run says was done: valves, source, water around the vessel.

Pure; what becomes of it the simulated vessel decides, and what it really is the faults.
"""

from __future__ import annotations

from collections.abc import Mapping
from typing import Final

from runbook.assess.scene import Scene
from runbook.assess.walk import Walked, valves_of
from runbook.procedure.model import CoolTo, DoStep, WarmTo
from runbook.run.ledger import Ledger

WIDE: Final = 5e-3
"""Bore of an opening that states none [m]."""
IN_WATER: Final = 30.0
"""How many times faster water takes heat to or from a body than still air: our choice, 300 over 10 W/m2/K [1]."""
_PAST = 1.0
"""How far past its target the water is with which a vessel is brought there [K]."""


def positions_in(ledger: Ledger, line: Walked | None) -> dict[str, str]:
    """Of every valve, as stated, and as the present step leaves it: it is done when its line is entered."""
    found = {tag: said.position for tag, said in ledger.stated.items()}
    if line is not None and isinstance(line.step, DoStep):
        found |= valves_of(line.step)
    return found


def gauge_line_open(scene: Scene, positions: Mapping[str, str]) -> bool:
    """What lies behind an isolator, such as the low gauge, is joined to the charge."""
    return any(
        positions.get(v.tag) == "open"
        for v in scene.apparatus.valves
        if scene.charge_space in v.joins and "outside" not in v.joins
    )


def way_out(
    scene: Scene, outside: tuple[str, ...], positions: Mapping[str, str], line: Walked | None
) -> tuple[bool, float]:
    """Whether a way to the room is open, and the bore of the widest [m]; outside: tags of what leads there."""
    if line is not None and line.during.filled:
        # The open way leads to the cylinder it is filled from.
        return False, 0.0
    bores = {v.tag: (v.bore.value if v.bore is not None else WIDE) for v in scene.apparatus.valves}
    open_ways = [bores.get(tag, WIDE) for tag in outside if positions.get(tag) == "open"]
    return bool(open_ways), max(open_ways, default=0.0)


def heating(ledger: Ledger, line: Walked | None, room_K: float, before: bool | float) -> bool | float:
    """False off, else the set point of the source [K]; before: what it was, which it keeps where it is left on."""
    if ledger.source != "on" or line is None:
        return False
    verb = line.verb
    if isinstance(verb, WarmTo | CoolTo):
        if verb.set_to is not None:
            return verb.set_to.value
        aim = verb.warm_to if isinstance(verb, WarmTo) else verb.cool_to
        return room_K if isinstance(aim, str) else aim.value
    return before


def water_around(line: Walked | None) -> float | None:
    """Temperature [K] of the water that is poured around the vessel in this line; None: none is."""
    verb = None if line is None else line.verb
    if not isinstance(verb, WarmTo | CoolTo) or verb.by_means_of not in ("lukewarm water", "cold water"):
        return None
    aim, past = (verb.warm_to, _PAST) if isinstance(verb, WarmTo) else (verb.cool_to, -_PAST)
    return None if isinstance(aim, str) else aim.value + past
