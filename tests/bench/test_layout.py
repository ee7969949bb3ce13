"""Rows of the run screen: the same in every state, none left over, none missing."""

from __future__ import annotations

import pytest

from runbook.bench.layout import SMALLEST, layout


@pytest.mark.parametrize("rows", range(SMALLEST[1], 70))
@pytest.mark.parametrize("columns", [60, 79, 80, 100, 119, 120, 200])
def test_every_row_is_given_out(columns: int, rows: int) -> None:
    """Whatever the size, header, bands, rules and keys fill the screen exactly."""
    found = layout(columns, rows)

    assert found is not None
    assert found.rows == rows
    assert found.ask == 4
    assert min(found.do, found.alone, found.ceiling, found.see, found.agree) >= 1


def test_the_usual_sizes() -> None:
    """80x24 and 30 rows are as drawn in the plan of the screen; from 120 columns on pictures stand beside."""
    usual, tall, wide = layout(80, 24), layout(80, 30), layout(120, 40)

    assert usual is not None
    assert (usual.do, usual.ask, usual.alone, usual.ceiling, usual.see, usual.agree) == (5, 4, 1, 3, 2, 2)
    assert "alone" not in usual.rules
    assert tall is not None
    assert (tall.see, tall.pictures) == (4, False)
    assert wide is not None
    assert wide.pictures


@pytest.mark.parametrize(("columns", "rows"), [(59, 24), (80, 19), (1, 1)])
def test_too_small(columns: int, rows: int) -> None:
    """Below 60x20 there is no run screen but one sentence."""
    assert layout(columns, rows) is None
