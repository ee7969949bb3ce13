"""Kills line mode with signal 9 at chosen events of a whole run, and looks at what is left.

    python -m tests.attacks.kill_rounds FOLDER kinds|seeded|every

One process loads the physics, a fork of it runs line mode and says how many records are acknowledged, and is
killed at the chosen count. Prints one JSON object a round.
"""

from __future__ import annotations

import asyncio
import contextlib
import json
import os
import random
import signal
import sys
from pathlib import Path
from typing import Any

from runbook.assess.local import LocalEngine
from runbook.run.acts import GapAnswers, MakeSafe
from runbook.run.clock import FakeClock
from runbook.run.conductor import Conductor
from runbook.run.events import event_from_plain
from runbook.run.journal import Journal, JournalWriter, Record, read
from runbook.run.ledger import fold_all
from runbook.run.reasons import Refused
from tests.commands.typist import opened

PROCEDURE = Path(__file__).parents[2] / "procedures" / "co2-critical-point.yaml"


async def typed(journal: Path, acknowledged: int) -> None:
    """One whole run; each time more records are on the disk their number goes to the descriptor."""
    session, _ = await opened(PROCEDURE, journal)
    desk = session.desk

    def tell() -> None:
        assert desk.journal is not None
        os.write(acknowledged, f"{desk.journal.head[0]}\n".encode())

    desk.changed = tell
    tell()
    try:
        await session.go()
    finally:
        await desk.close()


def child(journal: Path, acknowledged: int) -> None:
    """Never returns."""
    with Path(os.devnull).open("w") as nowhere, contextlib.redirect_stdout(nowhere):
        asyncio.run(typed(journal, acknowledged))
    os._exit(0)


def killed_at(journal: Path, count: int) -> int:
    """Run line mode in a fork and kill it when `count` records are acknowledged; how many were."""
    out, into = os.pipe()
    pid = os.fork()
    if pid == 0:
        os.close(out)
        child(journal, into)
    os.close(into)
    seen = 0
    with os.fdopen(out) as said:
        for line in said:
            seen = int(line)
            if seen >= count:
                os.kill(pid, signal.SIGKILL)
                break
    os.waitpid(pid, 0)
    return seen


async def resumed(journal: Path) -> dict[str, Any]:
    """Take the run up again: the four questions stand, nothing raises before them, make safe is open."""
    handle, records = Journal.open(journal)
    desk = Conductor(JournalWriter(handle), FakeClock(boot=1e6, wall=2e9), LocalEngine())
    try:
        await desk.resume(records, "killed")
        open_gap = desk.ledger.gap_open
        answered = await desk.act(GapAnswers("do not know", "do not know", "do not know", ()))
        safe = await desk.act(MakeSafe())
        await desk.settled()
        return {
            "gap": open_gap,
            "answered": not isinstance(answered, Refused),
            "safe": not isinstance(safe, Refused) and safe is not None,
        }
    finally:
        await desk.close()


def one_round(folder: Path, reference: tuple[Record, ...], count: int) -> dict[str, Any]:
    """Kill, read, fold, compare with the same beginning of the undisturbed run, resume."""
    journal = folder / f"killed-{count}.jsonl"
    seen = killed_at(journal, count)
    found = read(journal).records
    same = [r.kind for r in found] == [r.kind for r in reference[: len(found)]]
    here = fold_all((event_from_plain(r.kind, r.data), r.moment) for r in found)
    there = fold_all((event_from_plain(r.kind, r.data), r.moment) for r in reference[: len(found)])
    finished = found[-1].kind == "RunClosed"
    return {
        "count": count,
        "kind": found[min(count, len(found)) - 1].kind,
        "acknowledged": seen,
        "kept": len(found),
        "same": same and here.line == there.line and here.source == there.source,
        "finished": finished,
        **({} if finished else asyncio.run(resumed(journal))),
    }


def counts(reference: tuple[Record, ...], which: str) -> list[int]:
    """After which records to kill."""
    if which == "every":
        return list(range(1, len(reference) + 1))
    if which == "seeded":
        return sorted(random.Random(20).sample(range(2, len(reference)), 20))
    first: dict[str, int] = {}
    for record in reference:
        first.setdefault(record.kind, record.n)
    return sorted(first.values())


def main() -> int:
    """Print a round a line."""
    folder, which = Path(sys.argv[1]), sys.argv[2]
    whole = folder / "whole.jsonl"
    with contextlib.redirect_stdout(sys.stderr):
        killed_at(whole, 10**9)
    reference = read(whole).records
    for count in counts(reference, which):
        print(json.dumps(one_round(folder, reference, count)), flush=True)
    return 0


if __name__ == "__main__":
    sys.exit(main())
