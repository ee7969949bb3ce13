"""Sights in words: what is said unasked, what when asked, and what is kept back."""

from __future__ import annotations

from dataclasses import replace

from runbook.answers import Sight
from runbook.run.sight_words import (
    KEPT_BACK,
    NOTHING,
    UNREAD,
    along,
    details,
    figures,
    see_if_not,
    see_source,
    see_words,
    sights_of,
)
from runbook.run.standing import Standing, standing
from runbook.run.wanted import Wanted
from tests.run.plans import HS1, answer, begun, line, plan

SAID = Sight("Every joint is dry.", False, "Make safe.")
COMING = Sight("From about 30.2 °C a haze.", True, of="haze", at_K=303.32, trust="Good to a quarter.")
FADES = Sight("At 31.0 °C the surface is gone.", True, of="meniscus", at_K=304.13, trust="Good to 0.1 K.")
LATER = Sight("No surface.", True, of="meniscus", at_K=306.15, trust="Good.")
NOW = Sight("The surface stands at 30 mm.", True, of="meniscus", numbers=(("height", 0.0302, "m"),), trust="Good.")


def stand(*sights: Sight, hidden: bool = False) -> Standing:
    """A run in a line with these sights, nothing computed yet."""
    made = plan(line(1, sights=sights))
    run = begun(made)
    found = standing(made, run.ledger, run.clock.now())
    return replace(found, sights=sights, hidden=hidden)


def test_the_authors_words_stay_beside_what_is_computed() -> None:
    """First where nothing moves; second while the charge is on its way; the plan's computed ones are replaced."""
    looked = answer("k", sights=(NOW,))
    assert sights_of(looked, line(1, sights=(SAID,))) == (SAID, NOW)
    assert sights_of(looked, line(1, sights=(SAID, COMING))) == (NOW, SAID)
    assert sights_of(None, line(1, sights=(SAID, COMING))) == (SAID, COMING)
    assert sights_of(looked, None) == (NOW,)
    assert sights_of(None, None) == ()


def test_a_path_is_not_poured_into_the_band() -> None:
    """Of sights that fall on a path only two are said, and only where nothing else is."""
    assert see_words(stand(COMING, FADES, LATER)) == f"{COMING.words} {FADES.words}"
    assert see_words(stand(SAID, COMING)) == SAID.words
    assert see_words(stand()) == NOTHING


def test_where_words_come_from() -> None:
    """Computed, written, or both."""
    assert see_source(stand(NOW)) == "computed"
    assert see_source(stand(SAID)) == "written"
    assert see_source(stand(SAID, NOW)) == "written and computed"
    assert see_source(stand()) == ""


def test_nothing_gives_a_blind_reading_away() -> None:
    """While a signer's own reading is outstanding neither words nor figures nor what-if-not are there."""
    kept = stand(SAID, NOW, hidden=True)
    assert see_words(kept) == KEPT_BACK
    assert see_source(kept) == ""
    assert see_if_not(kept) == ""
    assert details(plan(line(1)), kept) == ((KEPT_BACK, (), ""),)


def test_a_height_that_is_to_be_read_is_not_said_first() -> None:
    """A value beside an empty box is copied: sentence and figures wait till the height has been read."""
    due = Wanted(HS1, 0.0, False, "line")
    asked = replace(stand(NOW, SAID), wanted=(due,))
    assert see_words(asked) == f"{UNREAD} {SAID.words}"
    assert "30" not in "".join(word for row in details(plan(line(1)), asked) for word in (row[0], *row[1]))
    later = replace(asked, wanted=(replace(due, due_s=60.0),))
    assert see_words(later) == f"{NOW.words} {SAID.words}"


def test_asked_for_all_of_it_is_there() -> None:
    """Sentence, figures in units of the bench and trust; the path's with their temperatures."""
    found = details(plan(line(1)), stand(NOW, SAID, COMING))
    assert found[0] == (NOW.words, ("height 30.2 mm",), "Good.")
    assert "author" in found[1][2]
    assert found[2] == (COMING.words, (), "Good to a quarter.")


def test_figures_in_units_of_the_bench() -> None:
    """Kelvin become degrees unless they are a distance, metres millimetres or nanometres, pascal the dial's unit."""
    numbers = (
        ("temperature", 304.128, "K"),
        ("below critical", 0.0804, "K"),
        ("correlation length", 5.5e-9, "m"),
        ("movement on warming", 7.8e-5, "m/K"),
        ("triple pressure", 517964.0, "Pa"),
        ("least", 0.115, "kg"),
        ("step of the index", 0.05937, "1"),
        ("turbidity", 1.456, "1/m"),
    )
    assert figures(plan(line(1)), replace(NOW, numbers=numbers)) == (
        "temperature 30.978 °C",
        "below critical 0.080 K",
        "correlation length 5.5 nm",
        "movement on warming 0.078 mm/K",
        "triple pressure 4.17 bar(g)",
        "least 115.0 g",
        "step of the index 0.05937",
        "turbidity 1.456 1/m",
    )


def test_the_briefing_lists_what_is_seen_in_the_order_of_the_path() -> None:
    """Of each line that has a path; lines without one are left out."""
    made = plan(line(1, sights=(SAID,)), line(2, sights=(SAID, COMING, FADES, LATER)))
    assert along(made) == (("1.2", (COMING.words, FADES.words, f"33.0 °C: {LATER.words}")),)
