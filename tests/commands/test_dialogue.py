"""`runbook new` on a terminal: asked, wrong answers asked again, nothing lost, and the result is what check says."""

from __future__ import annotations

import io
import json
import re
from collections.abc import Callable, Iterable
from datetime import date
from pathlib import Path

import pytest
import yaml

from runbook.__main__ import main
from runbook.commands import dialogue
from runbook.errors import InputUnusable
from runbook.procedure.dialogue.demonstration import Place, demonstration_form
from runbook.procedure.dialogue.form import Form
from runbook.procedure.dialogue.vessel import vessel_form
from runbook.procedure.reader import read_apparatus, read_procedure

Typing = Callable[[Iterable[str], list[str]], int]
VESSEL = Path("apparatus/my-vessel.yaml")
ROOM = "30 degC; 18 degC; 180 m3; 2 per h; 120 m"
PROCEDURE = Path("my-demonstration.yaml")


@pytest.fixture
def typing(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> Typing:
    """Somebody types these lines while a command runs in an empty folder."""
    monkeypatch.chdir(tmp_path)
    monkeypatch.setattr(dialogue, "can_ask", lambda: True)

    def run(lines: Iterable[str], command: list[str]) -> int:
        monkeypatch.setattr("sys.stdin", io.StringIO("".join(f"{one}\n" for one in lines)))
        return main(command)

    return run


def examples(form: Form, **instead: str) -> list[str]:
    """The example of every question that is asked, in order; `instead` by the name of a question's first slot."""
    given = []
    for question in form.questions:
        if not form.asked(question):
            continue
        answer = instead.get(question.slots[0].name, question.example)
        # Good today, whatever day that is.
        answer = re.sub(r"203[23]-..-..", "2099-01-31", answer).replace("2031-01-01", "2024-01-01")
        form.take(question, answer)
        given.append(answer)
    return given


def test_all_examples_give_a_procedure_within_limits(typing: Typing, capsys: pytest.CaptureFixture[str]) -> None:
    """A vessel and a demonstration, every figure known: within limits at the first attempt, and it says so."""
    assert typing(examples(vessel_form()), ["new", "apparatus"]) == 0
    assert capsys.readouterr().out.strip() == str(VESSEL)
    answers = ["", "", "Boiling and rest", "A. Lind; T. Berg", "", "dry ice", "", ROOM]
    assert typing(answers, ["new", "procedure"]) == 0
    told = capsys.readouterr()
    assert "WITHIN LIMITS" in told.out
    assert "error:" not in told.out + told.err
    assert read_procedure(PROCEDURE).procedure.charge != "already loaded"


def test_ratings_that_nobody_has_are_all_that_is_not_proved(typing: Typing, capsys: pytest.CaptureFixture[str]) -> None:
    """Enter at each rating: the file reads well, and every error that check tells names an unknown rating or paper."""
    unknown = dict.fromkeys(("mawp", "proof", "cycles", "cut_out"), "")
    unknown |= {"w_pressure": "?; ?; ?; maker's sheet", "b_pressure": "up to 250 bar(g); ?; drawing"}
    typing(examples(vessel_form(), **unknown), ["new", "apparatus"])
    answers = ["", "", "Boiling", "A. Lind; T. Berg", "", "dry ice", "117 g ± 2 g", ROOM]
    assert typing(answers, ["new", "procedure"]) == 1
    assert "NOT PROVED" in capsys.readouterr().out
    main(["check", str(PROCEDURE), "--json"])
    (judged,) = json.loads(capsys.readouterr().out)["procedures"]
    errors = [f["message"] for f in judged["findings"] if f["severity"] == "error"]
    assert errors
    assert [message for message in errors if "not known" not in message] == []


@pytest.mark.parametrize("fluid", ["CO2", "xenon", "SF6", "R134a"])
def test_a_vessel_that_is_loaded_already(fluid: str, typing: Typing, capsys: pytest.CaptureFixture[str]) -> None:
    """Of any fluid that may be planned: the steps look at it; what may not be let out is not let out."""
    typing(examples(vessel_form()), ["new", "apparatus"])
    answers = ["", fluid, "Look", "A. Lind; T. Berg", "", "already loaded", ROOM]
    typing(answers, ["new", "procedure"])
    text = PROCEDURE.read_text("utf-8")
    assert "charge: already loaded" in text
    assert ("let_down_to" in text) is (fluid in ("CO2", "xenon"))
    told = capsys.readouterr()
    assert "Traceback" not in told.err
    assert read_procedure(PROCEDURE)


def test_a_wrong_answer_is_asked_again_and_one_can_go_back(typing: Typing, capsys: pytest.CaptureFixture[str]) -> None:
    """A wrong unit is told with the nearest good one, in the words of the reader; < asks the one before once more."""
    given = examples(vessel_form())
    at = next(i for i, one in enumerate(given) if one.startswith("250 mL ±"))
    wrong = [*given[:at], "250 ml2; weighed", "250 mL", *given[at:], "<", given[-1]]
    wrong[0:0] = ["first name", "<"]
    assert typing(wrong, ["new", "apparatus"]) == 0
    told = capsys.readouterr().err
    assert "'250 ml2'" in told
    assert "parted by semicolons" in told
    assert read_apparatus(VESSEL).name == "view cell, 250 mL"


def test_leaving_keeps_what_was_answered(typing: Typing, capsys: pytest.CaptureFixture[str]) -> None:
    """Ctrl-D in the middle: a file that reads well, with the answers in it, and a word about the rest."""
    assert typing(["The tall cell", "VC-9"], ["new", "apparatus"]) == 0
    assert read_apparatus(VESSEL).name == "The tall cell"
    assert read_apparatus(VESSEL).tag == "VC-9"
    assert "Not everything was answered" in capsys.readouterr().err


def test_nothing_typed_is_lost_where_the_file_cannot_be_written(
    typing: Typing, tmp_path: Path, capsys: pytest.CaptureFixture[str]
) -> None:
    """A file stands where the folder should be: the text is printed instead."""
    (tmp_path / "apparatus").write_text("a file\n", "utf-8")
    assert typing(examples(vessel_form()), ["new", "apparatus"]) == 2
    told = capsys.readouterr()
    assert "view cell, 250 mL" in told.out
    assert "cannot be written" in told.err


def test_a_file_that_exists_is_told_before_anything_is_asked(
    typing: Typing, tmp_path: Path, capsys: pytest.CaptureFixture[str]
) -> None:
    """Exit 2 at once."""
    (tmp_path / "mine.yaml").write_text("mine\n", "utf-8")
    assert typing([], ["new", "apparatus", "mine.yaml"]) == 2
    assert "for example" not in capsys.readouterr().err


@pytest.mark.parametrize("odd", ["a: b, {c}", "[/b] #1", 'say "so"', "true", "2031-01-01", "*x", "‹tag›"])
def test_what_is_typed_is_text_and_nothing_else(odd: str) -> None:
    """Signs that mean something in YAML come back as they were typed."""
    form = vessel_form()
    form.take(form.questions[0], odd)
    assert not form.judge(form.text())
    assert yaml.safe_load(form.text())["name"] == odd


def test_a_vessel_of_another_kind_is_refused_with_a_sentence(tmp_path: Path) -> None:
    """Without valve, gauge and cap these steps cannot be written."""
    made = tmp_path / "cell.yaml"
    made.write_text(vessel_form().text(), "utf-8")
    closed = read_apparatus(made).model_copy(update={"valves": (), "openings": ()})
    with pytest.raises(InputUnusable, match="has no loading cap and no valve"):
        demonstration_form(Place("apparatus/cell.yaml", closed, date(2031, 1, 1)))
