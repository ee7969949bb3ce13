"""Rules that hold for every state of carbon dioxide, on drawn inputs."""

from __future__ import annotations

import contextlib
import math

import pytest
from hypothesis import example, given, settings
from hypothesis import strategies as st

from runbook.errors import OutsideValidity, RunbookError
from runbook.fluids.substance import State, substance

CO2 = substance("carbon dioxide")

temperatures = st.one_of(
    st.floats(150.0, 600.0),
    st.floats(303.0, 305.0),
    st.floats(216.0, 217.2),
    st.just(CO2.triple_temperature),
    st.just(CO2.critical_temperature),
)
densities = st.one_of(st.floats(0.001, 1540.0), st.floats(420.0, 520.0), st.floats(1170.0, 1190.0))


def known(temperature: float, density: float) -> State | None:
    try:
        return CO2.state(temperature, density)
    except OutsideValidity:
        return None


@settings(max_examples=400, deadline=None)
@given(density=densities, pair=st.tuples(temperatures, temperatures))
def test_pressure_never_falls_on_warming(density: float, pair: tuple[float, float]) -> None:
    """At fixed density the pressure of a warmer charge is never lower (1e-9 of it is rounding)."""
    cold, warm = (known(t, density) for t in sorted(pair))
    if cold is not None and warm is not None:
        assert warm.pressure >= cold.pressure * (1.0 - 1e-9)


@settings(max_examples=400, deadline=None)
@given(temperature=temperatures, pair=st.tuples(densities, densities))
def test_pressure_never_falls_on_filling_more(temperature: float, pair: tuple[float, float]) -> None:
    """At fixed temperature the pressure of a greater charge is never lower (1e-9 of it is rounding)."""
    thin, dense = (known(temperature, d) for d in sorted(pair))
    if thin is not None and dense is not None:
        assert dense.pressure >= thin.pressure * (1.0 - 1e-9)


@settings(max_examples=400, deadline=None)
@given(temperature=temperatures, density=densities)
@example(temperature=CO2.critical_temperature, density=CO2.critical_density)
@example(temperature=CO2.triple_temperature, density=13.7)
def test_a_state_is_whole(temperature: float, density: float) -> None:
    """Volume fractions are all there and sum to 1 or all None; pressures agree; every number is finite."""
    state = known(temperature, density)
    if state is None:
        return
    shares = (state.solid, state.liquid, state.vapour)
    if None in shares:
        assert shares == (None, None, None)
    else:
        assert math.fsum(share or 0.0 for share in shares) == pytest.approx(1.0, abs=1e-12)
        assert all(0.0 <= (share or 0.0) <= 1.0 for share in shares)
    assert math.isfinite(state.pressure)
    assert state.pressure > 0.0
    assert state.internal_energy is None or math.isfinite(state.internal_energy)
    assert CO2.region(temperature, density) is state.region
    assert CO2.pressure(temperature, density) == pytest.approx(state.pressure, rel=1e-9)
    uncertainty = CO2.pressure_uncertainty(temperature, density)
    assert uncertainty > 0.0
    assert math.isfinite(uncertainty)


@settings(max_examples=300, deadline=None)
@given(temperature=st.floats(150.01, 599.99), density=st.floats(0.01, 1170.0))
def test_pressure_is_continuous(temperature: float, density: float) -> None:
    """A hundredth of a millikelvin never moves the pressure by more than 100 Pa, across every edge."""
    low, high = known(temperature - 5e-6, density), known(temperature + 5e-6, density)
    if low is not None and high is not None:
        assert abs(high.pressure - low.pressure) < 100.0


@pytest.mark.parametrize("density", [0.5, 2.0, 10.0, 13.7, 14.0, 130.0, 440.0, 468.0, 500.0, 720.0, 900.0, 1170.0])
def test_pressure_is_continuous_across_the_edges(density: float) -> None:
    """At each landmark of a charge the pressure just below and just above differ by less than 50 Pa."""
    marks = CO2.landmarks(density)
    edges = [t for t in (marks.triple, marks.liquid_full, marks.dry, marks.critical) if t is not None]
    assert edges
    for edge in edges:
        low, at, high = (CO2.pressure(edge + step, density) for step in (-1e-5, 0.0, 1e-5))
        assert low <= at * (1.0 + 1e-9)
        assert at <= high * (1.0 + 1e-9)
        assert high - low < 50.0


@settings(max_examples=500, deadline=None)
@given(
    temperature=st.floats(allow_nan=True, allow_infinity=True), density=st.floats(allow_nan=True, allow_infinity=True)
)
@example(temperature=150.0, density=7.02040688670261e-156)
@example(temperature=304.1282, density=467.6)
@example(temperature=1e308, density=1e308)
def test_wild_numbers_raise_only_our_errors(temperature: float, density: float) -> None:
    """Whatever is asked, the answer is a finite pressure or one of this program's own errors."""
    for ask in (CO2.pressure, CO2.dp_dT, CO2.dp_ddensity, CO2.pressure_uncertainty, CO2.heat_capacity):
        with contextlib.suppress(RunbookError):
            assert math.isfinite(ask(temperature, density))
    with contextlib.suppress(RunbookError):
        CO2.landmarks(density)
