"""Where procedures are found."""

from __future__ import annotations

from pathlib import Path

import pytest

from runbook.errors import InputUnusable
from runbook.procedure import shelf
from tests.procedure.files import PROCEDURE, written


def test_own_files_come_before_the_shipped(tmp_path: Path) -> None:
    """Those of the folder first; a YAML file that is no procedure is passed over."""
    written(tmp_path)
    own = tmp_path / PROCEDURE
    own.write_text(own.read_text("utf-8") + "# mine\n", "utf-8")
    (tmp_path / "other.yaml").write_text("a: 1\n", "utf-8")
    files = shelf.list_procedures(tmp_path)
    assert files[0] == tmp_path / PROCEDURE
    assert [f.name for f in files].count(PROCEDURE) == 2
    assert "other.yaml" not in [f.name for f in files]


def test_a_copy_of_a_shipped_procedure_is_listed_once(tmp_path: Path) -> None:
    """A checkout stands beside the program that was installed from it: the file of this folder is the one."""
    written(tmp_path)
    assert [f for f in shelf.list_procedures(tmp_path) if f.name == PROCEDURE] == [tmp_path / PROCEDURE]


def test_a_shipped_procedure_has_a_name() -> None:
    """With or without its ending; another name is refused and says what there is."""
    shipped = shelf.shipped_folder()
    assert shipped is not None
    assert shelf.find_procedure("co2-critical-point") == shipped / PROCEDURE
    assert shelf.find_procedure(PROCEDURE) == shipped / PROCEDURE
    with pytest.raises(InputUnusable, match="co2-critical-point"):
        shelf.find_procedure("no-such-thing")


def test_an_installation_without_procedures_says_so(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    """Neither here nor shipped: a sentence, not an empty list."""
    monkeypatch.setattr(shelf, "shipped_folder", lambda: None)
    with pytest.raises(InputUnusable, match="runbook new procedure"):
        shelf.list_procedures(tmp_path)
