"""Procedures written from the manual alone: no error, at most two warnings, within limits."""

from __future__ import annotations

import asyncio
from pathlib import Path

import pytest

from runbook.assess.bind import bind
from runbook.procedure.reader import read_procedure
from runbook.rehearsal.headless import rehearse

FILES = sorted((Path(__file__).parent / "good").glob("*.yaml"))
UNKNOWN = {"franklin"}
"""Of a vessel two of whose proofs nobody has: not proved is the true answer."""


@pytest.mark.parametrize("path", FILES, ids=lambda path: path.stem)
def test_a_good_procedure_is_called_good(path: Path) -> None:
    """No false error and few warnings, on the day it was issued."""
    loaded = read_procedure(path)
    plan = bind(loaded, loaded.procedure.issue.date)
    assert [f.message for f in plan.findings if f.severity == "error"] == []
    warnings = [f for f in plan.findings if f.severity == "warning"]
    assert len(warnings) <= 2
    if path.stem in UNKNOWN:
        assert plan.verdict == "not proved"
        assert [f.rule for f in warnings] == ["certificate", "certificate"]
    else:
        assert plan.verdict == "within limits"


@pytest.mark.parametrize("name", ["sf6", "r134a", "natterer", "xenon", "nitrogen", "argon", "marcet"])
def test_a_good_procedure_is_rehearsed_to_its_end(name: str) -> None:
    """The ideal operator comes through: tubes without a gauge, water poured by hand, gas from a cylinder, steam.

    tests/benchmarks/bench_good_procedures.py rehearses all of them.
    """
    found = asyncio.run(rehearse(next(path for path in FILES if path.stem == name), 1))
    assert (found.outcome, found.reason) == ("completed", None)
    if name == "marcet":
        # Warmed to about 160 degC: 6.18 bar over water (steam tables, IAPWS-IF97).
        assert found.highest_pressure == pytest.approx(6.18e5, rel=0.06)
