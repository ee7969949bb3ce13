"""A part of the day gone through by the clock, without interlock and journal: when each line begins, when it is seen.

The vessel is the simulated bench of a rehearsal and acts end by its rule; nobody is refused anything here. What people
take for an act is the file's `takes`, else an estimate, at the pace of the lot.
"""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import replace
from functools import partial
from typing import Final

from runbook.answers import LineKind, Need, PlanLine
from runbook.assess.walk import Walked
from runbook.errors import OutsideValidity
from runbook.procedure.model import DoStep, KeepAt, LetRiseTo, QuickStep
from runbook.rehearsal.arriving import arrived, risen
from runbook.rehearsal.lots import Lot
from runbook.rehearsal.watching import PartRun, Watch
from runbook.rehearsal.world import World
from runbook.run.clock import Moment
from runbook.run.ledger import Ledger
from runbook.run.proofs import RISE, WAIT_S, WARM
from runbook.run.state import Stated

ACT_S: Final = 30.0
"""An act that states no time of its own [s]; an estimate, as those that follow."""
READ_S, SIGN_S, ITEM_S = 15.0, 30.0, 5.0
"""A reading with what is typed; a signature; an item of a quick sequence that waits for nothing [s]."""
PATIENCE_S: Final = 8 * 3600.0
"""[s] after which a line that has not ended never will."""
_TICK, _FINE_TICK, _SLOW_TICK = 10.0, 1.0, 60.0
"""Between two looks at the instruments: as a rule, in a quick sequence, after half an hour of the same [s]."""
_LONG_S: Final = 1800.0


class Lesson:
    """One lot on its way through the lines."""

    def __init__(self, lot: Lot, part: int = 0, start_K: float | None = None, source_K: float | None = None) -> None:
        """part: the first one. start_K: vessel and charge begin it at this temperature, the source at source_K [K].

        None: everything at the room's.
        """
        self.lot = lot
        self.clock = 0.0
        """[s]"""
        first = lot.plan.parts[part].first
        before = lot.lines[first].before
        plan = replace(lot.plan, charge=lot.scene.charge if before.loaded else None)
        self.world = World(lot.scene, lot.lines, plan, lot.seed, Moment(0.0, 0.0), part)
        self._positions = dict(before.valves)
        if start_K is not None or source_K is not None:
            self.rest(start_K, source_K)

    def rest(self, start_K: float | None = None, source_K: float | None = None) -> None:
        """The vessel has come to one temperature [K], by itself the room's, with the charge of the lot in it."""
        world = self.world
        at = world.room_K if start_K is None else start_K
        world.stand(at, at if source_K is None else source_K, self.lot.charge_kg)

    def go(self, part: int) -> PartRun:
        """Through one part. What lies beyond the models ends it as a line that never ends."""
        found, begun = PartRun(part), self.clock
        plan = self.lot.plan
        for index in range(plan.parts[part].first, len(plan.lines)):
            if plan.lines[index].part != part:
                break
            found.begins[index] = self.clock - begun
            try:
                ended = self._line(index, found, begun)
            except OutsideValidity:
                ended = False
            if not ended:
                found.stuck = index
                return found
        found.ends_s = self.clock - begun
        return found

    def put(self, index: int, tag: str, position: str) -> None:
        """A valve is put while the run stands in a line."""
        self._positions[tag] = position
        self._stand(index, self.lot.lines[index])

    def wait(self, seconds: float) -> None:
        """Time passes [s]."""
        self.clock += seconds
        self.world.move_to(Moment(self.clock, 0.0))

    # -- time ---------------------------------------------------------------------------------------------

    def _until(self, done: Callable[[], bool], look: Callable[[], None], tick: float = _TICK) -> bool:
        """Wait; False where it never comes."""
        since = self.clock
        while not done():
            waited = self.clock - since
            if waited > PATIENCE_S:
                return False
            self.wait(tick if waited < _LONG_S or tick < _TICK else _SLOW_TICK)
            look()
        return True

    def _busy(self, seconds: float) -> None:
        self.wait(seconds * self.lot.pace)

    # -- lines --------------------------------------------------------------------------------------------

    def _line(self, index: int, found: PartRun, begun: float) -> bool:
        line, planned = self.lot.lines[index], self.lot.plan.lines[index]
        watch = Watch(self.lot, self.world, index, found, begun, self.clock)
        self._stand(index, line)
        match planned.kind:
            case LineKind.DO:
                ended = self._do(line, planned, partial(self._look, watch))
            case LineKind.HOLD:
                need = planned.hold.read if planned.hold is not None else None
                ended = need is None or self._read((need, need))
                self._busy(SIGN_S)
            case LineKind.WITNESS:
                self._busy(0.5 * planned.witness.wait_s if planned.witness is not None else 0.0)
                ended = True
            case LineKind.QUICK:
                ended = self._quick(index, planned, partial(self._look, watch))
            case LineKind.EMPTY:
                ended = self._empty(index, planned)
            case _:
                self.rest()
                ended = True
        watch.look(self.clock)
        self._positions = dict(line.after.valves)
        return ended

    def _look(self, watch: Watch) -> None:
        watch.look(self.clock)

    def _stand(self, index: int, line: Walked) -> None:
        """The run stands in a line, with valves as they are: the simulated bench does what that means."""
        stated = {tag: Stated(position, 0, 0) for tag, position in self._positions.items()}
        self.world.follow(replace(Ledger.start(), line=index, source=line.during.source, stated=stated))

    def _do(self, line: Walked, planned: PlanLine, look: Callable[[], None]) -> bool:
        step, verb = line.step, line.verb
        takes = step.takes if isinstance(step, DoStep) else None
        if takes is None:
            self._busy(ACT_S)
        else:
            self.wait(self.lot.within(takes))
        look()
        if isinstance(verb, KeepAt):
            self.wait(verb.for_.value)
            look()
        return self._until(lambda: arrived(self.world, self.lot.plan, line), look) and self._read(planned.reads)

    def _read(self, needs: tuple[Need, ...]) -> bool:
        """Each reading, taken when it would be accepted."""
        for need in needs:
            if not self._until(partial(self._accepted, need), _nothing):
                return False
            self._busy(READ_S)
        return True

    def _accepted(self, need: Need) -> bool:
        shown = self.world.read(need.tag)
        return (
            shown is not None and (need.low is None or shown >= need.low) and (need.high is None or shown <= need.high)
        )

    def _quick(self, index: int, planned: PlanLine, look: Callable[[], None]) -> bool:
        line = self.lot.lines[index]
        assert isinstance(line.step, QuickStep), "the plan's kind is the step's"
        scale = next((i.tag for i in self.lot.plan.instruments if i.reads == "mass"), None)
        for item, written in zip(planned.quick, line.step.quick, strict=True):
            path = written.path
            if isinstance(path, LetRiseTo):
                self._until(partial(self._let_go, path, self.clock + item.latest_s), look, _FINE_TICK)
            elif item.seals and line.held is None and scale is not None and not self._weighs(scale):
                if not self._until(partial(self._weighs, scale), look):
                    return False
            else:
                self.wait(min(ITEM_S * self.lot.pace, item.latest_s))
            self._positions |= dict(item.valves)
            self._stand(index, line)
        return self._read(planned.read_after)

    def _let_go(self, path: LetRiseTo, latest: float) -> bool:
        """The hand lets go: what it waited for has come, or its time is over [s]."""
        return self.clock >= latest or risen(self.world, path, self.lot.plan.barometer)

    def _weighs(self, scale: str) -> bool:
        """The falling scale shows no more than the charge."""
        shown = self.world.read(scale)
        return shown is None or shown <= self.lot.shut_at_kg

    def _empty(self, index: int, planned: PlanLine) -> bool:
        """The four proofs, one after the other."""
        empty = planned.empty
        assert empty is not None, "the plan's kind is the step's"

        self._busy(ACT_S)
        if not self._until(lambda: (self.world.read(empty.wall) or 0.0) > WARM, _nothing):
            return False
        self.wait(WAIT_S)
        if empty.isolator:
            self.put(index, empty.isolator, "open")
        for _ in range(12):
            self.put(index, empty.vent, "shut")
            self.wait(0.0)
            before = self.world.read(empty.low_gauge) or 0.0
            self.wait(WAIT_S)
            rise = (self.world.read(empty.low_gauge) or 0.0) - before
            self.put(index, empty.vent, "open")
            self._busy(READ_S)
            if rise < RISE:
                return True
        return False


def _nothing() -> None:
    """Nothing is looked for."""
