"""The simulated vessel in a process of its own, for the screens: they must never load the property library.

One JSON line in, one out, until standard input ends. It keeps no time of its own: each look says what moment it
is and what the run says has been done, and is answered with what every dial shows.
"""

from __future__ import annotations

import json
import sys
from collections.abc import Callable
from dataclasses import replace
from datetime import date
from pathlib import Path
from typing import Any

from runbook.answers.request import BindRequest
from runbook.assess.bind import plan_of_all
from runbook.assess.child import opened, serve_standard
from runbook.codec import from_plain
from runbook.errors import RunbookError
from runbook.procedure.reader import read_procedure
from runbook.rehearsal.bath import world_of
from runbook.rehearsal.faults import Trouble, Troubles, parse_fault
from runbook.rehearsal.world import World
from runbook.run.clock import Moment
from runbook.run.state import Ledger, Stated


def open_world(asked: dict[str, Any]) -> World:
    """The world of a request, a seed and a moment. Raises RunbookError."""
    request = from_plain(BindRequest, asked["request"])
    loaded = read_procedure(Path(request.procedure_path))
    scenes = opened(loaded, request)
    plan = plan_of_all(loaded, scenes, date.fromisoformat(request.on), request.part)
    return world_of(scenes, plan, int(asked["seed"]), Moment(float(asked["boot"]), 0.0), request.part, Troubles())


def look(world: World, asked: dict[str, Any]) -> dict[str, Any]:
    """Let the time since the last look pass, do what has been done: what every dial shows [SI], and what is seen.

    With it the faults that have begun since, and what people and computers feel of them.
    """
    troubles = world.troubles
    # A fault drawn at random was drawn by who asks, so that a new process is told the same.
    troubles.all += [Trouble(*parse_fault(str(text), 0)) for text in asked["faults"][len(troubles.all) :]]
    world.move_to(Moment(float(asked["boot"]), 0.0))
    world.follow(
        replace(
            Ledger.start(),
            line=int(asked["line"]),
            source=str(asked["source"]),
            stated={str(tag): Stated(str(position), 0, 0) for tag, position in asked["valves"]},
        )
    )
    world.move_to(Moment(float(asked["boot"]), 0.0))
    shown = {str(tag): world.read(str(tag)) for tag in asked["tags"]}
    return {
        "shown": {tag: value for tag, value in shown.items() if value is not None},
        "seen": world.seen,
        "news": troubles.news(),
        "alone": troubles.alone,
        "lost": troubles.lost(float(asked["boot"])),
    }


def serve(lines_in: Callable[[], str], line_out: Callable[[str], None]) -> None:
    """Answer until the input ends."""
    world: World | None = None
    while line := lines_in():
        asked = json.loads(line)
        try:
            if "request" in asked:
                world = open_world(asked)
                line_out(json.dumps({"ready": True}))
            elif world is None:
                line_out(json.dumps({"why": "no vessel is there yet"}))
            else:
                line_out(json.dumps(look(world, asked), allow_nan=False))
        except RunbookError as error:
            # Where the models end the dials cannot be said; the rehearsal goes on without them.
            line_out(json.dumps({"why": str(error)}))


if __name__ == "__main__":
    sys.exit(serve_standard(serve))
