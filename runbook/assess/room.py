"""What the vessel gives to the room's air, and what the room's pressure does to a vessel that holds less.

No ventilation is counted: it may be off. A part that says nothing of pressure from outside is judged only where its
material breaks without warning.
"""

from __future__ import annotations

from collections.abc import Iterable
from typing import TYPE_CHECKING, Final

from runbook.answers import Judgement, Margin
from runbook.assess.judging import NARROW_SHARE, judge
from runbook.fluids.substance import substance
from runbook.quantities import NotKnown

if TYPE_CHECKING:
    from runbook.assess.limits import Extremes
    from runbook.assess.scene import Scene

BRITTLE: Final = ("glass", "acrylic", "polycarbonate")
"""Break without warning under a pressure they were not made for, common practice."""
LOWEST: Final = "lowest pressure"
SLACK: Final = 1e3
"""Below the room's pressure no part notices it [Pa]: what boils in the open stands at the room's own."""
COOLANT: Final = "carbon dioxide"
"""What dry ice for cooling becomes."""


def gas_margins(scene: Scene, reach: Extremes, cause: str) -> Iterable[Margin]:
    """All of it in the room's air at once, dry ice for cooling included, against the long-term exposure limits."""
    own = scene.substance.data.hazards
    brought = scene.procedure.room.dry_ice
    coolant = 0.0 if brought is None else brought.high
    given = {COOLANT: coolant} if coolant > 0.0 else {}
    if reach.released > 0.0 and own.breathing != "harmless":
        name = scene.substance.name
        given[name] = given.get(name, 0.0) + reach.released
    for name, released in given.items():
        yield _gas(scene, name, released, cause)


def _gas(scene: Scene, name: str, released: float, cause: str) -> Margin:
    fluid = scene.substance if name == scene.substance.name else substance(name)
    hazards, volume = fluid.data.hazards, fluid.gas_volume(293.15, 101325.0)
    limit = hazards.exposure_limit
    kind = "gas in the room" if fluid is scene.substance else f"{name} in the room"
    worst = None if volume is None else hazards.background + released * volume / scene.procedure.room.volume.low
    if limit is None or worst is None:
        why = f"no exposure limit of {name} is known"
        return Margin("room", kind, cause, worst, limit, None, "m3/m3", Judgement.BLOCKED, None, why=why)
    margin = limit - worst
    return Margin("room", kind, cause, worst, limit, margin, "m3/m3", judge(margin, NARROW_SHARE * limit), None)


def outside_margins(scene: Scene, reach: Extremes, cause: str) -> Iterable[Margin]:
    """Parts around the charge against a room whose pressure is higher than the vessel's; trapped air is not counted on.

    What a part bears from outside is the difference between its faces, whatever the pressures themselves are.
    """
    room, lowest = scene.barometer.high_Pa, reach.lowest_pressure
    for part in scene.apparatus.components:
        if part.space != scene.charge_space:
            continue
        bears = part.outside_pressure
        unsaid = bears is None and part.material in BRITTLE and lowest < scene.barometer.low_Pa - SLACK
        if unsaid or isinstance(bears, NotKnown):
            why = f"what {part.tag} bears from outside is not known"
            yield Margin(part.tag, LOWEST, cause, lowest, None, None, "Pa", Judgement.BLOCKED, None, why=why)
        elif bears is not None and bears.high is not None:
            allowed = room - bears.high.pascal
            margin = lowest - allowed
            found = judge(margin, NARROW_SHARE * room)
            yield Margin(part.tag, LOWEST, cause, lowest, allowed, margin, "Pa", found, None)
