"""Physics that can be lost for a while, as a process can: the run then knows nothing and has to live with it."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass

from runbook.answers import Answer, BindRequest, Question, Unanswered
from runbook.run.engine import Bound, Engine


@dataclass
class FailingEngine:
    """Another engine, away whenever somebody says so."""

    inner: Engine
    away: Callable[[], bool] = lambda: False
    """Nothing is answered now."""

    async def bind(self, request: BindRequest) -> Bound:
        """As the other one."""
        return await self.inner.bind(request)

    async def ask(self, question: Question) -> Answer | Unanswered:
        """The answer, or that there is none."""
        if self.away():
            return Unanswered(question.key, "nothing is computed for a while")
        return await self.inner.ask(question)

    async def close(self) -> None:
        """End the other one."""
        await self.inner.close()
