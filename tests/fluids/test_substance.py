"""Carbon dioxide at a temperature and a density: regions, pressures, landmarks, slopes."""

from __future__ import annotations

import pytest

from runbook.errors import InputUnusable, OutsideValidity
from runbook.fluids.substance import Region, substance

CO2 = substance("carbon dioxide")
CELL = 250e-6
"""Volume of the example cell [m3]."""


def test_aliases_are_one_fluid() -> None:
    """Every spelling of a fluid gives the same object under its canonical name."""
    assert substance("CO2") is substance(" co2 ") is substance("Carbon Dioxide") is CO2
    assert CO2.name == "carbon dioxide"


def test_an_unknown_fluid_names_the_known_ones() -> None:
    """A fluid that is not known is refused with the list of those that are."""
    with pytest.raises(InputUnusable, match="carbon dioxide"):
        substance("unobtainium")


@pytest.mark.wiring
@pytest.mark.parametrize(
    ("gram", "celsius", "pascal", "region"),
    [
        (117.0, 20.0, 5.72905e6, Region.LIQUID_VAPOUR),
        (117.0, 40.0, 8.93541e6, Region.SUPERCRITICAL),
        (180.0, 40.0, 1.207865e7, Region.SUPERCRITICAL),
        (225.0, 20.0, 1.449293e7, Region.LIQUID),
        (117.0, 21.0, 58.648e5, Region.LIQUID_VAPOUR),
        (180.0, 30.0, 83.570e5, Region.LIQUID),
        (225.0, 21.0, 151.78e5, Region.LIQUID),
        (32.5, 20.0, 47.907e5, Region.VAPOUR),
        (80.0, 40.0, 83.1e5, Region.SUPERCRITICAL),
        (150.0, 40.0, 96.7e5, Region.SUPERCRITICAL),
        (200.0, 40.0, 163.8e5, Region.SUPERCRITICAL),
        (225.0, 40.0, 282.5e5, Region.SUPERCRITICAL),
    ],
)
def test_charges_in_a_quarter_litre(gram: float, celsius: float, pascal: float, region: Region) -> None:
    """Pressure and region of bench charges in 250 mL, computed beforehand: within 0.02 % or the printed digit."""
    state = CO2.state(celsius + 273.15, gram / 1000.0 / CELL)
    printed = 0.06e5 if pascal in (83.1e5, 96.7e5, 163.8e5, 282.5e5) else 0.0
    assert state.pressure == pytest.approx(pascal, rel=2e-4, abs=printed)
    assert state.region is region
    assert CO2.pressure(celsius + 273.15, gram / 1000.0 / CELL) == pytest.approx(state.pressure, rel=1e-9)


@pytest.mark.wiring
@pytest.mark.parametrize(("gram", "liquid"), [(117.0, 0.4727), (150.0, 0.70), (180.0, 0.91)])
def test_liquid_fraction_at_20_celsius(gram: float, liquid: float) -> None:
    """The share of liquid at 20 degC, computed beforehand: within 0.0005, or half a printed digit."""
    state = CO2.state(293.15, gram / 1000.0 / CELL)
    assert state.liquid == pytest.approx(liquid, abs=0.0005 if gram == 117.0 else 0.005)
    assert state.solid == 0.0


@pytest.mark.wiring
@pytest.mark.parametrize(("celsius", "liquid"), [(15.0, 0.4646), (20.0, 0.4720), (25.0, 0.4807), (30.0, 0.4935)])
def test_liquid_fraction_at_critical_density(celsius: float, liquid: float) -> None:
    """At critical density the meniscus stands a little below the middle, computed beforehand: within 0.0005."""
    assert CO2.state(celsius + 273.15, CO2.critical_density).liquid == pytest.approx(liquid, abs=5e-4)


@pytest.mark.wiring
@pytest.mark.parametrize(
    ("density", "celsius"), [(700.0, 25.67), (760.0, 21.21), (800.0, 17.35), (850.0, 11.47), (900.0, 4.39)]
)
def test_liquid_full_temperatures(density: float, celsius: float) -> None:
    """The temperature at which liquid fills the vessel, computed beforehand: within 0.01 K."""
    assert CO2.liquid_full_temperature(density) == pytest.approx(celsius + 273.15, abs=0.01)


def test_landmarks_of_four_charges() -> None:
    """Each charge has one of critical, liquid-full and dry, and the other two are None: within 5 mK."""
    critical = CO2.landmarks(0.117 / CELL)
    assert critical.critical == pytest.approx(304.128, abs=0.005)
    assert (critical.liquid_full, critical.dry) == (None, None)
    for gram, kelvin in ((180.0, 297.506), (225.0, 277.544)):
        full = CO2.landmarks(gram / 1000.0 / CELL)
        assert full.liquid_full == pytest.approx(kelvin, abs=0.005)
        assert (full.dry, full.critical) == (None, None)
    thin = CO2.landmarks(0.0325 / CELL)
    assert thin.dry == pytest.approx(281.987, abs=0.005)
    assert (thin.liquid_full, thin.critical) == (None, None)
    assert thin.triple == CO2.triple_temperature


def test_the_critical_landmark_ends_5_per_cent_from_critical_density() -> None:
    """Within 5 % of critical density the landmark is critical, just outside it liquid-full or dry."""
    rho = CO2.critical_density
    assert CO2.landmarks(1.0499 * rho).critical is not None
    assert CO2.landmarks(1.0501 * rho).liquid_full is not None
    assert CO2.landmarks(0.9501 * rho).critical is not None
    assert CO2.landmarks(0.9499 * rho).dry is not None


def test_charges_too_thin_or_too_dense_for_a_meniscus() -> None:
    """A charge thinner than triple-point vapour goes dry as solid; one denser than its liquid is never liquid-full."""
    thin = CO2.landmarks(2.0)
    assert thin.triple is None
    assert thin.dry is not None
    assert thin.dry < CO2.triple_temperature
    assert CO2.region(thin.dry - 0.01, 2.0) is Region.SOLID_VAPOUR
    assert CO2.region(thin.dry + 0.01, 2.0) is Region.VAPOUR
    dense = CO2.landmarks(1200.0)
    assert dense.liquid_full is None
    assert dense.triple == CO2.triple_temperature


@pytest.mark.parametrize(
    ("kelvin", "density", "region"),
    [
        (195.0, 480.0, Region.SOLID_VAPOUR),
        (200.0, 3.0, Region.VAPOUR),
        (200.0, 5.0, Region.SOLID_VAPOUR),
        (216.592, 480.0, Region.THREE_PHASE),
        (216.592, 10.0, Region.VAPOUR),
        (220.0, 1300.0, Region.SOLID_LIQUID),
        (220.0, 1180.0, Region.LIQUID),
        (260.0, 480.0, Region.LIQUID_VAPOUR),
        (304.12, 440.0, Region.VAPOUR),
        (304.12, 500.0, Region.LIQUID),
        (304.12, 467.6, Region.LIQUID_VAPOUR),
        (303.0, 900.0, Region.LIQUID),
        (304.2, 467.6, Region.SUPERCRITICAL),
        (304.2, 200.0, Region.GAS),
    ],
)
def test_regions(kelvin: float, density: float, region: Region) -> None:
    """Below critical temperature one phase is named by density, above it by pressure; solids where they are."""
    state = CO2.state(kelvin, density)
    assert state.region is region
    assert CO2.region(kelvin, density) is region


def test_the_plateau_leaves_fractions_open() -> None:
    """At the triple point temperature and density fix the pressure, not the shares nor the energy."""
    state = CO2.state(CO2.triple_temperature, 480.0)
    assert state.pressure == pytest.approx(CO2.triple_pressure, rel=1e-12)
    assert (state.solid, state.liquid, state.vapour, state.internal_energy) == (None, None, None, None)


@pytest.mark.parametrize(
    ("kelvin", "density"),
    [
        (149.0, 480.0),
        (1100.1, 1.0),
        (293.15, 0.0),
        (293.15, -1.0),
        (293.15, float("nan")),
        (float("nan"), 480.0),
        (float("inf"), 480.0),
        (200.0, 1600.0),
        (320.0, 1800.0),
        (50.0, 1.0),
        (220.0, 1560.0),
        (600.0, 1450.0),
    ],
)
def test_beyond_the_models_is_refused(kelvin: float, density: float) -> None:
    """Where the property library answers with nonsense, or there is no state, the answer is a refusal."""
    for ask in (CO2.pressure, CO2.state, CO2.region, CO2.dp_dT, CO2.dp_ddensity, CO2.pressure_uncertainty):
        with pytest.raises(OutsideValidity):
            ask(kelvin, density)


def test_a_refusal_leaves_nothing_behind() -> None:
    """A state asked for after a refusal is the same as before it."""
    before = CO2.state(293.15, 468.0)
    with pytest.raises(OutsideValidity):
        CO2.state(320.0, 1800.0)
    assert CO2.state(293.15, 468.0) == before


@pytest.mark.parametrize(
    ("kelvin", "density"),
    [
        (190.0, 480.0),
        (200.0, 2.0),
        (222.0, 1300.0),
        (250.0, 480.0),
        (290.0, 480.0),
        (303.9, 480.0),
        (305.0, 468.0),
        (313.15, 720.0),
        (290.0, 900.0),
        (300.0, 130.0),
    ],
)
def test_slopes_are_those_of_the_pressure(kelvin: float, density: float) -> None:
    """dp/dT and dp/drho agree with differences of the pressure itself, in every region: within 1e-4."""
    dt, dd = 1e-3, 1e-4 * density
    by_t = (CO2.pressure(kelvin + dt, density) - CO2.pressure(kelvin - dt, density)) / (2.0 * dt)
    assert CO2.dp_dT(kelvin, density) == pytest.approx(by_t, rel=1e-4)
    by_d = (CO2.pressure(kelvin, density + dd) - CO2.pressure(kelvin, density - dd)) / (2.0 * dd)
    assert CO2.dp_ddensity(kelvin, density) == pytest.approx(by_d, rel=1e-4, abs=1e-6)


@pytest.mark.wiring
@pytest.mark.parametrize(
    ("kelvin", "capacity"),
    [(217.0, 2128.0), (230.0, 2213.0), (250.0, 2383.0), (290.0, 3004.94), (303.0, 4109.0), (320.0, 1052.0)],
)
def test_heat_capacity_beside_vapour_is_the_true_one(kelvin: float, capacity: float) -> None:
    """Heat capacity of 480 kg/m3, computed beforehand by differences of energy: within 0.05 %.

    The equation's own figure at 290 K would be 998054 J/kg/K.
    """
    assert CO2.heat_capacity(kelvin, 480.0) == pytest.approx(capacity, rel=5e-4)


def test_uncertainty_of_the_pressure() -> None:
    """0.012 % of saturation; full of liquid 0.2 % in density times the slope; 1.2 % over dry ice."""
    assert CO2.pressure_uncertainty(293.15, 468.0) == pytest.approx(1.2e-4 * 5.72905e6, rel=1e-3)
    full = 0.002 * 900.0 * CO2.dp_ddensity(293.15, 900.0)
    assert CO2.pressure_uncertainty(293.15, 900.0) == pytest.approx(full, rel=1e-9)
    assert full > 2e5
    assert CO2.pressure_uncertainty(190.0, 480.0) == pytest.approx(0.012 * CO2.pressure(190.0, 480.0))
    # Near critical the slope vanishes, the uncertainty does not.
    assert CO2.pressure_uncertainty(304.1283, 467.6) >= 1.2e-4 * 7.377e6
