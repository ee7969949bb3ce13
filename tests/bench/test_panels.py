"""Panels and screens of a run: what is typed is kept, echoed before it counts, and nothing is done twice."""

from __future__ import annotations

from dataclasses import replace

import pytest
from textual.widgets import Input

from runbook.answers import Instrument
from runbook.bench.screens.gap import GapScreen
from runbook.bench.screens.hold import HoldScreen
from runbook.bench.screens.leave import LeaveScreen
from runbook.bench.screens.pages import KeysScreen, PicturesScreen
from runbook.bench.screens.quick import QuickScreen
from runbook.bench.screens.read import ReadPanel
from runbook.bench.screens.run import RunScreen
from runbook.run.events import GapOpened
from tests.bench import scenes
from tests.bench.pilot import FakePace, arm_at_once, running
from tests.bench.svgtext import check_golden

# -- readings -----------------------------------------------------------------------------------------------


async def test_a_digit_opens_the_field_with_it() -> None:
    """A digit typed anywhere in the run begins a reading; number pad and Enter are enough."""
    async with running(scenes.plan(scenes.LINES[1:])) as bench:
        await bench.press("enter", "2")

        assert isinstance(bench.screen, ReadPanel)
        assert bench.screen.query_one(Input).value == "2"
        await bench.press("4", ".", "1", "enter")
        assert "TT1 24.1 °C" in bench.text
        assert bench.desk.ledger.reading("TT1") is None
        await bench.press("enter")
        taken = bench.desk.ledger.reading("TT1")
        assert taken is not None
        assert taken.event.value == pytest.approx(297.25)
        assert (taken.event.typed, taken.event.echo, taken.event.by) == ("24.1", "TT1 24.1 °C", "R. Amsel")


async def test_a_bare_pressure_takes_the_dial() -> None:
    """A bare number takes the dial's unit and reference; a comma is read; the echo says it in full."""
    async with running(scenes.plan(scenes.LINES[1:])) as bench:
        await bench.press("enter", "f3", "f3", *"62,6", "enter")

        assert "PG1 62.6 bar(g)" in bench.text
        await bench.press("enter")
        taken = bench.desk.ledger.reading("PG1")
        assert taken is not None
        assert taken.event.value == pytest.approx(scenes.BARO + 62.6e5)


async def test_what_cannot_be_read_is_said_and_stays() -> None:
    """A text that can be read two ways is refused with both, and stays in the field."""
    async with running(scenes.plan(scenes.LINES[1:])) as bench:
        await bench.press("enter", "f3", *"1,170", "enter")

        assert "1.170" in bench.text
        assert "1170" in bench.text
        assert bench.screen.query_one(Input).value == "1,170"
        assert bench.desk.ledger.reading("TT1") is None


async def test_outside_its_dial_is_said_before_it_counts() -> None:
    """The echo says that a number lies outside the dial; the run decides what that means."""
    async with running(scenes.plan(scenes.LINES[1:])) as bench:
        await bench.press("enter", "f3", *"500", "enter")

        assert "OUTSIDE ITS DIAL" in bench.text


async def test_changing_the_text_takes_back_the_echo() -> None:
    """After an echo a changed text is echoed again before it counts."""
    async with running(scenes.plan(scenes.LINES[1:])) as bench:
        await bench.press("enter", "f3", *"24", "enter", "5", "enter")

        assert "245 °C" in bench.text
        assert bench.desk.ledger.reading("TT1") is None


async def test_esc_keeps_what_was_typed() -> None:
    """A reading and a note that were left half typed stand there again."""
    async with running() as bench:
        await bench.press("f3", *"62.6", "escape", "f3")
        assert bench.screen.query_one(Input).value == "62.6"
        await bench.press("escape", "f5", *"a note", "escape", "f5")
        assert bench.screen.query_one(Input).value == "a note"


async def test_make_safe_keeps_what_was_typed() -> None:
    """Nor does make safe throw it away."""
    async with running() as bench:
        await bench.press("f3", *"62.6", "f9", "f3")

        assert bench.screen.query_one(Input).value == "62.6"


async def test_another_person_reads() -> None:
    """F4 hands the reading to the next person, and the record says who."""
    async with running(scenes.plan(scenes.LINES[1:])) as bench:
        await bench.press("enter", "f3", "f4", *"24.1", "enter", "enter")

        taken = bench.desk.ledger.reading("TT1")
        assert taken is not None
        assert taken.event.by == "T. Okoro"


async def test_rehearsal_shows_the_simulated_dial() -> None:
    """In a rehearsal the panel says what the simulated dial shows, and that it is one."""
    async with running(scenes.plan(scenes.LINES[1:]), pace=FakePace()) as bench:
        await bench.press("enter", "f3")

        assert "the simulated dial shows 24.1" in bench.text
        check_golden("read-rehearsal-80x24", bench.app.export_screenshot())


# -- hold points --------------------------------------------------------------------------------------------


async def test_a_measuring_hold_is_blind() -> None:
    """The signer sees no other reading before their own is in; then both stand there, and the number signs."""
    async with running() as bench:
        await bench.press("enter", "f3", *"30", "enter", "enter", "f4")
        assert isinstance(bench.screen, HoldScreen)
        blind = bench.text
        check_golden("hold-blind-80x24", bench.app.export_screenshot())
        await bench.press(*"30.5", "enter", "enter")
        seen = bench.text
        check_golden("hold-number-80x24", bench.app.export_screenshot())
        await bench.press(*"222", "enter")

        assert "30" not in blind.replace("MAKE SAFE", "")
        assert "HS1 30 mm, read by R. Amsel" in seen
        assert bench.desk.ledger.entry.signed_by == "T. Okoro"


async def test_a_wrong_number_does_not_sign() -> None:
    """A wrong number signs nothing, is said, is not shown, and leaves the field empty."""
    async with running() as bench:
        await bench.press("enter", "f3", *"30", "enter", "enter", "f4", *"30.5", "enter", "enter", *"999")
        assert "999" not in bench.text
        await bench.press("enter")

        assert bench.desk.ledger.entry.signed_by == ""
        assert bench.screen.query_one(Input).value == ""


async def test_a_played_signer_signs_with_enter() -> None:
    """In a rehearsal the second person is played, and marked so: Enter types for them."""
    async with running(pace=FakePace()) as bench:
        await bench.press("enter", "f3", *"30", "enter", "enter", "f4")
        assert "played in this rehearsal" in bench.text
        await bench.press("enter", "enter", "enter")

        assert bench.desk.ledger.entry.signed_by == "T. Okoro"


async def test_the_witness_is_said_to_be_here(monkeypatch: pytest.MonkeyPatch) -> None:
    """F4 asks, Y says it; the record has the name."""
    arm_at_once(monkeypatch)
    async with running(scenes.plan(scenes.LINES[2:])) as bench:
        await bench.press("enter", "f4", "y")

        assert bench.desk.ledger.entry.witness == "came"


# -- quick sequence, gap, valves ------------------------------------------------------------------------------


async def test_a_quick_sequence(monkeypatch: pytest.MonkeyPatch) -> None:
    """One key an item, a countdown, and the act when the time has passed."""
    arm_at_once(monkeypatch)
    async with running(scenes.plan(scenes.LINES[3:])) as bench:
        await bench.press("enter")
        assert isinstance(bench.screen, QuickScreen)
        await bench.passes(20.0)
        assert "40 s left" in bench.text
        check_golden("quick-80x24", bench.app.export_screenshot())
        await bench.passes(45.0)
        assert "LATE by 5 s" in bench.text
        assert "NOW: Open V1 and begin again." in bench.text
        await bench.press("enter", "enter")

        assert [mark.late for mark in bench.desk.ledger.entry.quick] == [True, False]
        assert isinstance(bench.screen, RunScreen)


async def test_a_quick_sequence_of_a_rehearsal_shows_the_simulated_scale() -> None:
    """Who shuts a vent on the falling scale has to see it fall."""
    plan = scenes.plan(scenes.LINES[3:])
    scale = Instrument("BS1", "mass", "scale", "kg", 0.0, 6.0, 5e-4, 0.0, 5e-5, 0.0, "at the cell")
    pace = FakePace()
    pace.dials["BS1"] = "0.11705"
    async with running(replace(plan, instruments=(*plan.instruments, scale)), pace=pace) as bench:
        await bench.press("enter")

        assert isinstance(bench.screen, QuickScreen)
        assert "BS1 shows 0.11705 kg" in bench.text


async def test_once_it_is_closed_a_rehearsal_shows_gauge_and_sight(monkeypatch: pytest.MonkeyPatch) -> None:
    """Whoever keeps a vent shut by hand has to see the gauge rise and the ice melt."""
    arm_at_once(monkeypatch)
    async with running(scenes.plan(scenes.LINES[3:]), pace=FakePace()) as bench:
        await bench.press("enter", "enter")

        assert isinstance(bench.screen, QuickScreen)
        assert "PG1 shows 62.6 bar(g)" in bench.text
        assert "in the vessel: solid 8 % of it" in bench.text


async def test_the_clock_of_a_rehearsal_is_turned_in_a_quick_sequence_too(monkeypatch: pytest.MonkeyPatch) -> None:
    """Speed and pause as on the run screen; a jump ends before the latest time of the item that is due, never after."""
    arm_at_once(monkeypatch)
    pace = FakePace()
    async with running(scenes.plan(scenes.LINES[3:]), pace=pace) as bench:
        await bench.press("enter")
        assert isinstance(bench.screen, QuickScreen)
        await bench.press("right_square_bracket", "right_square_bracket", "left_square_bracket", "p", "j")

        assert (pace.speed, pace.stopped) == (2.0, True)
        assert pace.jumped == [55.0]  # of the 60 s that the first item has
        await bench.passes(59.5)
        await bench.press("j")
        assert "No jump" in bench.text
        await bench.passes(10.0)
        await bench.press("j")
        assert pace.jumped == [55.0]
        await bench.press("enter", "j")
        assert pace.jumped == [55.0, 25.0]


async def test_at_the_vessel_no_key_turns_the_clock_of_a_quick_sequence() -> None:
    """Time is nobody's to turn there: the keys do nothing."""
    async with running(scenes.plan(scenes.LINES[3:])) as bench:
        await bench.press("enter", "j", "right_square_bracket", "p")

        assert isinstance(bench.screen, QuickScreen)
        assert "60 s left" in bench.text or "1 min left" in bench.text


async def test_one_press_confirms_one_item() -> None:
    """A key that bounces, or is held, does not confirm the item after."""
    async with running(scenes.plan(scenes.LINES[3:])) as bench:
        await bench.press("enter", "enter", "enter")

        assert len(bench.desk.ledger.entry.quick) == 0


async def test_four_questions_after_a_gap() -> None:
    """Digits choose, Enter goes on, do-not-know stands there until something else is chosen."""
    async with running() as bench:
        await bench.desk._write(GapOpened("the child was lost"))
        await bench.settle()
        assert isinstance(bench.screen, GapScreen)
        check_golden("gap-80x24", bench.app.export_screenshot())
        await bench.press("1", "enter", "2", "enter", "enter", "enter")
        assert "Choose who is here" in bench.text
        await bench.press("1", "3", "enter")

        assert not bench.desk.ledger.gap_open
        assert (bench.desk.ledger.source, bench.desk.ledger.position("V2")) == ("off", "shut")
        assert isinstance(bench.screen, RunScreen)


async def test_valves_are_stated_with_one_key() -> None:
    """F8 lists what can be stated, one key each; the statement is in the record."""
    async with running() as bench:
        await bench.press("f8")
        check_golden("valves-80x24", bench.app.export_screenshot())
        await bench.press("1")

        assert bench.desk.ledger.position("V2") == "open"


# -- other --------------------------------------------------------------------------------------------------


async def test_a_note_is_recorded_as_typed() -> None:
    """A note goes into the record verbatim, brackets and all."""
    async with running() as bench:
        recorded = bench.desk.ledger.seq
        await bench.press("f5")
        bench.screen.query_one(Input).value = scenes.NASTY
        await bench.press("enter")

        assert bench.desk.ledger.seq == recorded + 1
        assert isinstance(bench.screen, RunScreen)


async def test_pictures_and_keys() -> None:
    """F6 shows cell, chart and the same in words; F2 every key; Esc comes back."""
    async with running(scenes.plan(scenes.LINES[1:])) as bench:
        await bench.press("enter", *"24.1", "enter", "enter", *"62.6", "enter", "enter", "f6")
        assert isinstance(bench.screen, PicturesScreen)
        check_golden("pictures-80x24", bench.app.export_screenshot())
        await bench.press("escape", "f2")
        assert isinstance(bench.screen, KeysScreen)
        check_golden("keys-80x24", bench.app.export_screenshot())
        await bench.press("escape")
        assert isinstance(bench.screen, RunScreen)


async def test_a_rehearsal_has_its_own_clock() -> None:
    """Speed, pause and jump are keys of a rehearsal; at the vessel they do nothing."""
    pace = FakePace()
    async with running(scenes.plan(scenes.LINES[1:]), pace=pace) as bench:
        await bench.press("enter", "right_square_bracket", "right_square_bracket", "left_square_bracket", "p", "j")

        assert (pace.speed, pace.stopped) == (2.0, True)
        assert pace.jumped == [pytest.approx(175.0)]
        assert "REHEARSAL PAUSED" in bench.text
    async with running() as bench:
        await bench.press("right_square_bracket", "p", "j")
        assert "REHEARSAL" not in bench.text


@pytest.mark.parametrize("key", ["escape", "ctrl+q", "ctrl+c"])
async def test_leaving_asks(key: str, monkeypatch: pytest.MonkeyPatch) -> None:
    """Every way out asks; staying changes nothing, leaving is recorded."""
    arm_at_once(monkeypatch)
    async with running() as bench:
        await bench.press(key)
        assert isinstance(bench.screen, LeaveScreen)
        await bench.press("escape")
        assert not bench.desk.ledger.left
        await bench.press(key, "l")

        assert bench.desk.ledger.left
        assert bench.app.return_value == 1


async def test_a_yes_in_the_same_moment_does_not_leave() -> None:
    """A key that was already on its way when the question appeared is no answer to it."""
    async with running() as bench:
        await bench.press("ctrl+q", "l")

        assert isinstance(bench.screen, LeaveScreen)
        assert not bench.desk.ledger.left
