"""What is computed to be seen of a vessel as it stands."""

from __future__ import annotations

from dataclasses import replace
from pathlib import Path

import pytest

from runbook.answers import Sight
from runbook.assess.now import answer
from runbook.assess.sights import Look, computed, path_sights
from runbook.assess.sights.marks import marks
from runbook.assess.walk import walk
from runbook.codec import from_plain, to_plain
from runbook.fluids.catalogue import fluids
from runbook.fluids.substance import substance
from tests.assess.looking import filled, kinds, number, of, seen, there
from tests.assess.scenes import observed, question

# -- the vessel as it stands ---------------------------------------------------------------------------------


@pytest.mark.wiring
def test_the_surface_stands_where_the_filling_puts_it(tmp_path: Path) -> None:
    """117 g in 250 mL at 20 degC is 47 % liquid: 28.7 mm in a lying cell of 60 mm, in 0.3 mm."""
    found = of(seen(there(tmp_path), 293.15), "meniscus")
    assert number(found, "height") == pytest.approx(0.0287, abs=3e-4)
    assert "29 mm" in found.words


def test_the_bounds_of_the_charge_are_bounds_of_the_height(tmp_path: Path) -> None:
    """115 to 119 g: 0.33 mm a gram in this cell, so 1.3 mm between them, in 0.2 mm."""
    found = of(computed(there(tmp_path), Look(0.115, 0.119, 293.15)), "meniscus")
    width = number(found, "greatest height") - number(found, "least height")
    assert width == pytest.approx(4 * 0.33e-3, abs=2e-4)


def test_a_charge_nobody_knows_places_no_surface(tmp_path: Path) -> None:
    """Between nothing and brim-full the sentence says so and gives no height."""
    found = of(computed(there(tmp_path), Look(0.0, 0.275, 293.15)), "meniscus")
    assert "not known" in found.words
    assert "mm" not in found.words


def test_bounds_of_more_than_a_few_millimetres_are_said(tmp_path: Path) -> None:
    """117 to 140 g is no height but a span of it."""
    found = of(computed(there(tmp_path), Look(0.117, 0.140, 293.15)), "meniscus")
    assert "between 29 and 36 mm" in found.words


def test_gas_alone_shows_no_surface(tmp_path: Path) -> None:
    """Nothing to 10 g at 20 degC: even the most is thin gas."""
    assert "at most gas is left" in of(computed(there(tmp_path), Look(0.0, 0.010, 293.15)), "no liquid").words


def test_direction_on_warming_and_on_cooling(tmp_path: Path) -> None:
    """Over critical density the surface rises on warming and falls on cooling; nothing is said where it stands."""
    place = there(tmp_path)
    heavy = filled(place, 1.3)
    assert "rises" in of(seen(place, 298.0, heavy, warming=True), "meniscus").words
    assert "falls" in of(seen(place, 298.0, heavy, warming=False), "meniscus").words
    light = filled(place, 0.75)
    assert "falls" in of(seen(place, 301.5, light, warming=True), "meniscus").words
    still = of(seen(place, 298.0, heavy), "meniscus").words
    assert "rises" not in still
    assert "falls" not in still
    assert "hardly moves" in of(seen(place, 293.15, warming=True), "meniscus").words


def test_bubbles_only_where_it_is_heated_or_let_down(tmp_path: Path) -> None:
    """A charge at rest does not boil."""
    place = there(tmp_path)
    assert not [s for s in seen(place, 293.15) if s.of == "boiling"]
    assert of(seen(place, 293.15, heated=True, warming=True), "boiling")
    assert of(seen(place, 293.15, lets_down=True), "boiling")
    assert not [s for s in seen(place, 306.0, heated=True, warming=True) if s.of == "boiling"]


def test_within_a_tenth_of_a_kelvin_one_sentence(tmp_path: Path) -> None:
    """At critical filling, on both sides of it, one honest sentence and nothing besides, beads or not."""
    place = there(tmp_path, beads=True)
    critical = place.substance.critical_temperature
    for away in (-0.099, -0.01, 0.0, 0.05, 0.099):
        for warming in (True, False, None):
            (one,) = seen(place, critical + away, warming=warming)
            assert "one density" in one.trust
    assert len(seen(place, critical - 0.11, warming=True)) > 1


def test_four_per_cent_off_reads_critical_and_ten_leaves(tmp_path: Path) -> None:
    """Within 5 % it vanishes in place; 10 % off the sentence within 0.1 K says at which end it leaves."""
    place = there(tmp_path)
    close = place.substance.critical_temperature - 0.05
    assert "fading where it stands" in seen(place, close, filled(place, 0.96))[0].words
    assert "fading where it stands" in seen(place, close, filled(place, 1.04))[0].words
    assert "at the top" in seen(place, close, filled(place, 1.1))[0].words
    assert "at the bottom" in seen(place, close, filled(place, 0.9))[0].words


def test_haze_begins_about_a_kelvin_below_and_thickens(tmp_path: Path) -> None:
    """Nothing 2 K below; seen 0.5 K below; thinner light the nearer; and above it clears within 5 K."""
    place = there(tmp_path)
    critical = place.substance.critical_temperature
    assert not [s for s in seen(place, critical - 2.0) if s.of == "haze"]
    through = [number(of(seen(place, critical + d), "haze"), "light through the cell") for d in (-0.5, -0.11, 0.11)]
    assert through[0] > through[1] > through[2]
    assert not [s for s in seen(place, critical + 5.0) if s.of == "haze"]


def test_a_surface_is_called_faint_only_when_it_is(tmp_path: Path) -> None:
    """1 K below critical the step of the index is 0.059 and plain; 0.3 K below it is under 0.05."""
    place = there(tmp_path)
    critical = place.substance.critical_temperature
    assert not [s for s in seen(place, critical - 1.0) if s.of == "contrast"]
    assert number(of(seen(place, critical - 0.3), "contrast"), "step of the index") < 0.05


def test_rain_only_while_it_cools(tmp_path: Path) -> None:
    """In the half kelvin below the return of the surface, and never on warming."""
    place = there(tmp_path)
    at = place.substance.critical_temperature - 0.3
    assert of(seen(place, at, warming=False), "rain")
    assert not [s for s in seen(place, at, warming=True) if s.of == "rain"]
    assert not [s for s in seen(place, at - 1.0, warming=False) if s.of == "rain"]


def test_what_comes_next_is_said_on_the_way_there(tmp_path: Path) -> None:
    """Warming towards 33 degC: the vanishing with its temperature; towards 25 degC: not a word of it."""
    place = there(tmp_path)
    ahead = [s.words for s in seen(place, 294.0, warming=True, toward=306.15)]
    assert any("31.0 °C the surface fades" in words for words in ahead)
    assert not any("31.0" in s.words for s in seen(place, 294.0, warming=True, toward=298.15))


# -- trust, figures, journals --------------------------------------------------------------------------------


def test_every_computed_sight_has_figures_and_trust(tmp_path: Path) -> None:
    """From dry ice to one phase, standing, warmed, cooled and let down; one sentence each."""
    place = there(tmp_path, beads=True)
    for tenth in range(1920, 3120, 17):
        for changes in ({}, {"warming": True, "heated": True}, {"warming": False}, {"lets_down": True}):
            for one in seen(place, tenth / 10.0, **changes):
                assert one.computed
                assert one.of
                assert one.numbers, one.words
                assert one.trust.endswith(".")
                assert one.words.endswith(".")
                assert one.words[0].isupper()


@pytest.mark.wiring
def test_which_equations_flatten_their_dome_too_early() -> None:
    """By their own slope between 1 K and 0.1 K below critical: xenon, SF6, n-butane and R134a, and not CO2, water or
    ethane; in nature the exponent is 0.326."""
    from runbook.assess.sights.marks import _flattens

    flat = {f.name for f in fluids() if _flattens(substance(f.name))}
    assert {"xenon", "sulfur hexafluoride", "n-butane", "R134a"} <= flat
    assert not flat & {"carbon dioxide", "water", "ethane"}


def test_a_flattened_dome_is_said_only_close_to_critical(tmp_path: Path) -> None:
    """Carbon dioxide never says it."""
    place = there(tmp_path)
    critical = place.substance.critical_temperature
    assert "too early" not in of(seen(place, critical - 0.3), "meniscus").trust
    charge = replace(marks(place, 0.117), flattens=True)
    place.seen[0.117] = charge
    assert "too early" in of(seen(place, critical - 0.3), "meniscus").trust
    assert "too early" not in of(seen(place, critical - 3.0), "meniscus").trust


def test_a_sight_of_an_old_journal_is_read_and_a_new_one_survives() -> None:
    """Fields that came later have defaults; all of it goes to JSON and back."""
    old = from_plain(Sight, {"words": "A haze.", "computed": True, "if_not": ""})
    assert old == Sight("A haze.", True)
    new = Sight("A haze.", True, "", "haze", 303.3, (("turbidity", 0.4, "1/m"),), "Good to a quarter.")
    assert from_plain(Sight, to_plain(new)) == new


def test_the_live_answer_looks_where_the_line_goes(tmp_path: Path) -> None:
    """In the warming line with the source on: it moves, boils, and the vanishing is ahead."""
    place = there(tmp_path)
    lines = walk(place)
    index = next(i for i, w in enumerate(lines) if w.warms)
    readings = (
        observed("mass", 0.1172, 3, closed=False),
        observed("temperature", 294.15, 10),
        observed("liquid height", 0.0285, 11, by="T. Okoro"),
    )
    found = answer(place, lines, question(index, index + 1, readings, source="on"))
    assert {"meniscus", "boiling"} <= {s.of for s in found.sights}
    assert any("fades" in s.words for s in found.sights)
    assert found.liquid_height == pytest.approx(0.0285, abs=0.001)


def test_what_depends_on_the_charge_alone_is_worked_out_once(tmp_path: Path) -> None:
    """Two looks at one charge share its marks."""
    place = there(tmp_path)
    assert marks(place, 0.117) is marks(place, 0.117)
    assert marks(place, 0.117) is not marks(place, 0.118)


@pytest.mark.parametrize("name", [fluid.name for fluid in fluids()])
def test_every_fluid_shows_something_and_nothing_raises(tmp_path: Path, name: str) -> None:
    """Three charges of each fluid from its coldest to 10 K above critical, and along the way there and back."""
    place = there(tmp_path, beads=True)
    place.substance = fluid = substance(name)
    for share in (0.6, 1.0, 1.5):
        mass = filled(place, share)
        low, high = fluid.min_temperature + 0.5, fluid.critical_temperature + 10.0
        for step in range(25):
            at = low + (high - low) * step / 24.0
            for changes in ({"warming": True, "heated": True, "toward": high}, {"lets_down": True}):
                seen(place, at, mass, **changes)
        up, down = path_sights(place, low, high, mass), path_sights(place, high, low, mass)
        assert {"meniscus"} <= set(kinds(up))
        assert up
        assert down
