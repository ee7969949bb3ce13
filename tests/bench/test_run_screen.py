"""The run screen as text, in every state: text changes, places never do."""

from __future__ import annotations

from collections.abc import Awaitable, Callable
from dataclasses import replace

import pytest

from runbook.answers import Agreement, Judgement, Phase
from runbook.run.acts import SetSource
from runbook.run.events import Halted
from tests.bench import scenes
from tests.bench.pilot import Bench, FakePace, running
from tests.bench.svgtext import check_golden

SIZES = ((80, 24), (120, 40))
AT_WARM = scenes.plan(scenes.LINES[1:])
"""Begins with warming."""

Do = Callable[[Bench], Awaitable[None]]


async def before(bench: Bench) -> None:
    """Before the first line."""


async def warming(bench: Bench) -> None:
    """In the line, its readings not yet taken."""
    await bench.press("enter")
    await bench.passes(70.0)


async def read(bench: Bench) -> None:
    """Both readings taken a little while ago."""
    await bench.press("enter", "2", "4", ".", "1", "enter", "enter", "6", "2", ".", "6", "enter", "enter")
    await bench.passes(70.0)


async def blocked(bench: Bench) -> None:
    """Nothing may be entered: the ceiling would be passed."""
    bench.engine.say = lambda key: scenes.answer(
        key, ahead=(scenes.margin(1.28, Judgement.BLOCKED, "heat stuck on"),), left_alone=scenes.RESTLESS
    )
    await bench.desk.act(SetSource("unplugged"))
    await bench.settle()


async def narrow(bench: Bench) -> None:
    """Near the ceiling, and the gauge disagrees."""
    far = Agreement("disagrees", "PG1", scenes.BARO + 90e5, 1.2e5, scenes.BARO + 80e5, 0.4e5, "nothing")
    bench.engine.say = lambda key: scenes.answer(key, now=(scenes.margin(0.97, Judgement.NARROW),), agreement=far)
    await bench.desk.act(SetSource("unplugged"))
    await bench.settle()


async def explained(bench: Bench) -> None:
    """The gauge disagrees, and the first explanation stands with its test."""
    await bench.press("enter", "2", "4", ".", "1", "enter", "enter", "6", "2", ".", "6", "enter", "enter")
    bench.engine.say = lambda key: scenes.answer(key, agreement=scenes.FAR, explanations=scenes.EXPLAINED)
    await bench.desk.act(SetSource("unplugged"))
    await bench.settle()
    await bench.passes(70.0)


async def turned_back(bench: Bench) -> None:
    """A margin went while warming: the way back stands in the place of the step."""
    await bench.press("enter")
    bench.engine.say = lambda key: scenes.answer(
        key, now=(scenes.margin(1.02, Judgement.BLOCKED),), left_alone=scenes.RESTLESS, phases=(Phase.D,)
    )
    await bench.desk.act(SetSource("unplugged"))
    await bench.settle()
    await bench.passes(1.0)


async def unknown(bench: Bench) -> None:
    """The process that computes is gone."""
    bench.engine.say = scenes.lost("the computing process has ended")
    await bench.press("enter")
    await bench.passes(30.0)


async def halted(bench: Bench) -> None:
    """The record cannot be kept."""
    await bench.desk._write(Halted("the disk is full"))
    await bench.settle()


STATES: dict[str, Do] = {
    f.__name__: f for f in (before, warming, read, blocked, narrow, explained, turned_back, unknown, halted)
}
LABELS = ("DO", "ON?", "ALONE", "CEILING", "SEE", "AGREE?")


@pytest.mark.parametrize("size", SIZES, ids=lambda size: f"{size[0]}x{size[1]}")
@pytest.mark.parametrize("state", STATES)
async def test_golden(state: str, size: tuple[int, int]) -> None:
    """Each state at each size is as it was looked at and found good."""
    async with running(AT_WARM, size) as bench:
        await STATES[state](bench)

        check_golden(f"run-{state}-{size[0]}x{size[1]}", bench.app.export_screenshot())


@pytest.mark.parametrize("size", [(60, 20), (80, 24), (80, 30), (100, 34), (120, 40)], ids=str)
async def test_places_never_move(size: tuple[int, int]) -> None:
    """Whatever the state, each label stands in the same row, and the last row is the same keys."""
    places, last = set(), set()
    for state in STATES.values():
        async with running(AT_WARM, size) as bench:
            await state(bench)
            rows = bench.rows
            places.add(tuple(next(i for i, r in enumerate(rows) if r.startswith(f" {label}")) for label in LABELS))
            last.add(rows[-1])

    assert len(places) == 1
    assert len(last) == 1
    assert last.pop().startswith(" F9 MAKE SAFE")


@pytest.mark.parametrize("line", [0, 2, 4], ids=["hold", "witness", "empty"])
async def test_other_kinds_of_line(line: int) -> None:
    """A hold, a witness and the proofs of empty stand in the same bands."""
    async with running(scenes.plan(scenes.LINES[line:])) as bench:
        await bench.press("enter")

        check_golden(f"run-line-{('hold', '', 'witness', '', 'empty')[line]}-80x24", bench.app.export_screenshot())


async def test_a_rehearsal_says_so() -> None:
    """REHEARSAL and its speed stand first in the header."""
    async with running(AT_WARM, pace=FakePace()) as bench:
        await bench.press("right_square_bracket")

        assert bench.rows[0].startswith(" REHEARSAL x2 ")


async def test_enter_exists_only_when_it_says_yes() -> None:
    """Where ON? does not say yes, Enter enters nothing and nothing is recorded."""
    async with running(AT_WARM) as bench:
        await blocked(bench)
        recorded = bench.desk.ledger.seq
        await bench.press("enter")

        assert "BLOCKED" in bench.text
        assert (bench.desk.ledger.line, bench.desk.ledger.seq) == (-1, recorded)


async def test_what_a_signer_must_not_see_is_nowhere() -> None:
    """While a blind reading is outstanding, neither height nor sight nor agreement stands on the run screen."""
    async with running(scenes.plan(scenes.LINES), (120, 40)) as bench:
        await bench.press("enter")

        assert "30 mm" not in bench.text
        assert "computed 62.0" not in bench.text
        assert "Kept back" in bench.text


async def test_too_small_a_window() -> None:
    """Below 60x20 one sentence stands there; the run goes on, and make safe still works."""
    async with running(AT_WARM) as bench:
        await bench.pilot.resize_terminal(50, 15)
        await bench.settle()
        small = bench.text
        await bench.press("f9")

        assert "Make the window larger" in small
        assert "F9 MAKE SAFE" in small
        assert bench.desk.ledger.safe is not None
        await bench.pilot.resize_terminal(80, 24)
        await bench.settle()
        assert "HEAT OFF" in bench.text


async def test_a_long_step_is_paged() -> None:
    """What does not fit a band is counted, and PgDn brings it; nothing is cut in silence."""
    long = replace(scenes.WARM, text="Warm it " + " ".join(f"word{i}" for i in range(80)))
    async with running(scenes.plan((long, scenes.LINES[-1]))) as bench:
        await bench.press("enter")
        seen = bench.text
        for _ in range(4):
            await bench.press("pagedown")
            seen += bench.text

        assert "lines more" in seen
        assert all(f"word{i}" in seen for i in range(80))


async def test_the_bell_rings_until_it_is_heard(monkeypatch: pytest.MonkeyPatch) -> None:
    """The way back rings at every look until somebody says that it was heard, and again the next time."""
    async with running(AT_WARM) as bench:
        rung: list[int] = []
        monkeypatch.setattr(bench.app, "bell", lambda: rung.append(1))
        await turned_back(bench)
        await bench.passes(1.0)
        ringing = len(rung)
        await bench.press("space")
        await bench.passes(1.0)

        assert ringing >= 2
        assert len(rung) == ringing
