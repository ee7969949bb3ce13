"""The screen as rows of text, from Textual's own picture of it; web addresses of fonts taken out."""

from __future__ import annotations

import html
import os
import re
from pathlib import Path

GOLDENS = Path(__file__).parent / "goldens"
_TEXT = re.compile(r'<text class="[^"]*-r\d+" x="([\d.]+)" y="([\d.]+)"[^>]*>(.*?)</text>')
_CELL = 12.2
"""[px] width of a character in that picture."""


def rows_of(svg: str) -> list[str]:
    """Rows of text, trailing spaces kept off."""
    svg = re.sub(r"@font-face \{.*?\}", "", svg, flags=re.DOTALL)
    found: dict[float, list[str]] = {}
    for x, y, text in _TEXT.findall(svg):
        line = found.setdefault(float(y), [])
        at = round(float(x) / _CELL)
        line += " " * (at - len(line))
        line[at:] = html.unescape(text).replace("\xa0", " ")
    top = min(found)
    step = 24.4
    count = round((max(found) - top) / step) + 1
    rows = ["" for _ in range(count)]
    for y, line in found.items():
        rows[round((y - top) / step)] = "".join(line).rstrip()
    return rows


def check_golden(name: str, svg: str) -> None:
    """Compare with the golden of that name; rewrite it where RUNBOOK_REWRITE_GOLDENS=1, never under CI."""
    path = GOLDENS / f"{name}.txt"
    text = "\n".join(rows_of(svg)) + "\n"
    if os.environ.get("RUNBOOK_REWRITE_GOLDENS") == "1":
        assert not os.environ.get("CI"), "goldens are rewritten by hand, never under CI"
        path.parent.mkdir(exist_ok=True)
        path.write_text(text, encoding="utf-8")
        return
    assert path.exists(), f"{path} is missing: run with RUNBOOK_REWRITE_GOLDENS=1 and look at it"
    assert text == path.read_text(encoding="utf-8")
