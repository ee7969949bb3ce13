"""`runbook rehearse FILE --timeline`: when each line begins and each sight falls, before anybody begins.

A hundred lots of the tolerances on the simulated vessel, whether each part fits the time it is given and what to warm
beforehand if not, and the let-down as it will go. The same seed gives the same lines.
"""

from __future__ import annotations

import json
import sys
from collections.abc import Callable, Iterator
from contextlib import contextmanager
from dataclasses import dataclass
from pathlib import Path
from typing import TYPE_CHECKING, Any

from runbook.errors import ExitCode, InputUnusable

if TYPE_CHECKING:
    from runbook.answers import Plan
    from runbook.rehearsal.letting_down import Downward, LetDownPlan
    from runbook.rehearsal.timeline import Band, PartTimes
    from runbook.rehearsal.warming import Warming

_MOST_RUNS = 10_000


def show_timeline(path: Path, seed: int, runs: int, part: int | None, as_json: bool) -> int:
    """Compute and print; part: from 1, None for all. Returns the exit code: 1 where a part does not fit."""
    from runbook.procedure.reader import read_procedure
    from runbook.procedure.several import seen_from_each
    from runbook.rehearsal.timeline import fits

    if not 1 <= runs <= _MOST_RUNS:
        raise InputUnusable(f"--runs is a count from 1 to {_MOST_RUNS}, not {runs}")
    count = len(seen_from_each(read_procedure(path)))
    found = [_vessel(path, seed, runs, part, number) for number in range(count)]
    if as_json:
        first, *beside = (as_document(str(path), seed, runs, one.parts, one.warm, one.lets_down) for one in found)
        pairs = zip(found[1:], beside, strict=True)
        others = [{"vessel": one.plan.vessel, "parts": doc["parts"]} for one, doc in pairs]
        print(json.dumps(first | ({"beside": others} if others else {}), indent=2, allow_nan=False))
    else:
        for one in found:
            if count > 1:
                print(f"VESSEL {one.plan.vessel}, {one.plan.apparatus}")
            print("\n".join(_lines(one.plan, seed, runs, one.parts, one.warm, one.lets_down)))
    good = all(fits(part) for one in found for part in one.parts)
    return int(ExitCode.GOOD if good else ExitCode.NOT_GOOD)


@dataclass(frozen=True)
class _Timed:
    """What was computed for one vessel."""

    plan: Plan
    parts: tuple[PartTimes, ...]
    warm: dict[int, tuple[Warming, ...]]
    lets_down: LetDownPlan | None


def _vessel(path: Path, seed: int, runs: int, part: int | None, number: int) -> _Timed:
    from runbook.rehearsal.letting_down import let_down_plan
    from runbook.rehearsal.many import all_lots
    from runbook.rehearsal.timeline import Asked, opened, timed_parts, timeline
    from runbook.rehearsal.warming import warmings

    scene, plan, lots = opened(Asked(path, seed, runs, (), number))
    wanted = timed_parts(plan)
    if part is not None:
        if part - 1 not in wanted:
            raise InputUnusable(f"there is no part {part} in which something is done: {_names(plan, wanted)}")
        wanted = (part - 1,)
    asked = Asked(path, seed, runs, wanted, number)
    with _progress(len(lots)) as told:
        parts = timeline(plan, wanted, all_lots(asked, lots, told))
        warm = {one.index: warmings(plan, one, lots) for one in parts}
        return _Timed(plan, parts, warm, let_down_plan(scene, plan, wanted))


def _names(plan: Plan, wanted: tuple[int, ...]) -> str:
    return ", ".join(f"{i + 1} is '{plan.parts[i].name}'" for i in wanted)


@contextmanager
def _progress(total: int) -> Iterator[Callable[[int], None]]:
    """A bar on standard error where that is a terminal."""
    if not sys.stderr.isatty():
        yield lambda _: None
        return
    from rich.console import Console
    from rich.progress import Progress

    with Progress(console=Console(stderr=True), transient=True) as bar:
        task = bar.add_task("lots", total=total)
        yield lambda done: bar.update(task, completed=done)


# -- words ------------------------------------------------------------------------------------------------


def _lines(
    plan: Plan,
    seed: int,
    runs: int,
    parts: tuple[PartTimes, ...],
    warm: dict[int, tuple[Warming, ...]],
    lets_down: LetDownPlan | None,
) -> Iterator[str]:
    from runbook.rehearsal.lesson import ACT_S, READ_S, SIGN_S
    from runbook.rehearsal.lots import SLOW

    yield f"TIMELINE of {plan.procedure}: {runs} lots of its tolerances, seed {seed}"
    yield "  Minutes since the part began, of nine lots in ten, in brackets the middle: estimates, as couplings are."
    yield (
        f"  An act that says no `takes` counts {ACT_S:.0f} s, a reading {READ_S:.0f} s, a signature {SIGN_S:.0f} s, "
        f"a slow crew {SLOW:g} times as much."
    )
    if plan.verdict != "within limits":
        yield f"  The procedure is {plan.verdict}: `runbook check` says why. Nothing here permits a step of it."
    for one in parts:
        yield ""
        yield from _part(one, warm[one.index])
    if lets_down is not None:
        yield ""
        yield from _let_down(plan, lets_down)


def _part(one: PartTimes, warm: tuple[Warming, ...]) -> Iterator[str]:
    yield f"{one.index + 1} {one.name}: {_verdict(one)}"
    rows = [(line.begins, f"{line.number:<5} {line.text}") for line in one.lines]
    rows += [(sight.falls, f"{sight.number:<5} seen: {sight.words}") for sight in one.sights]
    for when, words in sorted(rows, key=lambda row: row[0].middle):
        often = "" if when.runs == one.runs else f"  [in {when.runs} of {one.runs}]"
        yield f"  {_minutes(when):<24} {words}{often}"
    for number, count in one.stuck:
        yield f"  Step {number} never ends in {count} of {one.runs} lots: look at what it waits for, and at the room."
    if one.longest[0] and one.declared_s is not None and one.fits_in < one.runs:
        number, lasts = one.longest
        yield f"  Step {number} takes the most of it: {lasts / 60.0:.0f} min in the middle of the lots."
    yield from _warm(warm)


def _verdict(one: PartTimes) -> str:
    from runbook.rehearsal.timeline import fits

    takes = "it never ends" if one.takes is None else f"takes {_minutes(one.takes)} min"
    if one.declared_s is None:
        return f"{takes}; the file gives it no time"
    given = f"{one.declared_s / 60.0:.0f} min" + (" before the lesson" if one.declared_by == "lead" else "")
    if one.fits_in == one.runs:
        return f"{takes}; FITS its {given}"
    return f"{takes}; {'FITS' if fits(one) else 'DOES NOT FIT'} its {given}: in {one.fits_in} of {one.runs} lots"


def _warm(warm: tuple[Warming, ...]) -> Iterator[str]:
    for one in warm:
        words = "the vessel, with its source," if one.of == "vessel" else "the source alone"
        celsius = f"{one.start_K - 273.15:.0f} °C"
        if one.fits_in <= one.fits_cold:
            yield f"  To warm {words} beforehand is no help: at {celsius} it fits in {one.fits_in} of {one.runs} lots."
        else:
            yield (
                f"  With {words} at {celsius} when it begins it fits in {one.fits_in} of {one.runs} lots, "
                f"else in {one.fits_cold}. Write that warming as a step of a part before: then it is checked."
            )


def _minutes(when: Band) -> str:
    least, middle, most = (x / 60.0 for x in (when.least, when.middle, when.most))
    digits = 1 if most < 10.0 else 0
    if f"{least:.{digits}f}" == f"{most:.{digits}f}":
        return f"{middle:.{digits}f}"
    return f"{least:.{digits}f} to {most:.{digits}f} ({middle:.{digits}f})"


def _let_down(plan: Plan, found: LetDownPlan) -> Iterator[str]:
    from runbook.run.amounts import pressure

    yield f"LET-DOWN through {found.valve}, step {found.number}, from rest in the room"
    if not found.bore_stated:
        yield "  The apparatus file states no bore for it; of three bores:"
    yield "  open      to zero  liquid gone  coldest wall  solid left  to the room       pauses"
    for way in found.ways:
        yield f"  {_way(way)}"
    if found.bounds is not None:
        cold, hot = found.bounds
        yield f"  {_way(cold)}  most charge, coldest room"
        yield f"  {_way(hot)}  least charge, hottest room"
    if found.pause_Pa is not None:
        at = pressure(plan, found.pause_Pa)
        yield f"  A pause: shut at {at} while liquid is seen, opened again when the gauge stands 10 bar higher."
    if found.share is not None:
        limit = "no limit is known" if found.limit is None else f"the limit is {100.0 * found.limit:.2g} %"
        there = f"{100.0 * found.share:.2g} %"
        yield f"  All of it in the room's air: {there} with what was there; {limit}; no ventilation counted."


def _way(way: Downward) -> str:
    def minutes(seconds: float | None, none: str) -> str:
        return none if seconds is None else f"{seconds / 60.0:.1f} min"

    solid = f"{1e3 * way.solid_kg:.1f} g" if way.solid_kg > 0.0 else "none"
    return (
        f"{1e3 * way.opening_m:.3g} mm".ljust(9)
        + f"{minutes(way.takes_s, 'never'):>8}  {minutes(way.liquid_gone_s, 'freezes'):>11}  "
        + f"{way.coldest_K - 273.15:>9.0f} °C  {solid:>10}  "
        + f"{1e3 * way.gas_kg:.0f} g, {6e4 * way.most_kg_s:.1f} g/min".ljust(18)
        + f"{way.pauses}"
    )


# -- JSON -------------------------------------------------------------------------------------------------


def as_document(
    file: str,
    seed: int,
    runs: int,
    parts: tuple[PartTimes, ...],
    warm: dict[int, tuple[Warming, ...]],
    lets_down: LetDownPlan | None,
) -> dict[str, Any]:
    """The documented keys."""
    return {
        "file": file,
        "seed": seed,
        "runs": runs,
        "parts": [_part_document(one, warm[one.index]) for one in parts],
        "let_down": None if lets_down is None else _let_down_document(lets_down),
    }


def _part_document(one: PartTimes, warm: tuple[Warming, ...]) -> dict[str, Any]:
    return {
        "part": one.index + 1,
        "name": one.name,
        "declared_s": one.declared_s,
        "declared_by": one.declared_by or None,
        "takes_s": _band(one.takes),
        "fits_in": one.fits_in,
        "runs": one.runs,
        "lines": [{"step": x.number, "text": x.text, "begins_s": _band(x.begins)} for x in one.lines],
        "sights": [{"step": x.number, "of": x.of, "words": x.words, "falls_s": _band(x.falls)} for x in one.sights],
        "never_ends": [{"step": number, "in": count} for number, count in one.stuck],
        "longest": {"step": one.longest[0], "lasts_s": one.longest[1]} if one.longest[0] else None,
        "warmed": [
            {"of": w.of, "start_K": w.start_K, "fits_in": w.fits_in, "fits_cold": w.fits_cold, "runs": w.runs}
            for w in warm
        ],
    }


def _band(when: Band | None) -> dict[str, Any] | None:
    if when is None:
        return None
    return {"least": when.least, "middle": when.middle, "most": when.most, "in": when.runs}


def _let_down_document(found: LetDownPlan) -> dict[str, Any]:
    return {
        "step": found.number,
        "valve": found.valve,
        "pause_Pa": found.pause_Pa,
        "bore_stated": found.bore_stated,
        "ways": [_way_document(way) for way in found.ways],
        "bounds": None if found.bounds is None else [_way_document(way) for way in found.bounds],
        "share_in_room": found.share,
        "share_allowed": found.limit,
    }


def _way_document(way: Downward) -> dict[str, Any]:
    return {
        "opening_m": way.opening_m,
        "pauses": way.pauses,
        "takes_s": way.takes_s,
        "liquid_gone_s": way.liquid_gone_s,
        "coldest_K": way.coldest_K,
        "solid_kg": way.solid_kg,
        "gas_kg": way.gas_kg,
        "most_kg_s": way.most_kg_s,
    }
