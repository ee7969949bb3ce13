"""The last readings of the closed vessel, with their times: what explanations of a difference are made from.

Which readings count for a limit is another matter and stands in `questions`; here older ones are kept beside newer
ones, because how a gauge and a thermometer moved together is what tells causes apart. Refuses to keep a time that
nobody knows: where the clocks were broken it begins anew.
"""

from __future__ import annotations

from dataclasses import dataclass
from math import isfinite
from typing import Final

from runbook.answers import Past
from runbook.run.clock import Moment
from runbook.run.events import ReadingTaken

KEPT: Final = {"temperature": 24, "pressure": 24, "liquid height": 8, "mass": 8}
"""Readings kept of each kind: two hours of a lesson read every five minutes."""


@dataclass(frozen=True, slots=True)
class History:
    """Readings since closing, oldest first."""

    readings: tuple[Past, ...] = ()
    at: Moment | None = None
    """Of the last one; None: there is none."""


NOTHING: Final = History()


def with_past(history: History, event: ReadingTaken, at: Moment) -> History:
    """The history with one more reading; the oldest of its kind goes where there are too many."""
    most = KEPT.get(event.what)
    if most is None:
        return history
    kept = history.readings
    since = 0.0
    if history.at is not None and kept:
        age = at.age(history.at)
        if isfinite(age):
            since = kept[-1].at_s + age
        else:
            kept = ()
    if sum(p.what == event.what for p in kept) >= most:
        oldest = next(i for i, p in enumerate(kept) if p.what == event.what)
        kept = kept[:oldest] + kept[oldest + 1 :]
    # Whole seconds: nobody reads two dials closer together, and a question is sent with every reading.
    return History((*kept, Past(event.tag, event.what, event.value, float(round(since)))), at)
