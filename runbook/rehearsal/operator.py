"""The ideal operator: does what the run asks, when it asks, and reads what the simulated instruments show.

It has no knowledge of its own: it goes through the same door as a person, and where the door stays shut it
stops and says so. The second person is played.
"""

from __future__ import annotations

from dataclasses import dataclass

from runbook.answers import LineKind, Need, PlanLine
from runbook.assess.walk import Walked
from runbook.procedure.model import DoStep, LetDownTo, LetRiseTo, QuickStep
from runbook.rehearsal.arriving import arrived, let_down, risen
from runbook.rehearsal.world import World
from runbook.run.acts import (
    Act,
    Attend,
    Finish,
    GapAnswers,
    GoOn,
    MakeSafe,
    Prove,
    QuickDone,
    Read,
    SafeActDone,
    SetValve,
    Sign,
)
from runbook.run.conductor import Conductor
from runbook.run.opening import Participant
from runbook.run.signing import readings_missing
from runbook.run.state import Taken
from runbook.run.typed import typed_value, understand

_WATCHING_S = 1.0
"""Between two looks of somebody who keeps a vent shut by hand [s]."""
_MOMENT_S = 5.0
"""Between the last act of a quick sequence and the reading after it [s]."""
_AGAIN_S = 60.0
"""After which a reading that has not changed is taken again where the next line is blocked [s]."""
PROOFS = ("vent", "wall", "low gauge", "left open")


@dataclass(frozen=True, slots=True)
class Wish:
    """What the operator wants next."""

    act: Act | None
    """None: wait."""
    wait_s: float = 0.0
    """How long before looking again [s]."""


def _outside(need: Need, shown: float) -> bool:
    """What a dial shows [SI] lies outside what the author accepts."""
    return (need.low is not None and shown < need.low) or (need.high is not None and shown > need.high)


class Operator:
    """Decides from what stands on the screen what to do next."""

    def __init__(self, conductor: Conductor, world: World, lines: tuple[Walked, ...], who: tuple[Participant, ...]):
        self._conductor, self._world, self._lines = conductor, world, lines
        self._who = who
        self.look_again = False
        """The next line was blocked: what it leans on is read anew before it is asked for again."""

    def next(self) -> Wish:
        """The next act, or how long to wait."""
        ledger = self._conductor.ledger
        if ledger.gap_open:
            names = tuple(p.name for p in self._there)
            return Wish(GapAnswers(ledger.source, self._vent_position(), "no", names))
        if ledger.safe is not None:
            undone = [i for i in range(len(ledger.safe.acts)) if i not in ledger.safe_done]
            return Wish(SafeActDone(undone[0]) if undone else Finish())
        line = ledger.present
        if ledger.entry.turned_back is not None:
            return Wish(MakeSafe())
        if line is None:
            return Wish(self._needed() or GoOn())
        wish = self._in_line(line)
        if wish is not None:
            return wish
        if ledger.line >= len(self._conductor.plan.lines) - 1:
            return Wish(Finish())
        return Wish(self._needed() or GoOn())

    def _in_line(self, line: PlanLine) -> Wish | None:
        """What the line still asks for; None: nothing."""
        if line.kind is LineKind.QUICK:
            return self._quick(line)
        if line.kind is LineKind.HOLD:
            return self._hold(line)
        if line.kind is LineKind.WITNESS:
            came = self._conductor.ledger.entry.witness
            called = self._participant(line.witness.called if line.witness else "")
            if not came and called not in self._there:
                return Wish(None, 30.0)
            return None if came else Wish(Attend(called.name))
        if line.kind is LineKind.EMPTY:
            return self._empty(line)
        if not self._arrived():
            due = self._due(line)
            return Wish(due) if due is not None else Wish(None, 20.0)
        return self._asked(line.reads)

    def _arrived(self) -> bool:
        """The act has taken its time, and the path of the line has come to its end, by the instruments."""
        step, entry = self._lines[self._conductor.ledger.line].step, self._conductor.ledger.entry
        takes = step.takes.value if isinstance(step, DoStep) and step.takes is not None else 0.0
        if self._conductor.clock.now().age(entry.at) < takes:
            return False
        return arrived(self._world, self._conductor.plan, self._lines[self._conductor.ledger.line])

    def _due(self, line: PlanLine) -> Act | None:
        """A reading that is asked again and again while the line lasts, shortly before it is overdue."""
        now = self._conductor.clock.now()
        good = self._conductor.ledger.last_answer.good_for_s if self._conductor.ledger.last_answer else None
        for need in line.reads:
            if need.every_s is None:
                continue
            longest = min(x for x in (need.every_s, need.fresh_s, good) if x is not None)
            taken = self._conductor.ledger.in_entry(need.tag)
            since = taken[-1].at if taken else self._conductor.ledger.entry.at
            if now.age(since) >= 0.5 * longest:
                return self._read(need.tag, line.who)
        return None

    def _asked(self, needs: tuple[Need, ...]) -> Wish | None:
        """Readings at the end of a line, each once, taken when they would be accepted."""
        ledger = self._conductor.ledger
        now = self._conductor.clock.now()
        for need in needs:
            taken = ledger.in_entry(need.tag)
            fresh = min(need.fresh_s, need.every_s or need.fresh_s)
            if taken and taken[-1].event.in_range and now.age(taken[-1].at) < 0.8 * fresh:
                continue
            shown = self._world.read(need.tag)
            if shown is None:
                return Wish(None, 60.0)
            if _outside(need, shown):
                return self._author_says(need, taken, None) or Wish(None, 60.0)
            return Wish(self._read(need.tag, None))
        return None

    def _author_says(self, need: Need, taken: tuple[Taken, ...], role: str | None) -> Wish | None:
        """Where the author says to make safe outside the range: it is read so, and done. None: it is waited for."""
        if not need.if_not.lower().startswith("make safe"):
            return None
        if taken and not taken[-1].event.in_range:
            return Wish(MakeSafe())
        return Wish(self._read(need.tag, role, blind=role is not None))

    def _needed(self) -> Act | None:
        """A reading that the next line leans on and that is missing or old."""
        ledger, plan = self._conductor.ledger, self._conductor.plan
        if ledger.line + 1 >= len(plan.lines):
            return None
        now = self._conductor.clock.now()
        good = ledger.answer.good_for_s if ledger.answer is not None else None
        again, self.look_again = self.look_again, False
        for need in plan.lines[ledger.line + 1].entry_needs:
            shown = self._world.read(need.tag)
            last = ledger.reading(need.tag)
            # The same value again is a new reading too: what was lost meanwhile is asked anew.
            changed = last is None or shown != last.event.value or now.age(last.at) > _AGAIN_S
            if again and shown is not None and changed:
                return self._read(need.tag, None)
            taken = ledger.reading(need.tag)
            longest = need.fresh_s if good is None else min(need.fresh_s, good)
            if taken is None or now.age(taken.at) > 0.5 * longest:
                return self._read(need.tag, None)
        return None

    def _quick(self, line: PlanLine) -> Wish | None:
        done = len(self._conductor.ledger.entry.quick)
        if done < len(line.quick):
            low, high = self._conductor.plan.planned_kg
            scale = next((i.tag for i in self._conductor.plan.instruments if i.reads == "mass"), None)
            shown = None if scale is None else self._world.read(scale)
            if line.quick[done].seals and shown is not None and shown > 0.5 * (low + high):
                return Wish(None, 5.0)
            return Wish(QuickDone(done)) if self._risen(line, done) else Wish(None, _WATCHING_S)
        last = self._conductor.ledger.entry.quick[-1].at
        if line.read_after and self._conductor.clock.now().age(last) < _MOMENT_S:
            # What was done last has to have happened before it is read.
            return Wish(None, _MOMENT_S)
        return self._asked(line.read_after)

    def _risen(self, line: PlanLine, item: int) -> bool:
        """Where a hand waits for a level on a gauge: it shows it, the sight has come, or the time is over."""
        step = self._lines[self._conductor.ledger.line].step
        path = step.quick[item].path if isinstance(step, QuickStep) else None
        before = step.quick[item - 1].path if isinstance(step, QuickStep) and item > 0 else None
        if isinstance(before, LetDownTo) and not let_down(self._world, self._conductor.plan, before):
            return self._late(line, item)
        if not isinstance(path, LetRiseTo):
            return True
        if risen(self._world, path, self._conductor.plan.barometer):
            return True
        return self._late(line, item)

    def _late(self, line: PlanLine, item: int) -> bool:
        """The time of a quick act is all but over."""
        entry = self._conductor.ledger.entry
        since = entry.quick[-1].at if entry.quick else entry.at
        return self._conductor.clock.now().age(since) >= line.quick[item].latest_s - 2.0 * _WATCHING_S

    def _hold(self, line: PlanLine) -> Wish | None:
        ledger = self._conductor.ledger
        if ledger.entry.signed_by or line.hold is None:
            return None
        signer = self._participant(line.hold.signed_by)
        if signer not in self._there:
            # Nobody to sign: a hold stands where the vessel is at rest, so one waits.
            return Wish(None, 60.0)
        need = line.hold.read
        if need is not None:
            others = [
                t for t in (*ledger.before, *ledger.here) if t.event.tag == need.tag and t.event.by != signer.name
            ]
            shown = self._world.read(need.tag)
            if shown is None:
                return Wish(None, 20.0)
            if _outside(need, shown):
                taken = ledger.in_entry(need.tag)
                return self._author_says(need, taken, line.hold.signed_by) or Wish(None, 20.0)
            own = [t for t in ledger.in_entry(need.tag) if t.event.by == signer.name and t.event.blind]
            if not [t for t in others if t.event.in_range]:
                return Wish(self._read(need.tag, None))
            if not own or not own[-1].event.in_range:
                return Wish(self._read(need.tag, line.hold.signed_by, blind=True))
            if readings_missing(self._conductor.plan, ledger, signer.name):
                return Wish(self._read(need.tag, None))
        return Wish(Sign(signer.name, signer.number))

    def _empty(self, line: PlanLine) -> Wish | None:
        entry, empty = self._conductor.ledger.entry, line.empty
        done = {name for name, _ in entry.proofs}
        left = [p for p in PROOFS if p not in done]
        if not left or empty is None:
            return None
        position = self._conductor.ledger.position
        if left[0] == "vent":
            return Wish(Prove("vent") if position(empty.vent) == "open" else SetValve(empty.vent, "open"))
        if left[0] == "wall":
            return self._watched(empty.wall, Prove("wall"))
        if left[0] == "low gauge":
            if empty.isolator and position(empty.isolator) != "open":
                return Wish(SetValve(empty.isolator, "open"))
            if position(empty.vent) != "shut":
                return Wish(SetValve(empty.vent, "shut"))
            return self._watched(empty.low_gauge, Prove("low gauge"))
        return Wish(Prove("left open") if position(empty.vent) == "open" else SetValve(empty.vent, "open"))

    def _watched(self, tag: str, proof: Prove) -> Wish:
        """Read every minute until the proof can be made."""
        taken = self._conductor.ledger.in_entry(tag)
        now = self._conductor.clock.now()
        if not taken or now.age(taken[-1].at) >= 60.0:
            return Wish(self._read(tag, None))
        return Wish(proof, 20.0)

    def _read(self, tag: str, role: str | None, blind: bool = False) -> Act | None:
        shown = self._world.read(tag)
        if shown is None:
            return None
        plan = self._conductor.plan
        one = next(i for i in plan.instruments if i.tag == tag)
        text = typed_value(shown, one, plan)
        typed = understand(text, one, plan)
        if isinstance(typed, str):
            return None
        return Read(tag, typed.value, text, typed.echo, self._person(role or plan.roles[0]), blind)

    @property
    def _there(self) -> tuple[Participant, ...]:
        """Who is in the room."""
        return self._who[:1] if self._world.troubles.alone else self._who

    def _person(self, role: str) -> str:
        return self._participant(role).name

    def _participant(self, role: str) -> Participant:
        return next((p for p in self._who if role in p.roles), self._who[0])

    def _vent_position(self) -> str:
        tag = self._conductor.plan.let_down_valve
        return "do not know" if tag is None else self._conductor.ledger.position(tag)
