"""Line mode: the shipped procedure typed from the first line to the record."""

from __future__ import annotations

import asyncio
from pathlib import Path

import pytest

from runbook.run.journal import read, verify
from runbook.run.record import record_lines
from tests.assess.scenes import changed_files
from tests.commands.typist import opened


def test_a_whole_run_can_be_typed(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    """Every line is reached by typing what ON? asks for; the record is whole and names what blocked."""

    async def go() -> int:
        session, _ = await opened(changed_files(tmp_path), tmp_path / "run.jsonl")
        try:
            return await session.go()
        finally:
            await session.desk.close()

    assert asyncio.run(go()) == 0
    out = capsys.readouterr().out
    for label in (
        "DO ",
        "ON? ",
        "ALONE ",
        "CEILING ",
        "SEE ",
        "AGREE? ",
        "REHEARSAL",
        "● YES",
        "□ NOT YET",
        "■ BLOCKED",
    ):
        assert label in out
    assert verify(tmp_path / "run.jsonl").good
    account = "\n".join(record_lines(read(tmp_path / "run.jsonl").records))
    assert "closed: completed" in account
    assert "SIGNED" in account
    assert "Traceback" not in out


def test_a_run_with_a_vent_held_by_hand_can_be_typed(tmp_path: Path) -> None:
    """The triple point from the first line to the record: four closings, each let go again, and proved empty."""
    path = Path(__file__).parents[2] / "procedures" / "co2-triple-point.yaml"

    async def go() -> int:
        session, _ = await opened(path, tmp_path / "run.jsonl")
        try:
            return await session.go()
        finally:
            await session.desk.close()

    assert asyncio.run(go()) == 0
    account = " ".join(" ".join(record_lines(read(tmp_path / "run.jsonl").records)).split())
    assert "closed: completed" in account
    assert account.count("done: Let go of V1") == 4
    assert "let go at 4.6 bar(g) on PG1 at the latest" in account


def test_markup_of_an_author_is_shown_verbatim(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    """Square brackets are text."""
    evil = "Set the laptop [V-3] [/b] [@click=app.quit]x[/] to stay awake"
    path = changed_files(tmp_path, {"Set the laptop to stay awake, on mains power": f'"{evil}"'})

    async def go() -> None:
        session, typist = await opened(path, tmp_path / "run.jsonl")
        typist._most = 4
        try:
            await session.go()
        finally:
            await session.desk.close()

    asyncio.run(go())
    assert evil in capsys.readouterr().out


def test_the_end_of_the_input_leaves_the_run_unfinished(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    """Exit 1, and the journal says that the tool was left."""

    async def go() -> int:
        session, typist = await opened(changed_files(tmp_path), tmp_path / "run.jsonl")
        typist._most = 6
        try:
            return await session.go()
        finally:
            await session.desk.close()

    assert asyncio.run(go()) == 1
    assert read(tmp_path / "run.jsonl").records[-1].kind == "LeftTool"
    assert "unfinished" in capsys.readouterr().out
