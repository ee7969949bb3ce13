"""Ten procedures that are wrong on purpose: `check` finds exactly what each was written for, where it was written."""

from __future__ import annotations

import json
import os
from collections.abc import Mapping
from pathlib import Path
from typing import Any

import pytest

from runbook.commands.check import main
from tests.assess.scenes import changed_files

GOLDEN = Path(__file__).parent / "goldens" / "bad-procedures.json"
HOLD = """      - hold:
          signed_by: second
          because: letting down can bring the wall to -78 degC, and the gas goes where people breathe
"""
BAD: dict[str, tuple[Mapping[str, str], Mapping[str, str]]] = {
    "too much is closed in": ({"mass: 117 g ± 2 g": "mass: 145 g ± 2 g"}, {}),
    "the cut-out comes too late": ({}, {"cut_out: 38 degC ± 1 K": "cut_out: 46 degC ± 1 K"}),
    "it is warmed too far": ({"warm_to: 33 degC": "warm_to: 41 degC", "set_to: 35 degC": "set_to: 42 degC"}, {}),
    "the room is too small for the gas": ({"volume: 180 m3": "volume: 12 m3"}, {}),
    "a rating nobody knows": (
        {},
        {"up to 250 bar(g), temperature: -100 degC to 150": "not known, temperature: -100 degC to 150"},
    ),
    "nobody signs before the let-down": ({HOLD: ""}, {}),
    "let down through a dip tube": (
        {},
        {"joins: [cell, outside], port: top": "joins: [cell, outside], port: dip tube"},
    ),
    "tightened under pressure": (
        {"do: Look along V1, V2 and the windows with the camera": "do: Tighten the screws of V1 by a quarter turn"},
        {},
    ),
    "the valve is not in the valves": (
        {"do: Shut V3\n        who: performer\n        valves: {V3: shut}\n": "do: Shut V3\n        who: performer\n"},
        {},
    ),
    "the surface will not fade": ({"mass: 117 g ± 2 g": "mass: 98 g ± 2 g", "117 g to 150 g": "90 g to 150 g"}, {}),
}  # fmt: skip
"""What is wrong, and the words changed for it in the procedure and in the vessel."""


def found(folder: Path, name: str, capsys: pytest.CaptureFixture[str]) -> dict[str, Any]:
    """Verdict, and each finding's rule, severity, line and column."""
    path = changed_files(folder, *BAD[name])
    main([str(path), "--on", "2031-03-02", "--json"])
    document = json.loads(capsys.readouterr().out)["procedures"][0]
    rows = [[f["rule"], f["severity"], f["line"], f["column"]] for f in document["findings"]]
    return {"verdict": document["verdict"], "findings": rows}


@pytest.mark.parametrize("name", BAD)
def test_exactly_what_it_was_written_for(name: str, tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    """No more and no less than the golden list; RUNBOOK_REWRITE_GOLDENS=1 writes it anew."""
    ours = found(tmp_path, name, capsys)
    golden: dict[str, Any] = json.loads(GOLDEN.read_text("utf-8")) if GOLDEN.exists() else {}
    if os.environ.get("RUNBOOK_REWRITE_GOLDENS") and not os.environ.get("CI"):
        golden[name] = ours
        GOLDEN.write_text(json.dumps(golden, indent=1, ensure_ascii=False) + "\n", "utf-8")
    assert ours == golden[name]
