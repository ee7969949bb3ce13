"""A file with places for answers: the commented start when nothing is answered, the author's own file when all is.

An answer is judged by the reader of files itself, in the text it would stand in, so that a dialogue and a file meet
the same rules and the same sentences. Refuses to keep an answer that makes a problem; nothing is ever guessed.
"""

from __future__ import annotations

import json
import re
from collections.abc import Callable, Mapping
from dataclasses import dataclass, field
from typing import Final, Literal

from runbook.errors import Problem

Kind = Literal["text", "figure", "rating", "word"]
"""'text' is free; 'figure' has to be known; a 'rating' may be `not known`; a 'word' is one of a list."""
NOT_KNOWN: Final = "not known"
KNOWN: Final = ("known",)
_SLOT = re.compile(r"‹(\w+)›")
_LINE_OF = re.compile(r"^(?P<when>[\w ]+)\? (?P<line>.*)$")
_FIGURE = re.compile(r"[0-9A-Za-z .+±°%/()²³·-]+")
_PLAIN = re.compile(r"[A-Za-z][0-9A-Za-z ./()-]*[0-9A-Za-z.)]|[A-Za-z]")


@dataclass(frozen=True, slots=True)
class Slot:
    """One place in the file."""

    name: str
    start: str
    """What stands there in the commented start, as YAML."""
    kind: Kind = "figure"
    words: tuple[str, ...] = ()
    """Of a 'word': what it may be."""


@dataclass(frozen=True, slots=True)
class Question:
    """One thing that is asked; several slots are answered in one line, parted by semicolons."""

    text: str
    example: str
    slots: tuple[Slot, ...]
    only_if: tuple[str, tuple[str, ...]] | None = None
    """(slot, words): asked only where that slot was answered with one of these words; KNOWN: with any figure."""
    otherwise: str = ""
    """What an empty answer stands for; empty: a rating is `not known`, everything else is asked again."""


class AnswerRefused(Exception):
    """An answer that cannot be kept; the text says what is wrong and what to write."""


@dataclass(slots=True)
class Form:
    """A template, its questions and the answers so far."""

    template: str
    """Lines with slots as ‹name›. A line that begins with `word? ` stands only where `shown` holds that word."""
    questions: tuple[Question, ...]
    judge: Callable[[str], tuple[Problem, ...]]
    """The problems of a text."""
    shown: Callable[[Mapping[str, str]], set[str]] = lambda answers: set()
    """Words of lines that stand, from the answers so far."""
    derived: Callable[[Mapping[str, str]], dict[str, str]] = lambda filled: {}
    """Slots that nobody is asked for, from those that are filled."""
    answers: dict[str, str] = field(default_factory=dict)
    """Slot -> answer as YAML."""

    def text(self) -> str:
        """The file as it stands: what is not answered is as in the commented start."""
        starts = {slot.name: slot.start for question in self.questions for slot in question.slots}
        filled = starts | self.answers
        filled |= self.derived(filled)
        words = self.shown(filled)
        kept = []
        for line in self.template.splitlines():
            found = _LINE_OF.match(line)
            if found is not None and found["when"] not in words:
                continue
            kept.append(_SLOT.sub(lambda m: filled[m[1]], line if found is None else found["line"]))
        return "\n".join(kept) + "\n"

    def asked(self, question: Question) -> bool:
        """Whether the answers so far leave room for the question."""
        if question.only_if is None:
            return True
        name, words = question.only_if
        found = self.answers.get(name)
        return found in words or (words == KNOWN and found not in (None, NOT_KNOWN))

    def take(self, question: Question, given: str) -> None:
        """Keep an answer. Raises AnswerRefused, with the answers as they were before."""
        given = given.strip() or question.otherwise
        parts = [part.strip() for part in given.split(";")] if len(question.slots) > 1 else [given]
        if len(parts) == 1 and not parts[0]:
            parts = [""] * len(question.slots)
        if len(parts) != len(question.slots):
            raise AnswerRefused(
                f"{len(question.slots)} things are asked, parted by semicolons, for example: {question.example}"
            )
        before = dict(self.answers)
        try:
            for slot, part in zip(question.slots, parts, strict=True):
                self.answers[slot.name] = _as_yaml(slot, part, question.example)
            problems = self.judge(self.text())
            if problems:
                raise AnswerRefused(problems[0].message)
        except AnswerRefused:
            self.answers = before
            raise

    def forget(self, question: Question) -> None:
        """As if it had not been asked yet."""
        for slot in question.slots:
            self.answers.pop(slot.name, None)


def _as_yaml(slot: Slot, part: str, example: str) -> str:
    if slot.kind == "rating" and part.lower() in ("", "?", NOT_KNOWN):
        return NOT_KNOWN
    if not part:
        raise AnswerRefused(f"something is wanted here, for example: {example}")
    if slot.kind == "word":
        close = [word for word in slot.words if word.startswith(part.lower())]
        if part.lower() in slot.words:
            return part.lower()
        if len(close) != 1:
            raise AnswerRefused(f"'{part}' is not one of {', '.join(slot.words)}")
        return close[0]
    fits = _PLAIN if slot.kind == "text" else _FIGURE
    # Between quotation marks it is one value to the reader of YAML, whatever is in it.
    return part if fits.fullmatch(part) and not _means_something_else(part) else json.dumps(part, ensure_ascii=False)


def _means_something_else(part: str) -> bool:
    return part.lower() in ("true", "false", "null", "yes", "no", "on", "off", NOT_KNOWN)
