"""The client of the process that computes: one question at a time, a deadline on each, killed on any doubt.

The property library holds its interpreter for two seconds while it loads and may crash; in a process of its own
it can do neither to the run. Whatever is not a clean answer in time makes everything unknown, never a guess.
"""

from __future__ import annotations

import asyncio
import contextlib
import json
import sys
from collections.abc import Sequence
from dataclasses import dataclass, field
from pathlib import Path
from typing import IO, Any, Final, Protocol

from pydantic import ValidationError

from runbook.answers import Answer, BindRequest, Plan, Question, Unanswered
from runbook.codec import from_plain, to_plain
from runbook.errors import EngineLost, FileProblems, InputUnusable, Problem

START_S: Final = 30.0
"""[s] until the process says it is ready; the library alone takes two on a common machine."""
BIND_S: Final = 30.0
"""[s] for a plan."""
ANSWER_S: Final = 5.0
"""[s] for a live answer, a thousand times what one takes."""
_LONGEST_LINE: Final = 32 * 1024 * 1024
"""[byte] of one reply."""
CHILD: Final = ("-m", "runbook.assess.child")
"""What the interpreter is asked to run."""


@dataclass(frozen=True, slots=True)
class Bound:
    """A plan with the texts it was made from."""

    plan: Plan
    procedure_text: str
    apparatus_text: str
    versions: tuple[tuple[str, str], ...]
    """Of everything that answers depend on."""


class Engine(Protocol):
    """What a run asks of the physics."""

    async def bind(self, request: BindRequest) -> Bound:
        """A plan. Raises FileProblems, InputUnusable or EngineLost."""

    async def ask(self, question: Question) -> Answer | Unanswered:
        """An answer; never raises: a lost process is Unanswered."""

    async def close(self) -> None:
        """End it."""


@dataclass
class ChildEngine:
    """The process, started when first asked and again after it was lost."""

    command: Sequence[str] = CHILD
    """After the interpreter."""
    log: Path | None = None
    """Where its standard error goes; None: nowhere."""
    answer_s: float = ANSWER_S
    start_s: float = START_S
    request: BindRequest | None = None
    """What the process has bound, bound again after a restart."""
    _process: asyncio.subprocess.Process | None = field(default=None, init=False)
    _versions: tuple[tuple[str, str], ...] = field(default=(), init=False)
    _bound_in: asyncio.subprocess.Process | None = field(default=None, init=False)
    _lock: asyncio.Lock = field(default_factory=asyncio.Lock, init=False)
    _log_file: IO[bytes] | None = field(default=None, init=False)

    async def warm(self) -> None:
        """Start the process now, so that the first question does not wait for it. Raises EngineLost."""
        async with self._lock:
            await self._started()

    async def bind(self, request: BindRequest) -> Bound:
        """A plan. Raises FileProblems, InputUnusable or EngineLost."""
        async with self._lock:
            reply = await self._bound(request)
        try:
            plan = from_plain(Plan, reply["plan"])
            return Bound(plan, reply["procedure_text"], reply["apparatus_text"], self._versions)
        except (KeyError, ValidationError) as error:
            await self._kill()
            raise EngineLost(f"the computing process sent a plan that is none: {type(error).__name__}") from error

    async def ask(self, question: Question) -> Answer | Unanswered:
        """An answer, or why there is none."""
        try:
            async with self._lock:
                process = await self._started()
                if self.request is not None and self._bound_in is not process:
                    await self._bound(self.request)
                message = {"ask": "now", "key": question.key, "question": to_plain(question)}
                reply = await self._exchange(message, self.answer_s)
            if "answer" in reply:
                return from_plain(Answer, reply["answer"])
            return Unanswered(question.key, str(reply.get("why", "the files cannot be read any more")))
        except ValidationError:
            await self._kill()
            return Unanswered(question.key, "the computing process sent an answer that is none")
        except (EngineLost, FileProblems, InputUnusable) as error:
            return Unanswered(question.key, str(error))

    async def close(self) -> None:
        """End the process and read its pipes to the end."""
        process = self._process
        self._process = None
        if process is not None:
            if process.stdin is not None:
                process.stdin.close()
            try:
                await asyncio.wait_for(process.wait(), 0.3)
            except TimeoutError:
                with contextlib.suppress(ProcessLookupError):
                    process.kill()
            await self._drained(process)
        if self._log_file is not None:
            self._log_file.close()
            self._log_file = None

    async def _started(self) -> asyncio.subprocess.Process:
        if self._process is not None and self._process.returncode is None:
            return self._process
        await self._kill()
        if self.log is not None and self._log_file is None:
            with contextlib.suppress(OSError):
                # A full disk must not keep the physics from starting: the log is then done without.
                self._log_file = self.log.open("ab")
        try:
            self._process = await asyncio.create_subprocess_exec(
                sys.executable,
                *self.command,
                stdin=asyncio.subprocess.PIPE,
                stdout=asyncio.subprocess.PIPE,
                stderr=self._log_file if self._log_file is not None else asyncio.subprocess.DEVNULL,
                start_new_session=True,
                limit=_LONGEST_LINE,
            )
        except OSError as error:
            raise EngineLost(f"the computing process cannot be started: {error}") from error
        first = await self._line(self.start_s)
        ready = first.get("ready")
        if not isinstance(ready, dict) or not isinstance(ready.get("versions"), dict):
            await self._kill()
            raise EngineLost("the computing process did not say that it is ready")
        self._versions = tuple(sorted((str(k), str(v)) for k, v in ready["versions"].items()))
        return self._process

    async def _bound(self, request: BindRequest) -> dict[str, Any]:
        process = await self._started()
        reply = await self._exchange({"ask": "bind", "key": "bind", "request": to_plain(request)}, BIND_S)
        if "problems" in reply:
            raise FileProblems(tuple(from_plain(Problem, p) for p in reply["problems"]))
        if "plan" not in reply:
            raise InputUnusable(str(reply.get("why", "the procedure cannot be bound")))
        self.request, self._bound_in = request, process
        return reply

    async def _exchange(self, message: dict[str, Any], deadline: float) -> dict[str, Any]:
        """One question, one reply with the same key; anything else kills the process. Raises EngineLost."""
        process = self._process
        if process is None or process.stdin is None:
            raise EngineLost("the computing process is gone")
        try:
            process.stdin.write(json.dumps(message, allow_nan=False).encode() + b"\n")
            await process.stdin.drain()
        except (OSError, ValueError) as error:
            await self._kill()
            raise EngineLost(f"the computing process does not listen: {error}") from error
        reply = await self._line(deadline)
        if reply.get("key") != message["key"]:
            await self._kill()
            raise EngineLost("the computing process answered another question")
        return reply

    async def _line(self, deadline: float) -> dict[str, Any]:
        process = self._process
        if process is None or process.stdout is None:
            raise EngineLost("the computing process is gone")
        why = "the computing process has ended"
        try:
            line = await asyncio.wait_for(process.stdout.readline(), deadline)
            if line:
                found = json.loads(line)
                if isinstance(found, dict):
                    return found
                why = "the computing process sent something that is no answer"
        except TimeoutError:
            why = f"the computing process has not answered for {deadline:.0f} s"
        except ValueError:
            why = "the computing process sent something that is no answer"
        except asyncio.CancelledError:
            # Half a reply may be on its way: nothing after it could be trusted.
            await asyncio.shield(self._kill())
            raise
        await self._kill()
        raise EngineLost(why)

    async def _kill(self) -> None:
        process = self._process
        self._process = None
        if process is None:
            return
        with contextlib.suppress(ProcessLookupError):
            process.kill()
        await self._drained(process)

    async def _drained(self, process: asyncio.subprocess.Process) -> None:
        """Pipes read to the end and the process waited for, or the loop complains when it closes."""
        if process.stdin is not None:
            process.stdin.close()
        with contextlib.suppress(ValueError, OSError):
            if process.stdout is not None:
                while await process.stdout.read(65536):
                    pass
        await process.wait()
