"""Sights in words: what stands in the band SEE and in line mode, and the figures and trust behind it when asked.

One home, so that bench and line mode keep the same things back from a signer who reads blind.
"""

from __future__ import annotations

from dataclasses import replace
from typing import TYPE_CHECKING, Final

from runbook.answers import Answer, Plan, PlanLine, Sight
from runbook.quantities import say, say_level

if TYPE_CHECKING:
    # The standing asks here which sights stand in it.
    from runbook.run.standing import Standing

KEPT_BACK: Final = "Kept back until the signer's own reading is in."
UNREAD: Final = "Where the surface stands is said when its height has been read."
NOTHING: Final = "Nothing is expected to be seen."
_AHEAD: Final = 2
"""Sights of a path that are said where nothing is computed of the vessel as it stands; the rest when asked."""


def sights_of(answer: Answer | None, line: PlanLine | None) -> tuple[Sight, ...]:
    """What is computed of the vessel as it stands replaces what the plan computed; the author's words stay.

    While the charge is on its way they come second, for they tell of its end.
    """
    planned = line.sights if line is not None else ()
    if answer is None or not answer.sights:
        return planned
    said = tuple(sight for sight in planned if not sight.computed)
    moves = any(sight.at_K is not None for sight in planned)
    return (*answer.sights, *said) if moves else (*said, *answer.sights)


def height_kept_back(standing: Standing) -> bool:
    """A height is to be read now: a value that stands beside the empty box would be copied into it."""
    return standing.hidden or any(w.need.what == "liquid height" and w.due_s <= 0.0 for w in standing.wanted)


def seen_now(standing: Standing) -> tuple[Sight, ...]:
    """What is said without being asked: of the vessel as it stands, else the first of the line's path."""
    shown = _allowed(standing, standing.sights)
    return tuple(s for s in shown if s.at_K is None) or shown[:_AHEAD]


def _allowed(standing: Standing, sights: tuple[Sight, ...]) -> tuple[Sight, ...]:
    """Without the heights, where one is to be read first."""
    if not height_kept_back(standing):
        return sights
    return tuple(
        replace(s, words=UNREAD, numbers=()) if any(name == "height" for name, _, _ in s.numbers) else s for s in sights
    )


def see_words(standing: Standing) -> str:
    """All of it in a row."""
    if standing.hidden:
        return KEPT_BACK
    return " ".join(sight.words for sight in seen_now(standing)) or NOTHING


def see_source(standing: Standing) -> str:
    """'computed', 'written' or both; empty where nothing is said."""
    found = seen_now(standing)
    if standing.hidden or not found:
        return ""
    kinds = {sight.computed for sight in found}
    return "written and computed" if len(kinds) == 2 else "computed" if True in kinds else "written"


def see_if_not(standing: Standing) -> str:
    """What to do if it does not come; empty: nobody said."""
    if standing.hidden:
        return ""
    return standing.if_not or next((s.if_not for s in standing.sights if s.if_not), "")


def details(plan: Plan, standing: Standing) -> tuple[tuple[str, tuple[str, ...], str], ...]:
    """(sentence, its figures, how far to trust it) of every sight of this moment and of the line's path."""
    if standing.hidden:
        return ((KEPT_BACK, (), ""),)
    now = list(standing.sights)
    line = standing.line.sights if standing.line is not None else ()
    now += [sight for sight in line if sight.at_K is not None and sight not in now]
    return tuple((timed(s), figures(plan, s), _trust(s)) for s in _allowed(standing, tuple(now)))


def timed(sight: Sight) -> str:
    """The sentence, with its temperature before it where it falls on a path and does not say it itself."""
    there = "" if sight.at_K is None else say(sight.at_K, "degC", 1)
    return sight.words if there in sight.words else f"{there}: {sight.words}"


def along(plan: Plan) -> tuple[tuple[str, tuple[str, ...]], ...]:
    """(number of the line, its sights in order with their temperatures) of every line whose path shows something."""
    found = []
    for line in plan.lines:
        sights = tuple(timed(sight) for sight in line.sights if sight.at_K is not None)
        if sights:
            found.append((line.number, sights))
    return tuple(found)


def figures(plan: Plan, sight: Sight) -> tuple[str, ...]:
    """'height 28.8 mm' of each figure behind a sight, in units of the bench."""
    return tuple(f"{name} {_amount(plan, name, value, unit)}" for name, value, unit in sight.numbers)


def _trust(sight: Sight) -> str:
    return sight.trust if sight.computed else "The author's words; nothing of it is computed."


def _amount(plan: Plan, name: str, value: float, unit: str) -> str:
    if unit == "Pa":
        return say_level(value, plan.pressure_unit, plan.barometer, 2)
    if unit == "kg":
        return say(value, "g", 1)
    if unit == "K" and name.startswith("below"):
        return f"{value:.3f} K"
    if unit == "K":
        return say(value, "degC", 3)
    if unit == "m" and value < 1e-6:
        return f"{value * 1e9:.1f} nm"
    if unit in ("m", "m/K"):
        return f"{value * 1e3:.4g} mm{unit[1:]}"
    return f"{value:.4g}" if unit == "1" else f"{value:.4g} {unit}"
