"""`runbook new` and `runbook schema`."""

from __future__ import annotations

import json
from pathlib import Path
from typing import Any

import pytest

from runbook.__main__ import main
from runbook.procedure.reader import read_procedure
from runbook.procedure.schema import KINDS, editor_schema
from runbook.procedure.writing import findings
from tests.procedure.files import SHIPPED


def test_the_starts_read_well_and_prove_nothing(
    tmp_path: Path, monkeypatch: pytest.MonkeyPatch, capsys: pytest.CaptureFixture[str]
) -> None:
    """Both starts as they come load without a problem or a rule broken; unknown ratings are never within limits."""
    monkeypatch.chdir(tmp_path)
    assert main(["new", "apparatus"]) == 0
    assert main(["new", "procedure"]) == 0
    told = capsys.readouterr()
    assert told.out.split() == ["apparatus/my-vessel.yaml", "my-demonstration.yaml"]
    loaded = read_procedure(Path("my-demonstration.yaml"))
    assert {p.severity for p in findings(loaded)} <= {"advice"}
    assert main(["check", "my-demonstration.yaml", "--json", "--on", "2031-01-02"]) == 1
    assert json.loads(capsys.readouterr().out)["procedures"][0]["verdict"] != "within limits"


def test_nothing_is_written_over(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    """A file that exists stays as it is: exit 2."""
    path = tmp_path / "mine.yaml"
    path.write_text("mine\n", "utf-8")
    assert main(["new", "procedure", str(path)]) == 2
    assert path.read_text("utf-8") == "mine\n"
    assert "exists already" in capsys.readouterr().err


def test_a_place_that_cannot_be_written_is_a_sentence(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    """A file where the folder should be: exit 2, no traceback."""
    (tmp_path / "folder").write_text("a file\n", "utf-8")
    assert main(["new", "procedure", str(tmp_path / "folder" / "x.yaml")]) == 2
    assert "cannot be written" in capsys.readouterr().err


@pytest.mark.parametrize("kind", sorted(KINDS))
def test_the_shipped_schema_is_that_of_the_models(kind: str, capsys: pytest.CaptureFixture[str]) -> None:
    """The committed schema is what the command prints."""
    assert main(["schema", kind]) == 0
    assert capsys.readouterr().out == (SHIPPED / "schema" / f"{kind}.json").read_text("utf-8")


def test_the_schema_tells_every_key(capsys: pytest.CaptureFixture[str]) -> None:
    """Every mapping is closed, and nothing in it may be null."""
    for kind in KINDS:
        schema = editor_schema(kind)
        objects = [schema, *(d for d in schema["$defs"].values() if d.get("type") == "object")]
        assert all(one["additionalProperties"] is False for one in objects)
        assert "null" not in json.dumps(schema).replace('"default": null', "")
    words: dict[str, Any] = editor_schema("procedure")["$defs"]
    assert words["Seal"]["const"] == "seal"
    assert "description" in words["WarmTo"]["properties"]["overshoot"]


def test_the_file_may_stand_after_start(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    """`runbook new apparatus --start FILE`, in the order that the help shows."""
    path = tmp_path / "vessel.yaml"
    assert main(["new", "apparatus", "--start", str(path)]) == 0
    assert capsys.readouterr().out.strip() == str(path)
    assert path.read_text("utf-8").startswith("# One vessel.")
