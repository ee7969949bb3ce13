"""A YAML file as plain data with the place of every part of it. Holds what `yaml_text` has read; reads nothing."""

from __future__ import annotations

import re
from dataclasses import dataclass
from typing import Any, Final

from runbook.errors import Problem

_CLIPPED: Final = 110
"""Characters of a line that a problem repeats."""

_BREAK: Final = re.compile("\r\n|[\n\r\x85\u2028\u2029]")
"""Where the YAML library begins a new line."""

Place = tuple[int, int]
"""Line and column, from 1; columns count characters."""
Route = tuple[str | int, ...]
"""Keys and indices from the root."""


class Unreadable:
    """Stands where a value was refused, so that nothing more is said of it."""

    def __repr__(self) -> str:
        return "unreadable"


UNREADABLE: Final = Unreadable()


@dataclass(frozen=True, slots=True)
class Document:
    """One file, read as far as it could be."""

    file: str
    """As the user gave it."""
    plain: Any
    """Mappings, tuples, texts, numbers, truth values and dates; UNREADABLE where a value was refused."""
    values: dict[Route, Place]
    """Where each value begins."""
    keys: dict[Route, Place]
    """Where the key of each value of a mapping begins."""
    lines: tuple[str, ...]
    problems: tuple[Problem, ...]

    def problem(self, at: Place, message: str, rule: str = "reading", severity: str = "error") -> Problem:
        """A problem at a place, with its line."""
        return located(self.file, self.lines, at, message, rule, severity)


def split_lines(text: str) -> tuple[str, ...]:
    """The lines of a file as the YAML library counts them."""
    return tuple(_BREAK.split(text))


def located(
    file: str, lines: tuple[str, ...], at: Place, message: str, rule: str = "reading", severity: str = "error"
) -> Problem:
    """A problem with the line it is in, clipped, nothing in it that would move a cursor."""
    text = lines[at[0] - 1] if 0 < at[0] <= len(lines) else ""
    shown = "".join(c if c.isprintable() else ("\ufffd" if c != "\t" else " ") for c in text)
    if at[1] > _CLIPPED:
        shown = ""
    elif len(shown) > _CLIPPED:
        shown = shown[:_CLIPPED] + "…"
    return Problem(file, at[0], at[1], message, rule, severity, shown)
