"""The let-down before it is done: trends of the bench, balances, and the room's air by hand calculation."""

from __future__ import annotations

from collections.abc import Mapping
from pathlib import Path

import pytest

from runbook.assess.bind import plan_of
from runbook.assess.scene import open_scene
from runbook.procedure.reader import read_procedure
from runbook.rehearsal.letting_down import LetDownPlan, let_down_plan
from tests.assess.scenes import SHIPPED, changed_files

LAST = 3
"""The part of the shipped procedure that lets down."""
ROOM = {"hottest: 30 degC, coldest: 18 degC": "hottest: 21 degC, coldest: 20 degC"}


def planned(
    folder: Path, procedure: Mapping[str, str] | None = None, apparatus: Mapping[str, str] | None = None
) -> LetDownPlan:
    """Of the shipped procedure with words changed."""
    loaded = read_procedure(changed_files(folder, {**ROOM, **(procedure or {})}, apparatus))
    scene = open_scene(loaded, 101325.0, None)
    found = let_down_plan(scene, plan_of(scene, loaded.procedure.issue.date), (LAST,))
    assert found is not None
    return found


@pytest.fixture(scope="module")
def half_millimetre(tmp_path_factory: pytest.TempPathFactory) -> LetDownPlan:
    """Straight down through half a millimetre, and what a smaller and a wider opening would do."""
    folder = tmp_path_factory.mktemp("half")
    return planned(folder, {", pause_above: 20 bar(g)": ""}, {"bore: 0.15 mm": "bore: 0.5 mm"})


def test_a_wider_opening_is_quicker_and_colder(half_millimetre: LetDownPlan) -> None:
    """Half, once and twice the bore: each quicker and colder than the one before; nothing of the charge is lost."""
    found = half_millimetre
    times = [way.takes_s for way in found.ways]
    assert None not in times
    assert times == sorted((t for t in times if t is not None), reverse=True)
    assert [way.coldest_K for way in found.ways] == sorted((way.coldest_K for way in found.ways), reverse=True)
    for way in found.ways:
        assert way.gas_kg + way.solid_kg == pytest.approx(0.117, abs=1e-9)
        assert way.liquid_gone_s is not None
        assert way.takes_s is not None
        assert way.liquid_gone_s < way.takes_s
        # No minute gives more than the mean of all, and none less than it at the most.
        assert way.most_kg_s >= 0.99 * way.gas_kg / way.takes_s
    assert found.bounds is not None
    cold, hot = found.bounds
    assert cold.coldest_K < found.ways[1].coldest_K < hot.coldest_K


def test_without_heat_from_the_body_dry_ice_stays(tmp_path: Path) -> None:
    """120 g through 1.00 mm with next to no heat from the body: 32.5 g at 1 atm, nearly all of it dry ice, the coldest
    wall at its sublimation point; worked out beforehand. The gauge stands at zero a little above 1 atm."""
    vessel = {"from_fluid: 5 W/K": "from_fluid: 0.001 W/K", "bore: 0.15 mm": "bore: 1 mm"}
    charge = {", pause_above: 20 bar(g)": "", "mass: 117 g ± 2 g": "mass: 120 g ± 2 g"}
    way = planned(tmp_path, charge, vessel).ways[1]
    assert way.pauses == 0
    assert way.solid_kg == pytest.approx(0.0325, abs=0.001)
    assert way.coldest_K == pytest.approx(194.7, abs=0.5)


def test_a_pause_keeps_the_wall_warmer(tmp_path: Path, half_millimetre: LetDownPlan) -> None:
    """With a pause at 30 bar(g) for as long as liquid is seen the wall stays near where that liquid boils, and it
    takes longer than straight down."""
    bore = {"bore: 0.15 mm": "bore: 0.5 mm"}
    straight = half_millimetre.ways[1]
    paused = planned(tmp_path, {"pause_above: 20 bar(g)": "pause_above: 30 bar(g)"}, bore).ways[1]
    assert (straight.pauses, paused.pauses > 0) == (0, True)
    assert paused.coldest_K > straight.coldest_K + 2.0
    assert paused.takes_s is not None
    assert straight.takes_s is not None
    assert paused.takes_s > straight.takes_s
    # Carbon dioxide boils at 265 to 268 K under 30 to 32 bar (Span and Wagner 1996, table 34).
    assert paused.coldest_K > 262.0


@pytest.mark.independent
def test_the_rooms_air_by_hand(half_millimetre: LetDownPlan) -> None:
    """119 g at 44.01 g/mol and 24.06 L/mol (ideal, 20 degC, 1 atm) in 180 m3, and 420 ppm that were there: 1 %."""
    found = half_millimetre
    assert found.share == pytest.approx(0.119 / 0.04401 * 24.06e-3 / 180.0 + 420e-6, rel=0.01)
    assert found.limit == 0.005


def test_three_bores_where_the_file_states_none(tmp_path: Path) -> None:
    """A valve of which nobody knows how wide it is: three bores are told, and that the file says none."""
    found = planned(tmp_path, {", pause_above: 20 bar(g)": ""}, {"bore: 0.15 mm, ": ""})
    assert not found.bore_stated
    assert [way.opening_m for way in found.ways] == [0.15e-3, 0.3e-3, 1.0e-3]
    assert found.bounds is None


def test_no_plan_where_nothing_is_let_down() -> None:
    """The tube with a vent that springs open is never let down through a valve."""
    loaded = read_procedure(SHIPPED / "co2-triple-point.yaml")
    scene = open_scene(loaded, 101325.0, None)
    assert let_down_plan(scene, plan_of(scene, loaded.procedure.issue.date), (0, 1, 2)) is None
