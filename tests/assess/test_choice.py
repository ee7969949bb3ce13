"""How much to load: the same rules as of a written procedure, and arithmetic that a bench hand can check."""

from __future__ import annotations

from pathlib import Path

import pytest

from runbook.apparatus.model import Apparatus
from runbook.assess.bounds import charge_bounds
from runbook.assess.choice.loading import height, ice, most_for_source
from runbook.assess.choice.sight import SIGHTS, Choice
from runbook.assess.choice.standard import Wanted, hottest_target, standard_scene
from runbook.assess.corners import highest_pressure
from runbook.assess.hottest_place import hottest_place
from runbook.procedure.reader import read_apparatus
from tests.assess.scenes import changed_files, scene

BAROMETER = 101325.0


def vessel(folder: Path, changes: dict[str, str] | None = None) -> Apparatus:
    """The shipped vessel with words of its file changed."""
    changed_files(folder, None, changes)
    return read_apparatus(folder / "apparatus" / "view-cell-250.yaml")


def choice(folder: Path, fluid: str = "CO2", sight: str = "vanishes", changes: dict[str, str] | None = None) -> Choice:
    """One question of it."""
    apparatus = vessel(folder, changes)
    wanted = Wanted(fluid, 303.15, 291.15, 180.0, None, hottest_target(apparatus, 303.15))
    return Choice(apparatus, "x", wanted, sight)


def test_the_most_is_that_of_a_written_procedure(tmp_path: Path) -> None:
    """At one barometer the chosen bounds are those that `check` gives the shipped procedure: one set of rules."""
    written = charge_bounds(scene(tmp_path))
    one = choice(tmp_path)
    chosen = charge_bounds(standard_scene(one.apparatus, "x", one.wanted, 0.117, 0.002, BAROMETER))
    assert chosen.most_kg == pytest.approx(written.most_kg, abs=2e-5)
    assert chosen.best_kg == pytest.approx(written.best_kg)
    assert chosen.least_kg == pytest.approx(written.least_kg)


@pytest.mark.parametrize("sight", SIGHTS)
@pytest.mark.parametrize("fluid", ["CO2", "SF6", "water", "nitrogen", "xenon", "R134a", "argon", "ethane"])
def test_bounds_are_in_order_or_say_why_there_are_none(tmp_path: Path, fluid: str, sight: str) -> None:
    """Least, best, most rise; a bound that is missing has its reason."""
    found = choice(tmp_path, fluid, sight).bounds()
    known = [x for x in (found.least_kg, found.best_kg, found.most_kg) if x is not None]
    assert known == sorted(known)
    assert all(x > 0.0 for x in known)
    for name in ("least", "best", "most"):
        assert getattr(found, f"{name}_reason")


def test_a_rating_not_known_leaves_no_most(tmp_path: Path) -> None:
    """Unknown never permits: no charge, and the part is named."""
    found = choice(tmp_path, changes={"rating: 160 bar(g)": "rating: not known"}).bounds()
    assert found.most_kg is None
    assert "VC-2" in found.most_reason


def test_dry_ice_to_bring(tmp_path: Path) -> None:
    """A 1.2 kJ/K body at room temperature takes about 205 g of dry ice to 195 K (common practice); here from 30 degC,
    1.2 kJ/K x 108.5 K / 572.9 kJ/kg = 227 g (heat of sublimation: Jaeger and Span 2012)."""
    one = choice(tmp_path)
    found = ice(one, 0.117)
    assert found is not None
    assert found.cooling == pytest.approx(1200.0 * (303.15 - 194.66) / 572.9e3, rel=2e-3)
    assert found.bring >= found.charge + found.cooling + found.handling
    assert ice(choice(tmp_path, "SF6"), 0.1) is None
    assert ice(choice(tmp_path, "nitrogen"), 0.1) is None


def test_the_height_that_proves_it(tmp_path: Path) -> None:
    """47 % full at 20 degC in a lying 60 mm cell is 28.6 mm; a height tells the charge to about 0.33 mm/g (common
    practice), so 1 mm and half a division, with 2 mL of volume, tell it to about 5 g."""
    one = choice(tmp_path)
    found = height(one, 0.117)
    assert found is not None
    assert found.low < found.middle < found.high
    assert found.seen
    assert found.middle == pytest.approx(0.0290, abs=0.0003)
    assert found.proves == pytest.approx(0.005, abs=0.0006)
    assert height(one, 0.225) is None


def test_the_hottest_place_is_where_the_worst_corner_meets_the_limit(tmp_path: Path) -> None:
    """At it the most charge, in the least volume with air, stands at the ceiling: 0.1 %."""
    one = choice(tmp_path)
    found = hottest_place(one.scene(0.117), 0.117 + one.half)
    assert found is not None
    there = one.scene(0.117)
    worst = highest_pressure(there, 0.119, found).value
    assert worst == pytest.approx(94.848e5 + there.barometer.low_Pa, rel=1e-3)


def test_a_hotter_source_allows_less(tmp_path: Path) -> None:
    """The charge for a source one already has falls as that source can become hotter."""
    one = choice(tmp_path)
    found = [most_for_source(one, t) for t in (309.15, 312.15, 315.15, 318.15)]
    known = [x for x in found if x is not None]
    assert len(known) == 4
    assert known == sorted(known, reverse=True)
    assert known[1] == pytest.approx(one.bounds().most_kg, abs=3e-5)
