"""The page of what the readings may mean, and the same in line mode."""

from __future__ import annotations

from dataclasses import replace

from runbook.answers import Explanation
from runbook.bench.screens.run import RunScreen
from runbook.bench.screens.why import WhyScreen
from runbook.commands.plain_status import why
from runbook.run.acts import SetSource
from tests.bench import scenes
from tests.bench.pilot import Bench, running
from tests.bench.svgtext import check_golden

AT_WARM = scenes.plan(scenes.LINES[1:])
READ = ("enter", *"24.1", "enter", "enter", *"62.6", "enter", "enter")


async def disagreeing(bench: Bench) -> None:
    """Both readings in, and the answer that explains them."""
    await bench.press(*READ)
    bench.engine.say = lambda key: scenes.answer(key, agreement=scenes.FAR, explanations=scenes.EXPLAINED)
    await bench.desk.act(SetSource("unplugged"))
    await bench.settle()


async def test_f7_shows_every_explanation_with_its_test_and_esc_comes_back() -> None:
    """The most likely first, what is struck out last, and that nothing of it clears anything."""
    async with running(AT_WARM) as bench:
        await disagreeing(bench)
        await bench.press("f7")
        assert isinstance(bench.screen, WhyScreen)
        check_golden("why-80x24", bench.app.export_screenshot())
        await bench.press("escape")
        assert isinstance(bench.screen, RunScreen)


async def test_where_all_agrees_there_is_nothing_to_explain() -> None:
    """It says what the agreement says instead of an empty page."""
    async with running(AT_WARM) as bench:
        await bench.press(*READ, "f7")
        assert any("There is nothing to explain." in line for line in bench.rows)


async def test_what_is_kept_back_is_not_given_away() -> None:
    """Before a reading that proves something is in, neither page nor line says what is expected."""
    async with running() as bench:
        bench.engine.say = lambda key: scenes.answer(key, agreement=scenes.FAR, explanations=scenes.EXPLAINED)
        await bench.press("enter", "f7")
        await bench.settle()
        assert bench.desk.standing().hidden
        assert not any("2.4 bar" in line for line in bench.rows)


async def test_explanations_open_nothing() -> None:
    """With an explanation on the screen that says perhaps nothing is wrong the next step stays blocked."""
    async with running(scenes.plan((scenes.WARM, replace(scenes.WARM, number="1.3")))) as bench:
        await bench.press(*READ)
        assert bench.desk.standing().permission == "yes"
        perhaps = (Explanation("none", 0.0, "", 0.9, False, "re-zero"), *scenes.EXPLAINED)
        bench.engine.say = lambda key: scenes.answer(key, agreement=scenes.FAR, explanations=perhaps)
        await bench.desk.act(SetSource("unplugged"))
        await bench.settle()
        standing = bench.desk.standing()
        assert standing.explanations == perhaps
        assert standing.permission == "blocked"


async def test_line_mode_says_the_same_in_the_same_words() -> None:
    """One home for the sentences."""
    async with running(AT_WARM) as bench:
        await disagreeing(bench)
        lines = why(bench.desk.plan, bench.desk.standing())
        assert (
            lines[0] == "    62 %  PG1 shows 2.4 bar too much; or trapped air, which these readings do not tell apart"
        )
        assert lines[1] == "          test: tap PG1, check its zero"
        assert "  struck out: nothing is wrong, a leak" in lines
