"""Every rule has its page: name, severity, source, why, and how it is done well."""

from __future__ import annotations

import ast
from collections.abc import Iterator
from pathlib import Path

import pytest

from runbook.__main__ import main
from runbook.procedure.rulebook import rules

CODE = Path(__file__).parents[2] / "runbook"


def named_in_code() -> Iterator[tuple[str, str]]:
    """(rule, file) of everything that is found under a name: first text of Found and Finding, last of say."""
    for file in sorted(CODE.rglob("*.py")):
        for node in ast.walk(ast.parse(file.read_text("utf-8"))):
            if not isinstance(node, ast.Call):
                continue
            called = getattr(node.func, "id", getattr(node.func, "attr", ""))
            texts = [a.value for a in node.args if isinstance(a, ast.Constant) and isinstance(a.value, str)]
            if called in ("Found", "Finding") and texts:
                yield texts[0], file.name
            elif called == "say" and file.name == "rules_order.py" and len(node.args) >= 3:
                last = node.args[2]
                assert isinstance(last, ast.Constant)
                yield str(last.value), file.name


def test_every_rule_of_the_code_has_its_page() -> None:
    """A finding whose name nothing explains is a riddle."""
    known = {one.name for one in rules()}
    assert {name for name, _ in named_in_code()} - known == set()


def test_no_page_without_a_rule() -> None:
    """A page of a rule that nothing finds is dead text; 'reading', 'apparatus', 'order' and 'fluid' come otherwise."""
    used = {name for name, _ in named_in_code()} | {"reading", "apparatus", "order", "fluid"}
    assert {one.name for one in rules()} - used == set()


@pytest.mark.parametrize("name", [one.name for one in rules()])
def test_why_prints_it(name: str, capsys: pytest.CaptureFixture[str]) -> None:
    """`check --why RULE` on standard output, exit 0."""
    assert main(["check", "--why", name]) == 0
    said = capsys.readouterr().out
    assert said.startswith(name)
    assert "Source: " in said
    assert "Well done:" in said


def test_a_rule_that_is_not_there(capsys: pytest.CaptureFixture[str]) -> None:
    """Exit 2, and the nearest name."""
    assert main(["check", "--why", "hold mising"]) == 2
    assert "did you mean 'hold missing'" in capsys.readouterr().err
