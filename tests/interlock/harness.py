"""Engine and model side by side through one random run; every step is compared.

The run is a list of moves that can be played again, so that a disagreement is brought down to the few moves it
needs before a person reads it. It refuses to decide which of the two is right.
"""

from __future__ import annotations

from collections import Counter
from dataclasses import dataclass
from random import Random

from runbook.answers import Answer, Question, Unanswered
from runbook.run import acts
from runbook.run.clock import FakeClock
from runbook.run.decide import Refused, decide
from runbook.run.events import (
    Answered,
    Event,
    GapOpened,
    Halted,
    MadeSafe,
    NoAnswer,
    QuickConfirmed,
    ReadingTaken,
    RunClosed,
    RunOpened,
    Signed,
    TakenUp,
    WentOn,
)
from runbook.run.ledger import Ledger, fold
from runbook.run.questions import question
from tests.interlock.away import late, phase
from tests.interlock.model import Facts, Model
from tests.interlock.operators import next_step
from tests.interlock.past import lowers, raises
from tests.interlock.plans import random_answer, random_opening
from tests.interlock.unsafe import number_fits, unsafe


@dataclass(frozen=True)
class Outside:
    """A move that no person makes: time, clocks, the child, the disk."""

    what: str
    """'pass', 'jump', 'restart', 'answer', 'late answer', 'lose', 'gap' or 'halt'."""
    seconds: float = 0.0


Move = Outside | acts.Act


class Disagreement(AssertionError):
    """Engine and model differ, or something unsafe was let through."""


class Run:
    """One run, as the engine and as the model see it."""

    def __init__(self, seed: int, tally: Counter[str] | None = None) -> None:
        """Open the run of this seed."""
        self.seed = seed
        self.tally: Counter[str] = Counter() if tally is None else tally
        self.clock = FakeClock()
        self.opened: RunOpened = random_opening(Random(seed))
        self.plan = self.opened.plan
        self.model = Model(self.opened, self.clock.now())
        self.ledger: Ledger = fold(Ledger.start(), self.opened, self.clock.now())
        self.keys: list[str] = []
        self.facts: Facts | None = None
        self._compare()

    # Moves.

    def do(self, move: Move) -> None:
        """Make one move; Disagreement where the two differ."""
        if isinstance(move, Outside):
            self._outside(move)
        else:
            self._act(move)

    def _outside(self, move: Outside) -> None:
        key = self.keys[-1]
        match move.what:
            case "pass":
                self.clock.advance(move.seconds)
            case "jump":
                self.clock.jump_wall(move.seconds)
            case "restart":
                self.clock.restart(move.seconds)
            case "answer":
                self._happens(Answered(random_answer(self.seed, key)))
            case "late answer":
                self._happens(Answered(random_answer(self.seed, self.keys[len(self.keys) // 2])))
            case "lose":
                self._happens(NoAnswer(Unanswered(key, "lost")))
            case "gap":
                self._happens(GapOpened("lost child"))
            case "halt":
                self._happens(Halted("disk full"))

    def _act(self, act: acts.Act) -> None:
        now, answer = self.clock.now(), self.answer()
        permitted, why = self.model.permits(act, now, answer)
        result = decide(self.plan, self.ledger, now, act)
        event = None if isinstance(result, Refused) else result
        self.tally[f"{type(act).__name__} {'yes' if permitted else 'no: ' + why}"] += 1
        if (event is not None) != permitted:
            raise Disagreement(f"{act}: engine {result}, model {(permitted, why)}")
        if event is None:
            return
        self._count(event, answer)
        wrong = unsafe(self.model.past, event, now, answer) or self._unlike(act, event)
        if wrong:
            raise Disagreement(f"{act} -> {event}: {wrong}")
        self._happens(event)

    def _count(self, event: Event, answer: Answer | None) -> None:
        self.tally[type(event).__name__] += 1
        if not isinstance(event, WentOn | TakenUp):
            return
        line = self.plan.lines[event.to if isinstance(event, WentOn) else event.line]
        self.tally["containment opened"] += line.opens_containment
        at_rest = answer is not None and answer.left_alone.at_rest
        if raises(line):
            self.tally["gentler way" if lowers(line) and not at_rest else "through the gate"] += 1

    def _unlike(self, act: acts.Act, event: Event) -> str | None:
        """What the event says that the model says otherwise."""
        now, past = self.clock.now(), self.model.past
        match event:
            case ReadingTaken() if isinstance(act, acts.Read):
                same = (act.tag, act.value, act.by, act.blind) == (event.tag, event.value, event.by, event.blind)
                if not same or event.line != past.index():
                    return "another reading than was entered"
                inside = past.accepted(act.tag, act.value)
                return None if event.in_range == inside else f"model: in_range {inside}"
            case QuickConfirmed():
                return None if event.late == late(past, now) else f"model: late {not event.late}"
            case MadeSafe():
                worst = phase(past, event.seen, self.answer())
                return None if event.phase == worst and event.acts else f"model: phase {worst}"
            case Signed() if isinstance(act, acts.Sign):
                return None if number_fits(past, act.by, act.number) else "signed with a wrong number"
            case RunClosed():
                outcome = "made safe" if past.made_safe() else "completed"
                return None if event.outcome == outcome else f"model: {outcome}"
        if isinstance(act, acts.Tick):
            brought, wanted = type(event).__name__, self.model.tick(now, self.answer())
            return None if brought == wanted else f"model: {wanted}"
        return None

    def _happens(self, event: Event) -> None:
        now = self.clock.now()
        self.ledger = fold(self.ledger, event, now)
        self.model.happened(event, now)
        self._compare()

    # Comparison.

    def asked(self) -> Question | None:
        """The engine's question."""
        return question(self.plan, self.ledger)

    def answer(self) -> Answer | None:
        """The known answer to the current question, looked up in the list of events."""
        return self.model.past.answer(self.keys[-1])

    def _compare(self) -> None:
        asked = self.asked()
        if asked is not None:
            engine = Facts(asked.line, asked.to, asked.closed, asked.valves, asked.source)
            if engine != self.model.facts():
                raise Disagreement(f"facts: engine {engine}, model {self.model.facts()}")
        self._compare_key(asked.key if asked is not None else "")
        self.model.question_is(self.keys[-1], self.clock.now())
        if not self.model.past.closed():
            for seen in ("", "relief", "window", "fire"):
                safe = decide(self.plan, self.ledger, self.clock.now(), acts.MakeSafe(seen))
                if not isinstance(safe, MadeSafe):
                    raise Disagreement(f"make safe is refused: {safe}")

    def _compare_key(self, key: str) -> None:
        """The key changes with every fact and with every reading, and with nothing else."""
        event, facts = self.model.past.events[-1][0], self.model.facts()
        changed = self.facts is not None and facts != self.facts
        same = self.keys and key == self.keys[-1]
        # A closed run asks nothing: its key is empty and stays so.
        if key and same and (changed or isinstance(event, ReadingTaken)):
            raise Disagreement(f"the key stayed after {event}")
        if self.keys and not same and not changed and not isinstance(event, ReadingTaken | GapOpened | RunClosed):
            raise Disagreement(f"the key changed after {event}")
        self.keys.append(key)
        self.facts = facts


def random_moves(r: Random, run: Run) -> list[Move]:
    """What happens next: the world first, then the person."""
    moves: list[Move] = []
    if run.answer() is None and r.random() < 0.6:
        moves.append(Outside("answer"))
    chance = r.random()
    for share, move in (
        (0.012, Outside("jump", r.choice((-3600.0, -10.0, -3.0, 3.0, 10.0, 3600.0)))),
        (0.006, Outside("restart", r.choice((1.0, 60.0, 5000.0)))),
        (0.02, Outside("lose")),
        (0.012, Outside("late answer")),
        (0.02, Outside("gap")),
        (0.003, Outside("halt")),
        (0.06, Outside("pass", r.uniform(100.0, 1000.0))),
        (0.15, Outside("pass", r.uniform(10.0, 100.0))),
    ):
        chance -= share
        if chance < 0.0:
            moves.append(move)
            break
    else:
        moves.append(Outside("pass", r.choice((0.0, 1.0, 3.0, r.uniform(0.0, 10.0)))))
    return moves


def explore(seed: int, tally: Counter[str] | None = None) -> tuple[list[Move], Disagreement | None]:
    """One random run of 20 to 40 acts: its moves, and the disagreement it ended in, if it did."""
    r = Random(f"moves {seed}")
    moves: list[Move] = []
    try:
        run = Run(seed, tally)
        for _ in range(r.randint(20, 40)):
            for move in random_moves(r, run):
                moves.append(move)
                run.do(move)
            wait, act = next_step(r, run.model, run.clock.now())
            for step in (Outside("pass", wait), act):
                moves.append(step)
                run.do(step)
            if run.model.past.closed() and r.random() < 0.5:
                break
    except Disagreement as found:
        return moves, found
    return moves, None


def play(seed: int, tally: Counter[str] | None = None) -> None:
    """One random run; AssertionError with the fewest moves that show a disagreement."""
    moves, found = explore(seed, tally)
    if found is not None:
        shortest, last = shrink(seed, moves, found)
        shown = "\n".join(f"  {move}" for move in shortest)
        raise AssertionError(f"seed {seed}: {last}\nmoves:\n{shown}")


def shrink(seed: int, moves: list[Move], found: Disagreement) -> tuple[list[Move], Disagreement]:
    """Leave out moves one by one for as long as the two still differ."""
    shorter = True
    while shorter:
        shorter = False
        for i in range(len(moves) - 1, -1, -1):
            without = moves[:i] + moves[i + 1 :]
            again = replay(seed, without)
            if again is not None:
                moves, found, shorter = without, again, True
    return moves, found


def replay(seed: int, moves: list[Move]) -> Disagreement | None:
    """Play these moves; the disagreement they lead to, if they do."""
    try:
        run = Run(seed)
        for move in moves:
            run.do(move)
    except Disagreement as found:
        return found
    return None
