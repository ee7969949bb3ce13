"""The paper copy: nothing from a file is markup, warnings come first, what proves something is not given away."""

from __future__ import annotations

from dataclasses import replace
from datetime import date
from functools import cache
from html.parser import HTMLParser

import pytest

from runbook.answers import GaugeCard, Plan, VesselCard
from runbook.assess.bind import plan_of, plan_of_all
from runbook.assess.gauge_card import gauge_card, vessel_card
from runbook.assess.scene import Scene, open_scene
from runbook.assess.several import open_all
from runbook.assess.walk import walk
from runbook.errors import InputUnusable
from runbook.paper.booklet import booklet
from runbook.procedure import shelf
from runbook.procedure.model import Issue
from runbook.procedure.reader import read_procedure

ISSUED = date(2031, 3, 2)


@cache
def shipped() -> tuple[Scene, Plan, Issue, GaugeCard]:
    """The shipped procedure bound on its day of issue."""
    path = shelf.find_procedure("co2-critical-point")
    loaded = read_procedure(path)
    scene = open_scene(loaded, None, None)
    lines = walk(scene)
    card = gauge_card(scene, lines)
    assert card is not None
    return scene, plan_of(scene, ISSUED, lines), loaded.procedure.issue, card


@cache
def tags() -> tuple[VesselCard, ...]:
    """What hangs on its vessel."""
    scene = shipped()[0]
    return (vessel_card(scene, walk(scene)),)


class Read(HTMLParser):
    """Tags opened and text, in order."""

    def __init__(self) -> None:
        super().__init__()
        self.tags: list[str] = []
        self.attributes: list[tuple[str, str | None]] = []
        self.words: list[str] = []

    def handle_starttag(self, tag: str, attrs: list[tuple[str, str | None]]) -> None:
        self.tags.append(tag)
        self.attributes += attrs

    def handle_data(self, data: str) -> None:
        self.words.append(data)

    @property
    def text(self) -> str:
        """All of it, with single blanks."""
        return " ".join(" ".join(self.words).split())


def read(plan: Plan) -> Read:
    """The booklet of a plan, parsed."""
    _, _, issue, card = shipped()
    parsed = Read()
    parsed.feed(booklet(plan, issue, card, tags(), ISSUED))
    return parsed


def test_every_line_is_there_with_its_number() -> None:
    """A sheet that loses a step is worse than none."""
    plan = shipped()[1]
    found = read(plan)
    for line in plan.lines:
        assert line.number in found.words
        for item in line.quick:
            assert item.text in found.text
    assert found.text.count("signed,") == sum(1 for line in plan.lines if line.hold is not None)


def test_text_of_a_file_is_never_markup() -> None:
    """What an author writes comes out as it was written, and opens no element."""
    plan = shipped()[1]
    hostile = "<script>alert(1)</script> & </p><b>[/b]"
    lines = (replace(plan.lines[0], text=hostile), *plan.lines[1:])
    found = read(replace(plan, lines=lines, bring=(hostile,), procedure=hostile))
    assert "script" not in found.tags
    assert found.text.count("<script>alert(1)</script> & </p><b>[/b]") >= 3


def test_nothing_is_fetched() -> None:
    """One self-contained file: no address, no picture from elsewhere."""
    found = read(shipped()[1])
    assert not {"img", "link", "script", "iframe", "object"} & set(found.tags)
    assert not [value for name, value in found.attributes if name in ("src", "href")]


def test_a_warning_stands_before_its_step() -> None:
    """Warnings precede what they warn of (writing rule of the trade, DOE-STD-1029-92)."""
    plan = shipped()[1]
    text = read(plan).text
    for line in plan.lines:
        if line.warning is not None and not line.quick:
            assert text.index(line.warning.hazard) < text.index(line.text)


def test_what_proves_something_is_not_given_away() -> None:
    """The accepted range of a blind reading stands on a sheet of its own, behind the steps."""
    plan = shipped()[1]
    text = read(plan).text
    assert "27 mm to 32 mm" in text
    last = plan.lines[-1].text
    assert text.index("27 mm to 32 mm") > text.index(last)


def test_the_gauge_card_brackets_what_is_expected() -> None:
    """Least, expected and most rise with the wall and never cross; 56.3 bar(g) at 20 degC is the saturation pressure
    of Span and Wagner 1996 (57.29 bar) less the barometer of 120 m."""
    scene, _, _, card = shipped()
    previous = 0.0
    for row in card.rows:
        assert row.low is not None
        assert row.expected is not None
        assert row.high is not None
        assert row.low < row.expected < row.high
        assert row.expected > previous
        previous = row.expected
    at20 = next(r for r in card.rows if abs(r.temperature - 293.15) < 1e-6)
    assert at20.expected == pytest.approx(57.291e5, rel=2e-4)
    (on_it,) = tags()
    assert on_it.hottest_place is not None
    assert on_it.hottest_place > scene.room_hottest


def test_the_ceiling_on_the_card_is_the_vessels() -> None:
    """130 bar(g) disc, -4 % made, 5 % burst, run below 80 %: 94.848 bar(g)."""
    scene, _, _, card = shipped()
    assert card.ceiling is not None
    assert card.ceiling - scene.barometer.middle_Pa == pytest.approx(94.848e5, abs=1.0)


def test_outside_limits_is_not_printed() -> None:
    """Paper refuses no step, so a plan that a run would refuse is not printed."""
    _, plan, issue, card = shipped()
    for verdict in ("outside limits", "not proved"):
        with pytest.raises(InputUnusable, match=verdict):
            booklet(replace(plan, verdict=verdict), issue, card, tags(), ISSUED)


def test_each_tube_of_a_bath_has_its_tag() -> None:
    """Three sealed tubes: each with its own most and its own hottest place; nothing relieves them, and it is said."""
    loaded = read_procedure(shelf.find_procedure("sf6-three-tubes"))
    scenes = open_all(loaded, None)
    hung = [vessel_card(scene, lines) for scene, lines in scenes]
    hottest = [one.hottest_place for one in hung]
    # None at what the bath's cut-out lets it come to; the thin charges stop at what their sleeve bears, 90 degC.
    assert all(t is not None and t > 326.0 for t in hottest)
    assert hottest[:2] == [363.15, 363.15]
    assert hottest[2] == pytest.approx(339.8, abs=1.0)
    parsed = Read()
    parsed.feed(booklet(plan_of_all(loaded, scenes, ISSUED), loaded.procedure.issue, None, hung, ISSUED))
    for words in ("T06: LOADED", "T10: LOADED", "T14: LOADED", "at most 12.5 g", "Nothing relieves it."):
        assert words in parsed.text
    assert "FIRE SERVICE: T06, T10, T14" in parsed.text
    assert "in a fire it bursts, for nothing relieves it" in parsed.text
    assert "not known." not in parsed.text
    assert "until a device opens" not in parsed.text
