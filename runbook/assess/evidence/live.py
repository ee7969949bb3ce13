"""Explanations while a run is open: asked only where gauge and model do not agree, and asked once.

A search over causes takes a hundred times as long as one answer, so what it found is kept for as long as no
reading has come. Where nothing disagrees nothing is explained: a list of causes beside a good reading teaches
people to pass over it.
"""

from __future__ import annotations

from typing import Final

from runbook.answers import Agreement, Explanation, Observation, Past, Question
from runbook.assess.evidence.given import given
from runbook.assess.evidence.looks import STILL_K, TOGETHER_S, looks
from runbook.assess.evidence.ranking import explanations
from runbook.assess.scene import Scene

ASKED: Final = ("disagrees", "cannot tell")
"""Verdicts that call for an explanation."""
_KEPT: Final = 16


def explained(
    scene: Scene, question: Question, verdict: Agreement, wall: Observation | None, fastest: float
) -> tuple[Explanation, ...]:
    """What would make the readings of a question what they are; empty where they agree or say nothing.

    wall: the thermometer that was compared. fastest: how fast the wall may be moving [K/s].
    """
    if verdict.verdict not in ASKED or wall is None or verdict.tag is None:
        return ()
    if question.history and not _read_together(question.history, verdict.tag, wall.tag):
        return ()
    history = question.history or _last_pair(question, verdict.tag, wall)
    weighed = tuple(o for o in question.observations if o.what == "mass" and not o.closed)
    key = (history, weighed, verdict.tag, wall.tag, fastest)
    if key not in scene.explained:
        while len(scene.explained) >= _KEPT:
            del scene.explained[next(iter(scene.explained))]
        scene.explained[key] = _ranked(scene, history, weighed, verdict.tag, wall, fastest)
    return scene.explained[key]


def _read_together(history: tuple[Past, ...], gauge: str, thermometer: str) -> bool:
    """Whether the last of both were read together, or the wall has not moved since.

    While the second of a pair is still being typed there is nothing to explain, nor of a pressure that was read with
    the vessel open or at another temperature.
    """
    walls = [p for p in history if p.tag == thermometer]
    gauges = [p for p in history if p.tag == gauge]
    if not walls or not gauges:
        return False
    near = min(walls, key=lambda p: abs(p.at_s - gauges[-1].at_s))
    together = abs(near.at_s - gauges[-1].at_s) <= TOGETHER_S
    return together and (near is walls[-1] or abs(near.value - walls[-1].value) < STILL_K)


def _ranked(
    scene: Scene,
    history: tuple[Past, ...],
    weighed: tuple[Observation, ...],
    gauge: str,
    wall: Observation,
    fastest: float,
) -> tuple[Explanation, ...]:
    seen = looks(history, gauge, wall.tag, fastest)
    coldest = min((look.temperature for look in seen), default=wall.value)
    known = given(scene, weighed, gauge, wall.tag, coldest)
    return () if known is None or not seen else explanations(known, seen)


def _last_pair(question: Question, gauge: str, wall: Observation) -> tuple[Past, ...]:
    """The pair that was compared, where no history came along."""
    read = [o for o in question.observations if o.tag == gauge]
    return (
        Past(wall.tag, wall.what, wall.value, 0.0),
        *(Past(o.tag, o.what, o.value, 0.0) for o in read[-1:]),
    )
