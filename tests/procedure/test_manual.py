"""The manual for authors: its table holds every key, and it is the one the models write."""

from __future__ import annotations

import os
import re

from runbook.fluids.catalogue import fluids
from runbook.procedure.manual import BEGIN, key_table, manual_path


def test_the_table_of_keys_is_the_one_the_models_write() -> None:
    """A key that is added or renamed reaches the manual; RUNBOOK_REWRITE_GOLDENS=1 writes it anew."""
    path = manual_path()
    assert path is not None
    page, mark, table = path.read_text("utf-8").partition(BEGIN)
    assert mark
    if os.environ.get("RUNBOOK_REWRITE_GOLDENS") and not os.environ.get("CI"):
        path.write_text(f"{page}{mark}\n\n{key_table().rstrip()}\n", "utf-8")
    assert table.strip() == key_table().strip()


def test_the_page_itself_is_short() -> None:
    """One page and the table: an author reads the page, and looks things up in the table."""
    path = manual_path()
    assert path is not None
    page = path.read_text("utf-8").partition(BEGIN)[0]
    assert len(page.split()) < 1200


def test_every_fluid_is_named() -> None:
    """The table says which fluids there are, and which of them are refused; the list is the catalogue's."""
    row = next(line for line in key_table().splitlines() if line.startswith("| `fluid` |"))
    allowed, refused = row.split(";")[:2]
    for fluid in fluids():
        there = refused if fluid.hazards.flammable else allowed
        assert re.search(rf"\b{re.escape(fluid.name)}\b", there), fluid.name
