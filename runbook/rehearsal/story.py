"""How a fault went: when it began, when the run first noticed, what it said first, when the operator made safe.

Told from what happened alone; whether that was good is judged here too, by rules that know nothing of the interlock.
"""

from __future__ import annotations

from dataclasses import dataclass, field

from runbook.answers import Effect, Phase, PlanLine
from runbook.run.clock import Moment
from runbook.run.events import Answered, Event, MadeSafe, ReadingTaken, TurnedBack, WentOn
from runbook.run.fault_account import make_safe_by, noticed
from runbook.run.ledger import Ledger
from runbook.run.reasons import NOT_YET, Code, Reason, Refused
from runbook.run.safe import make_safe
from runbook.run.sentences import reason_words


@dataclass
class Story:
    """Of one rehearsal with faults."""

    noticed_s: float | None = None
    """When the run first blocked, turned back, or said that gauge and model disagree [s]."""
    said: str = ""
    """What it said first."""
    acted_s: float | None = None
    """When make safe was begun [s]."""
    wrong: list[str] = field(default_factory=list)
    """What should not have happened, in words."""
    _disagrees: bool = False
    _make_safe_by: str = ""
    """Instrument whose last reading calls for make safe, by the author's own word."""

    def refused(self, ledger: Ledger, refused: Refused, now: Moment, began: float | None) -> None:
        """A wish that was refused."""
        if refused.kind == "blocked" and ledger.plan is not None:
            self._notice(now, began, reason_words(ledger.plan, ledger, refused.reasons[0]))

    def happened(self, before: Ledger, event: Event, now: Moment, began: float | None) -> None:
        """An event, with the ledger before it."""
        if isinstance(event, Answered):
            self._disagrees = event.answer.agreement.verdict == "disagrees"
        if isinstance(event, Answered | TurnedBack):
            if words := noticed(event):
                self._notice(now, began, words)
        elif isinstance(event, MadeSafe):
            self._made_safe(before, event, now)
        elif isinstance(event, ReadingTaken):
            if event.tag == self._make_safe_by:
                self._make_safe_by = ""
            if not event.in_range:
                self._outside(before, event, now, began)
        elif isinstance(event, WentOn) and before.plan is not None:
            self._went_on(before, before.plan.lines[event.to])

    def _went_on(self, before: Ledger, line: PlanLine) -> None:
        """Into a line that raises, against what had been read or without what it leans on."""
        if not _raises(line):
            return
        said = f"went on into step {line.number}, which raises,"
        if self._disagrees:
            self.wrong.append(f"{said} while gauge and model disagreed")
        if self._make_safe_by:
            self.wrong.append(f"{said} though {self._make_safe_by} had been read where the author says to make safe")
        missing = [need.tag for need in line.entry_needs if before.reading(need.tag) is None]
        if missing:
            self.wrong.append(f"{said} without a reading of {' and '.join(missing)}")

    def _outside(self, before: Ledger, event: ReadingTaken, now: Moment, began: float | None) -> None:
        """A reading outside what the author accepts, where the author's word for that is make safe."""
        need = None if before.plan is None else make_safe_by(before.plan, event)
        if need is not None and before.plan is not None:
            self._make_safe_by = event.tag
            said = Reason(NOT_YET, Code.READING_OUTSIDE, tag=event.tag, need=need, value=event.value)
            self._notice(now, began, reason_words(before.plan, before, said))

    def _made_safe(self, before: Ledger, event: MadeSafe, now: Moment) -> None:
        if self.acted_s is None:
            self.acted_s = now.boot
        if before.plan is None:
            return
        phase = Phase(event.phase)
        firsts = {make_safe(before.plan, phase, rest).acts[0] for rest in (False, True)}
        if event.acts and event.acts[0] not in firsts:
            self.wrong.append(f"make safe began with '{event.acts[0]}', not with the first act of phase {phase}")

    def _notice(self, now: Moment, began: float | None, words: str) -> None:
        if self.noticed_s is None and began is not None and now.boot >= began:
            self.noticed_s, self.said = now.boot, words


def _raises(line: PlanLine) -> bool:
    effects = [effect for _, effect in line.effects]
    return any(e in (Effect.RAISES, Effect.UNKNOWN) for e in effects) and Effect.LOWERS not in effects
