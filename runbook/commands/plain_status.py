"""Line mode: the bands of the run screen as labelled lines, in the same order and the same words."""

from __future__ import annotations

from runbook.answers import LineKind, Plan
from runbook.run import sentences as say
from runbook.run.sight_words import NOTHING, details, see_if_not, see_source, see_words
from runbook.run.standing import Standing
from runbook.run.state import Ledger


def status_lines(plan: Plan, ledger: Ledger, standing: Standing, rehearsal: str = "") -> list[str]:
    """What stands now, band after band."""
    head = f"{plan.procedure}   {standing.part}, step {standing.step[0]} of {standing.step[1]}   log {standing.log}"
    lines = ["", f"{rehearsal} {head}".strip()]
    lines += _do(standing)
    lines += _on(plan, ledger, standing)
    alone = say.left_alone_words(plan, standing.left_alone)
    first = standing.safe.acts[0] if standing.safe.acts else ""
    lines.append(f"ALONE    {alone}    {say.left_alone_verdict(standing.left_alone, first)}")
    lines.append("CEILING  " + "   ".join(w for w in say.ceiling_words(plan, standing.ceiling) if w))
    lines.append("         " + "   ".join(w for w in say.distance_words(plan, standing.ceiling) if w))
    source, if_not = see_source(standing), see_if_not(standing)
    seen = f"SEE      {see_words(standing)}" + (f" ({source})" if source else "")
    lines.append(seen + (f" If not: {if_not}" if if_not else ""))
    agree = say.agreement_pair(plan, standing.agreement)
    age = say.agreement_age(standing.agreement_age_s, standing.good_for_s)
    says = say.agreement_says(plan, standing.agreement, standing.explanations)
    lines.append(f"AGREE?   {agree}   {says}   {age}".rstrip())
    return lines


def why(plan: Plan, standing: Standing) -> list[str]:
    """What the readings may mean, the most likely first, each with the test that decides."""
    found = []
    for words, test in say.why_lines(plan, standing):
        found.append(f"  {words}")
        found += [f"          test: {test}"] if test else []
    return found


def sight_lines(plan: Plan, standing: Standing) -> list[str]:
    """Every sight with its figures and how far to trust it, when asked."""
    lines = []
    for words, numbers, trust in details(plan, standing):
        lines.append(f"  {words}")
        lines += [f"      {'; '.join(numbers)}"] if numbers else []
        lines += [f"      {trust}"] if trust else []
    return lines or [f"  {NOTHING}"]


def _do(standing: Standing) -> list[str]:
    line = standing.line
    lines: list[str] = []
    if line is not None and line.warning is not None and not standing.loud:
        w = line.warning
        lines.append(f"DO       {w.word}: {w.hazard} could {w.could} {w.avoid}")
    label = "NOW >>> " if standing.loud else "DO      "
    for text in standing.instruction or (say.begin_words(standing),):
        lines.append(f"{label} {text}")
    if standing.loud and standing.turned_back:
        lines.append(f"         because {standing.turned_back}")
    if standing.making_safe:
        lines.append(f"         {say.phase_words(standing.safe.phase)}; {standing.safe.never}")
    if line is not None and standing.who:
        lines.append(f"         {line.who}: {', '.join(standing.who)}")
    return lines


def _on(plan: Plan, ledger: Ledger, standing: Standing) -> list[str]:
    lines = [f"ON?      {say.permission_words(standing)}   {say.next_words(standing)}".rstrip()]
    for wrong, clears in say.reasons_words(plan, ledger, standing.reasons):
        lines.append(f"         {wrong}")
        lines += [f"         clears it: {clears}"] if clears else []
    lines += [f"         {say.wanted_words(w)} ({w.need.what}, {w.need.unit})" for w in standing.wanted]
    if unstated := say.unstated_words(standing):
        lines.append(f"         {unstated}: valve {standing.unstated[0]} open | shut")
    line = standing.line
    if standing.hold is not None:
        lines.append(f"         {say.hold_words(standing.hold)}")
    if standing.witness is not None:
        lines.append(f"         {say.witness_words(standing)}")
    lines += [f"         {say.quick_words(item)}" for item in standing.quick]
    if line is not None and line.kind is LineKind.EMPTY:
        lines += [f"         {say.proof_words(plan, ledger, proof)}" for proof in standing.proofs]
    if standing.unknown_s is not None:
        lines.append(f"         {say.unknown_words(standing)}")
    return [one for one in lines if one.strip()]


HELP = (
    "Enter        go on, when ON? says yes",
    "READING      a number for the reading that is wanted, or 'PG1 62.6'; shown in full, then Enter takes it",
    "blind N V    the signer N reads V without sight of the other reading",
    "sign N PIN   person N signs the hold point with the signing number PIN",
    "came N       the witness N is here",
    "done         the quick step, the proof or the act of make safe is done",
    "up           take the step up again after the way back",
    "valve V2 open | shut | ?      heat on | off | unplugged | ?      as it stands now",
    "why          what the readings may mean where they do not agree, and the tests that decide",
    "by N         readings are N's from here on",
    "sights       the figures behind what should be seen, and how far to trust each",
    "note TEXT    write something down",
    "safe         MAKE SAFE; 'safe relief', 'safe window', 'safe fire' for what you see",
    "leave        leave the tool; the run stays unfinished",
)
"""What can be typed."""
HELP_REHEARSAL = (
    "read [TAG]   take what the simulated dial shows      look   see every dial and the vessel, and take nothing",
    "speed N      1 to 600 times      wait MIN   let minutes pass      jump   to the next thing asked for",
    "fault NAME[@S]   what goes wrong on purpose, and seconds after its situation",
)
"""What can be typed in a rehearsal besides."""
