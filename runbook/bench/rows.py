"""Rows of styled text, wrapped and fitted to a fixed width: what every band is made of.

Foreign text (from files, people, another process) enters here as plain strings and is never read as markup. A
row that does not fit is wrapped, never cut in silence; what does not fit a band is counted and said.
"""

from __future__ import annotations

import re
from collections.abc import Iterable
from dataclasses import dataclass
from typing import Final

from rich.cells import cell_len, set_cell_size
from textual.content import Content

Span = tuple[str, str]
"""(text, name of a style in STYLES)."""

STYLES: Final = {
    "plain": "",
    "label": "bold",
    "dim": "dim",
    "strong": "bold",
    "yes": "bold $text-success",
    "not yet": "bold $text-warning",
    "blocked": "bold $text-error",
    "warning": "bold $text-warning",
    "loud": "bold reverse",
    "rehearsal": "bold reverse $text-accent",
    "wall": "bold $text-error",
    "hatch": "$text-error",
    "narrow": "bold $text-warning",
    "key": "bold",
    "make safe": "bold reverse $text-error",
}
"""Name -> Textual style. Each is joined by a word or a shape wherever it means something."""


_NUMBER: Final = re.compile(r"[(±<>~-]*[0-9][0-9.,:]*")
_UNIT: Final = re.compile(
    r"(°C|K|bar|bar\(g\)|bar\(a\)|psi[ga]?|[kM]?Pa(\([ga]\))?|g|kg|mm|mL|L|min|s|h|%|K/min)[.,;:)]*"
)


@dataclass(frozen=True, slots=True)
class Row:
    """One row of a band."""

    spans: tuple[Span, ...]

    @property
    def text(self) -> str:
        """Without styles."""
        return "".join(text for text, _ in self.spans)

    @property
    def width(self) -> int:
        """Columns it takes [1]."""
        return cell_len(self.text)


EMPTY: Final = Row(())


def row(*spans: Span | str) -> Row:
    """A row from texts and (text, style) pairs, control characters made visible as spaces."""
    pairs = (span if isinstance(span, tuple) else (span, "plain") for span in spans)
    return Row(tuple((printable(text), style) for text, style in pairs if text))


def printable(text: str) -> str:
    """`text` with everything that could move the cursor replaced by a space."""
    return "".join(sign if sign.isprintable() else " " for sign in text)


def wrapped(text: str, width: int, style: str = "plain", lead: int = 0) -> list[Row]:
    """`text` on as many rows of `width` columns as it takes; the first is `lead` columns shorter."""
    return [Row(((line, style),)) for line in wrap(text, width, lead)]


def wrap(text: str, width: int, lead: int = 0) -> list[str]:
    """The lines of `text`, none wider than `width` columns; empty text gives none.

    Own line breaks are kept, and spaces at the start of a paragraph indent all of its lines.

    A number stays beside its unit: '34' at the end of one line and '°C' on the next is read as 34 of anything.
    """
    lines: list[str] = []
    for paragraph in text.splitlines():
        body = printable(paragraph)
        indent = " " * min(len(body) - len(body.lstrip(" ")), max(0, width - lead - 2))
        for line in _wrapped_words(_words(body.strip(" ")), width - len(indent), 0 if lines else lead):
            lines.append(indent + line)
    return lines


def _wrapped_words(words: list[str], width: int, lead: int) -> list[str]:
    lines: list[str] = []
    line = ""
    for word in words:
        if line and cell_len(line) + 1 + cell_len(word) > _room(lines, width, lead):
            lines.append(line)
            line = ""
        line = f"{line} {word}" if line else word
        while cell_len(line) > _room(lines, width, lead):
            piece = _fitting(line, _room(lines, width, lead))
            lines.append(piece)
            line = line[len(piece) :]
    return [*lines, line] if line else lines


def _room(lines: list[str], width: int, lead: int) -> int:
    return max(1, width if lines else width - lead)


def _words(text: str) -> list[str]:
    words: list[str] = []
    for word in text.split(" "):
        if words and _NUMBER.fullmatch(words[-1]) and _UNIT.fullmatch(word):
            words[-1] += f" {word}"
        else:
            words.append(word)
    return words


def _fitting(text: str, width: int) -> str:
    """As many characters from the start as `width` columns hold, at least one."""
    end = len(text)
    while end > 1 and cell_len(text[:end]) > width:
        end -= 1
    return text[:end]


def beside(left: Row, right: Row, width: int) -> Row:
    """Both on one row, the second at the right edge; the first alone where they do not fit together."""
    room = width - left.width - right.width
    if not right.spans or room < 1:
        return left
    return Row((*left.spans, (" " * room, "plain"), *right.spans))


def last_beside(rows: list[Row], right: Row, width: int) -> list[Row]:
    """`rows` with `right` at the right edge of the last, on a row of its own where there is no room."""
    if not rows:
        return [beside(EMPTY, right, width)]
    joined = beside(rows[-1], right, width)
    if right.spans and joined is rows[-1]:
        return [*rows, beside(EMPTY, right, width)]
    return [*rows[:-1], joined]


def padded(one: Row, width: int, style: str | None = None) -> Row:
    """`one` filled up with spaces to `width` columns; with a style, all of it in that style."""
    spans = one.spans if style is None else tuple((text, style) for text, _ in one.spans)
    return Row((*spans, (" " * max(0, width - one.width), style or "plain")))


def content(rows: Iterable[Row], plain_only: bool = False) -> Content:
    """Rows as something Textual paints; nothing in them is read as markup."""
    pieces: list[Span] = []
    for i, one in enumerate(rows):
        if i:
            pieces.append(("\n", ""))
        pieces += [(text, "" if plain_only else STYLES[style]) for text, style in one.spans]
    return Content.assemble(*pieces)


def plain(text: str) -> Content:
    """Foreign text as something Textual paints, square brackets and all."""
    return Content(text)


def cut(text: str, width: int) -> str:
    """`text` in exactly `width` columns, with an ellipsis where it had to be cut; for headings only."""
    text = printable(text)
    if cell_len(text) <= width:
        return set_cell_size(text, width)
    return set_cell_size(text, max(0, width - 1)) + "…" if width > 0 else ""
