"""`runbook rehearse FILE --timeline`: what it prints, its document, and what it refuses."""

from __future__ import annotations

import json
from pathlib import Path

import pytest

from runbook.commands.rehearse import main
from runbook.errors import InputUnusable
from tests.assess.scenes import changed_files

PART = ["--timeline", "--part", "3", "--runs", "3"]


def test_the_document_has_its_keys_and_repeats(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    """Every key ends in its unit, the same seed gives the same text, and a lesson that does not fit is exit 1."""
    path = str(changed_files(tmp_path, {"fits: 50 min": "fits: 10 min"}))
    texts = []
    for _ in range(2):
        assert main([path, *PART, "--json"]) == 1
        texts.append(capsys.readouterr().out)
    assert texts[0] == texts[1]
    found = json.loads(texts[0])
    assert list(found) == ["file", "seed", "runs", "parts", "let_down"]
    assert found["let_down"] is None
    (part,) = found["parts"]
    assert list(part) == [
        "part", "name", "declared_s", "declared_by", "takes_s", "fits_in", "runs", "lines", "sights", "never_ends",
        "longest", "warmed",
    ]  # fmt: skip
    assert (part["part"], part["declared_s"], part["declared_by"], part["runs"]) == (3, 600.0, "fits", 3)
    assert part["lines"][0] == {
        "step": "3.1",
        "text": "Bring the class behind the line, 3.6 m from the cell",
        "begins_s": {"least": 0.0, "middle": 0.0, "most": 0.0, "in": 3},
    }


def test_the_page_says_whether_it_fits(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    """With eight hours for the lesson it fits, exit 0; the page names lines and sights; no bar without a terminal."""
    changed = {
        "hottest: 30 degC, coldest: 18 degC": "hottest: 24 degC, coldest: 23 degC",
        "fits: 50 min": "fits: 8 h",
    }
    assert main([str(changed_files(tmp_path, changed)), *PART]) == 0
    captured = capsys.readouterr()
    assert captured.err == ""
    assert "3 The lesson: takes" in captured.out
    assert "FITS its 480 min" in captured.out
    assert "3.4   seen: At 31.0 °C the surface fades and is gone where it stands." in captured.out


@pytest.mark.parametrize(
    ("extra", "words"),
    [
        (["--headless"], "--timeline comes before"),
        (["--runs", "0"], "--runs is a count"),
        (["--part", "2"], "3 is 'The lesson'"),
    ],
)
def test_what_makes_no_sense_is_refused(tmp_path: Path, extra: list[str], words: str) -> None:
    """A timeline of a headless run, of no lots, of a part in which the vessel only rests: said with what would do."""
    with pytest.raises(InputUnusable, match=words):
        main([str(changed_files(tmp_path)), "--timeline", *extra])
