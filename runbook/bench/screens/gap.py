"""The four questions after a gap: do-not-know is always an answer, and stands there until another is given."""

from __future__ import annotations

from collections.abc import Iterable
from typing import TYPE_CHECKING, ClassVar, Final

from textual import events
from textual.widget import Widget

from runbook.bench.acting import do
from runbook.bench.place import Keys, Place
from runbook.bench.rows import EMPTY, Row, row, wrapped
from runbook.bench.widgets.lines import Lines
from runbook.run.acts import GapAnswers
from runbook.run.sentences import gap_questions

if TYPE_CHECKING:
    from runbook.run.conductor import Conductor

_UNKNOWN: Final = "do not know"
_FEWEST: Final = 1
"""Somebody must be here, or nobody could have answered."""


class GapScreen(Place[None]):
    """One question after the other, a digit chooses, Enter goes on."""

    HEADING = "AFTER A GAP: QUESTIONS"
    KEYS: ClassVar[Keys] = (("1-9", "choose"), ("Enter", "next"), ("Backspace", "the one before"))

    def __init__(self, desk: Conductor, why: str = "") -> None:
        """For the run of `desk`; `why` there was a gap."""
        super().__init__()
        self._desk = desk
        self._why = why
        plan = desk.plan
        named = {"source": plan.source_tag or "", "vent": plan.let_down_valve or ""}
        options = {
            "source": ("off", "unplugged", "on", _UNKNOWN),
            "vent": ("open", "shut", _UNKNOWN),
            "touched": ("no", "yes", _UNKNOWN),
            "here": tuple(person.name for person in desk.ledger.people),
        }
        asked = gap_questions(plan)
        self._keys = tuple(key for key, _ in asked)
        self._questions = tuple(
            (f"{text} {f'({tag})' if (tag := named.get(key)) else ''}".strip(), options[key]) for key, text in asked
        )
        self._last = len(asked) - 1
        """Who is here: several may be chosen."""
        self._chosen = [_UNKNOWN] * self._last
        self._here: list[str] = []
        self._at = 0
        self._said = ""

    def body(self) -> Iterable[Widget]:
        """All four, the present one open."""
        yield Lines(self._rows)

    def _rows(self, width: int) -> list[Row]:
        why = f"There was a gap: {self._why}. " if self._why else ""
        rows = [EMPTY, *wrapped(f" {why}Every reading is stale. What is not known counts as the worst.", width - 1)]
        for i, (question, options) in enumerate(self._questions):
            rows.append(EMPTY)
            answer = ", ".join(self._here) or "nobody yet" if i == self._last else self._chosen[i]
            style = "strong" if i == self._at else "plain"
            rows.append(row((f" {i + 1}. {question} ".ljust(46), style), (answer, style if i <= self._at else "dim")))
            if i == self._at:
                for k, option in enumerate(options):
                    mark = "x" if option in ([*self._here] if i == self._last else [self._chosen[i]]) else " "
                    rows.append(row("    ", (f"{k + 1}", "key"), f" [{mark}] {option}"))
        return rows + wrapped(f" {self._said}" if self._said else "", width - 1, "blocked")

    async def on_key(self, event: events.Key) -> None:
        """Digits choose, Enter goes on, Backspace goes back."""
        options = self._questions[self._at][1]
        if event.character and event.character.isdigit() and 1 <= int(event.character) <= len(options):
            self._choose(options[int(event.character) - 1])
        elif event.key == "backspace":
            self._at = max(0, self._at - 1)
        elif event.key == "enter":
            await self._next()
        elif event.key == "escape":
            await self.run_action("app.quit")
        else:
            return
        event.stop()
        self.query_one(Lines).refresh(layout=True)

    def _choose(self, option: str) -> None:
        self._said = ""
        if self._at < self._last:
            self._chosen[self._at] = option
        elif option in self._here:
            self._here.remove(option)
        else:
            self._here.append(option)

    async def _next(self) -> None:
        if self._at < self._last:
            self._at += 1
            return
        if len(self._here) < _FEWEST:
            self._said = "Choose who is here."
            return
        said = dict(zip(self._keys, self._chosen, strict=False))
        answers = GapAnswers(said.get("source", "none"), said["vent"], said["touched"], tuple(self._here))
        self._said = await do(self._desk, answers)
        if not self._said:
            self.dismiss(None)
