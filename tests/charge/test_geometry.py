"""Height and volume in simple shapes."""

from __future__ import annotations

from math import pi

import pytest
from hypothesis import given
from hypothesis import strategies as st

from runbook.charge.geometry import Shape, ShapeKind
from runbook.errors import InputUnusable
from runbook.fluids.substance import substance

CO2 = substance("carbon dioxide")
LYING = Shape(ShapeKind.LYING_CYLINDER, 0.060, 250e-6)
UPRIGHT = Shape(ShapeKind.UPRIGHT_CYLINDER, (4.0 * 250e-6 / pi / 0.080) ** 0.5, 250e-6)
SPHERE = Shape(ShapeKind.SPHERE, (6.0 * 250e-6 / pi) ** (1.0 / 3.0), 250e-6)
SHAPES = (LYING, UPRIGHT, SPHERE)


@given(shape=st.sampled_from(SHAPES), fraction=st.floats(0.0, 1.0))
def test_height_and_volume_are_inverse(shape: Shape, fraction: float) -> None:
    """The share below the height of a share is that share: within 1e-9."""
    assert shape.volume_below(shape.height(fraction)) == pytest.approx(fraction, abs=1e-9)
    assert shape.height_of_volume(fraction * shape.volume) == pytest.approx(shape.height(fraction), abs=1e-9)


@given(shape=st.sampled_from(SHAPES), pair=st.tuples(st.floats(0.0, 1.0), st.floats(0.0, 1.0)))
def test_more_liquid_stands_no_lower(shape: Shape, pair: tuple[float, float]) -> None:
    """Height never falls with volume."""
    less, more = sorted(pair)
    assert shape.height(less) <= shape.height(more) + 1e-12


@pytest.mark.parametrize("shape", SHAPES)
def test_empty_half_and_full(shape: Shape) -> None:
    """An empty vessel shows no liquid, a full one liquid to the top, a half-full one to the middle."""
    assert shape.height(0.0) == pytest.approx(0.0, abs=1e-9)
    assert shape.height(0.5) == pytest.approx(0.5 * shape.full_height, rel=1e-9)
    assert shape.height(1.0) == pytest.approx(shape.full_height, rel=1e-9)


def test_a_quarter_of_the_height() -> None:
    """At a quarter of the height a lying cylinder is 19.55 % full, a sphere 15.625 %: segment and cap by formula."""
    assert LYING.volume_below(0.015) == pytest.approx(0.1955, abs=1e-4)
    assert SPHERE.volume_below(0.25 * SPHERE.diameter) == pytest.approx(0.15625, abs=1e-9)


@pytest.mark.wiring
@pytest.mark.parametrize(("shape", "millimetre_per_gram"), [(LYING, 0.33), (UPRIGHT, 0.55)])
def test_how_far_a_gram_moves_the_meniscus(shape: Shape, millimetre_per_gram: float) -> None:
    """A gram more at 117 g and 20 degC raises the meniscus 0.33 mm in a lying 60 mm cell, 0.55 mm in an upright
    one 80 mm high; computed beforehand: within the printed digit."""

    def height(kilogram: float) -> float:
        liquid = CO2.state(293.15, kilogram / shape.volume).liquid
        assert liquid is not None
        return shape.height(liquid)

    assert 1000.0 * (height(0.1175) - height(0.1165)) == pytest.approx(millimetre_per_gram, abs=0.006)


@pytest.mark.parametrize(
    ("kind", "diameter", "volume"),
    [
        (ShapeKind.LYING_CYLINDER, 0.0, 1e-3),
        (ShapeKind.LYING_CYLINDER, 0.06, -1.0),
        (ShapeKind.UPRIGHT_CYLINDER, float("nan"), 1e-3),
        (ShapeKind.SPHERE, 0.1, 1e-3),
    ],
)
def test_impossible_shapes_are_refused(kind: ShapeKind, diameter: float, volume: float) -> None:
    """A shape needs a diameter and a volume, and a sphere's volume is that of its diameter within 5 %."""
    with pytest.raises(InputUnusable):
        Shape(kind, diameter, volume)


@pytest.mark.parametrize("shape", SHAPES)
def test_heights_outside_the_vessel_are_refused(shape: Shape) -> None:
    """No liquid stands below the bottom or above the top, nor fills more than all."""
    for ask, value in (
        (shape.volume_below, -0.001),
        (shape.volume_below, 1.0),
        (shape.height, 1.01),
        (shape.height, float("nan")),
    ):
        with pytest.raises(InputUnusable):
            ask(value)
