"""The shipped files with words of them changed, in a folder of their own."""

from __future__ import annotations

from pathlib import Path

import pytest

from runbook.errors import FileProblems, Problem
from runbook.procedure.reader import Loaded, read_procedure
from runbook.procedure.writing import findings

SHIPPED = Path(__file__).parents[2] / "procedures"
PROCEDURE = "co2-critical-point.yaml"
VESSEL = "view-cell-250.yaml"


def written(folder: Path, changes: dict[str, str] | None = None, vessel: dict[str, str] | None = None) -> Path:
    """Both files in a folder, the first place of each given text replaced; path of the procedure."""
    (folder / "apparatus").mkdir(exist_ok=True)
    text = _changed((SHIPPED / "apparatus" / VESSEL).read_text("utf-8"), vessel or {})
    (folder / "apparatus" / VESSEL).write_text(text, "utf-8")
    path = folder / PROCEDURE
    path.write_text(_changed((SHIPPED / PROCEDURE).read_text("utf-8"), changes or {}), "utf-8")
    return path


def read(folder: Path, changes: dict[str, str] | None = None, vessel: dict[str, str] | None = None) -> Loaded:
    """Both files, read."""
    return read_procedure(written(folder, changes, vessel))


def refused(path: Path) -> tuple[Problem, ...]:
    """The problems of files that cannot be read; each of them has a place."""
    with pytest.raises(FileProblems) as caught:
        read_procedure(path)
    problems = caught.value.problems
    assert problems
    for one in problems:
        assert one.line >= 1, one
        assert one.column >= 1, one
        assert one.message.strip(), one
    return problems


def only(path: Path) -> Problem:
    """The one problem there is."""
    problems = refused(path)
    assert len(problems) == 1, [str(p) for p in problems]
    return problems[0]


def found(
    folder: Path, rule: str, changes: dict[str, str] | None = None, vessel: dict[str, str] | None = None
) -> list[Problem]:
    """What the writing rules find under one name."""
    return [p for p in findings(read(folder, changes, vessel)) if p.rule == rule]


def word_at(path: Path, problem: Problem) -> str:
    """The text of the file from the place of a problem to the end of its line."""
    return path.read_text("utf-8").splitlines()[problem.line - 1][problem.column - 1 :]


def _changed(text: str, changes: dict[str, str]) -> str:
    for old, new in changes.items():
        assert old in text, f"the shipped file no longer says: {old}"
        text = text.replace(old, new, 1)
    return text
