"""How long a run of ten thousand events takes to be folded again, alone and from the lines of its journal.

Run by hand: `python tests/benchmarks/bench_replay.py`. It ends with an error where the property library was loaded
for it. The time from the journal's lines has reading, marks and validation in it, which dominate.
"""

from __future__ import annotations

import sys
import time
from collections.abc import Callable

from runbook.run.events import event_from_plain, event_to_plain
from runbook.run.journal import parse_bytes
from runbook.run.journal_lines import Head, draft, line_of
from runbook.run.ledger import fold_all
from tests.run.test_ledger import long_run

EVENTS = 10_000
ROUNDS = 5


def best(action: Callable[[], object]) -> float:
    """[s] the fastest of some calls takes."""
    times = []
    for _ in range(ROUNDS):
        begun = time.perf_counter()
        action()
        times.append(time.perf_counter() - begun)
    return min(times)


def main() -> None:
    """Measure and print."""
    pairs = long_run(EVENTS)
    head, lines = Head(), []
    for event, at in pairs:
        record, line = line_of(draft(*event_to_plain(event), at), head)
        head = Head(record.n, record.mark)
        lines.append(line)
    data = b"".join(lines)

    def from_lines() -> None:
        records = parse_bytes(data).records
        fold_all((event_from_plain(record.kind, record.data), record.moment) for record in records)

    alone = best(lambda: fold_all(pairs))
    print(f"{EVENTS} events folded: {alone:.3f} s, {alone / EVENTS * 1e6:.0f} us an event")
    assert "CoolProp" not in sys.modules, "a replay must not need the property library"
    print(f"the same from {len(data) / 1e6:.1f} MB of journal lines: {best(from_lines):.3f} s")


if __name__ == "__main__":
    main()
