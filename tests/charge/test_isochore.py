"""A sealed charge between energy and temperature."""

from __future__ import annotations

import itertools
import time

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from runbook.charge.isochore import Isochore
from runbook.errors import OutsideValidity
from runbook.fluids.substance import Region, substance

CO2 = substance("carbon dioxide")
PATHS = {rho: Isochore(CO2, rho) for rho in (10.0, 130.0, 468.0, 480.0, 720.0, 900.0, 1170.0, 1200.0, 1400.0)}
MASS = 0.120
"""Of the example charge, 480 kg/m3 in 250 mL [kg]."""


def test_heat_from_dry_ice_to_one_phase() -> None:
    """120 g in 250 mL take 4.32 kJ to the triple point, 23.60 kJ to melt, 27.69 kJ from there to 305 K; computed
    beforehand with another solid model: within 2 %, the last leg within 0.5 %."""
    path = PATHS[480.0]
    assert path.plateau is not None
    begin, end = path.plateau
    assert MASS * (begin - path.energy(195.0)) == pytest.approx(4320.0, rel=0.02)
    assert MASS * (end - begin) == pytest.approx(23600.0, rel=0.02)
    assert MASS * (path.energy(305.0) - end) == pytest.approx(27690.0, rel=0.005)


@pytest.mark.parametrize("density", PATHS)
def test_the_table_rises(density: float) -> None:
    """Temperature, energy and pressure never fall along the path, and it spans dry ice to beyond any bath."""
    path = PATHS[density]
    for column in (path.temperatures, path.energies, path.pressures):
        assert all(b >= a for a, b in itertools.pairwise(column))
    assert path.lowest_temperature <= 180.0
    # A charge of almost solid density reaches 500 MPa, where the models end, at 313 K.
    assert path.highest_temperature >= (420.0 if density < 1300.0 else 310.0)


@settings(max_examples=300, deadline=None)
@given(density=st.sampled_from(sorted(PATHS)), share=st.floats(0.0, 1.0))
def test_energy_and_temperature_are_inverse(density: float, share: float) -> None:
    """Temperature to energy and back: within 1e-6 K anywhere; the table alone within 50 mK (thin: 0.1 K)."""
    path = PATHS[density]
    temperature = path.lowest_temperature + share * (path.highest_temperature - path.lowest_temperature)
    energy = path.energy(temperature)
    assert path.temperature_of_energy(energy) == pytest.approx(temperature, abs=1e-6)
    allowed = 0.1 if density < 100.0 else 0.05
    assert path.table_temperature(energy)[0] == pytest.approx(temperature, abs=allowed)


@pytest.mark.parametrize("density", [480.0, 900.0, 1200.0])
def test_the_plateau_is_a_step(density: float) -> None:
    """While solid melts, energy rises at the triple point's temperature and pressure; the fractions go straight."""
    path = PATHS[density]
    assert path.plateau is not None
    begin, end = path.plateau
    assert end - begin > 1e5
    for share in (0.001, 0.3, 0.7, 0.999):
        energy = begin + share * (end - begin)
        assert path.temperature_of_energy(energy) == CO2.triple_temperature
        assert path.pressure_of_energy(energy) == pytest.approx(CO2.triple_pressure, rel=1e-9)
        state = path.state_of_energy(energy)
        assert state.region is Region.THREE_PHASE
        solid, liquid, vapour = (x if x is not None else -1.0 for x in (state.solid, state.liquid, state.vapour))
        assert solid + liquid + vapour == pytest.approx(1.0, abs=1e-12)
        assert min(solid, liquid, vapour) >= 0.0
        mass = solid * 1544.965 + liquid * CO2.saturation(216.592).liquid_density + vapour * 13.761
        assert mass == pytest.approx(density, rel=1e-4)
        assert path.solid_fraction(energy) == solid


def test_a_thin_charge_has_no_plateau() -> None:
    """A charge thinner than vapour at the triple point never holds liquid, and its path has no step."""
    assert PATHS[10.0].plateau is None


def test_solid_fraction_ends() -> None:
    """Before melting the solid is what the lever rule says; after it there is none."""
    path = PATHS[480.0]
    assert path.solid_fraction(path.energy(195.0)) == pytest.approx(0.304, abs=0.002)
    assert path.solid_fraction(path.energy(250.0)) == 0.0
    assert path.solid_fraction(path.energy(320.0)) == 0.0


@pytest.mark.parametrize("density", [130.0, 468.0, 900.0, 1400.0])
@pytest.mark.parametrize("temperature", [170.0, 210.0, 218.0, 250.0, 290.0, 303.0, 310.0])
def test_heat_capacity_is_the_slope_of_energy(density: float, temperature: float) -> None:
    """Heat capacity agrees with differences of energy over 0.1 K in every region: within 0.2 %."""
    path = PATHS[density]
    by_difference = (path.energy(temperature + 0.05) - path.energy(temperature - 0.05)) / 0.1
    assert path.heat_capacity(temperature) == pytest.approx(by_difference, rel=2e-3)
    assert path.heat_capacity(CO2.triple_temperature) == float("inf")


def test_energy_of_a_level() -> None:
    """Just below the energy of a pressure the charge is under it, just above it over it; beyond the path None."""
    path = PATHS[720.0]
    for level in (2e5, 5.0e5, 20e5, 64e5, 90e5, 300e5):
        energy = path.energy_of_pressure(level)
        assert energy is not None
        assert path.pressure_of_energy(energy - 5.0) < level < path.pressure_of_energy(energy + 5.0)
    assert path.energy_of_pressure(1e10) is None
    assert path.energy_of_pressure(1.0) == float("-inf")
    assert path.energy_of_pressure(CO2.triple_pressure) == pytest.approx((path.plateau or (0, 0))[1], abs=1.0)
    assert path.energy_of_temperature(5000.0) is None
    assert path.energy_of_temperature(100.0) == float("-inf")


@pytest.mark.parametrize("density", [0.0, -1.0, 1650.0, float("nan"), float("inf")])
def test_an_impossible_charge_is_refused(density: float) -> None:
    """No path is built for no charge, or one denser than the solid."""
    with pytest.raises(OutsideValidity):
        Isochore(CO2, density)


def test_an_energy_off_the_path_is_refused() -> None:
    """Beyond either end of the path there is no temperature."""
    path = PATHS[480.0]
    for energy in (path.energies[0] - 1.0, path.energies[-1] + 1.0, float("nan")):
        with pytest.raises(OutsideValidity):
            path.temperature_of_energy(energy)


def test_a_path_is_built_within_30_ms() -> None:
    """A path takes less than 30 ms to build (it takes about 3)."""

    def once() -> float:
        start = time.perf_counter()
        Isochore(CO2, 468.0)
        return time.perf_counter() - start

    assert min(once() for _ in range(5)) < 0.030
