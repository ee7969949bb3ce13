"""What a run needs, brought in after the first screen in slices short enough that keys do not notice.

Loading everything at once stands the screen still for a third of a second. A thread would not help: an import
holds the interpreter. So one module is imported at a turn, the deepest first, and the loop gets a turn in between.
"""

from __future__ import annotations

import asyncio
import gc
from collections.abc import Callable
from importlib import import_module
from typing import Final

ENGINE: Final = (
    "pydantic.version",
    "pydantic_core.core_schema",
    "pydantic.main",
    "pydantic.type_adapter",
    "pydantic.dataclasses",
    "runbook.answers.lines",
    "runbook.answers.explanation",
    "runbook.answers.plan",
    "runbook.answers",
    "runbook.run.engine",
)
"""As far as the client of the computing process."""
RUN: Final = (
    "runbook.quantities",
    "runbook.apparatus.base",
    "runbook.apparatus.parts",
    "runbook.apparatus.model",
    "runbook.run.acts",
    "runbook.run.events",
    "runbook.run.journal",
    "runbook.run.logbook",
    "runbook.run.state",
    "runbook.run.ledger",
    "runbook.run.gate",
    "runbook.run.decide",
    "runbook.run.standing",
    "runbook.run.sentences",
    "runbook.run.conductor",
    "runbook.run.opening",
    "runbook.run.record",
    "yaml",
    "runbook.procedure.yaml_text",
    "runbook.procedure.model",
    "runbook.procedure.reader",
    "runbook.drawing",
    "runbook.bench.view",
    "runbook.bench.bands",
    "runbook.bench.viewing",
    "runbook.bench.run_place",
    "runbook.bench.screens.gap",
    "runbook.bench.screens.quick",
    "runbook.bench.screens.safe",
    "runbook.bench.screens.run",
    "runbook.bench.screens.briefing",
    "runbook.bench.course",
)
"""The rest of a run, as far as its last screen."""
TURN_S: Final = 0.001
"""[s] between two slices."""
KEY_S: Final = 0.03
"""[s] between two slices while somebody types: from the terminal to the screen a key needs many turns of the loop."""


async def load(names: tuple[str, ...], typing: Callable[[], bool]) -> None:
    """Import these modules, one at a turn of the loop, and more slowly while somebody types."""
    for name in names:
        import_module(name)
        # What is loaded stays: the collector need not walk through it again while somebody types.
        gc.freeze()
        await asyncio.sleep(TURN_S)
        if typing():
            await asyncio.sleep(KEY_S)
