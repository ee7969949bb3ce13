"""What falls, and when, while a part of the day is gone through: the sights of each line on its own path.

Only notes; the sights are those that the plan computes, at the temperature at which they fall for this charge.
"""

from __future__ import annotations

from dataclasses import dataclass, field

from runbook.assess.sights.path import path_sights
from runbook.assess.walk import Walked
from runbook.procedure.model import CoolTo, LetDownTo, WarmTo
from runbook.rehearsal.lots import Lot
from runbook.rehearsal.world import World


@dataclass(frozen=True, slots=True)
class Seen:
    """A sight that fell."""

    line: int
    of: str
    """As Sight.of."""
    nth: int
    """Of its kind in that line, from 0."""
    at_s: float
    """Since the part began [s]."""
    words: str


@dataclass
class PartRun:
    """One part in one run."""

    part: int
    begins: dict[int, float] = field(default_factory=dict)
    """When each line began, by its index [s since the part began]."""
    ends_s: float | None = None
    """How long the part took [s]; None: a line of it never ended."""
    stuck: int | None = None
    """The line that never ended."""
    seen: list[Seen] = field(default_factory=list)
    hottest_K: float = 0.0
    """Of the wetted wall [K]."""
    coldest_K: float = 1e3
    """Of the wetted wall [K]."""


class Watch:
    """What falls on the path of one line."""

    def __init__(self, lot: Lot, world: World, index: int, found: PartRun, begun: float, clock: float) -> None:
        """begun: when the part began [s]; clock: now [s]."""
        self._world, self._index, self._found, self._begun = world, index, found, begun
        line = lot.lines[index]
        self._at, self._then = world.temperature(), clock
        self._solid, self._liquid = world.ice_seen, world.liquid_seen
        self._ahead: list[tuple[float, str, str]] = []
        self._down, self._held = isinstance(line.verb, LetDownTo), line.held is not None
        target = _target(line, world.room_K)
        if target is not None and not world.vessel.in_the_open and world.vessel.mass > 0.0:
            # The ends are what stands, not what falls; when the last solid goes is not told by a temperature.
            self._ahead = [
                (at, sight.of, sight.words)
                for at, sight in path_sights(lot.scene, self._at, target, lot.charge_kg)
                if at not in (self._at, target) and sight.of != "solid gone"
            ]
        self._warming = target is None or target >= self._at

    def look(self, clock: float) -> None:
        """Note what has fallen since the last look; clock: now [s]."""
        world = self._world
        now = world.temperature()
        coldest, hottest = world.wall()
        self._found.hottest_K = max(self._found.hottest_K, hottest)
        self._found.coldest_K = min(self._found.coldest_K, coldest)
        while self._ahead and (now >= self._ahead[0][0] if self._warming else now <= self._ahead[0][0]):
            at, of, words = self._ahead.pop(0)
            share = (at - self._at) / (now - self._at) if now != self._at else 1.0
            self._note(of, words, self._then + min(1.0, max(0.0, share)) * (clock - self._then))
        if self._held and world.liquid_seen and not self._liquid:
            self._note("liquid", "Liquid is seen.", clock)
        if self._solid and not world.ice_seen:
            self._note("solid gone", "The last solid is gone.", clock)
        if self._down and self._liquid and not world.liquid_seen:
            self._note("no liquid", "No liquid is seen any more.", clock)
        self._solid, self._liquid = world.ice_seen, world.liquid_seen
        self._at, self._then = now, clock

    def _note(self, of: str, words: str, clock: float) -> None:
        nth = sum(1 for one in self._found.seen if (one.line, one.of) == (self._index, of))
        self._found.seen.append(Seen(self._index, of, nth, clock - self._begun, words))


def _target(line: Walked, room_K: float) -> float | None:
    """Where a warming or a cooling goes [K]; None: the line is neither."""
    verb = line.verb
    if not isinstance(verb, WarmTo | CoolTo):
        return None
    aim = verb.warm_to if isinstance(verb, WarmTo) else verb.cool_to
    return room_K if isinstance(aim, str) else aim.value
