"""Rows: foreign text stays as it is written, nothing is cut in silence, a number keeps its unit."""

from __future__ import annotations

import pytest
from hypothesis import given
from hypothesis import strategies as st
from rich.cells import cell_len

from runbook.bench.rows import EMPTY, beside, content, cut, last_beside, padded, plain, row, wrap, wrapped

NASTY = "Open [V-3], then [/b] and [@click=app.quit]x[/] \x1b[31mred"


def test_brackets_are_text() -> None:
    """Square brackets from a file are shown, never read as markup; escape sequences lose their escape."""
    shown = content([row((NASTY, "strong"))]).plain

    assert shown == NASTY.replace("\x1b", " ")
    assert plain("[V-3]").plain == "[V-3]"


def test_a_number_keeps_its_unit() -> None:
    """'34' at the end of one line and '°C' on the next would be read as 34 of anything."""
    assert wrap("Jacket at 34 °C, no faster", 12) == ["Jacket at", "34 °C, no", "faster"]
    assert wrap("at 94.8 bar(g) by RD1", 14) == ["at 94.8 bar(g)", "by RD1"]


@given(text=st.text(max_size=200), width=st.integers(1, 40))
def test_wrapping_loses_nothing(text: str, width: int) -> None:
    """No line is wider than asked for where its characters allow it, and every printable character comes out."""
    lines = wrap(text, width)

    assert all(cell_len(line) <= max(width, 2) for line in lines)
    assert "".join("".join(lines).split()) == "".join(
        "".join(c if c.isprintable() else " " for c in "\n".join(text.splitlines())).split()
    )


@pytest.mark.parametrize("width", [0, 1, 5, 9, 30])
def test_headings_are_cut_to_size(width: int) -> None:
    """A heading takes exactly its columns, wide characters included, with a sign that it was cut."""
    shown = cut("Kohlendioxid 二酸化炭素", width)

    assert cell_len(shown) == width
    assert width in (0, 30) or shown.endswith("…")


def test_beside() -> None:
    """A piece at the right edge moves to a row of its own rather than over the words."""
    assert beside(row("left"), row("right"), 12).text == "left   right"
    rows = last_beside([row("a long sentence")], row("right"), 16)

    assert [one.text for one in rows] == ["a long sentence", "           right"]
    assert last_beside([], row("x"), 3) == [beside(EMPTY, row("x"), 3)]


def test_padded_style_covers_the_row() -> None:
    """A reversed row is reversed to its end, so that it is seen as a bar."""
    one = padded(row("NOT AT REST"), 20, "loud")

    assert one.width == 20
    assert {style for _, style in one.spans} == {"loud"}


def test_empty_text_takes_no_row() -> None:
    """A sentence that is not there leaves no blank row behind."""
    assert wrapped("", 20) == []
