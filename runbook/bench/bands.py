"""The six bands as rows of text, each fitted to the columns and rows it has.

Pure: no widget and no run. The label of a band stands in a column of its own, so that a glance down the left
edge finds any of the seven questions.
"""

from __future__ import annotations

import re
from collections.abc import Callable
from typing import Final

from runbook.bench.rows import EMPTY, Row, beside, cut, last_beside, padded, row, wrapped
from runbook.bench.view import AgreeView, AloneView, AskView, CeilingView, DoView, HeaderView, RunView, SeeView
from runbook.drawing import UNICODE, Glyphs, ruler_picture

Fit = Callable[[int, int, int], list[Row]]
"""(width, height, page) -> exactly `height` rows."""
LABEL: Final = 10
"""[columns] of the label and the gap after it."""


GAP: Final = "    "
"""Between two clauses of one sentence of the run."""
_AT: Final = re.compile(r" at -?[0-9.]+ °C")
LONG_WORST: Final = "this step at worst"
SHORT_WORST: Final = "worst"
"""The same on a narrow terminal."""


def labelled(label: str, rows: list[Row], style: str = "label") -> list[Row]:
    """`rows` moved right of the label, which stands beside the first."""
    first = Row(((f" {label:<{LABEL - 1}}", style),))
    rest = " " * LABEL
    body = rows or [EMPTY]
    return [
        Row((*first.spans, *one.spans)) if i == 0 else Row(((rest, "plain"), *one.spans)) for i, one in enumerate(body)
    ]


def header(view: HeaderView, width: int) -> Row:
    """Title, place, record and clock on one row; REHEARSAL before all of them and never cut."""
    right = f"{view.record}  {view.clock} "
    place = f"  {view.place}    "
    loud = f" {view.rehearsal} " if view.rehearsal else ""
    room = width - len(loud) - len(right) - 1
    if room < len(place) + 12:
        # Where one stands is news at every step, the title is not.
        return row((loud, "rehearsal"), (cut(f" {view.place}", room + 1), "plain"), (right, "dim"))
    title = cut(view.title, max(0, room - len(place)))
    return row((loud, "rehearsal"), (" ", "plain"), (title, "strong"), (place, "plain"), (right, "dim"))


def do(view: DoView, width: int, height: int, page: int = 0, glyphs: Glyphs = UNICODE) -> list[Row]:
    """Warning, blank row, instruction and who; on too few rows the instruction stays and the rest is paged."""
    room = width - LABEL
    warning = _warning(view.warning, room, glyphs) if view.warning else []
    words = wrapped(view.instruction, room, "loud" if view.loud else "strong")
    words = last_beside(words, row((view.who, "dim")), room) if view.who else words
    whole = [*warning, EMPTY, *words] if warning else words
    if len(whole) <= height:
        return fitted(whole, height, room)
    whole = [*warning, *words]
    if len(whole) <= height or page > 0 or not warning:
        return fitted(whole, height, room, max(0, page - 1))
    kept = words[: height - 1]
    return [*fitted(warning + words[len(kept) :], height - len(kept), room), *kept]


def _warning(text: str, room: int, glyphs: Glyphs) -> list[Row]:
    word, _, rest = text.partition(" ")
    lead = row((f"{glyphs.warning} {word}  ", "warning"))
    first, *others = wrapped(rest.strip(), room, lead=lead.width) or [EMPTY]
    return [Row((*lead.spans, *first.spans)), *others]


def ask(view: AskView, width: int, height: int, page: int = 0, glyphs: Glyphs = UNICODE) -> list[Row]:
    """Shape and word, each reason with what clears it, and the key, which stays whatever else is paged."""
    room = width - LABEL
    shape = {"yes": glyphs.yes, "not yet": glyphs.not_yet, "blocked": glyphs.blocked}[view.state]
    lead = f"{shape} {view.word}"
    indent = max(len(lead) + 2, 12)
    rows = _items(view.items, indent, room) or [EMPTY]
    key = row((view.key, "key"))
    whole = len(rows) < height or (len(rows) == height and rows[-1].width + key.width < room)
    if not whole and view.state == "blocked" and len(view.items) > 1 and not view.items[0][1]:
        # What stands in the way goes before what it stands in the way of.
        rows = _items(view.items[1:], indent, room)
        whole = len(rows) < height or (len(rows) == height and rows[-1].width + key.width < room)
    shown = last_beside(rows, key, room) if whole else fitted(rows, height, room, page, key, forced=True)
    return [Row(((lead.ljust(indent), view.state), *shown[0].spans[1:])), *shown[1:]]


def _items(items: tuple[tuple[str, str], ...], indent: int, room: int) -> list[Row]:
    """Each reason, and beneath it what clears it."""
    rows: list[Row] = []
    for what, clears in items:
        rows += _indented("", what, indent, room)
        rows += _indented("clears it", clears, indent, room)
    return rows


def _indented(lead: str, text: str, indent: int, room: int) -> list[Row]:
    lines = wrapped(text, room - indent)
    return [Row((((lead if i == 0 else "").ljust(indent), "dim"), *one.spans)) for i, one in enumerate(lines)]


def alone(view: AloneView, width: int, height: int) -> list[Row]:
    """Two clauses and AT REST; where it is not, the verdict reversed, and the clauses where there is room."""
    room = width - LABEL
    if not view.at_rest:
        verdict = [padded(one, room, "loud") for one in wrapped(view.verdict, room)]
        words = wrapped(view.words, room)
        return [*verdict, *words] if len(verdict) + len(words) <= height else verdict
    rows: list[Row] = []
    for clauses in (view.words, *_shorter(view.words)):
        rows = last_beside(wrapped(clauses, room), row((view.verdict, "yes")), room)
        if len(rows) <= height:
            break
    return rows


def _shorter(words: str) -> tuple[str, ...]:
    """The same clauses closer together; then with fewer temperatures."""
    first, *others = words.split(GAP)
    bare = [_AT.sub("", other) for other in others]
    return "  ".join((first, *others)), "  ".join((first, *bare)), "  ".join((_AT.sub("", first), *bare))


def ceiling(view: CeilingView, width: int, height: int, glyphs: Glyphs = UNICODE) -> list[Row]:
    """Numbers, ruler, distances; on two rows the ruler goes, never a number."""
    room = width - LABEL
    style = {"clear": "strong", "narrow": "narrow", "blocked": "blocked"}[view.state]
    left, middle, right = view.now, view.worst, view.ceiling
    if len(left) + len(middle) + len(right) + 4 > room:
        middle = middle.replace(LONG_WORST, SHORT_WORST)
    gap = max(2, (room - len(left) - len(middle) - len(right)) // 2)
    top = beside(row((left, style), " " * gap, middle), row((right, "strong")), room)
    if right and top.text.endswith(middle):
        # Too narrow even so: the worst of the step goes before the ceiling does.
        top = beside(row((left, style)), row((right, "strong")), room)
    word = {"clear": "", "narrow": "NARROW", "blocked": "BLOCKED"}[view.state]
    between = max(1, min(6, (room - len(word) - 1 - sum(map(len, view.distances))) // max(1, len(view.distances) - 1)))
    bottom = beside(row((" " * between).join(view.distances)), row((word, style)), room)
    if height < 3:
        return [top, bottom]
    return [top, _ruler(ruler_picture(view.ruler, room, glyphs), glyphs), bottom]


def _ruler(picture: str, glyphs: Glyphs) -> Row:
    wall = picture.find(glyphs.ceiling)
    if wall < 0:
        return row(picture)
    return row(picture[:wall], (picture[wall], "wall"), (picture[wall + 1 :], "hatch"))


def see(view: SeeView, width: int) -> list[Row]:
    """What should be seen, whether that is computed or written, and what if not."""
    room = width - LABEL
    rows = [line for words in view.words for line in wrapped(words, room)]
    rows = last_beside(rows, row((view.source, "dim")), room) if view.source else rows
    return rows + (wrapped(f"If not: {view.if_not}", room) if view.if_not else [])


def agree(view: AgreeView, width: int, glyphs: Glyphs = UNICODE) -> list[Row]:
    """The pair that is compared, what its agreement proves, and how long it is good for."""
    room = width - LABEL
    shape = {"yes": glyphs.yes, "not yet": glyphs.not_yet, "blocked": glyphs.blocked}[view.state]
    lead = row((f"{shape} ", view.state))
    words = "    ".join(filter(None, (view.pair, view.proves)))
    first, *others = wrapped(words, room, lead=lead.width) or [EMPTY]
    return last_beside([Row((*lead.spans, *first.spans)), *others], row((view.age, "dim")), room)


def fitted(
    rows: list[Row], height: int, width: int, page: int = 0, key: Row = EMPTY, *, forced: bool = False
) -> list[Row]:
    """`rows` on exactly `height` rows; what does not fit is counted at the end of the last, page by page.

    `key` stands at the very end of the last row and is never paged away; `forced` where it alone does not fit.
    """
    if len(rows) <= height and not forced:
        return rows + [EMPTY] * (height - len(rows))
    if height < 1:
        return []
    shown, more = _page(rows, height, page, key)
    if height < 3 or all(one.width <= width - more.width - 2 for one in rows):
        return [*shown[:-1], _marked(shown[-1], more, width)]
    # Where there are rows enough, no sentence is cut for the sake of the marker.
    shown, more = _page(rows, height - 1, page, key)
    return [*shown, beside(EMPTY, more, width)]


def _page(rows: list[Row], height: int, page: int, key: Row) -> tuple[list[Row], Row]:
    """The rows of one page, and what stands at its end."""
    pages = -(-len(rows) // height)
    start = min((page % pages) * height, max(0, len(rows) - height))
    hidden = len(rows) - height
    more = row((f"{hidden} of {len(rows)} lines more", "not yet")) if hidden > 0 else EMPTY
    if key.spans:
        more = Row((*more.spans, ("  ", "plain"), *key.spans)) if more.spans else key
    return rows[start : start + height], more


def _marked(last: Row, more: Row, width: int) -> Row:
    room = width - more.width - 2
    if last.width <= room:
        return beside(last, more, width)
    # The marker must not be lost: the row's own end goes, which the next page shows.
    spans, left = [], room
    for text, style in last.spans:
        spans.append((cut(text, left) if len(text) > left else text, style))
        left -= len(text)
        if left <= 0:
            break
    return beside(Row(tuple(spans)), more, width)


def band_rows(name: str, view: RunView, width: int, height: int, page: int, glyphs: Glyphs) -> list[Row]:
    """One band with its label, on exactly `height` rows."""
    match name:
        case "do":
            rows = do(view.do, width, height, page, glyphs)
        case "ask":
            rows = ask(view.ask, width, height, page, glyphs)
        case "alone":
            rows = alone(view.alone, width, height)
        case "ceiling":
            rows = ceiling(view.ceiling, width, height, glyphs)
        case "see":
            rows = see(view.see, width)
        case _:
            rows = agree(view.agree, width, glyphs)
    label = {"ask": "ON?", "agree": "AGREE?"}.get(name, name.upper())
    return labelled(label, fitted(rows, height, width - LABEL, page))
