"""The timeline before a run: of a hundred lots of the tolerances, when each line begins, each sight falls, a part ends.

A band holds nine of ten lots. Times are estimates: the couplings of the apparatus file are. Nothing is permitted or
refused by them.
"""

from __future__ import annotations

import contextlib
from collections import Counter
from collections.abc import Iterable, Sequence
from dataclasses import dataclass
from datetime import date
from pathlib import Path
from typing import Final

from runbook.answers import Plan
from runbook.assess.bind import plan_of
from runbook.assess.scene import Scene, open_scene
from runbook.errors import OutsideValidity
from runbook.procedure.reader import read_procedure
from runbook.procedure.several import seen_from_each
from runbook.rehearsal.lesson import Lesson
from runbook.rehearsal.lots import Lot, lots
from runbook.rehearsal.watching import PartRun

RUNS: Final = 100
"""As many lots as a band takes to stand still to a few per cent [1]."""
_EDGE: Final = 0.05
"""Share of the lots that lies beyond either end of a band [1]."""


@dataclass(frozen=True, slots=True)
class Band:
    """When something happens in nine of ten lots [s]."""

    least: float
    middle: float
    """Half of the lots are earlier."""
    most: float
    runs: int
    """Lots in which it happens at all."""


@dataclass(frozen=True, slots=True)
class LineTime:
    """When a line begins."""

    number: str
    text: str
    begins: Band


@dataclass(frozen=True, slots=True)
class SightTime:
    """When a sight falls."""

    number: str
    """Of its line."""
    of: str
    words: str
    falls: Band


@dataclass(frozen=True, slots=True)
class PartTimes:
    """One part of the day, since it began."""

    index: int
    name: str
    declared_s: float | None
    """What the file gives it [s]; None: nothing."""
    declared_by: str
    """'fits' or 'lead'; empty: neither."""
    takes: Band | None
    """None: in no lot it ends."""
    fits_in: int
    """Lots in which it ends within what is declared; without a declaration, in which it ends."""
    runs: int
    """Lots in which it was begun."""
    lines: tuple[LineTime, ...]
    sights: tuple[SightTime, ...]
    stuck: tuple[tuple[str, int], ...]
    """(line that never ends, in how many lots)."""
    longest: tuple[str, float]
    """The line that takes the most time in the middle of the lots: its number and how long [s]."""


@dataclass(frozen=True, slots=True)
class Asked:
    """What every process works from: the same files give the same lots."""

    path: Path
    seed: int
    count: int
    parts: tuple[int, ...]
    """Those that are told, from 0."""
    vessel: int = 0
    """Of several in one bath the one that is gone with, from 0: the first one's readings are its own."""


def opened(asked: Asked) -> tuple[Scene, Plan, tuple[Lot, ...]]:
    """Scene, plan on the procedure's issue date, and the lots. Raises FileProblems or InputUnusable."""
    loaded = seen_from_each(read_procedure(asked.path))[asked.vessel]
    scene = open_scene(loaded, None, None)
    on: date = loaded.procedure.issue.date
    plan = plan_of(scene, on)
    return scene, plan, lots(scene, plan, asked.seed, asked.count)


def timed_parts(plan: Plan) -> tuple[int, ...]:
    """Parts in which something is done, from 0."""
    return tuple(i for i in range(len(plan.parts)) if any(x.part == i and x.kind != "parked" for x in plan.lines))


def one_lot(lot: Lot, wanted: Sequence[int]) -> tuple[PartRun, ...]:
    """The wanted parts of one lot, each from where the one before it leaves the vessel.

    A part that finds the vessel closed can begin by itself, at rest in the room; so does one after a part that never
    ends. What needs a part before it that never ended is left out, and so is what begins beyond the models.
    """
    found: list[PartRun] = []
    lesson: Lesson | None = None
    for part in range(_start(lot, min(wanted)), max(wanted) + 1):
        if lesson is None and _by_itself(lot, part):
            with contextlib.suppress(OutsideValidity):
                lesson = Lesson(lot, part)
        if lesson is None:
            continue
        run = lesson.go(part)
        if part in wanted:
            found.append(run)
        if run.stuck is not None:
            lesson = None
    return tuple(found)


def _by_itself(lot: Lot, part: int) -> bool:
    before = lot.lines[lot.plan.parts[part].first].before
    return part == 0 or before.closed


def _start(lot: Lot, part: int) -> int:
    return next(p for p in range(part, -1, -1) if _by_itself(lot, p))


def timeline(plan: Plan, wanted: Iterable[int], runs: Sequence[tuple[PartRun, ...]]) -> tuple[PartTimes, ...]:
    """The bands of all lots but the first of `runs`, which is the one without tolerances: its words are taken."""
    return tuple(
        _part(
            plan, part, [r for r in runs[0] if r.part == part], [r for run in runs[1:] for r in run if r.part == part]
        )
        for part in wanted
    )


def fits(part: PartTimes) -> bool:
    """As many lots end within what is declared as a band holds or more; without a declaration, end at all."""
    return part.fits_in >= (1.0 - _EDGE) * part.runs


def _part(plan: Plan, part: int, middle: list[PartRun], runs: list[PartRun]) -> PartTimes:
    of = plan.parts[part]
    declared, by = (of.fits_s, "fits") if of.fits_s is not None else (of.lead_s, "lead")
    ends = [r.ends_s for r in runs if r.ends_s is not None]
    within = sum(1 for e in ends if declared is None or e <= declared)
    indices = [i for i, line in enumerate(plan.lines) if line.part == part]
    lines = []
    for i in indices:
        begins = band(r.begins[i] for r in runs if i in r.begins)
        if begins is not None:
            lines.append(LineTime(plan.lines[i].number, plan.lines[i].text, begins))
    stuck = Counter(plan.lines[r.stuck].number for r in runs if r.stuck is not None)
    return PartTimes(
        index=part,
        name=of.name,
        declared_s=declared,
        declared_by="" if declared is None else by,
        takes=band(ends),
        fits_in=within,
        runs=len(runs),
        lines=tuple(lines),
        sights=_sights(plan, middle, runs),
        stuck=tuple(sorted(stuck.items())),
        longest=_longest(plan, indices, runs),
    )


def _sights(plan: Plan, middle: list[PartRun], runs: list[PartRun]) -> tuple[SightTime, ...]:
    """Each sight of a kind once, in the order in which it falls."""
    words = {(one.line, one.of, one.nth): one.words for run in middle for one in run.seen}
    times: dict[tuple[int, str, int], list[float]] = {}
    for run in runs:
        for one in run.seen:
            key = (one.line, one.of, one.nth)
            words.setdefault(key, one.words)
            times.setdefault(key, []).append(one.at_s)
    found = []
    for key, at in times.items():
        falls = band(at)
        if falls is not None:
            found.append(SightTime(plan.lines[key[0]].number, key[1], words[key], falls))
    return tuple(sorted(found, key=lambda one: one.falls.middle))


def _longest(plan: Plan, indices: list[int], runs: list[PartRun]) -> tuple[str, float]:
    best = ("", 0.0)
    for i in indices:
        took = [_until_next(r, i) for r in runs if i in r.begins]
        lasted = band(x for x in took if x is not None)
        if lasted is not None and lasted.middle > best[1]:
            best = (plan.lines[i].number, lasted.middle)
    return best


def _until_next(run: PartRun, index: int) -> float | None:
    if run.stuck == index:
        return None
    after = run.begins.get(index + 1, run.ends_s)
    return None if after is None else after - run.begins[index]


def band(values: Iterable[float]) -> Band | None:
    """Nine of ten of the values [s], by rank; None of none."""
    ordered = sorted(values)
    if not ordered:
        return None

    def at(share: float) -> float:
        return ordered[min(len(ordered) - 1, int(share * len(ordered)))]

    return Band(at(_EDGE), at(0.5), at(1.0 - _EDGE), len(ordered))
