"""Every fault in every shipped procedure: none leads past a limit, none is passed by; `--every-fault` in short."""

from __future__ import annotations

import asyncio
from pathlib import Path

import pytest

from runbook.rehearsal.faults import FAULTS, Fault
from runbook.rehearsal.headless import rehearse

SHIPPED = sorted((Path(__file__).parents[2] / "procedures").glob("*.yaml"))


@pytest.mark.parametrize("fault", FAULTS, ids=lambda fault: fault.name)
@pytest.mark.parametrize("path", SHIPPED, ids=lambda path: path.stem)
def test_nothing_goes_badly(path: Path, fault: Fault) -> None:
    """The rules that the command ends with 1 for; and what was begun comes to an end."""
    found = asyncio.run(rehearse(path, 1, faults=[(fault, 0.0)]))
    assert found.fault is not None
    assert found.fault.wrong == ()
    assert found.outcome in ("completed", "made safe")
