"""Which spaces are one: what nobody knows is the worse of the two."""

from __future__ import annotations

import pytest
from hypothesis import given
from hypothesis import strategies as st

from runbook.apparatus.spaces import is_closed, isolated, joined_spaces, trapped, ways_out
from tests.apparatus.cell import CLOSED, OPEN, cell

CELL = cell()
POSITION = st.sampled_from(["open", "shut", "do not know"])
WORSE = {"open": "do not know", "shut": "do not know", "do not know": "do not know"}


@pytest.mark.parametrize(
    ("changed", "spaces"),
    [
        ({}, {"cell"}),
        ({"V3": "open"}, {"cell", "low gauge line"}),
        ({"V3": "do not know"}, {"cell", "low gauge line"}),
        ({"V2": "open"}, {"cell", "outside"}),
        ({"V1": "open", "V3": "open"}, {"cell", "low gauge line", "outside"}),
    ],
)
def test_joined(changed: dict[str, str], spaces: set[str]) -> None:
    """Open valves join, and so do those nobody knows of; shut ones do not."""
    assert joined_spaces(CELL, CLOSED | changed, "cell") == spaces


def test_a_valve_nobody_mentions_is_not_known() -> None:
    """An empty list of positions joins everything and leads nowhere for certain."""
    assert joined_spaces(CELL, {}, "cell") == {"cell", "low gauge line", "outside"}
    assert is_closed(CELL, {})
    assert isolated(CELL, "PG2", {})


def test_the_room_joins_nothing_behind_it() -> None:
    """Two spaces that are both open to the room are not one vessel."""
    line = CELL.valves[1].model_copy(update={"joins": ("low gauge line", "outside")})
    apart = CELL.model_copy(update={"valves": (CELL.valves[0], line)})
    assert joined_spaces(apart, OPEN, "cell") == {"cell", "outside"}


@pytest.mark.parametrize(
    ("changed", "closed"),
    [
        ({}, True),
        ({"V2": "open"}, False),
        ({"V1": "open"}, False),
        ({"V3": "open"}, True),
        ({"V2": "do not know"}, True),
    ],
)
def test_closed(changed: dict[str, str], closed: bool) -> None:
    """Only a way that is known to be open makes the vessel an open one."""
    assert is_closed(CELL, CLOSED | changed) is closed


def test_a_way_out_through_another_space_counts() -> None:
    """Open isolator, open vent behind it: the vessel is open."""
    vent = CELL.valves[0].model_copy(update={"joins": ("low gauge line", "outside")})
    round_about = CELL.model_copy(update={"valves": (vent, CELL.valves[1])})
    assert not is_closed(round_about, {"V1": "shut", "V2": "open", "V3": "open"})
    assert is_closed(round_about, {"V1": "shut", "V2": "open", "V3": "shut"})


@pytest.mark.parametrize(("position", "wanted"), [("open", False), ("shut", True), ("do not know", True)])
def test_isolated(position: str, wanted: bool) -> None:
    """A gauge behind a valve that is not known to be open may read only itself."""
    assert isolated(CELL, "PG2", CLOSED | {"V3": position}) is wanted
    assert isolated(CELL, "PG1", CLOSED | {"V3": position}) is False
    assert isolated(CELL, "TT1", CLOSED | {"V3": position}) is False
    with pytest.raises(KeyError):
        isolated(CELL, "PG9", CLOSED)


def test_trapped() -> None:
    """A closed space without relief is named; relief anywhere in the group, or a way out, frees it."""
    assert trapped(CELL, CLOSED) == ()
    bare = CELL.model_copy(update={"relief": CELL.relief[:1]})
    assert trapped(bare, CLOSED) == (frozenset({"low gauge line"}),)
    assert trapped(bare, CLOSED | {"V3": "open"}) == ()
    none = CELL.model_copy(update={"relief": ()})
    assert trapped(none, CLOSED | {"V3": "open"}) == (frozenset({"cell", "low gauge line"}),)
    assert trapped(none, OPEN) == ()


def test_ways_out() -> None:
    """Valves and openings between a space and the room."""
    assert ways_out(CELL, "cell") == ("V2", "V1")
    assert ways_out(CELL, "low gauge line") == ()


@given(st.fixed_dictionaries({"V1": POSITION, "V2": POSITION, "V3": POSITION}), st.sampled_from(["V1", "V2", "V3"]))
def test_knowing_less_never_helps(positions: dict[str, str], tag: str) -> None:
    """Forgetting where a valve stands joins no fewer spaces, opens no vessel and un-isolates no gauge."""
    less = positions | {tag: WORSE[positions[tag]]}
    assert joined_spaces(CELL, less, "cell") >= joined_spaces(CELL, positions, "cell")
    assert is_closed(CELL, less) >= is_closed(CELL, positions)
    assert isolated(CELL, "PG2", less) >= isolated(CELL, "PG2", positions)
