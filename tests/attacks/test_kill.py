"""Line mode killed with signal 9: nothing acknowledged is lost, and the run can be taken up again."""

from __future__ import annotations

import json
import subprocess
import sys
from pathlib import Path

import pytest

ROOT = Path(__file__).parents[2]


@pytest.mark.skipif(not hasattr(sys, "getdlopenflags"), reason="forks and signal 9 are not there on Windows")
@pytest.mark.parametrize("which", ["kinds", "seeded"])
def test_no_acknowledged_event_is_lost(tmp_path: Path, which: str) -> None:
    """After one event of each kind, and at 20 seeded moments: every acknowledged record is there, the fold is the
    same, the four questions stand, and make safe is open before and after them."""
    command = [sys.executable, "-W", "error::ResourceWarning", "-m", "tests.attacks.kill_rounds", str(tmp_path), which]
    done = subprocess.run(command, capture_output=True, text=True, cwd=ROOT, check=False, timeout=500)
    assert done.returncode == 0, done.stderr[-2000:]
    rounds = [json.loads(line) for line in done.stdout.splitlines()]
    assert len(rounds) >= (10 if which == "kinds" else 20)
    for one in rounds:
        assert one["kept"] >= one["acknowledged"], one
        assert one["same"], one
        assert one["finished"] or (one["gap"] and one["answered"] and one["safe"]), one
