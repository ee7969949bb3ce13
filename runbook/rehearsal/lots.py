"""One vessel, charge, room and crew out of all that a procedure's tolerances allow, drawn by a seed.

Every figure with a ± lies anywhere between its bounds, alike. How fast people are is no figure of a file: it is drawn
too. Couplings that state no ± are taken as written, although they are estimates.
"""

from __future__ import annotations

from dataclasses import dataclass, replace
from math import exp, log
from random import Random
from typing import Final, TypeVar

from runbook.answers import ChargeBox, Plan
from runbook.apparatus.base import FileModel
from runbook.assess.scene import Scene
from runbook.assess.walk import Walked, walk
from runbook.procedure.model import Charge, Load, Procedure
from runbook.procedure.reader import Loaded
from runbook.quantities import Bounded

SLOW: Final = 1.5
"""A slow crew takes so many times as long as a practised one, a quick one as many times less; common practice [1]."""
Model = TypeVar("Model", bound=FileModel)


@dataclass(frozen=True, slots=True)
class Lot:
    """What one run meets."""

    scene: Scene
    """The files with every figure at the value that was drawn."""
    lines: tuple[Walked, ...]
    """Of that scene."""
    plan: Plan
    """The procedure's own."""
    charge_kg: float
    """What is closed in [kg]."""
    shut_at_kg: float
    """What the scale shows when the last vent is shut [kg]: the middle of what is planned."""
    room_K: float
    """[K]"""
    pace: float
    """How many times as long as a practised crew everybody takes [1]."""
    seed: int
    """Of the instruments' errors."""

    def within(self, given: Bounded) -> float:
        """A time between its bounds, the slowest crew at its most [s]."""
        return _at(given, 0.5 * (1.0 + log(self.pace) / log(SLOW))).value


def lots(scene: Scene, plan: Plan, seed: int, count: int) -> tuple[Lot, ...]:
    """The lot without tolerances first, then `count` drawn ones; the same for the same seed."""
    random = Random(f"lots {seed}")
    return (middle(scene, plan), *(_drawn(scene, plan, random) for _ in range(count)))


def middle(scene: Scene, plan: Plan) -> Lot:
    """Every figure as written, the room half way between its bounds, a practised crew."""
    return _lot(scene, plan, [0.5] * 8, 1.0, 1)


def corner(scene: Scene, plan: Plan, *, most: bool) -> Lot:
    """The most charge in the least volume of the coldest room, a slow crew; or the other way round."""
    high, low = (1.0, 0.0) if most else (0.0, 1.0)
    return _lot(scene, plan, [high, low, 0.5, low, 0.5, 0.5, 0.5, low], SLOW if most else 1.0 / SLOW, 1)


def _drawn(scene: Scene, plan: Plan, random: Random) -> Lot:
    shares = [random.random() for _ in range(8)]
    pace = exp(log(SLOW) * random.uniform(-1.0, 1.0))
    return _lot(scene, plan, shares, pace, random.randrange(2**31))


def _lot(scene: Scene, plan: Plan, shares: list[float], pace: float, seed: int) -> Lot:
    """shares: of charge, volume, body, coupling, loss, power, source and room, from least (0) to most (1)."""
    mass, volume, body, coupling, loss, power, source, warm = shares
    least, most = scene.planned
    charge = least + mass * (most - least)
    room_K = scene.room_coldest + warm * (scene.room_hottest - scene.room_coldest)
    files = scene.loaded
    vessel = files.apparatus
    drawn = _with(
        vessel,
        volume=_with(vessel.volume, free=_at(vessel.volume.free, volume)),
        body=_with(
            vessel.body,
            heat_capacity=_at(vessel.body.heat_capacity, body),
            from_fluid=_at(vessel.body.from_fluid, coupling),
            loss_to_room=_at(vessel.body.loss_to_room, loss),
        ),
        heat_source=vessel.heat_source
        and _with(
            vessel.heat_source,
            power=_at(vessel.heat_source.power, power),
            heat_capacity=_at(vessel.heat_source.heat_capacity, source),
        ),
    )
    loaded = replace(files, apparatus=drawn, procedure=_procedure(files, charge, room_K))
    box = ChargeBox(charge, charge, True, ("plan",))
    there = replace(scene, loaded=loaded, charge=box, hottest_K=room_K)
    lines = tuple(_loading(line, mass) for line in walk(there))
    return Lot(there, lines, replace(plan, charge=None), charge, 0.5 * (least + most), room_K, pace, seed)


def _procedure(files: Loaded, charge: float, room_K: float) -> Procedure:
    written = files.procedure
    room = _with(written.room, hottest=Bounded(room_K), coldest=Bounded(room_K))
    if not isinstance(written.charge, Charge):
        return _with(written, room=room)
    return _with(written, room=room, charge=_with(written.charge, mass=Bounded(charge)))


def _loading(line: Walked, share: float) -> Walked:
    """The line with what the scale truly comes to."""
    if not isinstance(line.verb, Load):
        return line
    return replace(line, verb=_with(line.verb, load=_at(line.verb.load, share)))


def _at(given: Bounded, share: float) -> Bounded:
    """One value between the bounds."""
    return Bounded(given.low + share * (given.high - given.low))


def _with(model: Model, **changed: object) -> Model:
    """The same with some fields changed. No value leaves what was valid, so nothing is validated again."""
    return model.model_copy(update=changed)
