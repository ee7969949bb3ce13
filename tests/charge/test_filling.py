"""Trapped air, and the charge that a height means."""

from __future__ import annotations

import itertools

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from runbook.charge.filling import (
    air_pressure,
    liquid_fraction,
    mass_from_height,
    meniscus_end,
    pressure_with_air,
)
from runbook.charge.geometry import Shape, ShapeKind
from runbook.errors import InputUnusable, OutsideValidity
from runbook.fluids.substance import substance

CO2 = substance("carbon dioxide")
CELL = Shape(ShapeKind.LYING_CYLINDER, 0.060, 250e-6)
AIR = 101325.0 * 250e-6 / 8.314462618 / 293.15
"""One cell of room air [mol]."""
R = 8.314462618


def test_air_alone_beside_vapour() -> None:
    """One cell of air squeezed into the vapour space of 117 g at 20 degC is 1 atm over its share: within 0.1 %."""
    share = CO2.state(293.15, 468.0).vapour
    assert share is not None
    assert air_pressure(CO2, 293.15, 468.0, AIR, 250e-6) == pytest.approx(101325.0 / share, rel=1e-3)
    together = pressure_with_air(CO2, 293.15, 468.0, AIR, 250e-6)
    assert together == pytest.approx(5.72905e6 + 101325.0 / share, rel=2e-4)


def test_no_air_adds_nothing() -> None:
    """Without air nothing is added, whatever the state."""
    assert air_pressure(CO2, 400.0, 900.0, 0.0, 250e-6) == 0.0


@pytest.mark.parametrize("density", [468.0, 720.0, 900.0, 130.0])
def test_near_the_end_of_the_meniscus_the_worse_counts(density: float) -> None:
    """From 1 K below the end of the meniscus it is 1.1 n R T / V or the value there, whichever is more."""
    end = meniscus_end(CO2, density)
    assert end is not None
    before = air_pressure(CO2, end - 1.0, density, AIR, 250e-6)
    for temperature in (end - 0.5, end, end + 5.0, end + 40.0):
        expected = max(before, 1.1 * AIR * R * temperature / 250e-6)
        assert air_pressure(CO2, temperature, density, AIR, 250e-6) == pytest.approx(expected, rel=1e-9)


def test_a_nearly_full_cell_squeezes_its_air() -> None:
    """1 K below liquid-full the air of a full cell counts several times its pressure in the whole cell."""
    end = meniscus_end(CO2, 900.0)
    assert end is not None
    assert air_pressure(CO2, end + 10.0, 900.0, AIR, 250e-6) > 5.0 * AIR * R * end / 250e-6


def test_air_while_solid_melts_has_the_lesser_room() -> None:
    """At the triple point the vapour space is that which the liquid leaves: less than beside solid."""
    at = air_pressure(CO2, CO2.triple_temperature, 468.0, AIR, 250e-6)
    assert at > air_pressure(CO2, 216.0, 468.0, AIR, 250e-6)
    assert at == pytest.approx(air_pressure(CO2, 216.6, 468.0, AIR, 250e-6), rel=1e-3)


def test_air_without_room_is_refused() -> None:
    """Solid and liquid that fill the vessel leave air no room: the answer is unknown, not a number."""
    with pytest.raises(OutsideValidity):
        air_pressure(CO2, 230.0, 1250.0, AIR, 250e-6)


def test_negative_air_is_refused() -> None:
    """An amount of air below zero is an input that cannot be used."""
    with pytest.raises(InputUnusable):
        air_pressure(CO2, 293.15, 468.0, -1.0, 250e-6)


@pytest.mark.parametrize("gram", [60.0, 117.0, 150.0, 185.0])
def test_charge_from_height_and_back(gram: float) -> None:
    """The height of a charge, read without error, is that charge again: within 1e-6."""
    liquid = liquid_fraction(CO2, 293.15, gram / 1000.0 / CELL.volume)
    assert liquid is not None
    found = mass_from_height(CO2, CELL, CELL.height(liquid), 293.15)
    assert found.nominal == pytest.approx(gram / 1000.0, rel=1e-6)
    assert found.least == pytest.approx(found.greatest, rel=1e-12)


@pytest.mark.wiring
def test_bounds_of_a_charge_from_its_height() -> None:
    """1 mm in a lying 60 mm cell is 3.1 g at 117 g, 2 mL a further 0.9 g; computed beforehand: within 0.1 g."""
    liquid = liquid_fraction(CO2, 293.15, 468.0)
    assert liquid is not None
    height = CELL.height(liquid)
    by_height = mass_from_height(CO2, CELL, height, 293.15, height_error=1e-3)
    assert 1000.0 * (by_height.greatest - by_height.nominal) == pytest.approx(3.1, abs=0.1)
    by_volume = mass_from_height(CO2, CELL, height, 293.15, volume_error=2e-6)
    assert 1000.0 * (by_volume.greatest - by_volume.nominal) == pytest.approx(0.9, abs=0.1)


@settings(max_examples=60, deadline=None)
@given(
    height=st.floats(0.005, 0.055),
    celsius=st.floats(5.0, 27.0),
    inside=st.tuples(st.floats(-1.0, 1.0), st.floats(-1.0, 1.0), st.floats(-1.0, 1.0)),
)
def test_the_bounds_hold_inside_the_box(height: float, celsius: float, inside: tuple[float, float, float]) -> None:
    """No point inside the box of height, temperature and volume gives a charge outside the bounds (1e-5)."""
    bounds = mass_from_height(
        CO2, CELL, height, celsius + 273.15, height_error=1e-3, temperature_error=2.0, volume_error=2e-6
    )
    h, t, v = inside
    shape = Shape(CELL.kind, CELL.diameter, CELL.volume + v * 2e-6)
    point = mass_from_height(CO2, shape, height + h * 1e-3, celsius + 273.15 + t * 2.0).nominal
    assert bounds.least * (1.0 - 1e-5) <= point <= bounds.greatest * (1.0 + 1e-5)


def test_a_height_beyond_the_meniscus_is_refused() -> None:
    """Where the box of temperature reaches past critical there is no meniscus to read; nor outside the vessel."""
    with pytest.raises(OutsideValidity):
        mass_from_height(CO2, CELL, 0.030, 303.0, temperature_error=2.0)
    for height, error in ((0.061, 0.0), (0.030, -1.0)):
        with pytest.raises(InputUnusable):
            mass_from_height(CO2, CELL, height, 293.15, height_error=error)


def test_liquid_fraction_is_none_without_phases() -> None:
    """Beyond critical there is no liquid to give a share of."""
    assert liquid_fraction(CO2, 313.15, 468.0) is None
    assert [liquid_fraction(CO2, t, d) for t, d in itertools.product((290.0,), (900.0,))] == [1.0]
