"""The shipped vessel, for tests that change it in code."""

from __future__ import annotations

from pathlib import Path

from runbook.apparatus.model import Apparatus
from runbook.procedure.reader import read_apparatus

FILE = Path(__file__).parents[2] / "procedures" / "apparatus" / "view-cell-250.yaml"
OPEN = {"V1": "shut", "V2": "open", "V3": "open"}
CLOSED = {"V1": "shut", "V2": "shut", "V3": "shut"}


def cell() -> Apparatus:
    """The shipped vessel."""
    return read_apparatus(FILE)
