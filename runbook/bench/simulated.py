"""The clock and the dials of a rehearsal on the screens; the vessel itself is simulated in another process.

Dials are what the process last said they show. Where it is gone they show nothing, which is what a person at a
vessel sees when the gauge has gone blind: the interlock then does its work, and nothing here makes up a value. A new
process is told everything that was done and when, and comes to the same vessel.
"""

from __future__ import annotations

import asyncio
import contextlib
import json
import sys
from typing import Any, Final

from runbook.answers import BindRequest, Plan
from runbook.codec import to_plain
from runbook.rehearsal.faults import AWAY, AWAY_S, settled_fault
from runbook.run.clock import ScaledClock
from runbook.run.opening import Participant
from runbook.run.state import Ledger
from runbook.run.typed import typed_value

SPEEDS: Final = (1.0, 2.0, 5.0, 10.0, 20.0, 60.0, 120.0, 300.0, 600.0)
"""[1] steps of the speed keys."""
_DEADLINE_S: Final = 10.0
"""[s] for one look."""
_OPENING_S: Final = 30.0
"""[s] to begin, and for each thing that a new process is told of what has happened."""
_TRIES: Final = 3
"""Times a lost vessel is brought back before its dials stay dark."""
CHILD: Final = ("-m", "runbook.rehearsal.child")


def _facts(asked: dict[str, Any]) -> dict[str, Any]:
    """What a look tells besides the moment."""
    return {key: value for key, value in asked.items() if key != "boot"}


class Simulated:
    """Implements Pace."""

    def __init__(self, clock: ScaledClock, played: tuple[Participant, ...]) -> None:
        """`played` are the people nobody sits here for."""
        self.clock = clock
        self._played = {one.name: one.number for one in played}
        self._plan: Plan | None = None
        self._shown: dict[str, float] = {}
        self.seen = ""
        """What stands in the simulated vessel, for whoever looks into it; empty: nothing, or nobody can say."""
        self._opening: dict[str, Any] | None = None
        """What the simulated vessel was begun with; None: there is none."""
        self._told: list[dict[str, Any]] = []
        """Looks that told it of something new: a lost vessel is brought back by telling all of it once more."""
        self._losses = 0
        """Times it was lost since it last showed a value."""
        self._seed = 1
        self._faults: list[str] = []
        """What goes wrong, settled: the same whoever reads it."""
        self._news: list[tuple[str, str]] = []
        self._known: set[str] = set()
        """Names of faults whose beginning was told: a new process tells all of them once more."""
        self._alone = False
        self.lost = False
        """Nothing is computed for the run now, by a fault."""
        self._process: asyncio.subprocess.Process | None = None
        self._looking: asyncio.Task[None] | None = None

    # -- the other process ------------------------------------------------------------------------------

    async def open(self, request: BindRequest, plan: Plan, seed: int, fault: str = "") -> None:
        """Start the simulated vessel, with a fault by name; where that fails the dials stay dark.

        Raises InputUnusable for a fault that is none.
        """
        self._plan, self._seed = plan, seed
        if fault:
            self.trouble(fault)
        self._opening = {"request": to_plain(request), "seed": seed, "boot": self.clock.now().boot}
        await self._start()
        self._looking = asyncio.ensure_future(self._exchange(self._opening, _OPENING_S))

    async def _start(self) -> None:
        try:
            self._process = await asyncio.create_subprocess_exec(
                sys.executable,
                *CHILD,
                stdin=asyncio.subprocess.PIPE,
                stdout=asyncio.subprocess.PIPE,
                stderr=asyncio.subprocess.DEVNULL,
                start_new_session=True,
            )
        except OSError:
            self._process = None

    async def _look(self, asked: dict[str, Any]) -> None:
        """One look; where the process was lost, another one is told everything that has happened first."""
        if self._process is None and self._opening is not None and self._losses < _TRIES:
            await self._start()
            for told in (self._opening, *self._told):
                await self._exchange(told, _OPENING_S)
        await self._exchange(asked)
        if not self._told or _facts(asked) != _facts(self._told[-1]):
            self._told.append(asked)

    async def close(self) -> None:
        """End it and read its pipe to the end."""
        if self._looking is not None:
            self._looking.cancel()
            with contextlib.suppress(asyncio.CancelledError):
                await self._looking
        process, self._process = self._process, None
        if process is None:
            return
        with contextlib.suppress(ProcessLookupError):
            process.kill()
        if process.stdin is not None:
            process.stdin.close()
        if process.stdout is not None:
            await process.stdout.read()
        await process.wait()

    async def _exchange(self, asked: dict[str, Any], deadline: float = _DEADLINE_S) -> None:
        process = self._process
        if process is None or process.stdin is None or process.stdout is None:
            return
        try:
            process.stdin.write(json.dumps(asked).encode() + b"\n")
            await process.stdin.drain()
            reply = json.loads(await asyncio.wait_for(process.stdout.readline(), deadline))
            self._shown = dict(reply.get("shown", {}))
            self._losses = 0 if self._shown else self._losses
            self.seen = str(reply.get("seen", ""))
            self._hear(reply)
        except (OSError, ValueError, TimeoutError):
            self._shown, self.seen = {}, ""
            self._process = None
            self._losses += 1
            with contextlib.suppress(ProcessLookupError):
                process.kill()
            process.stdin.close()
            await process.stdout.read()
            await process.wait()

    def _hear(self, reply: dict[str, Any]) -> None:
        """What people and computers feel of the faults."""
        self._alone, self.lost = bool(reply.get("alone")), bool(reply.get("lost"))
        for name, words in reply.get("news", ()):
            if name in self._known:
                continue
            self._known.add(name)
            self._news.append((name, words))
            if name == AWAY:
                # Whoever sits here is not there either: what happens meanwhile has happened.
                self.clock.skip(AWAY_S)

    # -- Pace -------------------------------------------------------------------------------------------

    @property
    def words(self) -> str:
        """Speed or pause."""
        return "PAUSED" if self.clock.paused else f"x{self.clock.speed:g}"

    def faster(self) -> None:
        """One step faster."""
        self.clock.set_speed(next((s for s in SPEEDS if s > self.clock.speed), SPEEDS[-1]))

    def slower(self) -> None:
        """One step slower."""
        self.clock.set_speed(next((s for s in reversed(SPEEDS) if s < self.clock.speed), SPEEDS[0]))

    def pause(self) -> None:
        """Stop the clock, or let it go on."""
        if self.clock.paused:
            self.clock.go_on()
        else:
            self.clock.pause()

    def jump(self, seconds: float) -> None:
        """This much later at once [s]."""
        self.clock.skip(seconds)

    def follow(self, ledger: Ledger) -> None:
        """Look at the simulated vessel, unless a look is under way."""
        if self._plan is None or (self._looking is not None and not self._looking.done()):
            return
        asked = {
            "boot": self.clock.now().boot,
            "line": ledger.line,
            "source": ledger.source,
            "valves": [(tag, said.position) for tag, said in ledger.stated.items()],
            "tags": [one.tag for one in self._plan.instruments],
            "faults": list(self._faults),
        }
        self._looking = asyncio.ensure_future(self._look(asked))

    async def looked(self) -> None:
        """Wait for the look under way."""
        if self._looking is not None:
            await self._looking

    def dial(self, tag: str) -> str | None:
        """What the dial shows, as one would type it; None: nothing that can be read."""
        value = self._shown.get(tag)
        if value is None or self._plan is None:
            return None
        one = next(i for i in self._plan.instruments if i.tag == tag)
        return typed_value(value, one, self._plan)

    def played(self, name: str) -> str | None:
        """The number of a played person; None: a real one, or one who has left."""
        return None if self._alone else self._played.get(name)

    def trouble(self, fault: str) -> None:
        """Let one more thing go wrong. Raises InputUnusable."""
        self._faults.append(settled_fault(fault, self._seed))

    def news(self) -> list[tuple[str, str]]:
        """Faults that have begun since somebody last asked."""
        found, self._news = self._news, []
        return found
