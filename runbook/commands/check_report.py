"""What `runbook check` prints for a person: findings, the verdict, every step with what governs it, the path.

Steps that say the same stand in one row. Colour only on a terminal that wants it; the words carry everything.
"""

from __future__ import annotations

import sys
from collections.abc import Callable, Sequence
from itertools import groupby

from rich.console import Console
from rich.text import Text

from runbook.answers import Finding, LeftAlone, Margin, Plan, PlanLine
from runbook.drawing import ASCII, UNICODE, Chart, Mark, chart_picture
from runbook.quantities import pressure_to_unit, to_unit
from runbook.run.amounts import grams, level, margin_left, pressure
from runbook.run.evidence_words import telling_lines

_VERDICT_STYLE = {"within limits": "bold green", "outside limits": "bold red", "not proved": "bold yellow"}
_SEVERITY_STYLE = {"error": "red", "warning": "yellow", "advice": "cyan"}
_WIDE, _STRIP_ROWS = 78, 14


def print_report(file: str, plan: Plan) -> None:
    """The whole report of one procedure on standard output."""
    console = Console(highlight=False, markup=False, soft_wrap=True, file=sys.stdout)
    for finding, steps in _gathered(plan):
        head = f"{finding.file or file}:{finding.line}:{finding.column}: "
        said = Text(head)
        said.append(finding.severity, style=_SEVERITY_STYLE.get(finding.severity, ""))
        said.append(f": {steps}{_without_step(finding)[1]} [{finding.rule}]")
        console.print(said)
    verdict = Text(f"{file}: ")
    verdict.append(plan.verdict.upper(), style=_VERDICT_STYLE[plan.verdict])
    verdict.append(f" of the figures in this file, approved by {plan.approved}")
    console.print(verdict)
    for row in _table(plan):
        console.print(row)
    for drawn in _strip(plan):
        console.print(drawn)
    for name in ("least", "best", "most"):
        mass, reason = getattr(plan.bounds, f"{name}_kg"), getattr(plan.bounds, f"{name}_reason")
        console.print(f"  {name} charge: {'none' if mass is None else grams(mass)} ({reason})")
    for told in telling_lines(plan):
        console.print(f"  instrument {told}")


# -- findings ---------------------------------------------------------------------------------------------


def _without_step(finding: Finding) -> tuple[str, str]:
    """('1.17', the rest) of 'step 1.17: the rest'; no step: ('', all of it)."""
    head, colon, rest = finding.message.partition(": ")
    if colon and head.startswith("step ") and head[5:].replace(".", "").isdigit():
        return head[5:], rest
    return "", finding.message


def _gathered(plan: Plan) -> list[tuple[Finding, str]]:
    """Findings that say the same of several steps once, at the first, with the numbers of all."""
    kept: dict[tuple[str, str, str], tuple[Finding, list[str]]] = {}
    for finding in plan.findings:
        number, rest = _without_step(finding)
        place = "" if number else f"{finding.line}:{finding.column}"
        kept.setdefault((finding.rule, rest, place), (finding, []))[1].append(number)
    return [(finding, _steps(plan, numbers)) for finding, numbers in kept.values()]


def _steps(plan: Plan, numbers: Sequence[str]) -> str:
    """'step 1.17: ', 'steps 1.18 to 3.2, 3.6: ', or nothing."""
    order = [line.number for line in plan.lines]
    places = sorted({order.index(n) for n in numbers if n in order})
    runs: list[tuple[int, int]] = []
    for place in places:
        runs = [*runs[:-1], (runs[-1][0], place)] if runs and runs[-1][1] == place - 1 else [*runs, (place, place)]
    said = [order[a] if a == b else f"{order[a]} to {order[b]}" for a, b in runs]
    if not said:
        return ""
    return f"step{'s' if len(places) > 1 else ''} {', '.join(said)}: "


# -- the table --------------------------------------------------------------------------------------------


def _table(plan: Plan) -> list[Text]:
    """One row for each run of steps that say the same."""
    rows = [_cells(plan, line) for line in plan.lines]
    numbered = zip((line.number for line in plan.lines), rows, strict=True)
    merged: list[tuple[str, tuple[str, ...]]] = []
    for cells, group in groupby(numbered, key=lambda pair: pair[1]):
        numbers = [number for number, _ in group]
        merged.append((numbers[0] if len(numbers) == 1 else f"{numbers[0]} to {numbers[-1]}", cells))
    head = ("step", ("governs", "worst", "allowed", "margin", "left alone"))
    table = [(first, *rest) for first, rest in (head, *merged)]
    widths = [max(len(row[i]) for row in table) for i in range(5)]
    found = []
    for row in table:
        left = f"  {row[0]:<{widths[0]}}  {row[1]:<{widths[1]}}"
        numbers_ = "".join(f"  {row[i]:>{widths[i]}}" for i in (2, 3, 4))
        text = Text(left + numbers_ + "  ")
        text.append(row[5], style="bold red" if row[5].startswith("NOT") else "")
        found.append(text)
    return found


def _cells(plan: Plan, line: PlanLine) -> tuple[str, ...]:
    alone = _alone_words(plan, line.left_alone)
    if not line.ahead:
        return ("-", "", "", "", alone)
    governs: Margin = line.ahead[0]
    what = f"{governs.limit} {governs.kind}"
    return (
        what,
        level(plan, governs, governs.worst),
        level(plan, governs, governs.allowed),
        margin_left(plan, governs),
        alone,
    )


def _alone_words(plan: Plan, alone: LeftAlone) -> str:
    ends = [pressure(plan, f.ends_Pa) + (" stuck on" if f.cause == "heat stuck on" else "") for f in alone.futures]
    return ("at rest " if alone.at_rest else "NOT AT REST ") + ", ".join(ends)


# -- the strip --------------------------------------------------------------------------------------------


def _strip(plan: Plan) -> tuple[str, ...]:
    """Pressure over temperature along the path of the planned charge, the ceiling above it."""
    if not plan.path or plan.ceiling is None:
        return ()

    def up(pascal: float) -> float:
        return pressure_to_unit(pascal, plan.pressure_unit, plan.barometer)

    path = tuple((to_unit(T, "degC"), up(p)) for T, p in plan.path)
    top = 1.15 * max(up(plan.ceiling), max(p for _, p in path))
    chart = Chart(
        across=(path[0][0], path[-1][0]),
        up=(0.0, top),
        path=path,
        ceiling=up(plan.ceiling),
        marks=_marks(plan, up),
        unit_across="°C",
        unit_up=plan.pressure_unit,
    )
    glyphs = UNICODE if (sys.stdout.encoding or "").lower().startswith("utf") else ASCII
    rows = (f"  {row}".rstrip() for row in chart_picture(chart, _WIDE, _STRIP_ROWS, glyphs))
    rooms = " c and h: coldest and hottest room;" if chart.marks else " never left to come to the room;"
    return (*rows, f"  the planned charge as it warms;{rooms} shaded: beyond the ceiling")


def _marks(plan: Plan, up: Callable[[float], float]) -> tuple[Mark, ...]:
    """The room's two ends on the path; none where it ends far below them."""
    if plan.path[-1][0] < plan.room_coldest:
        return ()
    found = []
    for kelvin, sign in ((plan.room_coldest, "c"), (plan.room_hottest, "h")):
        nearest = min(plan.path, key=lambda point: abs(point[0] - kelvin))
        found.append(Mark((to_unit(nearest[0], "degC"), up(nearest[1])), sign))
    return tuple(found)
