"""Scenes of the shipped vessel, with words of its files changed."""

from __future__ import annotations

from collections.abc import Mapping
from pathlib import Path

from runbook.answers import ChargeBox, Observation, Question
from runbook.assess.assumptions import ALL, Assumptions
from runbook.assess.scene import Scene, open_scene
from runbook.procedure.reader import Loaded, read_procedure

SHIPPED = Path(__file__).parents[2] / "procedures"


def changed_files(
    folder: Path, procedure: Mapping[str, str] | None = None, apparatus: Mapping[str, str] | None = None
) -> Path:
    """The shipped files in a folder, each given text replaced wherever it stands; path of the procedure."""
    source = SHIPPED / "co2-critical-point.yaml"
    vessel = SHIPPED / "apparatus" / "view-cell-250.yaml"
    (folder / "apparatus").mkdir(exist_ok=True)
    (folder / "apparatus" / vessel.name).write_text(_replaced(vessel.read_text("utf-8"), apparatus or {}), "utf-8")
    target = folder / source.name
    target.write_text(_replaced(source.read_text("utf-8"), procedure or {}), "utf-8")
    return target


def loaded(
    folder: Path, procedure: Mapping[str, str] | None = None, apparatus: Mapping[str, str] | None = None
) -> Loaded:
    """As changed_files, read."""
    return read_procedure(changed_files(folder, procedure, apparatus))


def scene(
    folder: Path,
    procedure: Mapping[str, str] | None = None,
    apparatus: Mapping[str, str] | None = None,
    assume: Assumptions = ALL,
    charge: ChargeBox | None = None,
) -> Scene:
    """A scene of the changed files; the barometer is the standard atmosphere's, read."""
    return open_scene(loaded(folder, procedure, apparatus), 101325.0, charge, assume)


def _replaced(text: str, changes: Mapping[str, str]) -> str:
    for old, new in changes.items():
        assert old in text, f"the shipped file no longer says: {old}"
        text = text.replace(old, new)
    return text


def question(
    line: int,
    to: int,
    observations: tuple[Observation, ...] = (),
    *,
    source: str = "unplugged",
    closed: str = "closed",
    charge: ChargeBox | None = None,
    valves: Mapping[str, str] | None = None,
) -> Question:
    """A question; valves default to all shut when closed, V1 and V2 open when open."""
    way = "shut" if closed == "closed" else "open"
    positions = {"V1": way, "V2": way, "V3": "shut"} | dict(valves or {})
    return Question("key", line, to, closed, tuple(sorted(positions.items())), source, charge, observations)


def observed(what: str, value: float, sequence: int, by: str = "R. Amsel", closed: bool = True) -> Observation:
    """A reading of the shipped vessel's instrument for what it reads [SI]."""
    tags = {"mass": "BS1", "temperature": "TT1", "pressure": "PG1", "liquid height": "HS1"}
    return Observation(tags[what], what, value, sequence, by, closed)
