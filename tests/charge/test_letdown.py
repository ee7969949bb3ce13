"""A charge let down: figures worked out beforehand, balances, and the trend that the wall's heat gives."""

from __future__ import annotations

import pytest

from runbook.charge.letdown import Contents, Hole, LetDown
from runbook.charge.nozzle import throat
from runbook.fluids.flash import Flash
from runbook.fluids.state import Region, State
from runbook.fluids.substance import substance

CO2 = substance("carbon dioxide")
VOLUME = 250e-6
ATMOSPHERE = 101325.0


def start(mass: float = 0.120, temperature: float = 293.15) -> Contents:
    """A charge [kg] at a temperature [K]."""
    energy = CO2.state(temperature, mass / VOLUME).internal_energy
    assert energy is not None
    return Contents(mass, energy)


def followed(hole: Hole, contents: Contents, heat: float = 0.0, dt: float = 0.2) -> list[tuple[float, Contents, State]]:
    """Time [s], contents and state until the pressure is that of the room."""
    vessel, time, found = LetDown(CO2, VOLUME), 0.0, []
    while time < 600.0:
        state = vessel.state(contents)
        found.append((time, contents, state))
        if state.pressure <= 1.03 * ATMOSPHERE:
            return found
        # A wall gives heat to what is colder than it, and none to gas as warm as it.
        given = heat if state.temperature < 285.0 else 0.0
        contents = vessel.advance(contents, hole, ATMOSPHERE, given, dt)
        time += dt
    raise AssertionError("it never came to the room's pressure")


@pytest.mark.wiring
def test_let_down_through_a_vent_on_top() -> None:
    """120 g from 20 degC through 1.00 mm, Cd 0.84, no heat from the body: 5.18 bar after 14.7 +- 0.5 s with
    55.4 +- 0.7 g left; at 1 atm 32.5 g of which 31.9 +- 0.4 g are dry ice. Worked out beforehand."""
    path = followed(Hole(1e-3, "top"), start())
    time, contents, _ = next(row for row in path if row[2].region is Region.THREE_PHASE)
    assert time == pytest.approx(14.7, abs=0.5)
    assert contents.mass == pytest.approx(0.0554, abs=0.0007)
    _, left, last = path[-1]
    assert left.mass == pytest.approx(0.0325, abs=0.0004)
    assert last.region is Region.SOLID_VAPOUR
    vapour = (last.vapour or 0.0) * VOLUME * (last.vapour_density or 0.0)
    assert left.mass - vapour == pytest.approx(0.0319, abs=0.0004)
    assert last.temperature == pytest.approx(194.7, abs=0.3)


@pytest.mark.wiring
def test_let_down_from_below_empties_it() -> None:
    """The same through a bottom vent: 5.18 bar after 11.6 s with 4.6 g left, 1.6 g at the end."""
    path = followed(Hole(1e-3, "bottom"), start())
    time, contents, _ = next(row for row in path if row[2].region is Region.THREE_PHASE)
    assert time == pytest.approx(11.6, abs=0.5)
    assert contents.mass == pytest.approx(0.0046, abs=0.0005)
    assert path[-1][1].mass == pytest.approx(0.0016, abs=0.0003)


def test_heat_from_the_wall_leaves_less_solid() -> None:
    """A wall that gives heat keeps it warmer and leaves less: the trend of the bench."""
    without, with_heat = (followed(Hole(1e-3, "top"), start(), heat)[-1][1].mass for heat in (0.0, 100.0))
    assert with_heat < 0.8 * without


def test_a_smaller_hole_takes_longer_in_proportion() -> None:
    """Without heat the same states are passed, in a time that goes with the area: 2 %."""
    times = []
    for bore in (1e-3, 0.5e-3):
        dt = 0.2 * (1e-3 / bore) ** 2
        path = followed(Hole(bore, "top"), start(), dt=dt)
        times.append(next(t for t, _, state in path if state.region is Region.THREE_PHASE))
    assert times[1] == pytest.approx(4.0 * times[0], rel=0.02)


def test_mass_and_energy_are_kept() -> None:
    """What is in, what has left and what the wall gave balance: the energy at fixed mass is that of the state, 1e-6."""
    vessel, contents = LetDown(CO2, VOLUME), start()
    for _ in range(30):
        contents = vessel.advance(contents, Hole(1e-3, "top"), ATMOSPHERE, 50.0, 1.0)
        state = vessel.state(contents)
        assert state.internal_energy == pytest.approx(contents.energy, rel=1e-6, abs=1.0)
        assert state.density == pytest.approx(contents.mass / VOLUME, rel=1e-12)


@pytest.mark.wiring
def test_heat_from_dry_ice_to_one_phase() -> None:
    """120 g in 250 mL from 195 K to 305 K: 4.32 kJ to the triple point, 23.60 kJ on it, 27.69 kJ after; 1 % each,
    55.61 kJ in all within 0.5 %. Worked out beforehand from Jaeger and Span 2012 and Span and Wagner 1996."""
    density = 0.120 / VOLUME
    plateau = CO2.plateau(density)
    cold, warm = (CO2.state(t, density).internal_energy for t in (195.0, 305.0))
    assert plateau is not None
    assert cold is not None
    assert warm is not None
    steps = [0.120 * (b - a) for a, b in ((cold, plateau[0]), plateau, (plateau[1], warm))]
    assert steps == [pytest.approx(x, rel=0.01) for x in (4320.0, 23600.0, 27690.0)]
    assert sum(steps) == pytest.approx(55610.0, rel=0.005)


@pytest.mark.parametrize("temperature", [291.37, 250.11, 218.9, 205.3])
def test_a_flux_between_two_temperatures_is_that_of_the_throat(temperature: float) -> None:
    """What is interpolated between temperatures half a kelvin apart is the throat's own flux within 5e-4."""
    vessel = LetDown(CO2, VOLUME)
    state = CO2.state(temperature, 200.0)
    if state.region is Region.SOLID_VAPOUR:
        vapour = CO2.vapour_beside_solid(temperature)
        enthalpy, entropy = vapour.gibbs + temperature * vapour.entropy, vapour.entropy
    else:
        both = CO2.saturation(temperature)
        enthalpy, entropy = both.vapour_energy + both.pressure / both.vapour_density, both.vapour_entropy
    exact = throat(Flash(CO2), enthalpy, entropy, state.pressure, ATMOSPHERE).flux
    hole = Hole(1e-3, "top")
    assert vessel.leaving(state, hole, ATMOSPHERE).flow / hole.area == pytest.approx(exact, rel=5e-4)
