"""The same answers without a process of their own: for commands, where nobody waits at a screen."""

from __future__ import annotations

from typing import Any

from runbook.answers import Answer, BindRequest, Plan, Question, Unanswered
from runbook.assess.child import Bound as BoundHere
from runbook.assess.child import reply, versions
from runbook.codec import from_plain, to_plain
from runbook.errors import FileProblems, InputUnusable, Problem
from runbook.run.engine import Bound


class LocalEngine:
    """Answers in this process, through the very replies that the child gives."""

    def __init__(self) -> None:
        self.here = BoundHere()

    async def bind(self, request: BindRequest) -> Bound:
        """A plan. Raises FileProblems or InputUnusable."""
        found = self._asked({"ask": "bind", "key": "bind", "request": to_plain(request)})
        if "problems" in found:
            raise FileProblems(tuple(from_plain(Problem, p) for p in found["problems"]))
        if "plan" not in found:
            raise InputUnusable(str(found.get("why", "the procedure cannot be bound")))
        return Bound(
            from_plain(Plan, found["plan"]),
            found["procedure_text"],
            found["apparatus_text"],
            tuple(sorted(versions().items())),
        )

    async def ask(self, question: Question) -> Answer | Unanswered:
        """An answer, or why there is none."""
        found = self._asked({"ask": "now", "key": question.key, "question": to_plain(question)})
        if "answer" in found:
            return from_plain(Answer, found["answer"])
        return Unanswered(question.key, str(found.get("why", "no answer")))

    async def close(self) -> None:
        """Nothing to end."""

    def _asked(self, message: dict[str, Any]) -> dict[str, Any]:
        return reply(self.here, message)
