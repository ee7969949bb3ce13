"""How cold a gas that never was liquid makes its vessel when it is let down."""

from __future__ import annotations

import pytest

from runbook.charge.blowdown import coldest_of_gas
from runbook.fluids.substance import substance

ROOM = 101325.0
"""[Pa]."""


@pytest.mark.independent
def test_a_thin_gas_takes_pressure_times_volume() -> None:
    """Of an ideal gas the wall loses at most p V (first law of an open vessel), and throttling cools nothing.

    Nitrogen at 2 bar in 1 L: 200 J from a body of 100 J/K, 2 K; the real gas is 0.2 K/bar colder behind the valve
    (Joule-Thomson coefficient of nitrogen at 300 K and 1 atm, 0.22 K/bar: handbook figure, from memory).
    """
    mass = 200e3 * 1e-3 / (296.8 * 300.0)
    found = coldest_of_gas(substance("nitrogen"), mass, 1e-3, 300.0, ROOM, 100.0)
    assert found == pytest.approx(300.0 - 2.0 - 0.22, abs=0.1)


@pytest.mark.independent
def test_argon_behind_its_valve_is_as_cold_as_throttling_makes_it() -> None:
    """Argon from 60 bar at 293 K through a valve is about 21 K colder: 0.36 K/bar (handbook figure, from memory)."""
    mass = 0.102
    found = coldest_of_gas(substance("argon"), mass, 1e-3, 293.15, ROOM, 1e9)
    assert found is not None
    assert 293.15 - found == pytest.approx(0.36 * 59.0, rel=0.12)


def test_a_light_body_becomes_colder() -> None:
    """The same gas takes the same heat from less metal."""
    heavy, light = (coldest_of_gas(substance("argon"), 0.1, 1e-3, 293.15, ROOM, c) for c in (4000.0, 1000.0))
    assert heavy is not None
    assert light is not None
    assert light < heavy - 3.0


@pytest.mark.parametrize(
    ("fluid", "mass", "volume", "start", "body"),
    [
        ("carbon dioxide", 0.117, 0.25e-3, 303.15, 1200.0),
        ("carbon dioxide", 0.2, 1e-3, 283.15, 1200.0),
        ("argon", 0.3, 1e-3, 283.15, 5.0),
    ],
)
def test_where_liquid_may_form_nothing_is_said(
    fluid: str, mass: float, volume: float, start: float, body: float
) -> None:
    """A charge that boils, or that takes its wall to where it would, has no such bound."""
    assert coldest_of_gas(substance(fluid), mass, volume, start, ROOM, body) is None
