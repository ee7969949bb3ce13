"""The band that answers 'may I go on': what does not fit is paged, never cut, and the answer itself stays."""

from __future__ import annotations

import pytest

from runbook.bench import bands
from runbook.bench.screens.run import RunScreen
from runbook.bench.view import AskView, HeaderView
from tests.bench import scenes
from tests.bench.pilot import running

REASON = "With the heat stuck on: pressure reaches 96.2 bar(g) with 137.4 g at 39.0 °C. RD1 allows 94.8 bar(g)."
CLEARS = "Let 20.5 g sublime, to 116.9 g on the scale, or make safe: it is still open."


def shown(view: AskView, height: int = 4, page: int = 0) -> list[str]:
    """The rows at 80 columns, as text."""
    return [one.text for one in bands.ask(view, 80, height, page)]


def test_what_clears_a_block_goes_before_what_comes_next() -> None:
    """Where all does not fit, the name of the next step makes room for the reason and what clears it, in full."""
    rows = shown(AskView("blocked", "BLOCKED", (("Next the vessel is closed.", ""), (REASON, CLEARS)), "F3 read"))

    assert len(rows) == 4
    text = " ".join(" ".join(rows).split())
    assert "it is still open." in text
    assert "Next the vessel" not in text
    assert "…" not in text
    assert text.endswith("F3 read")


@pytest.mark.parametrize("page", [0, 1, 2])
def test_the_answer_stays_on_every_page(page: int) -> None:
    """Turned to another page, the band still says BLOCKED and the key, and no row ends in the middle of a word."""
    items = ((REASON, CLEARS), ("PG1 has not been read for 12 min.", "Read PG1 again, and wait until it stands still."))
    rows = shown(AskView("blocked", "BLOCKED", items, "F3 read"), page=page)

    assert rows[0].startswith("■ BLOCKED")
    assert rows[-1].endswith("F3 read")
    assert "…" not in "".join(rows)


def test_every_row_stands_on_some_page() -> None:
    """Paging loses nothing."""
    items = ((REASON, CLEARS), ("PG1 has not been read for 12 min.", "Read PG1 again, and wait until it stands still."))
    view = AskView("blocked", "BLOCKED", items, "F3 read")
    text = " ".join(" ".join(shown(view, page=page)) for page in range(4))
    text = " ".join(text.split())

    for word in f"{REASON} {CLEARS} {items[1][0]} {items[1][1]}".split():
        assert word in text


async def test_a_measuring_hold_asks_for_the_other_reading_first() -> None:
    """Before the signer is sent to sign, the screen asks another person to read: else the signature is refused."""
    async with running(scenes.plan(scenes.LINES[0:])) as bench:
        await bench.press("enter")
        assert isinstance(bench.screen, RunScreen)
        assert "Another person reads HS1." in bench.text
        assert "F3 read" in bench.rows[10]
        await bench.press("f3", *"30", "enter", "enter")
        assert "Another person reads HS1." not in bench.text
        assert "F4 sign hold" in bench.text


def test_the_place_goes_before_the_title() -> None:
    """Where the header has no room for both, it says where the run stands, in the middle of a rehearsal too."""
    view = HeaderView("A long title", "Let down and prove empty, step 4 of 8", "log 136", "14:21", "REHEARSAL PAUSED")

    assert bands.header(view, 80).text.startswith(" REHEARSAL PAUSED  Let down and prove empty, step 4 of 8")
    assert bands.header(view, 80).text.endswith("log 136  14:21 ")
