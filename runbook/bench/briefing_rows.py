"""The briefing as rows: what may be loaded, what holds it, what happens left alone, what is dated. Pure.

The first *outside limits* that somebody meets reads as help: limit, number, corner, and what to mend.
"""

from __future__ import annotations

from typing import Final

from runbook.answers import BindRequest, Finding, Plan
from runbook.bench.rows import EMPTY, Row, wrapped
from runbook.quantities import say, say_level
from runbook.run.amounts import planned, vessels
from runbook.run.evidence_words import TOLD, telling_lines
from runbook.run.sight_words import along

_INDENT: Final = 22


def briefing_rows(plan: Plan, request: BindRequest, width: int, wrong: str = "") -> list[Row]:
    """Everything a person is told before the run; wrong: what goes wrong on purpose in a rehearsal."""
    return [
        EMPTY,
        *_verdict(plan, width),
        EMPTY,
        *_day(plan, request, width),
        *(_pair("goes wrong", wrong, width, "strong", "F") if wrong else ()),
        EMPTY,
        *_numbers(plan, width),
        EMPTY,
        *_seen(plan, width),
        *_dated(plan, width),
        *_telling(plan, width),
        *_bring(plan, width),
        *_findings(plan.findings, width),
    ]


def _pair(name: str, words: str, width: int, style: str = "plain", key: str = "") -> list[Row]:
    lines = wrapped(words, width - _INDENT - 1, style) or [EMPTY]
    first = Row(((f" {key:<2}", "key"), (name.ljust(_INDENT - 3), "dim"), *lines[0].spans))
    return [first, *(Row(((" " * _INDENT, "plain"), *one.spans)) for one in lines[1:])]


def _verdict(plan: Plan, width: int) -> list[Row]:
    style = {"within limits": "yes", "outside limits": "blocked"}.get(plan.verdict, "not yet")
    sign = {"within limits": "●", "outside limits": "■"}.get(plan.verdict, "□")
    words = f"{sign} {plan.verdict.upper()} of the figures in the file, approved by {plan.approved}"
    return [
        *wrapped(f" {plan.procedure}", width - 1, "strong"),
        *_pair("vessel", f"{vessels(plan)}; {plan.fluid}", width),
        *_pair("checked", words, width, style),
    ]


def _day(plan: Plan, request: BindRequest, width: int) -> list[Row]:
    part = plan.parts[request.part].name if plan.parts else "all of it"
    of = f"{request.part + 1} of {len(plan.parts)}"
    comes_loaded = plan.charge is not None and not request.cell_closed
    cell = "already closed" if request.cell_closed else "loaded, by its file" if comes_loaded else "open and empty"
    bound = f" ± {plan.barometer_bound / 100:.0f} hPa"
    barometer = f"{plan.barometer / 100:.0f} hPa{bound}, from: {plan.barometer_source}"
    box = plan.charge
    rows = [
        *_pair("begin with", f"{part} ({of})", width, "strong", "P"),
        *_pair("the cell is", cell, width, "strong", "C"),
        *_pair("room's pressure", barometer, width, "strong", "B"),
    ]
    if box is not None:
        proved = "proved" if box.proved else "NOT PROVED"
        words = f"{say(box.low_kg, 'g', 1)} to {say(box.high_kg, 'g', 1)}, {proved}, by {', '.join(box.by)}"
        rows += _pair("in it", words, width, "plain" if box.proved else "not yet")
        if box.contradiction:
            rows += _pair("", box.contradiction, width, "blocked")
    return rows


def _numbers(plan: Plan, width: int) -> list[Row]:
    bounds = plan.bounds
    rows = _pair(
        "ceiling", _pressure(plan.ceiling, plan) + (f" by {plan.ceiling_by}" if plan.ceiling_by else ""), width
    )
    # Vessels that stand beside each other are sealed: nobody chooses what is in them.
    for name, mass, reason in () if plan.beside else (
        ("least charge", bounds.least_kg, bounds.least_reason),
        ("best charge", bounds.best_kg, bounds.best_reason),
        ("most charge", bounds.most_kg, bounds.most_reason),
    ):
        rows += _pair(name, f"{'none' if mass is None else say(mass, 'g', 1)}  {reason}", width)
    rows += _pair("planned", planned(plan), width, "strong")
    restless = [line.number for line in plan.lines if not line.left_alone.at_rest]
    ends = [f.ends_Pa for line in plan.lines for f in line.left_alone.futures if f.ends_Pa is not None]
    highest = f"at most {_pressure(max(ends), plan)}" if ends else "not known"
    stuck = any(f.cause == "heat stuck on" for line in plan.lines for f in line.left_alone.futures)
    rows += _pair("left alone", f"ends {highest}" + (", heat stuck on included" if stuck else ""), width)
    words = f"steps {', '.join(restless)}: do not leave the vessel there" if restless else "at rest in every step"
    return rows + _pair("", words, width, "not yet" if restless else "yes")


def _pressure(value: float | None, plan: Plan) -> str:
    return "not known" if value is None else say_level(value, plan.pressure_unit, plan.barometer, 1)


def _seen(plan: Plan, width: int) -> list[Row]:
    """What the class will see, and at what temperature, in the order of the path."""
    rows: list[Row] = []
    for number, sights in along(plan):
        for place, words in enumerate(sights):
            rows += _pair(f"seen in {number}" if place == 0 else "", words, width)
    return [*rows, EMPTY] if rows else []


def _dated(plan: Plan, width: int) -> list[Row]:
    bad = [c for c in plan.certificates if c.state != "valid"]
    rows = []
    for one in bad:
        rows += _pair("certificate", f"{one.tag} {one.what}: {one.state.upper()}, until {one.until}", width, "blocked")
    good = len(plan.certificates) - len(bad)
    if good:
        soonest = min((c.until for c in plan.certificates if c.state == "valid"), default="")
        rows += _pair("certificates", f"{good} valid, the first until {soonest}", width, "yes")
    return rows


def _telling(plan: Plan, width: int) -> list[Row]:
    said = telling_lines(plan, TOLD)
    return [row for n, words in enumerate(said) for row in _pair("" if n else "instruments", words, width)]


def _bring(plan: Plan, width: int) -> list[Row]:
    return _pair("bring", ", ".join(plan.bring), width) if plan.bring else []


def _findings(findings: tuple[Finding, ...], width: int) -> list[Row]:
    rows: list[Row] = []
    for one in sorted(findings, key=lambda f: ("error", "warning", "advice").index(f.severity)):
        style = {"error": "blocked", "warning": "not yet"}.get(one.severity, "plain")
        rows += [EMPTY] if not rows else []
        rows += wrapped(f" {one.severity}, line {one.line}: {one.message}", width - 1, style)
    return rows
