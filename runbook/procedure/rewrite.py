"""A file with some of its values written anew, everything else left as its author put it: comments, order, blanks.

Refuses what is no single value at its place.
"""

from __future__ import annotations

from collections.abc import Iterable

import yaml

from runbook.errors import InputUnusable
from runbook.procedure.document import Place


def rewritten(text: str, values: Iterable[tuple[Place, str]]) -> str:
    """The text with the scalar that begins at each place replaced. Raises InputUnusable where none begins."""
    wanted = dict(values)
    spans: list[tuple[int, int, str]] = []
    for event in yaml.parse(text, Loader=yaml.SafeLoader):
        begin, end_mark = event.start_mark, event.end_mark
        if not isinstance(event, yaml.ScalarEvent) or begin is None or end_mark is None:
            continue
        at = (begin.line + 1, begin.column + 1)
        if at in wanted:
            spans.append((begin.index, end_mark.index, wanted.pop(at)))
    if wanted:
        line, column = next(iter(wanted))
        raise InputUnusable(f"no single value begins at {line}:{column}")
    for start, end, new in sorted(spans, reverse=True):
        text = text[:start] + new + text[end:]
    return text
