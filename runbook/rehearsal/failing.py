"""Physics that can be lost for a while, as a process can: the run then knows nothing and has to live with it."""

from __future__ import annotations

from collections.abc import Callable

from runbook.answers import Answer, Question, Unanswered
from runbook.assess.local import LocalEngine


class FailingEngine(LocalEngine):
    """The local physics, away whenever somebody says so."""

    def __init__(self) -> None:
        super().__init__()
        self.away: Callable[[], bool] = lambda: False
        """Nothing is answered now."""

    async def ask(self, question: Question) -> Answer | Unanswered:
        """The answer, or that there is none."""
        if self.away():
            return Unanswered(question.key, "nothing is computed for a while")
        return await super().ask(question)
