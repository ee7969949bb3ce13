"""`runbook check FILE...`: is every step of each procedure within its vessel's limits, with everybody gone?

Findings first, then every step with its governing margin and what happens if nobody does anything.
"""

from __future__ import annotations

import json
import sys
from datetime import date
from typing import TYPE_CHECKING, Any

from runbook.commands.arguments import Arguments, iso_date
from runbook.errors import ExitCode, FileProblems, InputUnusable, Problem

if TYPE_CHECKING:
    from runbook.answers import LeftAlone, Margin, Plan, PlanLine


def main(argv: list[str]) -> int:
    """Check each file; returns the exit code."""
    parser = Arguments(prog="runbook check", description=__doc__)
    parser.add_argument("files", nargs="*", metavar="FILE")
    parser.add_argument("--why", metavar="RULE", help="explain the rule named in brackets after a finding")
    parser.add_argument("--on", metavar="DATE", help="judge certificates on this date (default: today)")
    parser.add_argument("--json", action="store_true", help="one document, SI, pressures absolute")
    asked = parser.parse_args(argv)
    if asked.why is not None:
        return _why(asked.why)
    if not asked.files:
        raise InputUnusable("name a procedure file, or a rule to explain: --why RULE")
    on = iso_date(asked.on)
    results = [_check(file, on) for file in asked.files]
    if asked.json:
        print(json.dumps({"procedures": [_as_json(*r) for r in results]}, indent=2, allow_nan=False))
    else:
        for result in results:
            _print(*result)
    return max(int(_code(plan)) for _, plan, _ in results)


def _why(name: str) -> int:
    from runbook.procedure.rulebook import explained, rule

    print(explained(rule(name)))
    return int(ExitCode.GOOD)


def _check(file: str, on: date) -> tuple[str, Plan | None, tuple[Problem, ...]]:
    from runbook.procedure.reader import read_procedure
    from runbook.procedure.shelf import find_procedure

    try:
        loaded = read_procedure(find_procedure(file))
        # Physics only for files that read well: a wrong unit is told in a tenth of a second.
        from runbook.assess.bind import bind

        return file, bind(loaded, on), ()
    except FileProblems as problems:
        return file, None, problems.problems
    except InputUnusable as error:
        return file, None, (Problem(file, 0, 0, str(error)),)


def _code(plan: Plan | None) -> ExitCode:
    if plan is None:
        return ExitCode.UNUSABLE
    return ExitCode.GOOD if plan.verdict == "within limits" else ExitCode.NOT_GOOD


def _as_json(file: str, plan: Plan | None, problems: tuple[Problem, ...]) -> dict[str, Any]:
    if plan is None:
        found = [
            {"rule": p.rule, "severity": p.severity, "line": p.line, "column": p.column, "message": p.message}
            for p in problems
        ]
        return {"file": file, "verdict": "unreadable", "findings": found, "steps": []}
    findings = [
        {"rule": f.rule, "severity": f.severity, "line": f.line, "column": f.column, "message": f.message}
        for f in plan.findings
    ]
    return {
        "file": file,
        "verdict": plan.verdict,
        "findings": findings,
        "steps": [_step_json(line) for line in plan.lines],
    }


def _step_json(line: PlanLine) -> dict[str, Any]:
    return {
        "step": line.number,
        "margins": [_margin_json(m) for m in line.ahead],
        "left_alone": _alone_json(line.left_alone),
    }


def _margin_json(margin: Margin) -> dict[str, Any]:
    at = None
    if margin.at is not None:
        at = {
            "charge_kg": margin.at.charge_kg,
            "volume_m3": margin.at.volume_m3,
            "temperature_K": margin.at.temperature_K,
        }
    return {
        "limit": margin.limit,
        "kind": margin.kind,
        "worst": margin.worst,
        "allowed": margin.allowed,
        "margin": margin.margin,
        "unit": margin.unit,
        "at": at,
    }


def _alone_json(alone: LeftAlone) -> dict[str, Any]:
    ends = [f.ends_Pa for f in alone.futures if f.ends_Pa is not None]
    falls = [f.limit_after_s for f in alone.futures if f.limit_after_s is not None]
    return {
        "at_rest": alone.at_rest,
        "ends_Pa": max(ends) if ends and len(ends) == len(alone.futures) else None,
        "limit_after_s": min(falls) if falls else None,
    }


def _print(file: str, plan: Plan | None, problems: tuple[Problem, ...]) -> None:
    if plan is None:
        for problem in problems:
            print(str(problem), file=sys.stderr)
        print(f"{file}: UNREADABLE, {len(problems)} to mend")
        return
    from runbook.commands.check_report import print_report

    print_report(file, plan)
