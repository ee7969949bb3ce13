"""The card that is printed when the tool is left: what to do at the bench without it."""

from __future__ import annotations

from runbook.run.conductor import Conductor
from runbook.run.sentences import left_alone_verdict, left_alone_words, phase_words


def card_lines(desk: Conductor) -> tuple[str, ...]:
    """Acts of make safe, what never to do, what happens left alone; plain text."""
    standing, plan = desk.standing(), desk.plan
    safe = standing.safe
    acts = [f"  {i + 1}. {'(done) ' if i in safe.done else ''}{act}" for i, act in enumerate(safe.acts)]
    return (
        f"{'REHEARSAL. ' if standing.rehearsal else ''}THE RUN IS UNFINISHED: {plan.procedure}, vessel {plan.vessel}",
        f"To make safe ({phase_words(safe.phase)}):",
        *acts,
        f"  {safe.never}",
        f"Left alone: {left_alone_verdict(standing.left_alone, '').strip()}",
        f"  {left_alone_words(plan, standing.left_alone)}",
        "Take the run up again with: runbook",
    )
