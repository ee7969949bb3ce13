"""Where a meniscus stands, moves and ends."""

from __future__ import annotations

from math import pi

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from runbook.charge.geometry import Shape, ShapeKind
from runbook.charge.meniscus import Window, ending, passages, standing
from runbook.fluids.catalogue import fluids
from runbook.fluids.substance import substance

CO2 = substance("carbon dioxide")
RHO, TC = CO2.critical_density, CO2.critical_temperature
LYING = Shape(ShapeKind.LYING_CYLINDER, 0.060, 250e-6)
UPRIGHT = Shape(ShapeKind.UPRIGHT_CYLINDER, (4.0 * 250e-6 / pi / 0.080) ** 0.5, 250e-6)
SPHERE = Shape(ShapeKind.SPHERE, (6.0 * 250e-6 / pi) ** (1.0 / 3.0), 250e-6)
WINDOW = Window(0.006, 0.054)


@pytest.mark.wiring
@pytest.mark.parametrize(
    ("off", "way", "cell", "window"),
    [
        (-0.20, "bottom", 445.0, 615.0),
        (-0.10, "bottom", 57.5, 80.4),
        (0.10, "top", 50.4, 71.5),
        (0.20, "top", 422.0, 576.0),
    ],
)
def test_where_it_leaves(off: float, way: str, cell: float, window: float) -> None:
    """Millikelvin below critical at which it leaves the whole lying 60 mm cell, and its 6 to 54 mm window: 2 %."""
    found = ending(CO2, LYING, WINDOW, RHO * (1.0 + off))
    assert found is not None
    assert found.from_window is not None
    assert found.way == way
    assert (TC - found.temperature) * 1e3 == pytest.approx(cell, rel=0.02)
    assert (TC - found.from_window) * 1e3 == pytest.approx(window, rel=0.02)


@pytest.mark.wiring
@pytest.mark.parametrize(("off", "low", "high"), [(0.3, 1460.0, 1330.0), (0.05001, 6.9, 4.8)])
def test_what_leaves_farther_and_nearer(off: float, low: float, high: float) -> None:
    """30 % off it is kelvins, 5 % off millikelvins: 2 %."""
    for sign, expected in ((-1.0, low), (1.0, high)):
        found = ending(CO2, LYING, WINDOW, RHO * (1.0 + sign * off))
        assert found is not None
        assert (TC - found.temperature) * 1e3 == pytest.approx(expected, rel=0.02)


@pytest.mark.independent
@pytest.mark.parametrize("off", [0.1, 0.15, 0.2])
def test_the_coexistence_curve_of_nature(off: float) -> None:
    """Close to critical, half the dome's width is 1.60 t^0.3265 of critical density (carbon dioxide, Levelt Sengers and
    others 1976, from memory; Ising exponent): the mean of the two leavings obeys it within 8 %."""
    both = [ending(CO2, LYING, WINDOW, RHO * (1.0 + sign * off)) for sign in (-1.0, 1.0)]
    away = [1.0 - found.temperature / TC for found in both if found is not None]
    assert len(away) == 2
    half = sum(1.60 * t**0.3265 for t in away) / 2.0
    assert half == pytest.approx(off, rel=0.08)


@pytest.mark.parametrize("off", [-0.04, 0.0, 0.04])
def test_near_critical_density_it_vanishes_in_place(off: float) -> None:
    """4 % off still reads critical, and it is in the window to the last hundredth of a kelvin."""
    found = ending(CO2, LYING, WINDOW, RHO * (1.0 + off))
    assert found is not None
    assert found.way == "in place"
    assert found.temperature == TC
    assert found.seen
    assert found.from_window is None or TC - found.from_window < 0.01


@pytest.mark.wiring
def test_dry_and_liquid_full_of_worked_charges() -> None:
    """300 kg/m3 dries out at 301.66 K, 400 at 303.956, 550 is liquid-full at 303.836, 700 at 298.82, 900 at 277.54 K
    (Span and Wagner's saturation curves): 10 mK."""
    for density, kelvin in ((300.0, 301.66), (400.0, 303.956), (550.0, 303.836), (700.0, 298.82), (900.0, 277.54)):
        found = ending(CO2, LYING, WINDOW, density)
        assert found is not None
        assert found.temperature == pytest.approx(kelvin, abs=0.01)


def test_a_charge_without_liquid_has_no_meniscus() -> None:
    """Thinner than vapour at the triple point, or denser than liquid there."""
    assert ending(CO2, LYING, WINDOW, 5.0) is None
    assert ending(CO2, LYING, WINDOW, 1300.0) is None
    assert passages(CO2, LYING, WINDOW, 5.0) == ()


def test_a_window_that_misses_the_middle_never_shows_the_vanishing() -> None:
    """At critical density the surface ends in the middle: a window above it loses sight of it, or never has it."""
    found = ending(CO2, LYING, Window(0.045, 0.054), RHO)
    assert found is not None
    assert not found.seen


def test_a_surface_that_comes_into_the_window_and_leaves_it() -> None:
    """A window from 28 mm up: liquid expands into it on warming; at critical density it stays."""
    found = passages(CO2, LYING, Window(0.028, 0.054), RHO)
    assert [p.edge for p in found][:1] == ["bottom"]
    assert found[0].into
    assert found[0].temperature == pytest.approx(280.8, abs=3.0)


@pytest.mark.parametrize("shape", [LYING, UPRIGHT, SPHERE], ids=lambda s: s.kind.value)
@given(pair=st.tuples(st.floats(0.0, 1.0), st.floats(0.0, 1.0)), away=st.floats(0.3, 80.0))
@settings(max_examples=40, deadline=None)
def test_height_is_monotone_in_liquid(shape: Shape, pair: tuple[float, float], away: float) -> None:
    """More in it never stands lower at one temperature."""
    both = CO2.saturation(TC - away)
    densities = [both.vapour_density + x * (both.liquid_density - both.vapour_density) for x in sorted(pair)]
    heights = [standing(CO2, shape, d * (1.0 - 1e-12), TC - away) for d in densities]
    known = [h.height for h in heights if h is not None]
    assert known == sorted(known)


@pytest.mark.parametrize("shape", [LYING, UPRIGHT, SPHERE], ids=lambda s: s.kind.value)
def test_movement_is_that_of_two_heights(shape: Shape) -> None:
    """Against heights half a kelvin apart, 10 %; and a denser charge stands higher by what two charges show, 2 %."""
    now, later = standing(CO2, shape, 600.0, 295.0), standing(CO2, shape, 600.0, 295.5)
    more = standing(CO2, shape, 606.0, 295.0)
    assert now is not None
    assert later is not None
    assert more is not None
    assert now.per_kelvin == pytest.approx((later.height - now.height) / 0.5, rel=0.1)
    assert now.per_density == pytest.approx((more.height - now.height) / 6.0, rel=0.02)
    assert now.per_kelvin > 0.0


def test_under_filled_the_surface_falls_at_last() -> None:
    """20 % under critical density it falls on warming; 20 % over it rises."""
    low, high = (standing(CO2, LYING, RHO * x, TC - 1.0) for x in (0.8, 1.2))
    assert low is not None
    assert high is not None
    assert low.per_kelvin < 0.0 < high.per_kelvin


def test_beyond_the_dome_nothing_stands() -> None:
    """Above critical, below the triple point, and in one phase there is no height."""
    assert standing(CO2, LYING, RHO, TC + 0.01) is None
    assert standing(CO2, LYING, RHO, 216.0) is None
    assert standing(CO2, LYING, 700.0, 300.0) is None


@pytest.mark.parametrize("name", [fluid.name for fluid in fluids()])
@pytest.mark.parametrize("off", [-0.3, -0.1, 0.0, 0.1, 0.3])
def test_every_fluid_ends_its_meniscus_the_right_way(name: str, off: float) -> None:
    """Under critical density at the bottom, over it at the top, near it in place; below critical temperature."""
    fluid = substance(name)
    found = ending(fluid, LYING, WINDOW, fluid.critical_density * (1.0 + off))
    assert found is not None
    assert found.way == ("in place" if off == 0.0 else "bottom" if off < 0.0 else "top")
    assert fluid.triple_temperature < found.temperature <= fluid.critical_temperature
    if found.from_window is not None:
        assert found.from_window <= found.temperature
