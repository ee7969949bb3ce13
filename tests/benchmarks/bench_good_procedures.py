"""Every procedure written from the manual alone, rehearsed by the ideal operator: outcome, seconds, warnings.

    python tests/benchmarks/bench_good_procedures.py [SEEDS]

Not a test: the longer ones take seconds each. A vessel with a proof that nobody has is refused, and says so.
"""

from __future__ import annotations

import asyncio
import sys
import time
from pathlib import Path

from runbook.assess.bind import bind
from runbook.procedure.reader import read_procedure
from runbook.rehearsal.headless import rehearse

GOOD = Path(__file__).parents[1] / "procedure" / "good"


def main(seeds: int) -> None:
    """One line a procedure and seed."""
    for path in sorted(GOOD.glob("*.yaml")):
        loaded = read_procedure(path)
        plan = bind(loaded, loaded.procedure.issue.date)
        warned = sum(one.severity == "warning" for one in plan.findings)
        for seed in range(1, seeds + 1):
            began = time.perf_counter()
            found = asyncio.run(rehearse(path, seed))
            took = time.perf_counter() - began
            why = "" if found.reason is None else f": {found.reason}"
            print(f"{path.stem:12} {plan.verdict}, {warned} warnings, seed {seed}: {found.outcome}{why} ({took:.1f} s)")


if __name__ == "__main__":
    main(int(sys.argv[1]) if len(sys.argv) > 1 else 1)
