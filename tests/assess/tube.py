"""The shipped tube whose vent springs open, with words of its files changed."""

from __future__ import annotations

from collections.abc import Mapping
from pathlib import Path

from runbook.assess.assumptions import ALL
from runbook.assess.scene import Scene, open_scene
from runbook.procedure.reader import Loaded, read_procedure

SHIPPED = Path(__file__).parents[2] / "procedures"
PROCEDURE, VESSEL = "co2-triple-point.yaml", "triple-point-tube-50.yaml"
ISSUED = "2031-03-02"


def tube(folder: Path, procedure: Mapping[str, str] | None = None, vessel: Mapping[str, str] | None = None) -> Loaded:
    """Both files in a folder, each given text replaced wherever it stands, read."""
    (folder / "apparatus").mkdir(exist_ok=True)
    for source, target, changes in (
        (SHIPPED / PROCEDURE, folder / PROCEDURE, procedure or {}),
        (SHIPPED / "apparatus" / VESSEL, folder / "apparatus" / VESSEL, vessel or {}),
    ):
        text = source.read_text("utf-8")
        for old, new in changes.items():
            assert old in text, f"the shipped file no longer says: {old}"
            text = text.replace(old, new)
        target.write_text(text, "utf-8")
    return read_procedure(folder / PROCEDURE)


def scene(folder: Path, procedure: Mapping[str, str] | None = None, vessel: Mapping[str, str] | None = None) -> Scene:
    """A scene of the changed files at the standard atmosphere."""
    return open_scene(tube(folder, procedure, vessel), 101325.0, None, ALL)
