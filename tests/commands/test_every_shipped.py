"""Every shipped procedure: within limits on its day, rehearsed to its end, listed, printed, helped by the editor."""

from __future__ import annotations

import asyncio
from datetime import date
from pathlib import Path

import pytest

from runbook.__main__ import main
from runbook.assess.bind import bind
from runbook.procedure.reader import read_procedure
from runbook.rehearsal.headless import rehearse

FOLDER = Path(__file__).parents[2] / "procedures"
SHIPPED = sorted(FOLDER.glob("*.yaml"))
VESSELS = sorted((FOLDER / "apparatus").glob("*.yaml"))
by_name = pytest.mark.parametrize("path", SHIPPED, ids=lambda p: p.stem)


def issued(path: Path) -> date:
    """The day on which it is judged."""
    return read_procedure(path).procedure.issue.date


def test_there_are_some() -> None:
    """The critical and the triple point of carbon dioxide, three tubes in one bath; each vessel used by one."""
    assert {"co2-critical-point", "co2-triple-point", "sf6-three-tubes"} <= {p.stem for p in SHIPPED}
    used = {str(read_procedure(p).procedure.apparatus) for p in SHIPPED}
    assert all(any(v.name in one for one in used) for v in VESSELS)


@by_name
def test_it_is_within_limits_and_clean(path: Path) -> None:
    """Nothing is found in it, not even an advice; of tubes that nothing can relieve it stays said."""
    plan = bind(read_procedure(path), issued(path))
    found = [f.message for f in plan.findings if f.rule != "no relief device"]
    assert (plan.verdict, found) == ("within limits", [])


RUNS = [(p, 1) for p in SHIPPED] + [(FOLDER / "co2-triple-point.yaml", seed) for seed in (2, 7, 11)]
"""One of each, and more of what takes a second."""


@pytest.mark.parametrize(("path", "seed"), RUNS, ids=lambda x: x.stem if isinstance(x, Path) else str(x))
def test_it_is_rehearsed_to_its_end(path: Path, seed: int) -> None:
    """By the ideal operator, under every pressure limit, from its first line to its last."""
    found = asyncio.run(rehearse(path, seed))
    plan = bind(read_procedure(path), issued(path))
    assert (found.outcome, found.reason) == ("completed", None)
    assert found.steps_done == len(plan.lines)
    assert found.least_margin is not None
    assert found.least_margin > 0.0
    assert plan.ceiling is not None
    assert found.highest_pressure < plan.ceiling


@pytest.mark.parametrize("path", [*SHIPPED, *VESSELS], ids=lambda p: p.stem)
def test_its_first_line_tells_the_editor_its_schema(path: Path) -> None:
    """As the YAML language server asks, and the schema is there."""
    first = path.read_text("utf-8").splitlines()[0]
    assert first.startswith("# yaml-language-server: $schema=")
    assert (path.parent / first.split("=", 1)[1]).resolve().is_file()


@by_name
def test_it_is_listed_and_printed(path: Path, tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    """`runbook` names it, and its paper has every step."""
    assert main(["print", str(path), "--on", issued(path).isoformat(), "-o", str(tmp_path / "out.html")]) == 0
    page = (tmp_path / "out.html").read_text("utf-8")
    plan = bind(read_procedure(path), issued(path))
    assert [one.number for one in plan.lines if f">{one.number}<" not in page] == []
    capsys.readouterr()
    assert main([]) == 0
    assert path.name in capsys.readouterr().out
