"""Hold points, witness points and the four proofs of empty, judged from the list of what has happened.

Part of the second interlock (model.py), apart from it only for length; it refuses to remember anything.
"""

from __future__ import annotations

import math
from hashlib import sha256

from runbook.answers import Empty, LineKind
from runbook.run.clock import Moment
from runbook.run.events import Event, NotAttended, Proved, ReadingTaken, Signed, TakenUp, WentOn, WitnessCame
from tests.interlock.past import Past

PROOFS = ("vent", "wall", "low gauge", "left open")
COLDEST_WALL = 233.15
"""[K]"""
LARGEST_RISE = 1.0e4
"""[Pa]"""


def count(past: Past, *kinds: type[Event]) -> int:
    """How many such events the present entry of the line has seen."""
    return sum(isinstance(event, kinds) for event, _ in past.in_entry())


def may_sign(past: Past, by: str, number: str) -> tuple[bool, str]:
    """Only the named role, with that person's own number, never who performed what is signed for."""
    line, person = past.line(), past.person(by)
    if line is None or line.kind is not LineKind.HOLD or line.hold is None or count(past, Signed):
        return False, "no hold point"
    if person is None or line.hold.signed_by not in person.roles:
        return False, "role"
    if sha256(f"{by}:{number}".encode()).hexdigest() != person.number_sha256:
        return False, "number"
    if any(role in person.roles for role in performed(past, past.index())):
        return False, "performer"
    if line.hold.read is not None and not _measured(past, line.hold.read.tag, by):
        return False, "measuring"
    return True, ""


def performed(past: Past, hold: int) -> set[str]:
    """Roles that performed the lines a hold point stands over: back to the one before, a stop, or the part."""
    roles: set[str] = set()
    for i in range(hold - 1, past.plan.parts[past.plan.lines[hold].part].first - 1, -1):
        line = past.plan.lines[i]
        if line.kind in (LineKind.HOLD, LineKind.PARKED):
            break
        if line.who is not None:
            roles.add(line.who)
        elif line.kind is LineKind.QUICK:
            roles.add(past.plan.roles[0])
    return roles


def _measured(past: Past, tag: str, signer: str) -> bool:
    """The signer's own blind reading against another person's, or a third that stands with one of them.

    The third is the last reading of all: one that contradicts everything puts the question open again.
    """
    entry, here = past.entry(), past.index()
    counts = [(n, r) for n, r, _ in past.readings(tag) if n > entry or r.line == here - 1]
    own = [(n, r) for n, r in counts if r.by == signer and r.blind and n > entry]
    others = [(n, r) for n, r in counts if r.by != signer]
    if not own or not others or not own[-1][1].in_range:
        return False
    mine, other = own[-1], others[-1]
    if other[1].in_range and _agree(mine[1], other[1]):
        return True
    last, third = counts[-1]
    before = [r for n, r in others if n < last]
    if last <= mine[0] or not before or not before[-1].in_range or not third.in_range:
        return False
    return _agree(third, mine[1]) or _agree(third, before[-1])


def _agree(one: ReadingTaken, other: ReadingTaken) -> bool:
    return abs(one.value - other.value) <= math.hypot(one.U, other.U)


def may_attend(past: Past, by: str) -> tuple[bool, str]:
    """A person of the called role, once."""
    line, person = past.line(), past.person(by)
    if line is None or line.witness is None or line.kind is not LineKind.WITNESS:
        return False, "no witness point"
    known = person is not None and line.witness.called in person.roles
    return known and not count(past, WitnessCame), "witness"


def witness_overdue(past: Past, now: Moment) -> bool:
    """The wait has passed and nothing was written about it yet."""
    line = past.line()
    if line is None or line.witness is None or count(past, WitnessCame, NotAttended):
        return False
    return now.lasted(past.events[past.entry()][1]) >= line.witness.wait_s


def may_prove(past: Past, proof: str, now: Moment) -> tuple[bool, str]:
    """The four proofs, in their order, each from what was read and stated."""
    line = past.line()
    done = count(past, Proved)
    if line is None or line.kind is not LineKind.EMPTY or line.empty is None:
        return False, "no empty line"
    if done >= len(PROOFS) or PROOFS[done] != proof:
        return False, "order"
    vent = line.empty.vent
    match proof:
        case "vent":
            return past.position(vent) == "open", "vent"
        case "wall":
            return _wall_warm(past, line.empty.wall, now), "wall"
        case "low gauge":
            return _no_rise(past, line.empty, now), "low gauge"
        case _:
            n, position = past.stated(vent)[-1]
            return position == "open" and n > _proof_at(past, "low gauge"), "left open"


def _proof_at(past: Past, proof: str) -> int:
    entry = past.entry()
    numbered = enumerate(past.events)
    return max(n for n, (e, _) in numbered if n > entry and isinstance(e, Proved) and e.proof == proof)


def _wall_warm(past: Past, tag: str, now: Moment) -> bool:
    """Ten minutes of readings, each of them inside its dial and warm, the last of them young."""
    oldest: Moment | None = None
    readings = past.readings(tag, past.entry())
    for _, reading, at in reversed(readings):
        if not reading.in_range or reading.value - reading.U <= COLDEST_WALL:
            break
        oldest = at
    return oldest is not None and now.lasted(oldest) >= 600.0 and now.age(readings[-1][2]) <= 120.0


def _unbroken(past: Past, tag: str, position: str, after: int) -> int | None:
    """Number of the first event after `after` from which on a valve was said to be in this position only."""
    first: int | None = None
    for n, said in past.stated(tag):
        if said != position:
            first = None
        elif first is None and n > after:
            first = n
    return first


def _no_rise(past: Past, empty: Empty, now: Moment) -> bool:
    """Vent shut for ten minutes after the wall was warm, and the low gauge did not climb meanwhile.

    A gauge shut off from the vessel does not climb either: its isolator is open from before the first reading.
    """
    shut = _unbroken(past, empty.vent, "shut", _proof_at(past, "wall"))
    joined = _unbroken(past, empty.isolator, "open", -1)
    if shut is None or joined is None:
        return False
    at_shut = past.events[shut][1]
    readings = past.readings(empty.low_gauge, shut)
    if now.lasted(at_shut) < 600.0 or not readings or readings[0][2].age(at_shut) > 120.0:
        return False
    (first, low, _), (_, high, at) = readings[0], readings[-1]
    if first < joined or not low.in_range or not high.in_range:
        return False
    if at.lasted(at_shut) < 600.0 or now.age(at) > 120.0:
        return False
    return high.value - low.value < LARGEST_RISE


def empty_proved(past: Past) -> bool:
    """All four proofs in one entry of one line, and the let-down valve open now and as this line leaves it.

    A line that seals closes something in anew: what was proved before it proves nothing any more.
    """
    proved, finished = 0, False
    for event, _ in past.events:
        if isinstance(event, WentOn | TakenUp):
            entered = past.plan.lines[event.to if isinstance(event, WentOn) else event.line]
            finished = finished and not entered.seals
        if past.enters(event):
            proved = 0
        if isinstance(event, Proved):
            proved += 1
            finished = finished or proved == len(PROOFS)
    valve, line = past.plan.let_down_valve, past.line()
    if valve is None or line is None or not finished:
        return False
    leaves = [position for tag, position in line.valves if tag == valve]
    return past.position(valve) == "open" and all(position == "open" for position in leaves)
