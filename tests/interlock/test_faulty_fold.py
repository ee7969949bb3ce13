"""A fold with one rule of what is known left out does not get through: the second interlock sees each of them."""

from __future__ import annotations

from dataclasses import replace
from typing import Any

import pytest

from runbook.run import ledger as folding
from runbook.run import questions
from runbook.run.clock import Moment
from runbook.run.events import GapAnswered
from runbook.run.state import Entry, Ledger
from tests.interlock.harness import explore

RUNS = 600


def _found() -> bool:
    return any(explore(seed)[1] is not None for seed in range(RUNS))


def test_going_on_confirms_an_unfinished_line(monkeypatch: pytest.MonkeyPatch) -> None:
    """Valves of a line that was left undone must not count as moved."""
    monkeypatch.setattr(folding, "unfinished", lambda plan, ledger, now: ())
    assert _found()


def test_quick_items_keep_old_positions(monkeypatch: pytest.MonkeyPatch) -> None:
    """Valves that a quick sequence moves are not known from its entry on."""
    rule = folding._entry

    def faulty(ledger: Ledger, at: Moment) -> Entry:
        line, entry = ledger.present, rule(ledger, at)
        return replace(entry, unconfirmed=tuple(tag for tag, _ in line.valves) if line is not None else ())

    monkeypatch.setattr(folding, "_entry", faulty)
    assert _found()


@pytest.mark.parametrize("name", ["positions", "source"])
def test_an_open_gap_keeps_what_was_stated_before(monkeypatch: pytest.MonkeyPatch, name: str) -> None:
    """Nobody watched: until the four answers are in, neither valves nor source are known."""
    rule: Any = getattr(questions, name)
    monkeypatch.setattr(questions, name, lambda ledger: rule(replace(ledger, gap_open=False)))
    assert _found()


def test_something_touched_changes_nothing(monkeypatch: pytest.MonkeyPatch) -> None:
    """What may have been touched is not known until somebody has stated it anew."""
    rule = folding._HANDLERS[GapAnswered]

    def faulty(ledger: Ledger, event: GapAnswered, at: Moment) -> Ledger:
        return rule(ledger, replace(event, touched="no"), at)

    monkeypatch.setitem(folding._HANDLERS, GapAnswered, faulty)
    assert _found()
