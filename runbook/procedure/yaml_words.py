"""What is wrong with the words of a YAML file, in sentences: keys, control characters, and text that is no YAML."""

from __future__ import annotations

from typing import Final

import yaml

from runbook.procedure.document import Place
from runbook.procedure.scalars import Nothing, Refused, resolve

_LONGEST: Final = 40
"""Characters of a word that a sentence repeats."""


def bad_key(word: str, plain: bool) -> str:
    """What is wrong with a key, or nothing."""
    if moves_cursor(word):
        return "the key holds a line break or a control character"
    if not plain:
        return "" if word else "a key is empty"
    if word == "<<":
        return "'<<' merges another mapping: write its entries out here"
    try:
        found = resolve(word)
    except Nothing:
        return "a key is missing before the colon"
    except Refused as why:
        return str(why)
    return "" if isinstance(found, str) else f'{short(word)} is no key: quote it: "{short(word)}"'


def yaml_message(error: yaml.MarkedYAMLError, lines: tuple[str, ...]) -> tuple[Place, str]:
    """Place and sentence of a text that is no YAML."""
    mark = error.problem_mark or error.context_mark
    at = (1, 1) if mark is None else (mark.line + 1, mark.column + 1)
    line = lines[at[0] - 1] if at[0] <= len(lines) else ""
    what = error.problem or "something is wrong"
    started = ""
    if error.context_mark is not None and error.context_mark.line + 1 != at[0]:
        started = f" in what began in line {error.context_mark.line + 1}"
        line += lines[error.context_mark.line]
    if "mapping values" in what:
        return at, "a colon and a blank make a key, inside text too: quote the text"
    if "'\\t'" in what or "\t" in line[: at[1]]:
        return at, "a tab cannot be used to indent: use blanks"
    if "%" in what or "@" in what or "`" in what:
        return at, f"a text cannot begin with this character: quote it ({what})"
    if " #" in line:
        return at, f"this is no YAML{started} ({what}): ' #' begins a comment, quote the text if it belongs to it"
    return at, f"this is no YAML{started} ({what}): check quotes, brackets, commas and indentation"


def moves_cursor(text: str) -> bool:
    """Whether a text holds what would break a line of a screen; the two hard blanks do not."""
    return any(not c.isprintable() and c not in "\u00a0\u202f" for c in text)


def short(word: str) -> str:
    """A word clipped for a sentence."""
    return word if len(word) <= _LONGEST else word[:_LONGEST] + "…"
