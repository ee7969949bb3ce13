"""Line mode: one run, line after line, until it is over or its input ends."""

from __future__ import annotations

import asyncio
import sys
from dataclasses import dataclass
from typing import Protocol

from runbook.bench.viewing import next_moment
from runbook.commands.plain_status import HELP, HELP_REHEARSAL, sight_lines, status_lines, why
from runbook.commands.plain_words import wish
from runbook.errors import ExitCode, InputUnusable
from runbook.run.acts import GapAnswers, LeaveTool, Read
from runbook.run.conductor import Conductor
from runbook.run.reasons import Refused
from runbook.run.sentences import gap_questions, reasons_words
from runbook.run.state import Ledger

_TICK_S = 0.5
"""[s] between two looks at the clock while nothing is typed."""


REHEARSED = ("read", "look", "speed", "wait", "jump", "fault")
"""Words that only a rehearsal knows."""


class Bench(Protocol):
    """The simulated bench of a rehearsal, as line mode sees it."""

    @property
    def words(self) -> str:
        """Speed or pause."""
        ...

    def set_speed(self, factor: float) -> None:
        """1 to 600 times."""
        ...

    def jump(self, seconds: float) -> None:
        """This much later at once [s]."""
        ...

    def follow(self, ledger: Ledger) -> None:
        """Do what the run says has been done, up to now."""
        ...

    async def looked(self) -> None:
        """Wait until the dials show it."""
        ...

    def trouble(self, fault: str) -> None:
        """Let one more thing go wrong. Raises InputUnusable."""
        ...

    def news(self) -> list[tuple[str, str]]:
        """Faults that have begun since somebody last asked."""
        ...

    @property
    def seen(self) -> str:
        """What stands in the simulated vessel; empty: nothing."""
        ...

    def dial(self, tag: str) -> str | None:
        """What a dial shows, as one would type it; None: nothing that can be read."""
        ...


class Input:
    """Lines of standard input, without stopping the loop; None at its end."""

    def __init__(self) -> None:
        self._task: asyncio.Task[str] | None = None

    async def line(self, prompt: str, wait_s: float | None = None) -> str | None:
        """The next line; '\\0' where none came within wait_s [s]."""
        if self._task is None:
            print(prompt, end="", flush=True)
            self._task = asyncio.ensure_future(asyncio.to_thread(sys.stdin.readline))
        done, _ = await asyncio.wait({self._task}, timeout=wait_s)
        if not done:
            return "\0"
        text = self._task.result()
        self._task = None
        return text.rstrip("\n") if text else None


@dataclass
class Session:
    """One run in lines."""

    desk: Conductor
    given: Input
    pace: Bench | None = None
    by: str = ""
    shown: tuple[object, ...] = ()

    async def go(self) -> int:
        """Until the run is over or the input ends; returns the exit code."""
        people_here = self.desk.ledger.people
        self.by = self.by or next((p.name for p in people_here if self.desk.plan.roles[0] in p.roles), "")
        while self.desk.ledger.outcome is None:
            await self._pass()
            self._show_if_changed()
            if self.desk.ledger.gap_open:
                if not await self._gap():
                    return await self._leave()
                continue
            text = await self.given.line("> ", _TICK_S)
            if text == "\0":
                continue
            if text is None or text.strip() == "leave":
                return await self._leave()
            await self._typed(text.strip())
        await self.desk.settled()
        print(f"The run has ended: {self.desk.ledger.outcome}.")
        return int(ExitCode.GOOD if self.desk.ledger.outcome == "completed" else ExitCode.NOT_GOOD)

    async def _pass(self) -> None:
        if self.pace is not None:
            self.pace.follow(self.desk.ledger)
            await self._told()
        await self.desk.tick()

    async def _told(self) -> None:
        """Faults that have begun, for the record."""
        for name, words in self.pace.news() if self.pace is not None else ():
            await self.desk.fault_began(name, words)

    async def _typed(self, text: str) -> None:
        words = text.split()
        try:
            if words and words[0] in ("help", "keys", "?"):
                print("\n".join((*HELP, *(HELP_REHEARSAL if self.pace is not None else ()))))
            elif words == ["why"]:
                print("\n".join(why(self.desk.plan, self.desk.standing())))
            elif words == ["sights"]:
                print("\n".join(sight_lines(self.desk.plan, self.desk.standing())))
            elif words and words[0] == "by" and len(words) > 1:
                self._set_by(" ".join(words[1:]))
            elif self.pace is not None and words and words[0] in REHEARSED:
                await self._rehearsed(words)
            else:
                await self._act(text)
        except InputUnusable as error:
            print(f"  ! {error}")

    def _set_by(self, name: str) -> None:
        if self.desk.ledger.person(name) is None:
            raise InputUnusable(f"'{name}' is nobody here: {', '.join(p.name for p in self.desk.ledger.people)}")
        self.by = name

    async def _act(self, text: str) -> None:
        wanted = wish(self.desk.plan, self.desk.ledger, self.desk.standing(), self.by, text)
        if wanted.echo and isinstance(wanted.act, Read):
            answer = await self.given.line(f"  {wanted.act.echo}, read by {wanted.act.by}: Enter takes it ")
            if answer is None or answer.strip():
                print("  not taken")
                return
        found = await self.desk.act(wanted.act)
        await self.desk.settled()
        if isinstance(found, Refused):
            for wrong, clears in reasons_words(self.desk.plan, self.desk.ledger, found.reasons):
                print(f"  ! {wrong}" + (f" - {clears}" if clears else ""))
        elif found is not None:
            self.shown = ()
        if self.desk.not_recorded:
            print("  NOT RECORDED")

    async def _rehearsed(self, words: list[str]) -> None:
        assert self.pace is not None
        if words[0] == "read":
            wanted = self.desk.standing().wanted
            tag = words[1] if len(words) > 1 else (wanted[0].need.tag if wanted else "")
            await self._looked()
            shown = self.pace.dial(tag)
            if shown is None:
                raise InputUnusable(f"'{tag}' shows nothing that can be read now")
            print(f"  {tag} shows {shown}")
            await self._act(f"{tag} {shown}")
        elif words[0] == "look":
            await self._looked()
            dials = [(i, self.pace.dial(i.tag)) for i in self.desk.plan.instruments]
            print("  simulated: " + ", ".join(f"{i.tag} shows {d} {i.unit}" for i, d in dials if d is not None))
            print(f"  in the vessel: {self.pace.seen or 'nothing'}")
        elif words[0] == "fault":
            self.pace.trouble(" ".join(words[1:]))
        elif words[0] == "speed":
            self.pace.set_speed(_number(words, 1.0, 600.0))
        elif words[0] == "wait":
            # In bits, so that ticks fall where they would have fallen.
            left = _number(words, 0.0, 1440.0) * 60.0
            while left > 0.0:
                self.pace.jump(min(left, 10.0))
                left -= 10.0
                await self._looked()
                await self.desk.tick()
                await self.desk.settled()
        else:
            self.pace.jump(next_moment(self.desk.standing()))
            await self._looked()

    async def _looked(self) -> None:
        """The dials as they stand at this very moment."""
        assert self.pace is not None
        await self.pace.looked()
        self.pace.follow(self.desk.ledger)
        await self.pace.looked()
        await self._told()

    async def _gap(self) -> bool:
        """The four questions; False where the input ended."""
        print("Before anything else, after the gap ('?' = do not know):")
        answers: dict[str, str] = {}
        for name, words in gap_questions(self.desk.plan):
            text = await self.given.line(f"  {words} ")
            if text is None:
                return False
            if text.strip().split()[:1] == ["safe"]:
                await self._act(text.strip())
                return True
            answers[name] = "do not know" if text.strip() in ("?", "") else text.strip().casefold()
        here = tuple(p.name for p in self.desk.ledger.people if p.name.casefold() in answers["here"])
        found = await self.desk.act(
            GapAnswers(answers.get("source", "none"), answers["vent"], answers["touched"], here)
        )
        if isinstance(found, Refused):
            for wrong, _ in reasons_words(self.desk.plan, self.desk.ledger, found.reasons):
                print(f"  ! {wrong}")
        return True

    async def _leave(self) -> int:
        await self.desk.act(LeaveTool())
        await self.desk.settled()
        print("\nThe run is left unfinished; 'runbook' lists it to be taken up again.")
        return int(ExitCode.NOT_GOOD)

    def _show_if_changed(self) -> None:
        standing = self.desk.standing()
        overdue = tuple(w.need.tag for w in standing.wanted if w.overdue)
        now = (standing.index, standing.permission, standing.instruction, standing.answered, overdue)
        if now == self.shown:
            return
        self.shown = now
        mark = f"REHEARSAL {self.pace.words}" if self.pace is not None else ""
        print("\n".join(status_lines(self.desk.plan, self.desk.ledger, standing, mark)))
        if standing.loud:
            print("\a", end="")


def _number(words: list[str], low: float, high: float) -> float:
    try:
        value = float(words[1])
    except (IndexError, ValueError):
        raise InputUnusable(f"write '{words[0]}' and a number from {low:g} to {high:g}") from None
    if not low <= value <= high:
        raise InputUnusable(f"from {low:g} to {high:g}")
    return value
