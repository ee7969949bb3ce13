"""The smallest change that brings a procedure within limits: applied to the files by a script it does."""

from __future__ import annotations

from collections.abc import Callable
from datetime import date
from pathlib import Path

import pytest

from runbook.assess.bind import bind
from runbook.assess.mend import Mend, mends
from runbook.assess.scene import open_scene
from runbook.errors import InputUnusable
from runbook.procedure import shelf
from runbook.procedure.reader import Loaded, read_procedure
from runbook.procedure.rewrite import rewritten

ISSUED = date(2031, 3, 2)
SHIPPED = shelf.find_procedure("co2-critical-point")
VESSEL = SHIPPED.parent / "apparatus" / "view-cell-250.yaml"

Change = Callable[[str, str], tuple[str, str]]


def _heavy(procedure: str, vessel: str) -> tuple[str, str]:
    return procedure.replace("{mass: 117 g ± 2 g", "{mass: 180 g ± 2 g"), vessel


def _hot(procedure: str, vessel: str) -> tuple[str, str]:
    text = procedure.replace("warm_to: 33 degC", "warm_to: 44 degC").replace("set_to: 35 degC", "set_to: 45 degC")
    return text, vessel.replace("cut_out: 38 degC", "cut_out: 40 degC")


def _late_cut_out(procedure: str, vessel: str) -> tuple[str, str]:
    return procedure, vessel.replace("cut_out: 38 degC ± 1 K", "cut_out: 55 degC ± 3 K")


def _hot_room(procedure: str, vessel: str) -> tuple[str, str]:
    return procedure.replace("hottest: 30 degC", "hottest: 47 degC"), vessel


def _small_room(procedure: str, vessel: str) -> tuple[str, str]:
    return procedure.replace("volume: 180 m3", "volume: 14 m3"), vessel


BAD: dict[str, Change] = {
    "too much in it": _heavy,
    "warmed too far": _hot,
    "cut-out too late": _late_cut_out,
    "room too hot": _hot_room,
    "room too small": _small_room,
}


def _written(folder: Path, procedure: str, vessel: str) -> Loaded:
    (folder / "apparatus").mkdir(parents=True)
    (folder / "apparatus" / VESSEL.name).write_text(vessel, encoding="utf-8")
    (folder / "p.yaml").write_text(procedure, encoding="utf-8")
    return read_procedure(folder / "p.yaml")


def _mended(folder: Path, loaded: Loaded, mend: Mend) -> Loaded:
    procedure = rewritten(loaded.procedure_text, [(e.at, e.write) for e in mend.edits if not e.in_apparatus])
    vessel = rewritten(loaded.apparatus_text, [(e.at, e.write) for e in mend.edits if e.in_apparatus])
    return _written(folder, procedure, vessel)


@pytest.mark.parametrize("name", BAD)
def test_each_mend_applied_to_the_files_makes_them_pass(name: str, tmp_path: Path) -> None:
    """Outside limits before, within after, whichever of the offered changes is made."""
    loaded = _written(tmp_path / "bad", *BAD[name](SHIPPED.read_text("utf-8"), VESSEL.read_text("utf-8")))
    assert bind(loaded, ISSUED).verdict == "outside limits"
    offered = mends(open_scene(loaded, None, None))
    assert offered
    for number, mend in enumerate(offered):
        assert bind(_mended(tmp_path / f"{number}", loaded, mend), ISSUED).verdict == "within limits", mend.words


def test_a_mend_is_the_smallest(tmp_path: Path) -> None:
    """One step further than the offered charge is outside again: 132.7 g is the most, so 132 ± 2 g is offered."""
    loaded = _written(tmp_path / "bad", *_heavy(SHIPPED.read_text("utf-8"), VESSEL.read_text("utf-8")))
    found = {mend.words: mend for mend in mends(open_scene(loaded, None, None))}
    words = next(w for w in found if w.startswith("a plan of at most"))
    grams = float(words.split()[5])
    assert 130.0 <= grams <= 133.0
    text = rewritten(loaded.procedure_text, [(found[words].edits[0].at, f"{grams + 1.0:g} g ± 2 g")])
    assert bind(_written(tmp_path / "more", text, loaded.apparatus_text), ISSUED).verdict == "outside limits"


def test_nothing_is_offered_where_nothing_is_outside() -> None:
    """A good procedure is left alone."""
    assert mends(open_scene(read_procedure(SHIPPED), None, None)) == ()


def test_check_says_what_would_mend_it(tmp_path: Path) -> None:
    """The finding stands at the value that would be changed."""
    loaded = _written(tmp_path / "bad", *_heavy(SHIPPED.read_text("utf-8"), VESSEL.read_text("utf-8")))
    found = [f for f in bind(loaded, ISSUED).findings if f.rule == "mend"]
    at = loaded.positions[("charge", "mass")]
    assert any((f.line, f.column) == at and "a plan of at most" in f.message for f in found)


def test_rewriting_leaves_the_rest_alone() -> None:
    """Comments and order stay; a place where no single value begins is refused."""
    text = "a: 1 g   # one\nb: {c: 2 g, d: 'x y'}\n"
    assert rewritten(text, [((1, 4), "3 g ± 1 g"), ((2, 8), "5 g")]) == "a: 3 g ± 1 g   # one\nb: {c: 5 g, d: 'x y'}\n"
    with pytest.raises(InputUnusable, match="2:4"):
        rewritten(text, [((2, 4), "x")])
