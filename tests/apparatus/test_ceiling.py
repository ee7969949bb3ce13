"""Every limit of the spaces that are one, and the lowest that governs."""

from __future__ import annotations

import pytest

from runbook.apparatus.ceiling import ceiling, pressure_limits
from runbook.quantities import NOT_KNOWN, Level
from tests.apparatus.cell import cell

CELL = cell()


def test_limits_of_the_closed_cell() -> None:
    """The disc first (94.848 bar), then vessel and dial (160), windows (200), seals and body (250)."""
    found = pressure_limits(CELL, ["cell"])
    assert [(limit.tag, limit.kind) for limit in found] == [
        ("RD1", "relief"),
        ("VC-2", "mawp"),
        ("PG1", "gauge full scale"),
        ("W1", "component"),
        ("S1", "component"),
        ("B1", "component"),
    ]
    assert found[0].level is not None
    assert found[0].level.pascal == pytest.approx(94.848e5, rel=1e-12)


def test_the_low_gauge_governs_when_it_is_joined() -> None:
    """With its isolator open the 9 bar valve behind it is the ceiling: 9 x 0.97 x 0.9."""
    lowest = ceiling(CELL, ["cell", "low gauge line"])
    assert lowest is not None
    assert (lowest.tag, lowest.kind) == ("RV2", "relief")
    assert lowest.level is not None
    assert lowest.level.pascal == pytest.approx(7.857e5, rel=1e-9)


def test_what_is_not_known_stands_first() -> None:
    """A rating that nobody knows governs before every number: nothing is below it for certain."""
    parts = (*CELL.components[:2], CELL.components[2].model_copy(update={"pressure": NOT_KNOWN}))
    lowest = ceiling(CELL.model_copy(update={"components": parts}), ["cell"])
    assert lowest is not None
    assert (lowest.tag, lowest.level) == ("B1", None)
    rating = CELL.mawp.model_copy(update={"rating": NOT_KNOWN})
    lowest = ceiling(CELL.model_copy(update={"mawp": rating}), ["cell"])
    assert lowest is not None
    assert (lowest.tag, lowest.level, lowest.kind) == ("VC-2", None, "mawp")


def test_an_absolute_rating_takes_its_place_among_gauge_ones() -> None:
    """95 bar(a) is lower than 94.848 bar(g): order counts the room's pressure."""
    rating = CELL.mawp.model_copy(update={"rating": Level(95e5, "absolute")})
    lowest = ceiling(CELL.model_copy(update={"mawp": rating}), ["cell"])
    assert lowest is not None
    assert lowest.tag == "VC-2"


def test_the_room_has_no_ceiling() -> None:
    """Nothing rated is outside."""
    assert ceiling(CELL, ["outside"]) is None
