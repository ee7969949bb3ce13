"""The loop of one run: decide, write, fold, show, ask. Screens and line mode alike stand on it.

Nothing is shown before it is on the disk, with two exceptions that are drawn first and written when they can be:
make safe, and that the run is halted. It holds no rules of its own: decide is the only door.
"""

from __future__ import annotations

import asyncio
import contextlib
from collections.abc import Callable, Iterable
from dataclasses import dataclass, field
from typing import Final

from runbook.answers import Answer, Plan, Unanswered
from runbook.errors import JournalError
from runbook.run.acts import Act, LeaveTool, MakeSafe, SafeActDone, Tick
from runbook.run.clock import Clock, Moment
from runbook.run.decide import decide
from runbook.run.engine import Engine
from runbook.run.events import (
    Answered,
    Event,
    FaultBegan,
    GapOpened,
    Halted,
    NoAnswer,
    RunOpened,
    event_from_plain,
    event_to_plain,
)
from runbook.run.journal import JournalWriter, Record
from runbook.run.ledger import Ledger, fold
from runbook.run.questions import question
from runbook.run.reasons import Refused
from runbook.run.standing import Standing, standing

AGAIN_S: Final = 2.0
"""[s] between two tries to get an answer that was not given."""
AWAY_S: Final = 60.0
"""[s] the physics may be away before the four questions are asked."""
DRAWN_FIRST: Final = (MakeSafe, SafeActDone, LeaveTool)
"""Acts that wait for no disk."""


@dataclass
class Conductor:
    """One open run."""

    journal: JournalWriter | None
    """None: a rehearsal that keeps no record."""
    clock: Clock
    engine: Engine
    changed: Callable[[], None] = lambda: None
    """Called after everything that changes what is shown."""
    _durable: Ledger = field(default_factory=Ledger.start, init=False)
    _drawn: list[tuple[Event, Moment]] = field(default_factory=list, init=False)
    _lock: asyncio.Lock = field(default_factory=asyncio.Lock, init=False)
    _asking: asyncio.Task[None] | None = field(default=None, init=False)
    _tried: tuple[str, Moment] | None = field(default=None, init=False)
    _away_since: Moment | None = field(default=None, init=False)
    _writing: set[asyncio.Task[None]] = field(default_factory=set, init=False)

    @property
    def ledger(self) -> Ledger:
        """What is shown: what is on the disk, and what was drawn first."""
        found = self._durable
        for event, at in self._drawn:
            found = fold(found, event, at)
        return found

    @property
    def plan(self) -> Plan:
        """Of the open run; an assertion before it is opened."""
        plan = self._durable.plan
        assert plan is not None, "no run is open"
        return plan

    @property
    def not_recorded(self) -> bool:
        """Something is shown that is not in the journal (yet)."""
        return bool(self._drawn)

    def standing(self) -> Standing:
        """Everything a screen needs, now."""
        return standing(self.plan, self.ledger, self.clock.now())

    async def open(self, opened: RunOpened) -> None:
        """Begin a run. Raises JournalError where its first event cannot be written.

        A vessel that is closed already and, left alone, is not at rest, or not known to be, opens on make safe.
        """
        await self._write(opened)
        self._ask()
        if opened.request is not None and opened.request.cell_closed:
            await self.settled()
            answer = self.ledger.answer
            if answer is None or not answer.left_alone.at_rest:
                self._draw_first(MakeSafe())

    async def resume(self, records: Iterable[Record], why: str) -> None:
        """Take an unfinished run up again: fold what was written, then the four questions. Raises JournalError."""
        for record in records:
            self._durable = fold(self._durable, event_from_plain(record.kind, record.data), record.moment)
        await self._write(GapOpened(why))
        self._ask()

    async def act(self, act: Act) -> Event | Refused | None:
        """One wish of a person. Returns what happened, why not, or None where there was nothing to do."""
        if isinstance(act, DRAWN_FIRST):
            return self._draw_first(act)
        async with self._lock:
            decided = decide(self.plan, self.ledger, self.clock.now(), act)
            if decided is None or isinstance(decided, Refused):
                return decided
            try:
                await self._write(decided, locked=True)
            except JournalError as error:
                self._halt(str(error))
                return None
        self._ask()
        return decided

    async def tick(self) -> Event | None:
        """The clock looks: a margin that went, a witness who did not come, an answer to ask for again."""
        if self._durable.plan is None or self._durable.outcome is not None:
            return None
        found = await self.act(Tick())
        self._ask()
        return None if isinstance(found, Refused) else found

    async def fault_began(self, name: str, words: str) -> None:
        """Of a rehearsal: what was to go wrong has begun, for its record."""
        if self.ledger.outcome is not None or self.ledger.halted is not None:
            return
        try:
            await self._write(FaultBegan(name, words))
        except JournalError as error:
            self._halt(str(error))

    async def settled(self) -> None:
        """Wait until the standing question has been answered or given up, and everything is written."""
        while self._asking is not None or self._writing:
            waiting = [t for t in (self._asking, *self._writing) if t is not None]
            await asyncio.wait(waiting)
            await asyncio.sleep(0)

    async def close(self) -> None:
        """Stop asking, write what is left, end the physics and put the journal away."""
        if self._asking is not None:
            self._asking.cancel()
            with contextlib.suppress(asyncio.CancelledError):
                await self._asking
        if self._writing:
            await asyncio.wait(self._writing, timeout=2.0)
        await self.engine.close()
        if self.journal is not None:
            await asyncio.to_thread(self.journal.close)

    # -- writing --------------------------------------------------------------------------------------

    async def _write(self, event: Event, locked: bool = False) -> None:
        """Durable, then shown. Raises JournalError."""
        if not locked:
            async with self._lock:
                await self._write(event, locked=True)
            return
        now = self.clock.now()
        at = now
        if self.journal is not None:
            kind, data = event_to_plain(event)
            record = await self.journal.append(kind, data, now)
            at = record.moment
        self._durable = fold(self._durable, event, at)
        self.changed()

    def _draw_first(self, act: Act) -> Event | Refused | None:
        now = self.clock.now()
        decided = decide(self.plan, self.ledger, now, act)
        if decided is None or isinstance(decided, Refused):
            return decided
        drawn = (decided, now)
        self._drawn.append(drawn)
        self.changed()
        task = asyncio.ensure_future(self._write_drawn(drawn))
        self._writing.add(task)
        task.add_done_callback(self._writing.discard)
        return decided

    async def _write_drawn(self, drawn: tuple[Event, Moment]) -> None:
        """What was drawn first becomes durable, in the order of the journal; else it stays NOT RECORDED."""
        event, now = drawn
        at = now
        if self.journal is not None:
            kind, data = event_to_plain(event)
            try:
                record = await self.journal.append(kind, data, now)
            except JournalError as error:
                self._halt(str(error))
                return
            at = record.moment
        self._durable = fold(self._durable, event, at)
        self._drawn.remove(drawn)
        self.changed()
        self._ask()

    def _halt(self, why: str) -> None:
        """The record cannot be kept: latched, shown at once, never written."""
        if self.ledger.halted is None:
            self._drawn.append((Halted(why), self.clock.now()))
            self.changed()

    # -- asking ---------------------------------------------------------------------------------------

    def _ask(self) -> None:
        """Ask the standing question in the background unless it is answered or being asked."""
        if self._asking is not None or self._durable.plan is None or self.ledger.halted is not None:
            return
        asked = question(self.plan, self.ledger)
        if asked is None or self.ledger.answer is not None:
            return
        tried = self._tried is not None and self._tried[0] == asked.key and self.ledger.unanswered is not None
        if tried and self._tried is not None and self.clock.now().age(self._tried[1]) < AGAIN_S:
            return
        self._asking = asyncio.ensure_future(self._ask_until_answered())
        self._asking.add_done_callback(self._asked)

    def _asked(self, task: asyncio.Task[None]) -> None:
        self._asking = None
        if not task.cancelled():
            task.exception()

    async def _ask_until_answered(self) -> None:
        """Ask what stands now; ask again where the facts have changed meanwhile."""
        while True:
            asked = question(self.plan, self.ledger)
            if asked is None or self.ledger.answer is not None:
                return
            try:
                found = await self.engine.ask(asked)
            except Exception as error:
                # Whatever went wrong in the physics, the answer is unknown and the run goes on knowing that.
                found = Unanswered(asked.key, f"{type(error).__name__}: {error}")
            self._tried = (asked.key, self.clock.now())
            if asked.key != self.ledger.key:
                continue
            try:
                await self._came(found)
            except JournalError as error:
                self._halt(str(error))
            return

    async def _came(self, found: Answer | Unanswered) -> None:
        now = self.clock.now()
        if isinstance(found, Unanswered):
            self._away_since = self._away_since or now
            # Said once a question: a lost process must not fill the journal.
            if self.ledger.unanswered is None:
                await self._write(NoAnswer(found))
            return
        away, self._away_since = self._away_since, None
        if away is not None and now.age(away) > AWAY_S:
            await self._write(GapOpened(f"nothing was computed for {now.age(away) / 60:.0f} min"))
            return
        await self._write(Answered(found))
