"""`runbook rehearse FILE`: the same run on a simulated vessel, with the second person played.

On screens, as prompts and lines (--plain), or without anybody (--headless), where the ideal operator does it and
the same seed gives the same run.
"""

from __future__ import annotations

import asyncio
import json
import sys
from dataclasses import asdict
from pathlib import Path
from typing import TYPE_CHECKING, Any

from runbook.commands.arguments import Arguments, iso_date
from runbook.errors import ExitCode, InputUnusable
from runbook.procedure.shelf import find_procedure

if TYPE_CHECKING:
    from runbook.rehearsal.headless import FaultStory, Outcome


def main(argv: list[str]) -> int:
    """Rehearse one procedure; returns the exit code."""
    parser = Arguments(prog="runbook rehearse", description=__doc__)
    parser.add_argument("file", metavar="FILE", help="a procedure file, or the name of a shipped one")
    parser.add_argument("--headless", action="store_true", help="no screen: the ideal operator does it")
    parser.add_argument("--plain", action="store_true", help="prompts and lines instead of screens")
    parser.add_argument("--seed", type=int, default=1, metavar="N", help="of the instruments' errors (1)")
    parser.add_argument("--fault", metavar="NAME[@S]", default="",
                        help="what goes wrong, and seconds after its situation; 'random', or 'list'")  # fmt: skip
    parser.add_argument("--every-fault", action="store_true", help="with --headless: each in turn; 1 if one goes badly")
    parser.add_argument("--timeline", action="store_true",
                        help="before it: when each line begins and each sight falls, and whether it fits")  # fmt: skip
    parser.add_argument("--runs", type=int, default=100, metavar="N", help="with --timeline: lots of tolerances (100)")
    parser.add_argument("--part", type=int, metavar="N", help="with --timeline: one part of the day alone, from 1")
    parser.add_argument("--json", action="store_true", help="with --headless or --timeline: one document, SI")
    parser.add_argument("--logbook", metavar="DIR", type=Path, help="where the record goes")
    parser.add_argument("--ascii", action="store_true", help="no braille and no box characters")
    asked = parser.parse_args(argv)
    if asked.json and not (asked.headless or asked.timeline):
        raise InputUnusable("--json goes with --headless or --timeline")
    if asked.timeline and (asked.headless or asked.plain or asked.fault or asked.every_fault):
        raise InputUnusable("--timeline comes before a rehearsal: leave out --headless, --plain and faults")
    if asked.part is not None and not asked.timeline:
        raise InputUnusable("--part goes with --timeline")
    if asked.every_fault and not asked.headless:
        raise InputUnusable("--every-fault goes with --headless")
    if asked.fault == "list":
        return _list_faults()
    if asked.fault:
        # A name mistyped is told before anything else is loaded; without a fault not even this is.
        from runbook.rehearsal.faults import parse_fault

        parse_fault(asked.fault, asked.seed)
    path = find_procedure(asked.file)
    if asked.timeline:
        from runbook.commands.timeline import show_timeline

        return show_timeline(path, asked.seed, asked.runs, asked.part, asked.json)
    if asked.every_fault:
        return _every_fault(path, asked.seed, asked.json)
    if asked.headless:
        return _headless(path, asked.seed, asked.json, asked.logbook, asked.fault)
    if asked.plain:
        from runbook.commands.plain import rehearse_plain

        return rehearse_plain(path, asked.seed, asked.logbook, asked.fault)
    return _on_screens(path, asked)


def _on_screens(path: Path, asked: Any) -> int:
    from runbook.bench.launch import check_terminal, run_screens

    check_terminal("rehearse")
    from runbook.bench.entries import title_of
    from runbook.bench.journey import Session
    from runbook.bench.screens.listing import Entry

    start = Entry("rehearse", title_of(path), str(path.parent), str(path))
    session = Session(asked.logbook, iso_date(None).isoformat(), start=start, seed=asked.seed,
                      fault=asked.fault)  # fmt: skip
    return run_screens(session, asked.ascii)


def _list_faults() -> int:
    from runbook.rehearsal.faults import FAULTS

    for one in FAULTS:
        print(f"{one.name:<26}{one.words}; from: {one.begins}")
    return int(ExitCode.GOOD)


def _every_fault(path: Path, seed: int, as_json: bool) -> int:
    """Each fault in a rehearsal of its own; 1 where one went badly."""
    from runbook.rehearsal.faults import FAULTS
    from runbook.rehearsal.headless import rehearse

    told = []
    for one in FAULTS:
        outcome = asyncio.run(rehearse(path, seed, faults=[(one, 0.0)]))
        told.append(as_document(outcome))
        if not as_json:
            print("\n".join(_fault_lines(outcome)), flush=True)
    if as_json:
        print(json.dumps({"faults": told}, indent=2, allow_nan=False))
    return int(ExitCode.NOT_GOOD if any(t["fault"]["wrong"] for t in told) else ExitCode.GOOD)


def _fault_lines(outcome: Outcome) -> list[str]:
    story = outcome.fault
    if story is None:
        return []
    if story.began_s is None:
        return [f"{story.name}: its situation never came; {outcome.outcome}"]

    def at(seconds: float | None) -> str:
        return "never" if seconds is None else f"{seconds / 60.0:.0f} min"

    lines = [
        f"{story.name}: {outcome.outcome}; began {at(story.began_s)}, first noticed {at(story.noticed_s)}, "
        f"made safe {at(story.acted_s)}, highest {story.highest_after / 1e5:.1f} bar(a)"
    ]
    lines += [f"  said first: {story.said}"] if story.said else []
    return [*lines, *(f"  BADLY: {words}" for words in story.wrong)]


def _headless(path: Path, seed: int, as_json: bool, logbook: Path | None, fault: str) -> int:
    from runbook.rehearsal.faults import parse_fault
    from runbook.rehearsal.headless import rehearse

    chosen = [parse_fault(fault, seed)] if fault else []
    outcome = asyncio.run(rehearse(path, seed, _journal(path, logbook), faults=chosen))
    if as_json:
        print(json.dumps(as_document(outcome), indent=2, allow_nan=False))
    else:
        print(f"REHEARSAL of {path}, seed {seed}: {outcome.outcome}")
        if outcome.reason:
            print(f"  {outcome.reason}")
        print(f"  {outcome.steps_done} steps in {outcome.duration_s / 3600:.2f} h of simulated time")
        print(f"  highest pressure {outcome.highest_pressure / 1e5:.1f} bar(a), {outcome.events} events")
        print("\n".join(f"  {line}" for line in _fault_lines(outcome)), end="\n" if outcome.fault else "")
    return int(ExitCode.GOOD if outcome.outcome == "completed" else ExitCode.NOT_GOOD)


def as_document(outcome: Outcome) -> dict[str, Any]:
    """The documented keys."""
    found = asdict(outcome)
    return {
        "outcome": found["outcome"],
        "reason": found["reason"],
        "steps_done": found["steps_done"],
        "duration_s": found["duration_s"],
        "highest_pressure_Pa": found["highest_pressure"],
        "least_margin_Pa": found["least_margin"],
        "events": found["events"],
    } | ({} if outcome.fault is None else {"fault": _story(outcome.fault)})


def _story(story: FaultStory) -> dict[str, Any]:
    return {
        "name": story.name,
        "began_s": story.began_s,
        "noticed_s": story.noticed_s,
        "said": story.said,
        "acted_s": story.acted_s,
        "highest_after_Pa": story.highest_after,
        "wrong": list(story.wrong),
    }


def _journal(path: Path, folder: Path | None) -> Any:
    """Headless rehearsals keep a record only where they are told to: CI must not fill anybody's logbook."""
    if folder is None:
        return None
    from runbook.procedure.reader import read_procedure
    from runbook.run.clock import SystemClock
    from runbook.run.journal import Journal, JournalWriter
    from runbook.run.logbook import Logbook

    vessel = read_procedure(path).apparatus.tag
    target = Logbook(folder).new_run_path(vessel, SystemClock().now(), rehearsal=True)
    print(f"record: {target}", file=sys.stderr)
    return JournalWriter(Journal.create(target))
