"""The writing rules: what can be found wrong with a procedure without any physics.

Each finding stands at its place in the procedure file, under the readable name of its rule. What is wrong with
the apparatus file by itself has been refused when it was read.
"""

from __future__ import annotations

from collections.abc import Callable, Iterator
from typing import Final

from runbook.apparatus.model import Apparatus
from runbook.errors import Problem
from runbook.procedure.document import Place, Route, located, split_lines
from runbook.procedure.lines import Found
from runbook.procedure.model import Procedure
from runbook.procedure.reader import Loaded
from runbook.procedure.rules_guard import guards
from runbook.procedure.rules_held import held_by_hand
from runbook.procedure.rules_order import no_relief, order
from runbook.procedure.rules_people import holds, roles
from runbook.procedure.rules_readings import readings
from runbook.procedure.rules_tags import unknown_tags
from runbook.procedure.rules_text import messages, wording
from runbook.procedure.rules_vessel import heating, protection
from runbook.procedure.several import whole

Rule = Callable[[Procedure, Apparatus], Iterator[Found]]

RULES: Final[tuple[Rule, ...]] = (
    unknown_tags,
    roles,
    holds,
    order,
    no_relief,
    guards,
    held_by_hand,
    readings,
    wording,
    messages,
    protection,
    heating,
)
"""Every rule; each may find things under several names."""


def findings(loaded: Loaded) -> tuple[Problem, ...]:
    """Everything the rules find, in file order; of one place and rule only once."""
    lines = split_lines(loaded.procedure_text)
    kept: dict[tuple[Place, str, str], Problem] = {}
    for rule in RULES:
        for found in rule(loaded.procedure, whole(loaded.apparatus)):
            at = _place(loaded, found.route)
            problem = located(loaded.procedure_file, lines, at, found.message, found.rule, found.severity)
            kept.setdefault((at, found.rule, found.message), problem)
    return tuple(sorted(kept.values(), key=lambda p: (p.line, p.column)))


def _place(loaded: Loaded, route: Route) -> Place:
    """Of the value at a route, else of the nearest value around it."""
    for end in range(len(route), -1, -1):
        if route[:end] in loaded.positions:
            return loaded.positions[route[:end]]
    return (1, 1)
