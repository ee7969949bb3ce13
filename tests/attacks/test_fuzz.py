"""The short form of the fuzz of whole files through `check`."""

from __future__ import annotations

import time
from pathlib import Path

from runbook.__main__ import main
from tests.attacks.fuzz_files import fuzz
from tests.procedure.files import written

MARK = "      - do: Unplug H1\n"
STEP = "      - do: Read TT1\n        who: performer\n        read:\n          - {what: temperature, with: TT1}\n"


def test_damaged_files_are_told_or_judged(tmp_path: Path) -> None:
    """Exit 0, 1 or 2; with 2 a place; no traceback; none slower than a second. All three exits are reached."""
    codes, wrong = fuzz(250, 20310302, tmp_path)
    assert wrong == []
    assert set(codes) == {0, 1, 2}


def test_a_thousand_steps_are_judged_in_proportion(tmp_path: Path) -> None:
    """What costs a step costs a thousand of them a thousand times as much at most, never its square."""
    took = {}
    for count in (100, 1000):
        path = written(tmp_path, {MARK: STEP * count + MARK})
        main(["check", str(path), "--on", "2031-03-02"])
        began = time.perf_counter()
        assert main(["check", str(path), "--on", "2031-03-02"]) == 0
        took[count] = time.perf_counter() - began
    assert took[1000] < 20.0 * took[100]
