"""`runbook print`: writes the booklet, refuses what a run would refuse, and says where a file is wrong."""

from __future__ import annotations

from pathlib import Path

import pytest

from runbook.__main__ import main
from runbook.procedure import shelf

SHIPPED = shelf.find_procedure("co2-critical-point")


def test_writes_one_page(tmp_path: Path) -> None:
    """Exit 0 and a page with the name of the procedure."""
    out = tmp_path / "out.html"
    assert main(["print", str(SHIPPED), "--on", "2031-03-02", "-o", str(out)]) == 0
    assert "<h1>Carbon dioxide through its critical point</h1>" in out.read_text(encoding="utf-8")


def test_expired_is_not_printed(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    """On a day when a certificate has expired nothing is written, and the reason is said."""
    out = tmp_path / "out.html"
    assert main(["print", str(SHIPPED), "--on", "2034-01-01", "-o", str(out)]) == 1
    said = capsys.readouterr()
    assert "not printed" in said.err
    assert "has expired" in said.err
    assert said.out == ""
    assert not out.exists()


def test_a_file_that_cannot_be_read(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    """Exit 2 with a place."""
    bad = tmp_path / "bad.yaml"
    bad.write_text("format: procedure 1\n", encoding="utf-8")
    assert main(["print", str(bad), "-o", str(tmp_path / "x.html")]) == 2
    assert "bad.yaml:1:" in capsys.readouterr().err


def test_a_folder_that_is_not_there(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    """Exit 3 and a sentence, no traceback."""
    gone = tmp_path / "gone" / "x.html"
    assert main(["print", str(SHIPPED), "--on", "2031-03-02", "-o", str(gone)]) == 3
    assert "No such file" in capsys.readouterr().err
