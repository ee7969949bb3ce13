"""What an author says will be seen, against what this charge shows."""

from __future__ import annotations

from datetime import date
from pathlib import Path
from typing import get_args

import pytest

from runbook.answers import Finding
from runbook.assess.bind import bind
from runbook.procedure.reader import read_procedure
from runbook.procedure.steps import Shown
from tests.assess.scenes import loaded

ISSUED = date(2031, 3, 2)
FADES = "The surface fades in the middle of the window and is gone."


def found(folder: Path, changes: dict[str, str], rule: str) -> list[Finding]:
    """Findings under one rule."""
    return [f for f in bind(loaded(folder, changes), ISSUED).findings if f.rule == rule]


def test_true_words_are_left_alone(tmp_path: Path) -> None:
    """117 g in 250 mL fades in place; so says the shipped file."""
    for rule in ("words and sight", "landmark unannounced"):
        assert found(tmp_path, {}, rule) == []


@pytest.mark.parametrize(
    ("mass", "says"),
    [("150 g ± 2 g", "liquid fills the vessel"), ("95 g ± 2 g", "the last liquid goes")],
)
def test_an_over_or_under_filled_charge_shows_something_else(tmp_path: Path, mass: str, says: str) -> None:
    """The finding says what will be seen instead, and when."""
    # The cooling back has a finding of its own where its sights do not come either.
    finding, *_ = found(tmp_path, {"mass: 117 g ± 2 g": f"mass: {mass}"}, "words and sight")
    assert says in finding.message
    assert "degC" in finding.message
    assert finding.severity == "warning"


def test_a_tolerance_too_wide_is_said_for_the_charge_it_fails(tmp_path: Path) -> None:
    """With 117 g ± 9 g only the ends of the tolerance show something else."""
    (finding,) = found(tmp_path, {"mass: 117 g ± 2 g": "mass: 112 g ± 8 g"}, "words and sight")
    assert "with the least charge" in finding.message


def test_a_wrong_temperature_in_words(tmp_path: Path) -> None:
    """It fades at 31 degC, not at 35."""
    (finding,) = found(tmp_path, {FADES: "The surface vanishes mid-window at 35 degC."}, "words and sight")
    assert "31.0 degC" in finding.message
    assert found(tmp_path, {FADES: "The surface vanishes mid-window at 31 degC."}, "words and sight") == []


def test_a_landmark_that_nobody_is_told_of(tmp_path: Path) -> None:
    """Without sight and warning the step that passes 31 degC is told."""
    text = {
        f"        see:\n          words: {FADES}\n          show: [meniscus, haze]\n": "",
        "        if_not: Switch the jacket off and let it come back. Do not warm further.\n": "",
        "        warning:\n          word: WARNING\n          hazard: Pressure near 80 bar(g)\n          could: throw "
        "parts if a window fails.\n          avoid: Keep the shield between the cell and every face.\n": "",
    }
    (finding,) = found(tmp_path, text, "landmark unannounced")
    assert "31.0 degC" in finding.message


def test_a_sight_asked_for_that_does_not_come(tmp_path: Path) -> None:
    """Rain is seen on cooling: asked for on the way up it is told, with what there will be instead."""
    (finding,) = found(tmp_path, {"show: [meniscus, haze]": "show: [rain, haze]"}, "words and sight")
    assert "'rain' is not what will be seen" in finding.message
    assert "meniscus" in finding.message
    assert found(tmp_path, {"show: [meniscus, haze]": "show: [liquid height, haze]"}, "words and sight") == []


def test_an_unknown_haze_is_not_said_to_be_missing(tmp_path: Path) -> None:
    """Of xenon no amplitudes are known: that its haze is not computed is an advice, never 'it will not be seen'."""
    path = Path(__file__).parents[1] / "procedure" / "good" / "xenon.yaml"
    said = [f for f in bind(read_procedure(path), ISSUED).findings if f.rule == "words and sight"]
    assert [f.severity for f in said] == ["advice"]
    assert "haze of xenon is not computed" in said[0].message


def test_what_comes_is_told_in_words_one_may_write(tmp_path: Path) -> None:
    """The names after 'there will be' are those that 'show' takes."""
    (finding,) = found(tmp_path, {"show: [meniscus, haze]": "show: [rain, haze]"}, "words and sight")
    names = finding.message.rsplit(": ", 1)[1].split(", ")
    assert set(names) <= set(get_args(Shown))
