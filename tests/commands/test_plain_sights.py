"""Line mode: the figures behind what should be seen, asked for by one word."""

from __future__ import annotations

import asyncio
from pathlib import Path

import pytest

from tests.assess.scenes import changed_files
from tests.commands.typist import Typist, opened


class Curious(Typist):
    """Asks for the sights once the warming has begun, then leaves."""

    async def line(self, prompt: str, wait_s: float | None = None) -> str | None:
        """'sights' in the warming line, and the end of input after it."""
        if self.typed[-1:] == ["sights"]:
            return None
        line = self._desk.ledger.present
        looked = self._desk.ledger.answer is not None and bool(self._desk.ledger.answer.sights)
        if line is not None and line.number == "3.4" and looked and prompt.startswith(">"):
            self.typed.append("sights")
            return "sights"
        return await super().line(prompt, wait_s)


def test_sights_are_told_with_figures_and_trust(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    """In the lesson's warming: height in mm, the path with its temperatures, and how far to trust each."""

    async def go() -> None:
        session, typist = await opened(changed_files(tmp_path), tmp_path / "run.jsonl")
        typist.__class__ = Curious
        try:
            await session.go()
        finally:
            await session.desk.close()

    asyncio.run(go())
    text = capsys.readouterr().out
    assert "height " in text
    assert " mm; least height " in text
    assert "As good as the charge is known" in text
    assert "  At 31.0 °C the surface fades and is gone where it stands." in text
    assert "The author's words; nothing of it is computed." in text
