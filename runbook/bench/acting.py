"""An act of a person on its way to the run, and what to say when it does not happen."""

from __future__ import annotations

from runbook.run.acts import Act
from runbook.run.conductor import Conductor
from runbook.run.reasons import Refused
from runbook.run.sentences import reason_words


async def do(desk: Conductor, act: Act) -> str:
    """Empty where it happened; else why not, in sentences."""
    done = await desk.act(act)
    if isinstance(done, Refused):
        return " ".join(reason_words(desk.plan, desk.ledger, reason) for reason in done.reasons)
    if done is None:
        return desk.ledger.halted or "Nothing had to be done."
    return ""
