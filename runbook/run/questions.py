"""What the run asks the physics, folded from facts alone: times are left out, so the key changes only with facts.

Also which readings count in it. A new reading does not erase an earlier one that contradicts it: both are
carried until a third agrees with one of them. Refuses to guess a position: what nobody has stated since the
line was entered that moves it is 'do not know', and a line that closes the vessel counts as closed at once.
"""

from __future__ import annotations

import hashlib
import json
from dataclasses import replace
from math import hypot
from typing import Final

from runbook.answers import Observation, Plan, Question
from runbook.codec import to_plain
from runbook.run.clock import Moment
from runbook.run.events import ReadingTaken
from runbook.run.state import Carried, Ledger, Seen

TOGETHER_S: Final = 120.0
"""[s] two readings of one instrument at most this far apart, in one line, are of the same moment."""
AT_ONCE_S: Final = 10.0
"""[s] the same, in a line in which what is read falls by itself."""
BESIDE_S: Final = 600.0
"""[s] a temperature at most this old stands beside a height."""
CARRIED: Final = 8
"""Contradicting readings carried for one instrument: beyond it the middle ones, which govern nothing, go."""
UNKNOWN: Final = "do not know"


def question(plan: Plan, ledger: Ledger) -> Question | None:
    """The question that stands now; None before the run is opened and when it is closed."""
    if ledger.plan is None or ledger.outcome is not None:
        return None
    return Question(
        key=ledger.key,
        line=ledger.line,
        to=to_line(ledger),
        closed=closed(ledger),
        valves=positions(ledger),
        source=source(ledger),
        charge=plan.charge,
        observations=observations(ledger.seen),
        history=ledger.past.readings,
    )


def to_line(ledger: Ledger) -> int:
    """The line that would be entered next: the same at the end, or when it has to be taken up again."""
    last = len(ledger.plan.lines) - 1 if ledger.plan is not None else -1
    return ledger.line if ledger.entry.turned_back is not None or ledger.line >= last else ledger.line + 1


def positions(ledger: Ledger) -> tuple[tuple[str, str], ...]:
    """Every valve's position by tag: 'open', 'shut' or 'do not know'; the last for all while a gap is not answered."""
    doubtful = ledger.stated.keys() if ledger.gap_open else ledger.entry.unconfirmed
    return tuple((t, UNKNOWN if t in doubtful else s.position) for t, s in sorted(ledger.stated.items()))


def source(ledger: Ledger) -> str:
    """The heat source as it was last said to be; while a gap is not answered nobody knows, where there is one."""
    return UNKNOWN if ledger.gap_open and ledger.plan is not None and ledger.plan.source != "none" else ledger.source


def closed(ledger: Ledger) -> str:
    """Whether the vessel is closed: 'open', 'closed' or 'do not know'."""
    line = ledger.present
    gone_through = line is not None and line.quick and len(ledger.entry.quick) == len(line.quick)
    if line is not None and line.seals and not gone_through:
        # At once; a quick sequence that was gone through has said itself where its valves stand.
        return "closed"
    found = dict(positions(ledger))
    outside = [found.get(tag, UNKNOWN) for tag in (ledger.plan.outside_valves if ledger.plan else ())]
    if "open" in outside:
        return "open"
    return "closed" if all(p == "shut" for p in outside) else UNKNOWN


def read_closed(ledger: Ledger) -> bool:
    """Whether a reading taken now is one of the closed vessel.

    The instruction of a quick sequence counts as done at once, a scale read meanwhile does not: until the item that
    closes the last vent is confirmed there is still a way in and out, and such a weighing proves nothing.
    """
    line = ledger.present
    if line is not None and line.seals and line.quick:
        closing = max((n for n, item in enumerate(line.quick) if item.seals), default=len(line.quick) - 1)
        if len(ledger.entry.quick) <= closing:
            return False
    return closed(ledger) != "open"


def observations(seen: Seen) -> tuple[Observation, ...]:
    """Those that count, in the order of the record, each once; a temperature beside a height that is also the last of
    its instrument counts as that.
    """
    found = {o.sequence: o for o in seen.since}
    found.update((o.sequence, o) for o in seen.before.values())
    for kept in seen.moving.values():
        found.update((k.one.sequence, k.one) for k in kept)
    return tuple(found[n] for n in sorted(found))


def observations_json(seen: Seen) -> str:
    """The same as they stand in the digest."""
    return ",".join(canonical(to_fields(o)) for o in observations(seen))


def to_fields(one: Observation) -> dict[str, object]:
    """An observation as plain data, without the codec, which is slow for ten thousand events."""
    return {
        "tag": one.tag,
        "what": one.what,
        "value": one.value,
        "sequence": one.sequence,
        "by": one.by,
        "closed": one.closed,
        "beside": one.beside,
        "line": one.line,
    }


canonical: Final = json.JSONEncoder(sort_keys=True, separators=(",", ":"), ensure_ascii=True).encode
"""Canonical JSON: sorted keys, no spaces, ASCII."""


def plan_digest(plan: Plan) -> str:
    """SHA-256 of the whole plan: an answer never outlives what it was computed for."""
    return hashlib.sha256(canonical(to_plain(plan)).encode()).hexdigest()


def key_of(ledger: Ledger) -> str:
    """SHA-256 of the canonical JSON of the question without its key and history, and 'plan': the plan's digest.

    Put together from parts that were encoded when they changed. The history adds no fact: which readings have been
    taken is in the numbers of the observations.
    """
    text = (
        f'{{"charge":{ledger.charge_json},"closed":"{closed(ledger)}","line":{ledger.line},'
        f'"observations":[{ledger.observations_json}],"plan":"{ledger.plan_digest}",'
        f'"source":{canonical(source(ledger))},"to":{to_line(ledger)},"valves":{canonical(positions(ledger))}}}'
    )
    return hashlib.sha256(text.encode()).hexdigest()


def with_reading(ledger: Ledger, event: ReadingTaken, at: Moment, seq: int) -> Seen:
    """What counts once this reading has come as event `seq`."""
    one = Observation(event.tag, event.what, event.value, seq, event.by, read_closed(ledger), line=ledger.line)
    seen = ledger.seen
    if event.what in ("mass", "liquid height"):
        if one.closed:
            return _after_closing(ledger, one, at)
        # The open charge sublimes: less than a minute ago is no contradiction, and more governs by being the last.
        return replace(seen, before=seen.before | {event.tag: one})
    if event.what not in ("temperature", "pressure"):
        return seen
    kept = _kept(ledger, seen.moving.get(event.tag, ()), Carried(one, event.U), at)
    seen = replace(seen, moving=seen.moving | {event.tag: kept})
    if event.what == "temperature" and seen.wants_beside:
        seen = replace(seen, since=(*seen.since, replace(one, beside=True)), wants_beside=False)
    return seen


def after_gap(seen: Seen) -> Seen:
    """What still counts after a gap: how warm the vessel was says nothing any more, a contradiction stands."""
    return replace(seen, moving={tag: kept for tag, kept in seen.moving.items() if len(kept) > 1})


def _after_closing(ledger: Ledger, one: Observation, at: Moment) -> Seen:
    """A mass or a height of the closed vessel: all count, a height with the temperature read beside it."""
    seen = ledger.seen
    if one.what == "mass":
        return replace(seen, since=(*seen.since, one))
    near = [kept[-1].one for tag, kept in seen.moving.items() if _beside(ledger, tag, kept[-1], at)]
    if not near:
        return replace(seen, since=(*seen.since, one), wants_beside=True)
    beside = max(near, key=lambda o: o.sequence)
    known = any(o.sequence == beside.sequence for o in seen.since)
    return replace(seen, since=(*seen.since, one) if known else (*seen.since, replace(beside, beside=True), one))


def _beside(ledger: Ledger, tag: str, kept: Carried, at: Moment) -> bool:
    return kept.one.what == "temperature" and at.age(ledger.latest[tag].at) <= BESIDE_S


def _kept(ledger: Ledger, kept: tuple[Carried, ...], new: Carried, at: Moment) -> tuple[Carried, ...]:
    """The readings of one instrument that count with a new one, which comes last."""
    if not kept:
        return (new,)
    fits = any(abs(new.one.value - k.one.value) <= hypot(new.U, k.U) for k in kept)
    if len(kept) > 1:
        return (new,) if fits else _middle_gone((*kept, new))
    earlier = ledger.latest[new.one.tag]
    line = ledger.present
    apart = AT_ONCE_S if line is not None and line.falls else TOGETHER_S
    together = at.age(earlier.at) <= apart and earlier.event.line == ledger.line
    return (*kept, new) if together and not fits else (new,)


def _middle_gone(kept: tuple[Carried, ...]) -> tuple[Carried, ...]:
    if len(kept) <= CARRIED:
        return kept
    rest = sorted(kept[:-1], key=lambda k: k.one.value)
    gone = rest[len(rest) // 2]
    return tuple(k for k in kept if k is not gone)
