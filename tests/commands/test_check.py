"""`runbook check`: exit codes, the documented JSON, and findings with a position."""

from __future__ import annotations

import json
from pathlib import Path
from typing import Any

import pytest

from runbook.commands.check import main
from tests.assess.scenes import changed_files

ON = ["--on", "2031-03-02"]


def checked(path: Path, capsys: pytest.CaptureFixture[str], *more: str) -> tuple[int, dict[str, Any]]:
    """Exit code and the one procedure of the JSON."""
    code = main([str(path), "--json", *(more or ON)])
    document = json.loads(capsys.readouterr().out)
    assert list(document) == ["procedures"]
    found: dict[str, Any] = document["procedures"][0]
    return code, found


def test_the_shipped_procedure_is_within_limits(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    """On its issue date, with the documented keys for every line."""
    code, found = checked(changed_files(tmp_path), capsys)
    assert (code, found["verdict"]) == (0, "within limits"), found["findings"]
    assert set(found) == {"file", "verdict", "findings", "steps"}
    assert len(found["steps"]) >= 20
    for step in found["steps"]:
        assert set(step) == {"step", "margins", "left_alone"}
        assert set(step["left_alone"]) == {"at_rest", "ends_Pa", "limit_after_s"}
        for margin in step["margins"]:
            assert set(margin) == {"limit", "kind", "worst", "allowed", "margin", "unit", "at"}
            assert margin["at"] is None or set(margin["at"]) == {"charge_kg", "volume_m3", "temperature_K"}


def test_today_its_certificates_are_not_valid_yet(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    """A date before the fitting of the disc refuses, and says which certificate."""
    code, found = checked(changed_files(tmp_path), capsys, "--on", "2030-01-01")
    assert code == 1
    assert found["verdict"] != "within limits"
    assert any(f["rule"] == "certificate" and "RD1" in f["message"] for f in found["findings"])


def test_an_expired_proof_test_refuses(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    """The day after the proof test runs out nothing is within limits."""
    code, found = checked(changed_files(tmp_path), capsys, "--on", "2033-02-12")
    assert code == 1
    assert found["verdict"] == "outside limits"


def test_a_rating_not_known_is_not_proved(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    """`not known` loads and never passes; the finding names the part."""
    path = changed_files(tmp_path, apparatus={"rating: 160 bar(g)": "rating: not known"})
    code, found = checked(path, capsys)
    assert (code, found["verdict"]) == (1, "not proved")
    assert any("not known" in f["message"] for f in found["findings"])


def test_an_over_filled_plan_is_outside_limits(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    """A plan of 180 g is refused by RD1 with the heat stuck on, at the step that closes."""
    code, found = checked(changed_files(tmp_path, {"mass: 117 g ± 2 g": "mass: 180 g ± 2 g"}), capsys)
    assert (code, found["verdict"]) == (1, "outside limits")
    assert any("RD1" in f["message"] and "heat stuck on" in f["message"] for f in found["findings"])


def test_a_file_that_cannot_be_read_exits_2_with_a_position(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    """A wrong unit: verdict unreadable, steps empty, every finding located."""
    code, found = checked(changed_files(tmp_path, {"mass: 117 g ± 2 g": "mass: 117 bar ± 2 g"}), capsys)
    assert (code, found["verdict"], found["steps"]) == (2, "unreadable", [])
    assert found["findings"]
    assert all(f["line"] > 0 and f["column"] > 0 for f in found["findings"])


def test_the_text_form_puts_findings_first_with_their_place(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    """file:line:column, severity, what; then the verdict with who approved the figures."""
    path = changed_files(tmp_path, {"mass: 117 g ± 2 g": "mass: 180 g ± 2 g"})
    assert main([str(path), *ON]) == 1
    lines = capsys.readouterr().out.splitlines()
    assert lines[0].startswith(f"{path}:")
    assert any("OUTSIDE LIMITS of the figures in this file, approved by M. Ferrant" in line for line in lines)


def test_a_missing_file_is_a_sentence(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    """No traceback, exit 2."""
    assert main([str(tmp_path / "none.yaml")]) == 2
    assert "none.yaml" in capsys.readouterr().err


def test_steps_that_say_the_same_stand_once(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    """An over-filled plan says each limit once, with the numbers of all its steps, not thirty times."""
    path = changed_files(tmp_path, {"mass: 117 g ± 2 g": "mass: 180 g ± 2 g"})
    main([str(path), *ON])
    out = capsys.readouterr().out
    assert out.count("RD1 pressure, heat stuck on") == 1
    assert "steps 1.17, 3.3 to 3.6: RD1 pressure, heat stuck on" in out


def test_plain_when_piped(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    """No escape sequence reaches a file."""
    main([str(changed_files(tmp_path)), *ON])
    assert "\x1b" not in capsys.readouterr().out


def test_a_tag_that_is_not_there_cannot_be_judged(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    """No margin can be computed for an instrument that the apparatus does not have: exit 2 with its place."""
    code, found = checked(
        changed_files(tmp_path, {"{what: carbon dioxide, with: GD1": "{what: carbon dioxide, with: GD7"}), capsys
    )
    assert (code, found["verdict"], found["steps"]) == (2, "unreadable", [])
    assert any(f["rule"] == "unknown tag" and f["line"] > 1 for f in found["findings"])


def test_a_room_without_air_is_refused(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    """A volume of zero is told where it stands, not divided by."""
    code, _ = checked(changed_files(tmp_path, {"volume: 180 m3": "volume: 0 m3"}), capsys)
    assert code == 2


def test_a_fluid_that_is_not_known_is_told_where_it_stands(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    """Exit 2 with the place of the word and the fluids that are known."""
    code, found = checked(changed_files(tmp_path, {"fluid: carbon dioxide": "fluid: phlogiston"}), capsys)
    assert (code, found["verdict"]) == (2, "unreadable")
    (finding,) = found["findings"]
    assert (finding["line"], finding["column"]) == (24, 8)
    assert "carbon dioxide" in finding["message"]


def test_a_certificate_is_told_where_it_stands(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    """In the vessel's file, at the date that has passed."""
    path = changed_files(tmp_path)
    main([str(path), "--on", "2033-06-01"])
    vessel = tmp_path / "apparatus" / "view-cell-250.yaml"
    lines = vessel.read_text("utf-8").splitlines()
    told = [line for line in capsys.readouterr().out.splitlines() if "[certificate]" in line]
    assert len(told) >= 9
    for line in told:
        assert line.startswith(f"{vessel}:"), line
        row, column = (int(x) for x in line.removeprefix(f"{vessel}:").split(":")[:2])
        assert lines[row - 1][column - 1 :].startswith(("203", "{")), line
