"""The writing rules: what can be found wrong with a procedure without any physics.

Each finding stands at its place in the procedure file, under the readable name of its rule.
"""

from __future__ import annotations

from runbook.errors import Problem
from runbook.procedure.reader import Loaded


def findings(loaded: Loaded) -> tuple[Problem, ...]:
    """Everything the rules find, in file order."""
    del loaded
    return ()
