"""The child process that computes: one JSON line in, one JSON line out, until standard input ends.

It exists because the property library holds the interpreter for two seconds when it is loaded, and because a
crash in it must not take the screen and the run along. It refuses to print anything but answers on standard
output, and ends itself when an answer takes too long or the parent is gone.
"""

from __future__ import annotations

import contextlib
import faulthandler
import json
import os
import platform
import sys
from collections.abc import Callable
from dataclasses import dataclass
from datetime import date
from importlib.metadata import PackageNotFoundError, version
from pathlib import Path
from typing import Any

from runbook import __version__
from runbook.answers import Question
from runbook.answers.request import BindRequest
from runbook.assess.bind import plan_of_all
from runbook.assess.now import answer
from runbook.assess.scene import Scene
from runbook.assess.several import Scenes, asked_of, merged_answer, open_all
from runbook.assess.walk import Walked
from runbook.codec import from_plain, to_plain
from runbook.errors import FileProblems, RunbookError
from runbook.procedure.reader import Loaded, read_procedure

LONGEST_S = 60.0
"""No answer takes this long; then the process is stuck and ends itself [s]."""


@dataclass
class Bound:
    """The one procedure this child has bound."""

    scenes: Scenes = ()
    """Of each vessel, the first one first; empty: nothing is bound."""

    @property
    def scene(self) -> Scene | None:
        """Of the first vessel."""
        return self.scenes[0][0] if self.scenes else None

    @property
    def lines(self) -> tuple[Walked, ...]:
        """As the first vessel goes through them."""
        return self.scenes[0][1] if self.scenes else ()


def versions() -> dict[str, str]:
    """Of everything an answer depends on."""
    found = {"runbook": __version__, "python": platform.python_version()}
    for name in ("CoolProp", "pydantic", "PyYAML"):
        try:
            found[name] = version(name)
        except PackageNotFoundError:
            found[name] = "not known"
    return found


def opened(loaded: Loaded, request: BindRequest) -> Scenes:
    """The vessels of a request. Raises FileProblems, InputUnusable or OutsideValidity."""
    return open_all(
        loaded,
        request.barometer_Pa,
        request.charge,
        height_m=request.height_m,
        hottest_K=request.room_hottest_K,
        # A later part finds the vessel as the parts before it leave it.
        cell_closed=request.cell_closed and request.part == 0,
    )


def reply(bound: Bound, asked: dict[str, Any]) -> dict[str, Any]:
    """One reply. Every error of this program becomes a reason; anything else ends the process."""
    key = str(asked.get("key", ""))
    try:
        if asked.get("ask") == "bind":
            request = from_plain(BindRequest, asked["request"])
            loaded = read_procedure(Path(request.procedure_path))
            bound.scenes = opened(loaded, request)
            plan = plan_of_all(loaded, bound.scenes, date.fromisoformat(request.on), request.part)
            return {
                "key": key,
                "plan": to_plain(plan),
                "procedure_text": loaded.procedure_text,
                "apparatus_text": loaded.apparatus_text,
            }
        if asked.get("ask") == "now":
            if not bound.scenes:
                return {"key": key, "why": "nothing is bound yet"}
            question = from_plain(Question, asked["question"])
            answers = [
                answer(scene, lines, asked_of(scene, question, first=n == 0) if len(bound.scenes) > 1 else question)
                for n, (scene, lines) in enumerate(bound.scenes)
            ]
            tags = [scene.apparatus.tag for scene, _ in bound.scenes]
            return {"key": key, "answer": to_plain(merged_answer(answers, tags, question.key))}
    except FileProblems as problems:
        return {"key": key, "problems": [to_plain(p) for p in problems.problems]}
    except RunbookError as error:
        return {"key": key, "why": str(error)}
    return {"key": key, "why": f"no such question: {asked.get('ask')}"}


def serve(lines_in: Callable[[], str], line_out: Callable[[str], None]) -> None:
    """Answer until the input ends."""
    bound = Bound()
    line_out(json.dumps({"ready": {"versions": versions()}}))
    while line := lines_in():
        faulthandler.dump_traceback_later(LONGEST_S, exit=True)
        asked = json.loads(line)
        line_out(json.dumps(reply(bound, asked), allow_nan=False))
        faulthandler.cancel_dump_traceback_later()


def serve_standard(serving: Callable[[Callable[[], str], Callable[[str], None]], None]) -> int:
    """Serve standard input on a private copy of standard output; the exit code."""
    answers = os.fdopen(os.dup(1), "w", encoding="utf-8")
    # Whatever a library prints goes where it cannot be taken for an answer.
    os.dup2(2, 1)

    def line_out(text: str) -> None:
        answers.write(text + "\n")
        answers.flush()

    with contextlib.suppress(BrokenPipeError, KeyboardInterrupt):
        serving(sys.stdin.readline, line_out)
    return 0


if __name__ == "__main__":
    sys.exit(serve_standard(serve))
