"""A rehearsal with a vent held shut by hand: the ice melts, the hand lets go or does not, and has its consequence."""

from __future__ import annotations

from dataclasses import replace
from pathlib import Path

import pytest

from runbook.assess.bind import plan_of
from runbook.assess.walk import walk
from runbook.rehearsal.faults import Trouble, Troubles, find_fault
from runbook.rehearsal.world import World
from runbook.run.clock import Moment
from runbook.run.ledger import Ledger
from runbook.run.state import Stated
from tests.assess.test_held import ON, held_lines
from tests.assess.tube import scene

PLATEAU = 5.1795e5
"""Triple point of carbon dioxide [Pa], Span and Wagner 1996."""


class Tube:
    """The tube with 8 g of dry ice in it, moved by stating its vent."""

    def __init__(self, folder: Path, troubles: Troubles | None = None) -> None:
        here = scene(folder)
        self.lines = walk(here)
        self.held = held_lines(self.lines)[1]
        self.world = World(here, self.lines, plan_of(here, ON, self.lines), 1, Moment(0.0, 0.0), 0, troubles)
        self.at = 0.0
        self.vent("open", 0.0)

    def vent(self, position: str, seconds: float) -> None:
        """The vent stands so for so long [s]."""
        stated = {"V1": Stated(position, 0, 0), "C1": Stated("shut", 0, 0)}
        self.world.follow(replace(Ledger.start(), line=self.held, source="none", stated=stated))
        self.at += seconds
        self.world.move_to(Moment(self.at, 0.0))


def test_ice_melts_under_its_own_pressure_and_freezes_when_let_go(tmp_path: Path) -> None:
    """Shut, the gauge climbs to the triple pressure and stands there while ice and liquid are both seen; let go, the
    liquid is gone in seconds and snow is left, at the room's pressure."""
    tube = Tube(tmp_path)
    tube.vent("shut", 100.0)
    assert tube.world.ice_seen
    assert tube.world.liquid_seen
    assert tube.world.pressure() == pytest.approx(PLATEAU, rel=2e-3)
    tube.vent("shut", 40.0)
    assert tube.world.pressure() == pytest.approx(PLATEAU, rel=2e-3)
    before = tube.world.vessel.mass
    tube.vent("open", 5.0)
    assert not tube.world.liquid_seen
    assert tube.world.ice_seen
    assert tube.world.pressure() == pytest.approx(tube.world.controls.barometer, rel=2e-3)
    # Of the liquid about four tenths boil off before the rest is frozen; ice that had not melted stays.
    assert 0.6 * before < tube.world.vessel.mass < 0.95 * before
    assert tube.world.seen == "solid in the open"


def test_it_can_be_done_again_and_again(tmp_path: Path) -> None:
    """Three times in five minutes, each time from snow to the same pressure, with less in the tube."""
    tube = Tube(tmp_path)
    masses = []
    for _ in range(3):
        tube.vent("shut", 95.0)
        assert tube.world.pressure() == pytest.approx(PLATEAU, rel=2e-3)
        tube.vent("open", 5.0)
        masses.append(tube.world.vessel.mass)
    assert tube.at <= 300.0
    assert masses[0] > masses[1] > masses[2] > 3e-3


def test_whoever_does_not_let_go_meets_the_relief_valve(tmp_path: Path) -> None:
    """After the last ice it climbs to 7 bar(g) within a minute; the relief keeps it under 110 % of 8 bar(g)."""
    tube = Tube(tmp_path)
    tube.vent("shut", 900.0)
    assert not tube.world.ice_seen
    assert 7.9e5 < tube.world.highest_pressure < 1.1 * 8.0e5 + 101325.0


def test_a_hand_that_is_gone_lets_the_vent_open(tmp_path: Path) -> None:
    """Nobody is there from the moment it was closed: whatever the record says, the spring has opened it."""
    away = Troubles([Trouble(find_fault("operator away"), 30.0)])
    tube = Tube(tmp_path, away)
    tube.vent("shut", 60.0)
    assert tube.world.pressure() == pytest.approx(tube.world.controls.barometer, rel=2e-3)
    assert 1.1e5 < tube.world.highest_pressure < PLATEAU


def test_a_weeping_joint_makes_no_open_vessel(tmp_path: Path) -> None:
    """With a leak of a hundredth of a millimetre from the moment of closing it still comes to the triple point."""
    tube = Tube(tmp_path, Troubles([Trouble(find_fault("slow leak"))]))
    tube.vent("shut", 110.0)
    assert tube.world.pressure() == pytest.approx(PLATEAU, rel=2e-3)
