"""Several vessels in one simulated bath: each warmed by it, none large enough to cool it.

Each vessel has the bath for itself, of the same water and the same heater, so that they are equally warm but for what
their own charges take. Nothing is judged here.
"""

from __future__ import annotations

from dataclasses import replace

from runbook.answers import Plan
from runbook.assess.several import Scenes
from runbook.rehearsal.faults import Troubles
from runbook.rehearsal.world import World
from runbook.run.clock import Moment
from runbook.run.ledger import Ledger


def world_of(
    scenes: Scenes, plan: Plan, seed: int, now: Moment, part: int = 0, troubles: Troubles | None = None
) -> World:
    """The world of a procedure, of one vessel or of several."""
    if len(scenes) == 1:
        return World(*scenes[0], plan, seed, now, part, troubles)
    return Bath(scenes, plan, seed, now, part, troubles)


class Bath(World):
    """The first vessel, with the others beside it."""

    def __init__(
        self, scenes: Scenes, plan: Plan, seed: int, now: Moment, part: int = 0, troubles: Troubles | None = None
    ) -> None:
        """All vessels come loaded; what goes wrong goes wrong with the bath, so with all of them."""
        super().__init__(*scenes[0], plan, seed, now, part, troubles)
        self._others = [
            World(scene, lines, replace(plan, charge=scene.charge), seed + n, now, part, self.troubles)
            for n, (scene, lines) in enumerate(scenes[1:], 1)
        ]
        self._tags = [scene.apparatus.tag for scene, _ in scenes]

    def follow(self, ledger: Ledger) -> None:
        """Do what the run says has been done, with all of them."""
        super().follow(ledger)
        for one in self._others:
            one.follow(ledger)

    def move_to(self, now: Moment) -> None:
        """Let the time since the last look pass for all of them."""
        super().move_to(now)
        for one in self._others:
            one.move_to(now)
            self.highest_pressure = max(self.highest_pressure, one.highest_pressure)

    def read(self, tag: str) -> float | None:
        """What an instrument of any of them shows now [SI]; None where it shows nothing."""
        return next((one.read(tag) for one in self._others if tag in one.own_tags - self.own_tags), super().read(tag))

    def at_rest(self) -> bool:
        """Nothing of any of them moves any more."""
        return super().at_rest() and all(one.at_rest() for one in self._others)

    @property
    def seen(self) -> str:
        """What stands in each of them."""
        each = [super().seen, *(one.seen for one in self._others)]
        return "; ".join(f"{tag}: {words or 'nothing'}" for tag, words in zip(self._tags, each, strict=True))
