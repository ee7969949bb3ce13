"""Solids: their curves meet at the triple point, their slopes are their own, and the tables are exact enough."""

from __future__ import annotations

import pytest

from runbook.errors import OutsideValidity
from runbook.fluids.catalogue import fluids
from runbook.fluids.solids.curves import Solid
from runbook.fluids.state import Region
from runbook.fluids.substance import Substance, substance

NAMES = [data.name for data in fluids() if data.solid is not None]
WITHOUT = [data.name for data in fluids() if data.solid is None]


def with_solid(name: str) -> tuple[Substance, Solid]:
    """A fluid and its solid."""
    fluid = substance(name)
    assert fluid.solid is not None
    return fluid, fluid.solid


def melting_temperatures(fluid: Substance, solid: Solid) -> list[float]:
    """Three on the melting curve, near and far from the triple point."""
    sign = -1.0 if solid.melts_downwards else 1.0
    return [fluid.triple_temperature + sign * step for step in (0.5, 3.0, 7.0)]


@pytest.mark.parametrize("name", NAMES)
def test_curves_meet_at_the_triple_point(name: str) -> None:
    """Sublimation and melting pressure at the triple point are that of the equation of state."""
    fluid, solid = with_solid(name)
    assert solid.sublimation_pressure(fluid.triple_temperature) == pytest.approx(fluid.triple_pressure, rel=1e-11)
    assert solid.melting_pressure(fluid.triple_temperature) == pytest.approx(fluid.triple_pressure, rel=1e-11)


@pytest.mark.parametrize("name", NAMES)
@pytest.mark.parametrize("share", [0.05, 0.37, 0.71, 0.98])
def test_sublimation_slope_is_its_own(name: str, share: float) -> None:
    """The slope agrees with differences of the pressure, 1e-6, and with Clapeyron's, 1e-6: between the nodes too."""
    fluid, solid = with_solid(name)
    t = fluid.min_temperature + share * (fluid.triple_temperature - fluid.min_temperature)
    by_difference = (solid.sublimation_pressure(t + 1e-3) - solid.sublimation_pressure(t - 1e-3)) / 2e-3
    assert solid.sublimation_slope(t) == pytest.approx(by_difference, rel=1e-6)
    vapour = fluid.state(t, 100.0).vapour_density
    assert vapour is not None
    step = 1.0 / vapour - solid.beside_vapour(t).volume
    assert solid.sublimation_slope(t) == pytest.approx(solid.heat_of_sublimation(t) / (t * step), rel=1e-6)


@pytest.mark.parametrize("name", NAMES)
def test_melting_slope_is_its_own(name: str) -> None:
    """The slope agrees with differences of the pressure, 1e-5, and with Clapeyron's, 1e-4: between the nodes too."""
    fluid, solid = with_solid(name)
    for t in melting_temperatures(fluid, solid):
        by_difference = (solid.melting_pressure(t + 1e-3) - solid.melting_pressure(t - 1e-3)) / 2e-3
        assert solid.melting_slope(t) == pytest.approx(by_difference, rel=1e-5)
        ice, liquid = solid.beside_liquid(t)
        slope = solid.heat_of_fusion(t) / (t * (liquid.volume - ice.volume))
        assert solid.melting_slope(t) == pytest.approx(slope, rel=1e-4)


@pytest.mark.parametrize("name", NAMES)
def test_solid_and_fluid_have_one_gibbs_energy_on_the_curve(name: str) -> None:
    """Off the nodes the tables keep both phases in equilibrium: within 1e-6 of RT."""
    fluid, solid = with_solid(name)
    for share in (0.11, 0.52, 0.93):
        t = fluid.min_temperature + share * (fluid.triple_temperature - fluid.min_temperature)
        p = solid.sublimation_pressure(t)
        vapour = fluid.vapour_beside_solid(t)
        assert solid.beside_vapour(t).gibbs == pytest.approx(vapour.gibbs, abs=1e-6 * 8.3145 * t / fluid.molar_mass), (
            t,
            p,
        )


@pytest.mark.parametrize("name", NAMES)
def test_regions_change_at_the_curves(name: str) -> None:
    """A millikelvin on either side of the plateau is another region; so is a millionth of the density at the frost."""
    fluid, _ = with_solid(name)
    triple = fluid.triple_temperature
    assert fluid.region(triple - 1e-3, 0.3 * fluid.critical_density) is Region.SOLID_VAPOUR
    assert fluid.region(triple, 0.3 * fluid.critical_density) is Region.THREE_PHASE
    assert fluid.region(triple + 1e-3, 0.3 * fluid.critical_density) is Region.LIQUID_VAPOUR
    cold = triple - 5.0
    frost = fluid.state(cold, 0.3 * fluid.critical_density).vapour_density
    assert frost is not None
    assert fluid.region(cold, frost * (1.0 + 1e-6)) is Region.SOLID_VAPOUR
    assert fluid.region(cold, frost * (1.0 - 1e-6)) is Region.VAPOUR


@pytest.mark.parametrize("name", NAMES)
def test_outside_its_curve_is_refused(name: str) -> None:
    """Nothing is given below the lowest temperature or above the triple point, nor for no number at all."""
    fluid, solid = with_solid(name)
    for t in (fluid.min_temperature - 0.1, fluid.triple_temperature + 0.1, -5.0, float("nan")):
        for ask in (solid.sublimation_pressure, solid.sublimation_slope):
            with pytest.raises(OutsideValidity):
                ask(t)


@pytest.mark.parametrize("name", WITHOUT)
def test_without_a_solid_the_cold_is_refused_clearly(name: str) -> None:
    """Below its triple point the fluid is named, with its triple point, and at it liquid and vapour are there."""
    fluid = substance(name)
    with pytest.raises(OutsideValidity, match=f"triple point of {name}"):
        fluid.state(fluid.triple_temperature - 0.01, 100.0)
    assert fluid.region(fluid.triple_temperature, 100.0) is Region.LIQUID_VAPOUR


def test_water_freezes_lighter() -> None:
    """Ice floats: solid and liquid lie below the triple point under pressure, and a full vessel that cools bursts."""
    water, ice = with_solid("water")
    assert ice.melts_downwards
    assert not with_solid("carbon dioxide")[1].melts_downwards
    assert water.region(270.0, 950.0) is Region.SOLID_LIQUID
    assert water.pressure(265.0, 950.0) > water.pressure(270.0, 950.0) > 300e5
    assert water.region(270.0, 1040.0) is Region.LIQUID
