"""What readings may mean, in words: explanations, the tests that decide, what instruments would show.

Refuses to say that anything is cleared: an explanation is a guess with a number until its test has been made.
"""

from __future__ import annotations

from collections.abc import Iterable, Sequence
from itertools import groupby
from typing import Final

from runbook.answers import Agreement, ChargeEstimate, Explanation, Plan, Telling
from runbook.run.amounts import difference, grams, kelvins, pressure_difference

DECIDED_BY_TESTS: Final = "No explanation clears anything. Make its test; a new reading decides."

TOLD: Final = 3
"""Instruments a briefing says this of: more is not read."""
_TESTS: Final = {
    "dial": "look at {gauge}'s dial again: its unit, gauge or absolute",
    "re-zero": "tap {gauge}, check its zero",
    "second thermometer": "put a second thermometer on the wall",
    "wait": "wait 10 min at rest, then read both again",
    "height": "read the height of the liquid",
    "weigh": "weigh the closed vessel, and again an hour later",
}
_ALONE: Final = {
    "none": "nothing is wrong",
    "trapped air": "trapped air",
    "over-filled": "too much in it",
    "under-filled": "too little in it",
    "leak": "a leak",
    "thermometer lag": "a thermometer that is behind",
    "thermometer place": "a thermometer in the wrong place",
    "gauge offset": "a gauge that is off",
    "gauge/absolute slip": "a gauge/absolute slip",
    "wrong unit": "a wrong unit",
}


# -- explanations ----------------------------------------------------------------------------------------


def explanation_words(plan: Plan, agreement: Agreement | None, one: Explanation) -> str:
    """'trapped air: it adds 1.8 bar', with what these readings do not tell from it."""
    said = _with_number(plan, _gauge(agreement), one)
    other = [_ALONE.get(cause, cause) for cause in one.one_with if cause != "none"]
    if "none" in one.one_with:
        other = ["nothing at all", *other]
    return f"{said}; or {_or(other)}, which these readings do not tell apart" if other else said


def deciding_words(agreement: Agreement | None, one: Explanation) -> str:
    """'tap PG1, check its zero'; nothing where no test is needed."""
    return _TESTS[one.test].format(gauge=_gauge(agreement)) if one.test in _TESTS else ""


def first_explanation(plan: Plan, agreement: Agreement | None, found: Sequence[Explanation]) -> tuple[str, str]:
    """('PG1 shows 2.1 bar too much', 'tap PG1, check its zero'); ('', '') where there is none."""
    standing = [one for one in found if not one.struck_out]
    if not found:
        return "", ""
    if not standing:
        return "nothing that is known explains these readings together", "read both again"
    first = standing[0]
    if first.cause == "none" and len(standing) > 1:
        second = next((o for o in standing[1:] if o.cause not in first.one_with), standing[1])
        return f"perhaps nothing; else {_with_number(plan, _gauge(agreement), second)}", deciding_words(
            agreement, second
        )
    return _with_number(plan, _gauge(agreement), first), deciding_words(agreement, first)


def ranked_lines(plan: Plan, agreement: Agreement | None, found: Sequence[Explanation]) -> list[tuple[str, str]]:
    """(share and explanation, its test) of each, the most likely first; those struck out in one line at the end."""
    lines: list[tuple[str, str]] = []
    for one in found:
        if not one.struck_out:
            words = f"{_share(one.share):>6}  {explanation_words(plan, agreement, one)}"
            lines.append((words, deciding_words(agreement, one)))
    out = [_ALONE.get(one.cause, one.cause) for one in found if one.struck_out]
    if out:
        lines.append((f"struck out: {', '.join(out)}", ""))
    return lines


def charge_words(estimate: ChargeEstimate | None) -> str:
    """'117.3 g ±0.6 g, from weighing at closing and height; pressure says nothing of it'."""
    if estimate is None:
        return ""
    parts = " and ".join(part.how for part in estimate.parts)
    blind = f"; {' and '.join(estimate.blind)} says nothing of it" if estimate.blind else ""
    return f"{grams(estimate.kg)} ±{grams(estimate.U)}, from {parts}{blind}"


def _with_number(plan: Plan, gauge: str, one: Explanation) -> str:
    much = "too much" if one.size > 0.0 else "too little"
    match one.cause:
        case "trapped air":
            return f"trapped air: it adds {pressure_difference(plan, one.size)}"
        case "over-filled":
            return f"{grams(one.size)} more in it than was stated"
        case "under-filled":
            return f"{grams(-one.size)} less in it than was stated"
        case "leak":
            return f"a leak: it has lost {grams(one.size)}"
        case "thermometer lag":
            return f"the thermometer is {kelvins(abs(one.size))} behind the wall"
        case "thermometer place":
            way = "less than the wall has" if one.size > 0.0 else "more than the coldest wet place has"
            return f"the thermometer shows {kelvins(abs(one.size))} {way}"
        case "gauge offset":
            return f"{gauge} shows {pressure_difference(plan, abs(one.size))} {much}"
        case "gauge/absolute slip":
            return f"a gauge/absolute slip: {pressure_difference(plan, abs(one.size))} {much}"
        case "wrong unit":
            return f"a wrong unit: {one.detail}"
        case _:
            return _ALONE.get(one.cause, one.cause)


def _gauge(agreement: Agreement | None) -> str:
    return agreement.tag if agreement is not None and agreement.tag else "the gauge"


def _share(share: float) -> str:
    if share < 0.005:
        return "< 1 %"
    return "> 99 %" if share > 0.995 else f"{100.0 * share:.0f} %"


def _or(words: Sequence[str]) -> str:
    return " or ".join((", ".join(words[:-1]), words[-1]) if len(words) > 1 else words)


# -- what instruments would show -------------------------------------------------------------------------


def telling_lines(plan: Plan, at_most: int | None = None) -> list[str]:
    """One sentence for each instrument: what it would show at rest, what not, and which class would."""
    lines = [_telling(plan, list(rows)) for _, rows in groupby(plan.telling, key=lambda t: t.tag)]
    return lines if at_most is None else lines[:at_most]


def _telling(plan: Plan, rows: Sequence[Telling]) -> str:
    first = rows[0]
    said = []
    seen = [row for row in rows if row.seen]
    if seen:
        said.append(f"shows {_and(_fault(plan, row) for row in seen)}{_from(seen)}")
    missed = [row for row in rows if not row.seen and row.least is not None]
    for wanted, group in groupby(missed, key=lambda row: row.wanted):
        would = f" (class {wanted} would)" if wanted else ""
        said.append(f"does not show {_or([_fault(plan, row) for row in group])}{would}")
    if any(row.least is None for row in rows):
        said.append("says nothing of how much is in it while liquid is in view")
    quality = f" (class {first.quality})" if first.quality else ""
    return f"{first.tag}{quality} {'; '.join(said)}"


def _from(seen: Sequence[Telling]) -> str:
    least = [row.least for row in seen if row.least is not None and row.unit == "kg"]
    return f", from {grams(max(least))} on" if least else ""


def _fault(plan: Plan, row: Telling) -> str:
    moved = f" ({difference(plan, row.tag, row.shift)})" if row.reads == "liquid height" else ""
    match row.fault:
        case "trapped air":
            return f"{pressure_difference(plan, row.size)} of air"
        case "thermometer lag":
            return f"a thermometer {kelvins(row.size)} behind"
        case "leak":
            return f"a leak of {grams(row.size)}{moved}"
        case "over-filled":
            return f"{grams(row.size)} too much"
        case "under-filled":
            return f"{grams(row.size)} too little"
        case _:
            return _ALONE.get(row.fault, row.fault)


def _and(words: Iterable[str]) -> str:
    found = list(words)
    return " and ".join((", ".join(found[:-1]), found[-1]) if len(found) > 1 else found)
