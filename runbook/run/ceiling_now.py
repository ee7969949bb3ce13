"""How far the vessel is from its ceiling, as data for the ruler: who reads nothing else reads the gap."""

from __future__ import annotations

from dataclasses import dataclass

from runbook.answers import Answer, Distance, Judgement, Margin, Plan
from runbook.run.gate import raises
from runbook.run.state import Ledger


@dataclass(frozen=True, slots=True)
class Ceiling:
    """The ruler of pressure; all pressures absolute [Pa], None where not known."""

    now: float | None
    """As read; where nothing was read, as computed."""
    now_U: float | None
    step_worst: float | None
    """Worst of the step the run stands in where that raises a hazard, else of the next, uncertainty included."""
    ceiling: float | None
    by: str
    """Tag of the limit that governs."""
    distance: Distance
    judgement: Judgement
    """Of the smallest pressure margin now; blocked where unknown."""


NOWHERE = Distance(None, None, None, None)


def ceiling(plan: Plan, ledger: Ledger) -> Ceiling:
    """Of the vessel as it stands; with nothing computed the plan's ceiling and nothing else."""
    answer = ledger.answer
    if answer is None:
        return Ceiling(None, None, None, plan.ceiling, plan.ceiling_by, NOWHERE, Judgement.BLOCKED)
    pressures = [m for m in answer.now if m.kind == "pressure"]
    lowest = min((m for m in pressures if m.allowed is not None), key=lambda m: m.allowed or 0.0, default=None)
    agreement = answer.agreement
    was_read = agreement.read is not None
    return Ceiling(
        now=agreement.read if was_read else answer.pressure,
        now_U=agreement.read_U if was_read else answer.pressure_U,
        step_worst=_worst(_step(ledger, answer)),
        ceiling=plan.ceiling if lowest is None else lowest.allowed,
        by=plan.ceiling_by if lowest is None else lowest.limit,
        distance=answer.distance,
        judgement=_judgement(pressures),
    )


def _step(ledger: Ledger, answer: Answer) -> tuple[Margin, ...]:
    line = ledger.present
    return line.ahead if line is not None and raises(line) and line.ahead else answer.ahead


def _worst(ahead: tuple[Margin, ...]) -> float | None:
    found = [m.worst for m in ahead if m.kind == "pressure"]
    known = [w for w in found if w is not None]
    return max(known) if known and len(known) == len(found) else None


def _judgement(pressures: list[Margin]) -> Judgement:
    if any(m.judgement is Judgement.BLOCKED for m in pressures):
        return Judgement.BLOCKED
    if not pressures:
        return Judgement.CLEAR
    return Judgement.NARROW if any(m.judgement is Judgement.NARROW for m in pressures) else Judgement.CLEAR
