"""A vent that springs open is shut by a hand, in a quick sequence that lets go again: what else is written is found."""

from __future__ import annotations

from pathlib import Path

import pytest

from runbook.procedure.writing import findings
from tests.assess.tube import tube

CASES = [
    # rule, old, new, words of the finding
    ("held by hand", "at_start: {V1: open", "at_start: {V1: shut", "at the start"),
    (
        "held by hand",
        "          - {do: Let go of V1, valves: {V1: open}, latest: 2 s, if_not: Let go of V1 now.}\n",
        "",
        "also lets go of it",
    ),
    (
        "held by hand",
        "        read:\n          - {what: pressure, with: PG1, accept: -0.1 bar(g) to 0.1 bar(g), if_not: Set",
        "        path: {let_rise_to: 1 bar(g), read_on: PG1, let_go_within: 2 s}\n"
        "        read:\n          - {what: pressure, with: PG1, accept: -0.1 bar(g) to 0.1 bar(g), if_not: Set",
        "stands in a quick sequence",
    ),
    ("wrong instrument", "read_on: PG1", "read_on: BS1", "no gauge on the space"),
    ("reading outside dial", "let_rise_to: 4.6 bar(g)", "let_rise_to: 12 bar(g)", "cannot be read on PG1"),
]


def found(folder: Path, rule: str, changes: dict[str, str] | None = None) -> list[str]:
    """What the writing rules find under one name."""
    return [p.message for p in findings(tube(folder, changes)) if p.rule == rule]


@pytest.mark.parametrize(("rule", "old", "new", "said"), CASES)
def test_each_is_found_where_it_is_wrong(tmp_path: Path, rule: str, old: str, new: str, said: str) -> None:
    """And nothing in the shipped file."""
    assert found(tmp_path, rule) == []
    assert any(said in message for message in found(tmp_path, rule, {old: new}))


def test_an_empty_proof_without_isolator_needs_a_gauge_on_the_vessel(tmp_path: Path) -> None:
    """A gauge behind a valve that nobody names would stand still whatever is in the vessel."""
    low = (
        "PG2, reads: pressure, of: line, dial: 0 bar(g) to 1 bar(g), class: 1.0, division: 0.01 bar, read_from: screen"
    )
    valve = "  - {tag: V2, what: gauge isolator, joins: [tube, line], port: top, let_go: stays}\nopenings:"
    vessel = {
        "spaces: [tube, outside]": "spaces: [tube, line, outside]",
        "openings:": valve,
        "  - {tag: TT1": f"  - {{tag: {low}, valid_until: 2032-02-27}}\n  - {{tag: TT1",
    }
    loaded = tube(tmp_path, {"low_gauge: PG1": "low_gauge: PG2", "at_start: {": "at_start: {V2: open, "}, vessel)
    assert any("name the isolator" in p.message for p in findings(loaded))
