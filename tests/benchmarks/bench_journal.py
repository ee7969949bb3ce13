"""How long an event takes to be on the disk, beside the bare write and sync that nothing can do without.

Run by hand: `python tests/benchmarks/bench_journal.py [FOLDER]`; FOLDER is where the disk is that counts. The ratios
are what matters, since disks differ by a factor of a hundred: both are measured in turn, in one process.
"""

from __future__ import annotations

import os
import sys
import tempfile
import time
from collections.abc import Callable
from pathlib import Path
from statistics import median, quantiles

from runbook.run.clock import SystemClock
from runbook.run.journal import Journal, JournalWriter, parse_bytes

ROUNDS = 2000
REPLAYED = 10_000
READING: dict[str, object] = {"instrument": "PG1", "value": 6.21e6, "unit": "bar(g)", "by": "A. Example"}


def timed(action: Callable[[], object]) -> float:
    """[s] that one call takes."""
    start = time.perf_counter()
    action()
    return time.perf_counter() - start


def in_turn(*actions: Callable[[], object]) -> list[list[float]]:
    """[s] of every call, the actions taken in turn, so that all see the same disk."""
    taken: list[list[float]] = [[] for _ in actions]
    for _ in range(ROUNDS):
        for times, action in zip(taken, actions, strict=True):
            times.append(timed(action))
    return taken


def main(folder: Path) -> None:
    """Measure and print."""
    clock = SystemClock()
    journal = Journal.create(folder / "direct.jsonl")
    writer = JournalWriter(Journal.create(folder / "thread.jsonl"))
    bare = os.open(folder / "bare", os.O_RDWR | os.O_CREAT | os.O_APPEND)
    journal.append("ReadingTaken", READING, clock.now())
    line = (folder / "direct.jsonl").read_bytes()

    def bare_write() -> None:
        os.write(bare, line)
        os.fsync(bare)

    def bare_pair() -> None:
        bare_write()
        os.pwrite(other, line, 0)
        os.fsync(other)

    other = os.open(folder / "other", os.O_RDWR | os.O_CREAT)
    results = in_turn(
        bare_write,
        bare_pair,
        lambda: journal.append("ReadingTaken", READING, clock.now()),
        lambda: writer.append_now("ReadingTaken", READING, clock.now()),
    )
    names = ("write + sync", "two writes + two syncs", "Journal.append", "JournalWriter.append_now")
    base = median(results[0])
    print(f"{'an event of ' + str(len(line)) + ' bytes':28}{'median':>10}{'99 %':>10}{'ratio':>8}")
    for name, times in zip(names, results, strict=True):
        p99 = quantiles(times, n=100)[-1]
        print(f"{name:28}{median(times) * 1e3:7.3f} ms{p99 * 1e3:7.3f} ms{median(times) / base:8.2f}")
    journal.close()
    writer.close()
    for descriptor in (bare, other):
        os.close(descriptor)
    data = b"".join((folder / "direct.jsonl").read_bytes().splitlines(keepends=True)[:ROUNDS])
    reading = timed(lambda: parse_bytes(data)) / ROUNDS * REPLAYED
    print(f"{REPLAYED} records are read and checked in {reading:.3f} s (from {ROUNDS})")


if __name__ == "__main__":
    with tempfile.TemporaryDirectory(dir=sys.argv[1] if len(sys.argv) > 1 else None) as place:
        main(Path(place))
