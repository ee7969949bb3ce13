"""Everything every screen needs at one moment, as data: words are in `runbook.run.sentences`.

Worked out anew whenever it is asked for, never kept. It judges nothing itself: permission is what decide says.
A figure that would be copied into the box beside it is left out until that box is filled.
"""

from __future__ import annotations

from dataclasses import dataclass

from runbook.answers import Agreement, ChargeEstimate, Explanation, LeftAlone, LineKind, Margin, Plan, PlanLine, Sight
from runbook.run.acts import GoOn
from runbook.run.ceiling_now import Ceiling, ceiling
from runbook.run.clock import Moment
from runbook.run.decide import allowed_unknown, decide, unknown_for
from runbook.run.gate import PROOFS, gate, is_blocked, unfinished
from runbook.run.proofs import not_proved
from runbook.run.questions import UNKNOWN
from runbook.run.reasons import NOT_YET, Code, Reason, Refused
from runbook.run.safe import SafePhase, make_safe, phase_of, rest_shut
from runbook.run.sight_words import sights_of
from runbook.run.signing import may_not_sign
from runbook.run.state import Ledger
from runbook.run.wanted import Wanted, wanted


@dataclass(frozen=True, slots=True)
class QuickState:
    """One item of a quick sequence."""

    text: str
    done: bool
    late: bool
    """It was confirmed late, or its time has passed."""
    left_s: float | None
    """Of the item that is due [s], negative when late; None for all others."""
    if_not: str


@dataclass(frozen=True, slots=True)
class HoldState:
    """The hold point the run stands at."""

    role: str
    because: str
    signed_by: str
    """Empty: nobody yet."""
    may_sign: tuple[str, ...]
    """People who have the role and performed none of what is signed for."""
    tag: str
    """The instrument the signer reads without sight of the other reading; empty: none."""
    missing: tuple[Reason, ...]
    """What is still wanted before the first of them may sign."""


@dataclass(frozen=True, slots=True)
class ProofState:
    """One of the four proofs of empty."""

    name: str
    done: bool
    missing: tuple[Reason, ...]
    """Of the one that is due: what is still wanted; empty for all others."""


@dataclass(frozen=True, slots=True)
class SafeState:
    """Make safe, under way or as it would begin now."""

    acts: tuple[str, ...]
    done: frozenset[int]
    never: str
    phase: str
    may_wait: str


@dataclass(frozen=True, slots=True)
class Standing:
    """Where the run stands for those who look at it."""

    index: int
    """Of the line, -1 before the first."""
    line: PlanLine | None
    part: str
    step: tuple[int, int]
    """Of so many in this part, from 1; (0, n) before its first line."""
    instruction: tuple[str, ...]
    """What to do now: the line, the way back, or the acts of make safe that are not done."""
    loud: bool
    """The instruction replaces the line's: bell, reverse video."""
    who: tuple[str, ...]
    """Names of those who have the line's role."""
    permission: str
    """'yes', 'not yet', 'blocked', 'make safe', 'halted' or 'finished'."""
    reasons: tuple[Reason, ...]
    next: PlanLine | None
    """What going on would enter; shown as what it is about, never as an instruction, before it may be entered."""
    then: tuple[Reason, ...]
    """What would block the next line, known before this one is finished."""
    take_up: bool
    """The line was turned back and may be taken up again."""
    turned_back: str
    """Why; empty: it was not."""
    wanted: tuple[Wanted, ...]
    unstated: tuple[str, ...]
    """Valves of which nobody knows where they stand and which going on does not confirm: to be looked at."""
    now: tuple[Margin, ...]
    ahead: tuple[Margin, ...]
    ceiling: Ceiling
    left_alone: LeftAlone
    left_alone_planned: bool
    """It is the plan's, because nothing has been computed for the vessel as it stands."""
    open_now: str
    """The vent that would be opened where it is not at rest; empty: none, or nothing may be let out."""
    agreement: Agreement | None
    """None: nothing to compare, or it would give a blind reading away."""
    agreement_age_s: float | None
    good_for_s: float | None
    """How old the readings behind it may become [s]; None: as old as the step allows."""
    explanations: tuple[Explanation, ...]
    """What would make gauge and model differ, the most likely first; empty where they agree, and with agreement."""
    estimate: ChargeEstimate | None
    """The charge as a best estimate; None with agreement, or where there is none."""
    hidden: bool
    """What is expected is kept back until the reading that proves it is in."""
    sights: tuple[Sight, ...]
    if_not: str
    quick: tuple[QuickState, ...]
    hold: HoldState | None
    witness: tuple[str, float] | None
    """(role called, seconds left to wait); None: no witness is waited for."""
    proofs: tuple[ProofState, ...]
    gap_open: bool
    safe: SafeState
    making_safe: bool
    answered: bool
    """The standing question has an answer."""
    why_unanswered: str
    unknown_s: float | None
    """How long margins have been unknown [s]; None: they are known."""
    unknown_left_s: float | None
    """How long until the way back replaces the instruction [s]; None: not during this line."""
    log: int
    """Events so far."""
    rehearsal: bool
    elapsed_s: float
    """Since the run was opened [s]."""
    in_line_s: float
    """Since this line was entered [s]."""


def standing(plan: Plan, ledger: Ledger, now: Moment) -> Standing:
    """Where the run stands at `now`."""
    line = ledger.present
    answer = ledger.answer
    permission, reasons = _permission(plan, ledger, now)
    following = plan.lines[ledger.line + 1] if ledger.line + 1 < len(plan.lines) else None
    unknown = unknown_for(ledger, now)
    hold = _hold(plan, ledger)
    hidden = _hidden(ledger, hold)
    alone = answer.left_alone if answer is not None else line.left_alone if line is not None else _NOTHING
    vent = None if plan.release_forbidden else plan.let_down_valve
    return Standing(
        index=ledger.line,
        line=line,
        part=_part(plan, ledger),
        step=_step(plan, ledger),
        instruction=_instruction(ledger, line),
        loud=ledger.safe is not None or ledger.entry.turned_back is not None,
        who=tuple(p.name for p in ledger.people if line is not None and line.who in p.roles),
        permission=permission,
        reasons=reasons,
        next=following,
        then=gate(plan, ledger, now, ledger.line + 1) if following is not None else (),
        take_up=ledger.entry.turned_back is not None and not gate(plan, ledger, now, ledger.line),
        turned_back=ledger.entry.turned_back or "",
        wanted=wanted(plan, ledger, now),
        unstated=_unstated(ledger),
        now=answer.now if answer is not None else (),
        ahead=answer.ahead if answer is not None else (),
        ceiling=ceiling(plan, ledger),
        left_alone=alone,
        left_alone_planned=answer is None,
        open_now=vent or "",
        agreement=None if answer is None or hidden else answer.agreement,
        agreement_age_s=_agreement_age(ledger, now),
        good_for_s=answer.good_for_s if answer is not None else None,
        explanations=() if answer is None or hidden else answer.explanations,
        estimate=None if answer is None or hidden else answer.estimate,
        hidden=hidden,
        sights=sights_of(answer, line),
        if_not=line.if_not if line is not None else "",
        quick=_quick(ledger, now),
        hold=hold,
        witness=_witness(ledger, now),
        proofs=_proofs(ledger, now),
        gap_open=ledger.gap_open,
        safe=_safe(plan, ledger),
        making_safe=ledger.safe is not None,
        answered=answer is not None,
        why_unanswered=ledger.unanswered.why if ledger.unanswered is not None else "",
        unknown_s=unknown if unknown > 0.0 or answer is None else None,
        unknown_left_s=_unknown_left(ledger, unknown),
        log=ledger.seq,
        rehearsal=ledger.rehearsal,
        elapsed_s=now.lasted(ledger.opened_at),
        in_line_s=now.lasted(ledger.entry.at),
    )


_NOTHING = LeftAlone(at_rest=True, known=True, futures=())
"""Before the first line, with nothing in the vessel."""


def _permission(plan: Plan, ledger: Ledger, now: Moment) -> tuple[str, tuple[Reason, ...]]:
    if ledger.outcome is not None:
        return "finished", ()
    if ledger.halted is not None:
        return "halted", (Reason("refused", Code.HALTED, said=ledger.halted),)
    if ledger.safe is not None:
        return "make safe", ()
    if ledger.entry.turned_back is not None:
        blocked = gate(plan, ledger, now, ledger.line)
        turned = Reason(NOT_YET, Code.TURNED_BACK, said=ledger.entry.turned_back)
        return ("blocked", blocked) if blocked else (NOT_YET, (turned,))
    if ledger.line + 1 >= len(plan.lines):
        missing = unfinished(plan, ledger, now)
        return (NOT_YET, missing) if missing else ("yes", ())
    decided = decide(plan, ledger, now, GoOn())
    return (decided.kind, decided.reasons) if isinstance(decided, Refused) else ("yes", ())


def _unstated(ledger: Ledger) -> tuple[str, ...]:
    if ledger.gap_open or ledger.outcome is not None:
        # The questions after a gap come first.
        return ()
    doubtful = ledger.entry.unconfirmed
    return tuple(t for t, s in sorted(ledger.stated.items()) if s.position == UNKNOWN and t not in doubtful)


def _part(plan: Plan, ledger: Ledger) -> str:
    line = ledger.present
    index = line.part if line is not None else ledger.part
    return plan.parts[index].name if index < len(plan.parts) else ""


def _step(plan: Plan, ledger: Ledger) -> tuple[int, int]:
    line = ledger.present
    part = line.part if line is not None else ledger.part
    members = [i for i, other in enumerate(plan.lines) if other.part == part]
    return (members.index(ledger.line) + 1 if ledger.line in members else 0), len(members)


def _instruction(ledger: Ledger, line: PlanLine | None) -> tuple[str, ...]:
    if ledger.safe is not None:
        return tuple(text for n, text in enumerate(ledger.safe.acts) if n not in ledger.safe_done)
    if line is None:
        return ()
    return (line.text,) if ledger.entry.turned_back is None else (line.way_back,)


def _hold(plan: Plan, ledger: Ledger) -> HoldState | None:
    line = ledger.present
    if line is None or line.hold is None:
        return None
    people = [p.name for p in ledger.people if line.hold.signed_by in p.roles]
    able: list[str] = []
    missing: tuple[Reason, ...] = ()
    for name in people:
        found = may_not_sign(plan, ledger, name, None)
        if all(reason.kind == NOT_YET for reason in found):
            missing = missing if able else found
            able.append(name)
    tag = line.hold.read.tag if line.hold.read is not None else ""
    return HoldState(line.hold.signed_by, line.hold.because, ledger.entry.signed_by, tuple(able), tag, missing)


def _hidden(ledger: Ledger, hold: HoldState | None) -> bool:
    """A signer reads blind: neither the other reading nor anything computed may stand beside the empty box."""
    return hold is not None and any(reason.code is Code.OWN_WANTED for reason in hold.missing)


def _agreement_age(ledger: Ledger, now: Moment) -> float | None:
    """Age of the older of the two readings that were compared [s]."""
    answer = ledger.answer
    gauge = ledger.latest.get(answer.agreement.tag or "") if answer is not None else None
    warm = [t for t in ledger.latest.values() if t.event.what == "temperature"]
    ages = [now.age(t.at) for t in ((gauge,) if gauge is not None else ())]
    ages += [min(now.age(t.at) for t in warm)] if warm and ages else []
    return max(ages, default=None)


def _quick(ledger: Ledger, now: Moment) -> tuple[QuickState, ...]:
    line, entry = ledger.present, ledger.entry
    found: list[QuickState] = []
    for n, item in enumerate(line.quick if line is not None else ()):
        if n < len(entry.quick):
            found.append(QuickState(item.text, True, entry.quick[n].late, None, item.if_not))
            continue
        due = n == len(entry.quick)
        since = entry.quick[-1].at if entry.quick else entry.at
        left = item.latest_s - now.age(since) if due else None
        found.append(QuickState(item.text, False, left is not None and left < 0.0, left, item.if_not))
    return tuple(found)


def _witness(ledger: Ledger, now: Moment) -> tuple[str, float] | None:
    line = ledger.present
    if line is None or line.witness is None or ledger.entry.witness:
        return None
    return line.witness.called, max(0.0, line.witness.wait_s - now.lasted(ledger.entry.at))


def _proofs(ledger: Ledger, now: Moment) -> tuple[ProofState, ...]:
    line = ledger.present
    if line is None or line.kind is not LineKind.EMPTY:
        return ()
    made = len(ledger.entry.proofs)
    return tuple(
        ProofState(name, n < made, not_proved(ledger, now, name) if n == made else ()) for n, name in enumerate(PROOFS)
    )


def _safe(plan: Plan, ledger: Ledger) -> SafeState:
    if ledger.safe is not None:
        table = make_safe(plan, phase_of(plan, ledger, ledger.safe.seen))
        may_wait = table.may_wait if table.phase.value == ledger.safe.phase else ""
        return SafeState(ledger.safe.acts, ledger.safe_done, ledger.safe.never, ledger.safe.phase, may_wait)
    found: SafePhase = make_safe(plan, phase_of(plan, ledger, ""), rest_shut(plan, ledger))
    return SafeState(found.acts, frozenset(), found.never, found.phase.value, found.may_wait)


def _unknown_left(ledger: Ledger, unknown: float) -> float | None:
    line = ledger.present
    if line is None or ledger.entry.turned_back is not None or ledger.safe is not None:
        return None
    gone = ledger.answer is not None and any(is_blocked(m) for m in ledger.answer.now)
    return None if gone or unknown <= 0.0 else max(0.0, allowed_unknown(ledger) - unknown)
