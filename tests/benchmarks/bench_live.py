"""One live evaluation, in bare two-phase updates of the property library; and check, in imports of it.

Run by hand: python -m tests.benchmarks.bench_live. Ratios of one run on one machine; the bare update is CO2 at
468 kg/m3 and 293.15 K.
"""

from __future__ import annotations

import subprocess
import sys
import tempfile
import time
from collections.abc import Callable
from pathlib import Path

import CoolProp.CoolProp as cp

from runbook.assess.now import answer
from runbook.assess.walk import walk
from tests.assess.scenes import SHIPPED, observed, question, scene


def per_call(work: Callable[[int], object], rounds: int) -> float:
    """Seconds a call, the best of five batches."""
    best = float("inf")
    for _ in range(5):
        start = time.perf_counter()
        for index in range(rounds):
            work(index)
        best = min(best, (time.perf_counter() - start) / rounds)
    return best


def live() -> None:
    """A question of the lesson: new temperature and pressure each time, height and weighing as they were."""
    state = cp.AbstractState("HEOS", "CO2")

    def bare(_: int) -> None:
        state.update(cp.DmassT_INPUTS, 468.0, 293.15)

    with tempfile.TemporaryDirectory() as folder:
        there = scene(Path(folder))
        lines = walk(there)
        index = next(i for i, w in enumerate(lines) if w.warms)
        fixed = (
            observed("mass", 0.1172, 3, closed=False),
            observed("temperature", 294.15, 10),
            observed("liquid height", 0.0285, 11, by="T. Okoro"),
        )
        seen = [0]

        def one(_: int) -> None:
            seen[0] += 1
            new = (
                observed("temperature", 294.2 + 0.0007 * seen[0], 20),
                observed("pressure", 58.7e5 + 95.0 * seen[0], 21),
            )
            answer(there, lines, question(index, index + 1, fixed + new, source="on"))

        unit = per_call(bare, 2000)
        each = per_call(one, 200)
    print(f"bare two-phase update     {unit * 1e6:8.2f} us")
    print(f"one live evaluation       {each * 1e6:8.2f} us = {each / unit:.0f} bare updates (at most 100)")


def check() -> None:
    """Fresh processes: import alone, and check of every shipped procedure."""
    files = [str(p) for p in sorted(SHIPPED.glob("*.yaml"))]
    commands = {
        "import CoolProp alone": [sys.executable, "-c", "import CoolProp.CoolProp"],
        "check of all shipped": [sys.executable, "-m", "runbook", "check", *files, "--on", "2031-03-02"],
    }
    took: dict[str, float] = {name: float("inf") for name in commands}
    for _ in range(3):
        for name, command in commands.items():
            start = time.perf_counter()
            subprocess.run(command, capture_output=True, check=False, cwd=SHIPPED.parent)
            took[name] = min(took[name], time.perf_counter() - start)
    for name, seconds in took.items():
        print(f"{name:<25} {seconds:8.2f} s")
    print(f"ratio                     {took['check of all shipped'] / took['import CoolProp alone']:8.2f} (at most 2)")


if __name__ == "__main__":
    live()
    check()
