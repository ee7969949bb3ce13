"""An act of a person on its way to the run, and what to say when it does not happen."""

from __future__ import annotations

from runbook.run.acts import Act
from runbook.run.conductor import Conductor
from runbook.run.reasons import Refused
from runbook.run.sentences import reasons_words


async def do(desk: Conductor, act: Act) -> str:
    """Empty where it happened; else why not and what would clear it, in sentences."""
    done = await desk.act(act)
    if isinstance(done, Refused):
        said = [words for pair in reasons_words(desk.plan, desk.ledger, done.reasons) for words in pair if words]
        return " ".join(dict.fromkeys(said))
    if done is None:
        return desk.ledger.halted or "Nothing had to be done."
    return ""
