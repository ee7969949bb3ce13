"""How long a hundred lots of the lesson take, an hour's rehearsal without a screen, and a let-down more.

Run by hand: `python tests/benchmarks/bench_lesson.py`. Wanted: the lots under a minute on two cores, the hour and the
let-down under a second each, all without the two seconds in which the property library is loaded. It ends with an error
where several processes give other times than one.
"""

from __future__ import annotations

import asyncio
import os
import time
from pathlib import Path

from runbook.rehearsal.headless import rehearse
from runbook.rehearsal.lesson import Lesson
from runbook.rehearsal.letting_down import downward
from runbook.rehearsal.lots import middle
from runbook.rehearsal.many import all_lots
from runbook.rehearsal.timeline import Asked, one_lot, opened

PROCEDURES = Path(__file__).parents[2] / "procedures"
CELL, TUBE = PROCEDURES / "co2-critical-point.yaml", PROCEDURES / "co2-triple-point.yaml"
RUNS, LESSON = 100, 2


def main() -> None:
    """Measure and print."""
    asked = Asked(CELL, 1, RUNS, (LESSON,))
    scene, plan, lots = opened(asked)
    begun = time.perf_counter()
    found = all_lots(asked, lots, lambda _: None)
    took = time.perf_counter() - begun
    print(f"{RUNS} lots of the lesson: {took:.1f} s on {os.cpu_count()} cores, wanted under 60 s")
    assert found[:3] == [one_lot(lot, (LESSON,)) for lot in lots[:3]], "several processes give other times than one"

    at = middle(scene, plan)
    begun, lesson = time.process_time(), Lesson(at, LESSON)
    lesson.go(LESSON)
    alone = time.process_time() - begun
    print(f"one lot: {alone:.3f} s of computing for {lesson.clock / 3600.0:.1f} h, {_hour(alone, lesson.clock)}")

    begun = time.process_time()
    outcome = asyncio.run(rehearse(TUBE, 1))
    computing = time.process_time() - begun
    print(f"the tube's rehearsal, interlock and all: {computing:.2f} s for {outcome.duration_s / 3600.0:.2f} h, "
          f"{_hour(computing, outcome.duration_s)}, wanted under 1 s")  # fmt: skip

    begun = time.process_time()
    way = downward(at, range(len(plan.parts)))
    assert way is not None, "the shipped procedure lets its cell down"
    print(f"the let-down of the cell: {time.process_time() - begun:.2f} s of computing for "
          f"{(way.takes_s or 0.0) / 60.0:.1f} min, wanted under 1 s")  # fmt: skip


def _hour(computing: float, lasted: float) -> str:
    return f"{computing * 3600.0 / lasted:.3f} s an hour"


if __name__ == "__main__":
    main()
