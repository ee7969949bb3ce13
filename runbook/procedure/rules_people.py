"""Who does, who signs, who wrote: nobody both ends of one thing."""

from __future__ import annotations

from collections.abc import Iterator

from runbook.apparatus.model import Apparatus
from runbook.procedure.document import Route
from runbook.procedure.lines import Found, Line, lines_of, listed
from runbook.procedure.model import (
    DoStep,
    HoldStep,
    LetDownTo,
    Load,
    OpenContainment,
    Procedure,
    Purge,
    QuickStep,
    WarmTo,
    WitnessStep,
)
from runbook.procedure.problems import nearest


def roles(procedure: Procedure, apparatus: Apparatus) -> Iterator[Found]:
    """Rules 'role not declared', 'signs own work' and 'checks own text'."""
    del apparatus
    for route, role in _roles_used(procedure):
        if role not in procedure.roles:
            yield Found(
                "role not declared",
                route,
                f"'{role}' is not one of the roles{nearest(role, procedure.roles)}: {listed(procedure.roles)}",
            )
    issue = procedure.issue
    if _same(issue.written_by, issue.checked_by):
        yield Found(
            "checks own text", ("issue", "checked_by"), "the author does not check the own text: name somebody else"
        )
    if issue.review_by <= issue.date:
        yield Found("review date", ("issue", "review_by"), "the text is due for review before it is issued")
    for i, role in enumerate(procedure.roles):
        if role in procedure.roles[:i]:
            yield Found("role not declared", ("roles", i), f"the role '{role}' stands twice", "warning")


def holds(procedure: Procedure, apparatus: Apparatus) -> Iterator[Found]:
    """Rules 'hold at an end', 'signs own work' and 'witness before a rise'."""
    del apparatus
    lines = lines_of(procedure)
    for i, line in enumerate(lines):
        if isinstance(line.step, HoldStep):
            if i in (0, len(lines) - 1):
                end = "first" if i == 0 else "last"
                yield Found("hold at an end", line.route, f"a hold stands between two steps, never as the {end} line")
            yield from _own_work(procedure, lines, i, line.step)
        if isinstance(line.step, WitnessStep) and i + 1 < len(lines) and _raises(lines[i + 1]):
            yield Found(
                "witness before a rise",
                line.route,
                "a witness point lets the run go on alone, so it never stands before a step that raises a hazard: "
                "make it a hold, or move it",
            )


def performer(procedure: Procedure) -> str:
    """The role that performs a quick sequence, which names nobody."""
    return "performer" if "performer" in procedure.roles else procedure.roles[0]


def _own_work(procedure: Procedure, lines: tuple[Line, ...], i: int, step: HoldStep) -> Iterator[Found]:
    signer = step.hold.signed_by
    done = [_who(procedure, line) for line in lines]
    if signer in _signed_for(lines, done, i):
        yield Found(
            "signs own work",
            (*lines[i].route, "hold", "signed_by"),
            f"'{signer}' performs one of the steps this hold signs for, those since the hold before it or the "
            "beginning of the part: who performed never signs, name another role",
        )
    elif {w for w in done if w is not None} == {signer}:
        yield Found(
            "signs own work",
            (*lines[i].route, "hold", "signed_by"),
            f"'{signer}' performs every step: a hold is signed by somebody else",
        )


def _signed_for(lines: tuple[Line, ...], done: list[str | None], i: int) -> set[str]:
    """Roles that perform what hold i signs for: since the hold before it, or the beginning of its part."""
    found: set[str] = set()
    for n in range(i - 1, -1, -1):
        if isinstance(lines[n].step, HoldStep) or lines[n].route[:2] != lines[i].route[:2]:
            break
        found |= {role for role in (done[n],) if role is not None}
    return found


def _who(procedure: Procedure, line: Line) -> str | None:
    if isinstance(line.step, DoStep):
        return line.step.who
    return performer(procedure) if isinstance(line.step, QuickStep) else None


def _raises(line: Line) -> bool:
    """Whether a line raises a hazard by its verb alone."""
    step = line.step
    if isinstance(step, QuickStep):
        return True
    raising = (Load, WarmTo, LetDownTo, Purge, OpenContainment)
    return isinstance(step, DoStep) and (isinstance(step.path, raising) or bool(step.raises))


def _roles_used(procedure: Procedure) -> Iterator[tuple[Route, str]]:
    for i, part in enumerate(procedure.parts):
        if part.parked is not None:
            yield ("parts", i, "parked", "key_with"), part.parked.key_with
    for line in lines_of(procedure):
        step = line.step
        if isinstance(step, DoStep):
            yield (*line.route, "who"), step.who
        elif isinstance(step, HoldStep):
            yield (*line.route, "hold", "signed_by"), step.hold.signed_by
        elif isinstance(step, WitnessStep):
            yield (*line.route, "witness", "called"), step.witness.called
    for i, also in enumerate(procedure.make_safe_also):
        yield ("make_safe_also", i, "who"), also.who


def _same(one: str, other: str) -> bool:
    return " ".join(one.split()).casefold() == " ".join(other.split()).casefold()
