"""The screen of sights: what stands behind SEE, one key away."""

from __future__ import annotations

from runbook.answers import BindRequest
from runbook.bench.briefing_rows import briefing_rows
from runbook.bench.screens.run import RunScreen
from runbook.bench.screens.sights import SightsScreen
from tests.bench import scenes
from tests.bench.pilot import running
from tests.bench.svgtext import check_golden


async def test_s_shows_figures_and_trust_and_esc_comes_back() -> None:
    """Every sight of the moment and of the step's path, its figures, how far to trust it."""
    async with running(scenes.plan(scenes.LINES[1:])) as bench:
        await bench.press("enter", *"24.1", "enter", "enter", *"62.6", "enter", "enter", "s")
        assert isinstance(bench.screen, SightsScreen)
        assert "height 30 mm" in bench.text
        assert "As good as the charge is known." in bench.text
        assert "From about 30.2 °C a haze" in bench.text
        check_golden("sights-80x24", bench.app.export_screenshot())
        await bench.press("escape")
        assert isinstance(bench.screen, RunScreen)


async def test_a_blind_signer_gets_nothing_from_it() -> None:
    """While a measuring hold waits for the signer's own reading the screen keeps everything back."""
    async with running(scenes.plan(scenes.LINES)) as bench:
        await bench.press("enter", "s")
        assert isinstance(bench.screen, SightsScreen)
        assert "Kept back" in bench.text
        assert " mm" not in bench.text


def test_the_briefing_says_what_the_class_will_see() -> None:
    """With the number of the step, in order of the path."""
    rows = briefing_rows(scenes.plan(), BindRequest("file.yaml", "2031-03-02"), 80)
    text = ["".join(words for words, _ in row.spans) for row in rows]
    first = next(i for i, words in enumerate(text) if "seen in 1.2" in words)
    assert "30.2 °C" in text[first]
    assert any("31.0 °C" in words for words in text[first + 1 : first + 4])
