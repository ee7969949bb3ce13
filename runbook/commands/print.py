"""`runbook print FILE -o OUT.html`: the procedure on paper, with the cards that hang at the bench.

Only of a procedure within limits: paper refuses no step, so what a run would refuse is not printed.
"""

from __future__ import annotations

import sys
from datetime import date
from pathlib import Path

from runbook.commands.arguments import Arguments, iso_date
from runbook.errors import ExitCode, FileProblems


def main(argv: list[str]) -> int:
    """Write the booklet; returns the exit code."""
    parser = Arguments(prog="runbook print", description=__doc__)
    parser.add_argument("file", metavar="FILE")
    parser.add_argument("-o", "--out", metavar="OUT.html", required=True, help="where to write; '-' is standard output")
    parser.add_argument("--on", metavar="DATE", help="judge certificates on this date (default: today)")
    parser.add_argument("--barometer", metavar="READING", help="of the day, such as 1009hPa (default: by height)")
    asked = parser.parse_args(argv)
    on = iso_date(asked.on)
    try:
        page, plan_verdict, findings = _page(asked.file, on, asked.barometer)
    except FileProblems as problems:
        for problem in problems.problems:
            print(str(problem), file=sys.stderr)
        return int(ExitCode.UNUSABLE)
    if page is None:
        for line in findings:
            print(line, file=sys.stderr)
        print(
            f"{asked.file}: {plan_verdict.upper()}: not printed, for a sheet of paper refuses no step.",
            file=sys.stderr,
        )
        return int(ExitCode.NOT_GOOD)
    if asked.out == "-":
        print(page, end="")
    else:
        Path(asked.out).write_text(page, encoding="utf-8")
    return int(ExitCode.GOOD)


def _page(file: str, on: date, barometer: str | None) -> tuple[str | None, str, list[str]]:
    """The page, or None with the verdict and the findings."""
    from runbook.assess.bind import plan_of_all
    from runbook.assess.gauge_card import gauge_card, vessel_card
    from runbook.assess.several import open_all
    from runbook.paper.booklet import booklet
    from runbook.procedure.reader import read_procedure
    from runbook.procedure.shelf import find_procedure
    from runbook.quantities import parse_barometer

    loaded = read_procedure(find_procedure(file))
    read = None if barometer is None else parse_barometer(barometer)
    scenes = open_all(loaded, read)
    plan = plan_of_all(loaded, scenes, on)
    if plan.verdict != "within limits":
        said = [f"{f.file or file}:{f.line}:{f.column}: {f.severity}: {f.message} [{f.rule}]" for f in plan.findings]
        return None, plan.verdict, said
    tags = [vessel_card(scene, lines) for scene, lines in scenes]
    return booklet(plan, loaded.procedure.issue, gauge_card(*scenes[0]), tags, on), plan.verdict, []
