"""The short form of the fuzz of whole files through `check`."""

from __future__ import annotations

from pathlib import Path

from tests.attacks.fuzz_files import fuzz


def test_damaged_files_are_told_or_judged(tmp_path: Path) -> None:
    """Exit 0, 1 or 2; with 2 a place; no traceback; none slower than a second. All three exits are reached."""
    codes, wrong = fuzz(250, 20310302, tmp_path)
    assert wrong == []
    assert set(codes) == {0, 1, 2}
