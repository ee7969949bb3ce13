"""What nobody foresaw ends in a sentence and a file, never in a traceback on somebody's terminal."""

from __future__ import annotations

import re
import tempfile
from pathlib import Path

import pytest

from runbook import __main__ as start
from runbook.assess.needs import entry_needs
from runbook.assess.now import answer
from runbook.assess.walk import walk
from tests.assess.scenes import loaded, observed, question, scene


def test_a_fault_of_the_program_is_told_in_a_sentence(
    tmp_path: Path, capsys: pytest.CaptureFixture[str], monkeypatch: pytest.MonkeyPatch
) -> None:
    """Exit 3; the sentence says that it is not the user's file, and where the details are."""

    def broken(given: list[str]) -> int:
        raise KeyError("a\nb")

    monkeypatch.setattr(start, "_dispatch", broken)
    monkeypatch.setattr(tempfile, "tempdir", str(tmp_path))
    assert start.main(["check", "x.yaml"]) == 3
    said = capsys.readouterr().err
    assert said.startswith("runbook: a fault of this program, not of your files: KeyError:")
    assert "Traceback" not in said
    assert len(said.splitlines()) == 1
    named = re.search(r"details are in (\S+)\.$", said.strip())
    assert named is not None
    assert "Traceback" in Path(named[1]).read_text("utf-8")


def test_the_thermometer_of_the_room_reads_no_wall(tmp_path: Path) -> None:
    """A vessel whose only thermometer hangs in the room: what it shows is not how warm the charge is."""
    vessel = {"reads: temperature, of: wall": "reads: temperature, of: room air"}
    place = scene(tmp_path, None, vessel)
    assert loaded(tmp_path, None, vessel).apparatus.instruments[2].of == "room air"
    assert place.wall_probe() is None
    asked = question(20, 21, (observed("temperature", 293.15, 5), observed("pressure", 58e5, 6)))
    found = answer(place, walk(place), asked)
    assert found.agreement.computed is None
    needs = [need.tag for index in range(len(walk(place))) for need in entry_needs(place, walk(place), index)]
    assert "no temperature instrument" in needs
