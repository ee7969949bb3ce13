"""Good files: what is written is what the model says, in SI, with the place of everything."""

from __future__ import annotations

import datetime
import hashlib
from pathlib import Path

import pytest
import yaml

from runbook.procedure.model import Charge, HoldStep, LetDownTo, QuickStep, Seal, WarmTo
from runbook.procedure.scalars import Nothing, Refused, resolve
from runbook.procedure.yaml_text import read_document
from runbook.quantities import Bounded, Level, Range
from tests.procedure.files import PROCEDURE, SHIPPED, VESSEL, found, read


def test_the_shipped_files_in_si(tmp_path: Path) -> None:
    """Masses in kg, volumes in m3, temperatures in K, pressures as levels with their reference."""
    loaded = read(tmp_path)
    procedure, vessel = loaded.procedure, loaded.apparatus
    assert isinstance(procedure.charge, Charge)
    assert procedure.charge.mass.value == pytest.approx(0.117, rel=1e-12)
    assert procedure.charge.mass.plus_minus == pytest.approx(0.002, rel=1e-12)
    assert procedure.room.hottest.value == pytest.approx(303.15, abs=1e-9)
    assert procedure.room.volume == Bounded(180.0)
    assert procedure.issue.date == datetime.date(2031, 3, 2)
    assert vessel.volume.free.value == pytest.approx(250e-6, rel=1e-12)
    assert vessel.window is not None
    assert vessel.window.high == pytest.approx(0.054, rel=1e-12)
    assert vessel.mawp.rating == Level(160e5, "gauge")
    source = vessel.heat_source
    assert source is not None
    assert isinstance(source.cut_out, Bounded)
    assert source.cut_out.high == pytest.approx(312.15, abs=1e-9)
    steps = [s for part in procedure.parts for s in part.steps]
    paths = [getattr(s, "path", None) for s in steps]
    warm = next(p for p in paths if isinstance(p, WarmTo) and p.by_means_of == "H1")
    assert warm.rate is not None
    assert warm.rate.high == pytest.approx(1 / 60, rel=1e-12)
    assert next(p for p in paths if isinstance(p, LetDownTo)).let_down_to == Level(0.0, "gauge")
    quick = next(s for s in steps if isinstance(s, QuickStep))
    assert isinstance(quick.quick[0].path, Seal)
    hold = next(s for s in steps if isinstance(s, HoldStep) and s.hold.read is not None)
    assert hold.hold.read is not None
    assert isinstance(hold.hold.read.accept, Range)
    assert hold.hold.read.accept.low == pytest.approx(0.117, rel=1e-12)


def test_digests_are_of_the_bytes(tmp_path: Path) -> None:
    """SHA-256 of each file as it stands on disk."""
    loaded = read(tmp_path)
    assert loaded.procedure_sha256 == hashlib.sha256((tmp_path / PROCEDURE).read_bytes()).hexdigest()
    assert loaded.apparatus_sha256 == hashlib.sha256((tmp_path / "apparatus" / VESSEL).read_bytes()).hexdigest()


def test_every_step_has_a_place(tmp_path: Path) -> None:
    """The place of step n of part m is that of its first key."""
    loaded = read(tmp_path)
    lines = loaded.procedure_text.splitlines()
    for i, part in enumerate(loaded.procedure.parts):
        for k, _ in enumerate(part.steps):
            line, column = loaded.positions["parts", i, "steps", k]
            assert lines[line - 1][column - 3 : column - 1] == "- "
            assert lines[line - 1][column - 1 :].split(":")[0] in ("do", "hold", "witness", "quick", "show_empty")


def test_other_readers_of_yaml_agree() -> None:
    """PyYAML, a YAML 1.1 reader, finds the same texts, numbers and dates in the shipped files."""

    def plain(value: object) -> object:
        if isinstance(value, tuple | list):
            return [plain(v) for v in value]
        if isinstance(value, dict):
            return {k: plain(v) for k, v in value.items()}
        return value

    for path in (SHIPPED / PROCEDURE, SHIPPED / "apparatus" / VESSEL):
        document = read_document(path.read_bytes(), str(path))
        assert document.problems == ()
        assert plain(document.plain) == yaml.safe_load(path.read_text("utf-8"))


@pytest.mark.parametrize(
    ("word", "value"),
    [
        ("open", "open"), ("117 g ± 2 g", "117 g ± 2 g"), ("3", 3), ("-3", -3), ("0.6", 0.6), ("1e5", 1e5),
        ("1.0e+5", 1e5), (".5", 0.5), ("true", True), ("False", False), ("2031-03-02", datetime.date(2031, 3, 2)),
        ("2031-02-30", "2031-02-30"), ("y", "y"), ("A", "A"), ("V2", "V2"), ("None", "None"), ("1.2.3", "1.2.3"),
        ("-", "-"), ("12 N·m", "12 N·m"), 
    ],
)  # fmt: skip
def test_plain_words(word: str, value: object) -> None:
    """YAML 1.2 core types, decimal numbers and ISO dates; everything else is text."""
    found_value = resolve(word)
    assert found_value == value
    assert type(found_value) is type(value)


@pytest.mark.parametrize(
    "word",
    ["on", "off", "yes", "No", "012", "-007", "0x1F", "0o17", "0b1", "1_000", "12:30", "1:30:00", ".inf", "-.INF",
     ".nan", "2031-03-02 10:00:00", "9" * 50, "=", "<<", "1e400", "1_0.5"],
)  # fmt: skip
def test_words_that_readers_disagree_on_are_refused(word: str) -> None:
    """What YAML 1.1 takes for something else than text or a decimal number is refused, not read one way."""
    with pytest.raises(Refused):
        resolve(word)


@pytest.mark.parametrize("word", ["", "~", "null", "NULL"])
def test_nothing_is_nothing(word: str) -> None:
    """An empty value is no value."""
    with pytest.raises(Nothing):
        resolve(word)


@pytest.mark.parametrize("end", ["\n", "\r\n"])
def test_line_ends_do_not_matter(tmp_path: Path, end: str) -> None:
    """A file saved elsewhere, with a byte-order mark, has the same places."""
    text = "a: 1" + end + "b: {c: off}" + end
    document = read_document(b"\xef\xbb\xbf" + text.encode(), "x")
    assert document.values[("a",)] == (1, 4)
    assert document.problems[0].line == 2
    assert document.problems[0].column == 8


def test_a_comment_with_two_blanks_is_a_comment() -> None:
    """After a text: two blanks, # and a blank. Inside quotes everything is text."""
    document = read_document(b"a: Open valve  # the upper\nb: 'Open valve #2'\nc: a#b\n", "x")
    assert document.problems == ()
    assert document.plain == {"a": "Open valve", "b": "Open valve #2", "c": "a#b"}


def test_a_finding_has_its_line(tmp_path: Path) -> None:
    """What a rule finds carries the text of the line it stands in."""
    (problem,) = found(tmp_path, "verb first", {"do: Press tare": "do: Tares are pressed"})
    assert problem.source == "      - do: Tares are pressed"
