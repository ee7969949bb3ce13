"""Explanations in the answer to a question: only where something does not agree, once, and never a permission."""

from __future__ import annotations

import json
from dataclasses import replace
from pathlib import Path

import pytest

from runbook.answers import Answer, Past
from runbook.assess.child import Bound, reply
from runbook.assess.evidence import live
from runbook.assess.now import answer
from runbook.assess.scene import Scene
from runbook.assess.walk import walk
from runbook.codec import from_plain, to_plain
from tests.assess.scenes import observed, question, scene

BAR = 1e5
FINE = {"class: 0.6, division: 1 bar": "class: 0.25, division: 0.1 bar"}
LOADED = (
    observed("mass", 0.1172, 3, closed=False),
    observed("temperature", 294.15, 10),
    observed("liquid height", 0.0285, 11, by="T. Okoro"),
)
RIGHT = 58.65 * BAR


def history(pressure: float, *more: Past) -> tuple[Past, ...]:
    """A pair and a height at rest."""
    return (
        Past("TT1", "temperature", 294.15, 0.0),
        Past("HS1", "liquid height", 0.0285, 10.0),
        Past("PG1", "pressure", pressure, 20.0),
        *more,
    )


def ask(there: Scene, pressure: float, past: tuple[Past, ...] = ()) -> Answer:
    """Standing before the warming of the lesson."""
    lines = walk(there)
    index = next(i for i, w in enumerate(lines) if w.warms)
    asked = question(index - 1, index, (*LOADED, observed("pressure", pressure, 12)))
    return answer(there, lines, replace(asked, history=past))


def test_where_readings_agree_nothing_is_explained(tmp_path: Path) -> None:
    """A list of causes beside a good reading teaches people to pass over it."""
    found = ask(scene(tmp_path), RIGHT, history(RIGHT))
    assert found.agreement.verdict == "agrees"
    assert found.explanations == ()


def test_a_disagreement_is_explained_with_a_test(tmp_path: Path) -> None:
    """2.5 bar too much with everything else right: the gauge or air, and the test that tells."""
    there = scene(tmp_path, apparatus=FINE)
    found = ask(there, RIGHT + 2.5 * BAR, history(RIGHT + 2.5 * BAR))
    assert found.agreement.verdict == "disagrees"
    assert {e.cause for e in found.explanations[:2]} == {"trapped air", "gauge offset"}
    assert found.explanations[0].test == "re-zero"
    assert found.explanations[0].size == pytest.approx(2.5 * BAR, rel=0.15)


def test_without_a_history_the_pair_itself_is_explained(tmp_path: Path) -> None:
    """A question of an older run has none."""
    found = ask(scene(tmp_path, apparatus=FINE), RIGHT + 2.5 * BAR)
    assert found.explanations
    assert found.explanations[-1].struck_out


def test_a_pressure_of_another_temperature_is_not_explained(tmp_path: Path) -> None:
    """While the second of a pair is still to be read the first has nothing to disagree with."""
    there = scene(tmp_path, apparatus=FINE)
    warmer = Past("TT1", "temperature", 296.15, 600.0)
    lines = walk(there)
    index = next(i for i, w in enumerate(lines) if w.warms)
    seen = (LOADED[0], observed("temperature", 296.15, 13), observed("pressure", RIGHT, 12))
    asked = replace(question(index - 1, index, seen), history=history(RIGHT, warmer))
    found = answer(there, lines, asked)
    assert found.agreement.verdict == "disagrees"
    assert found.explanations == ()
    pair = replace(asked, history=(*asked.history, Past("PG1", "pressure", RIGHT, 630.0)))
    assert answer(there, lines, pair).explanations


def test_explanations_never_change_what_the_interlock_leans_on(tmp_path: Path) -> None:
    """With or without them margins, agreement, charge, phases and proof are the same."""
    there = scene(tmp_path, apparatus=FINE)
    bare = ask(there, RIGHT + 2.5 * BAR)
    full = ask(there, RIGHT + 2.5 * BAR, history(RIGHT, Past("PG1", "pressure", RIGHT + 2.5 * BAR, 60.0)))
    assert bare.explanations != full.explanations
    assert replace(bare, explanations=()) == replace(full, explanations=())


def test_the_same_readings_are_explained_once(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    """A question that changes nothing but the line costs no second search."""
    there = scene(tmp_path, apparatus=FINE)
    first = ask(there, RIGHT + 2.5 * BAR, history(RIGHT + 2.5 * BAR))

    def never(*_: object) -> object:
        raise AssertionError("searched again")

    monkeypatch.setattr(live, "explanations", never)
    assert ask(there, RIGHT + 2.5 * BAR, history(RIGHT + 2.5 * BAR)).explanations == first.explanations


def test_the_answer_carries_the_charge_as_a_best_estimate(tmp_path: Path) -> None:
    """From weighing and height; a pressure beside liquid is named as blind."""
    found = ask(scene(tmp_path), RIGHT).estimate
    assert found is not None
    assert {p.how for p in found.parts} == {"weighing at closing", "height"}
    assert found.blind == ("pressure",)
    assert found.kg == pytest.approx(0.1165, abs=0.001)


def test_explanations_come_through_the_pipe(tmp_path: Path) -> None:
    """The child gets the history with the question and gives explanations and estimate back, as plain data."""
    there = scene(tmp_path, apparatus=FINE)
    lines = walk(there)
    index = next(i for i, w in enumerate(lines) if w.warms)
    asked = question(index - 1, index, (*LOADED, observed("pressure", RIGHT + 2.5 * BAR, 12)))
    asked = replace(asked, history=history(RIGHT + 2.5 * BAR))
    sent = json.loads(json.dumps({"ask": "now", "key": asked.key, "question": to_plain(asked)}))
    back = json.loads(json.dumps(reply(Bound(((there, lines),)), sent), allow_nan=False))
    found = from_plain(Answer, back["answer"])
    assert found.explanations == answer(there, lines, asked).explanations
    assert found.estimate is not None


def test_an_answer_of_an_older_run_has_none(tmp_path: Path) -> None:
    """Journals written before there were explanations are read as they stand."""
    plain = to_plain(ask(scene(tmp_path), RIGHT))
    del plain["explanations"], plain["estimate"]
    found = from_plain(Answer, plain)
    assert (found.explanations, found.estimate) == ((), None)
