"""Rules that hold for every state of every fluid, on drawn inputs."""

from __future__ import annotations

import math

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from runbook.charge.geometry import Shape, ShapeKind
from runbook.charge.isochore import Isochore
from runbook.errors import OutsideValidity, RunbookError
from runbook.fluids.catalogue import fluids
from runbook.fluids.state import Region, State
from runbook.fluids.substance import substance

NAMES = [data.name for data in fluids()]
names = st.sampled_from(NAMES)
shares = st.floats(0.0, 1.0)


def place(name: str, warm: float, full: float) -> tuple[float, float]:
    """A temperature [K] from the cold end to 100 K above critical, and a density [kg/m3] up to that of the liquid."""
    fluid = substance(name)
    low, high = fluid.min_temperature, min(fluid.critical_temperature + 100.0, fluid.max_temperature)
    densest = fluid.saturation(fluid.triple_temperature).liquid_density
    return low + warm * (high - low), max(1e-3, full * densest)


def known(name: str, temperature: float, density: float) -> State | None:
    """The state, or None where the models end."""
    try:
        return substance(name).state(temperature, density)
    except OutsideValidity:
        return None


@settings(max_examples=400, deadline=None)
@given(name=names, warm=shares, full=shares)
def test_a_state_is_whole(name: str, warm: float, full: float) -> None:
    """Fractions sum to 1 or are all None; the quick questions agree with the whole state; every number is finite."""
    temperature, density = place(name, warm, full)
    state, fluid = known(name, temperature, density), substance(name)
    if state is None:
        return
    parts = (state.solid, state.liquid, state.vapour)
    if None not in parts:
        assert math.fsum(part or 0.0 for part in parts) == pytest.approx(1.0, abs=1e-12)
        assert all(0.0 <= (part or 0.0) <= 1.0 for part in parts)
    assert fluid.region(temperature, density) is state.region
    assert fluid.pressure(temperature, density) == pytest.approx(state.pressure, rel=1e-9)
    for value in (state.pressure, state.internal_energy, state.entropy):
        assert value is None or math.isfinite(value)
    assert fluid.pressure_uncertainty(temperature, density) > 0.0


@settings(max_examples=400, deadline=None)
@given(name=names, warm=st.tuples(shares, shares), full=shares)
def test_pressure_never_falls_on_warming(name: str, warm: tuple[float, float], full: float) -> None:
    """At fixed density, where liquid does not grow on cooling (water below 4 degC does); 1e-9 is rounding."""
    (cold, density), (hot, _) = (place(name, w, full) for w in sorted(warm))
    densest = substance(name).data.densest_temperature
    if densest is not None and cold < densest:
        return
    lower, higher = known(name, cold, density), known(name, hot, density)
    if lower is not None and higher is not None:
        assert higher.pressure >= lower.pressure * (1.0 - 1e-9)


@settings(max_examples=250, deadline=None)
@given(name=names, warm=shares, full=st.floats(0.001, 1.0))
def test_heat_over_temperature_is_entropy(name: str, warm: float, full: float) -> None:
    """At fixed density T ds = du, in every region: 2e-5 over a tenth of a kelvin that crosses no edge."""
    temperature, density = place(name, warm, full)
    a, b, c = (known(name, temperature + step, density) for step in (-0.05, 0.0, 0.05))
    if a is None or b is None or c is None or not a.region is b.region is c.region:
        return
    assert a.internal_energy is not None
    assert c.internal_energy is not None
    assert a.entropy is not None
    assert c.entropy is not None
    du, ds = c.internal_energy - a.internal_energy, c.entropy - a.entropy
    if abs(temperature - substance(name).critical_temperature) > 1.0:
        assert temperature * ds == pytest.approx(du, rel=2e-5, abs=1e-3)


@settings(max_examples=200, deadline=None)
@given(name=names, warm=shares, full=st.floats(0.01, 1.0))
def test_energy_gives_the_temperature_back(name: str, warm: float, full: float) -> None:
    """T -> u -> T at fixed density within 1e-6 K; on the plateau there is no T of one energy; near critical 1 mK."""
    temperature, density = place(name, warm, full)
    try:
        path = Isochore(substance(name), density)
    except OutsideValidity:
        return
    if not path.lowest_temperature < temperature < path.highest_temperature:
        return
    state = known(name, temperature, density)
    if state is None or state.internal_energy is None:
        return
    found = path.temperature_of_energy(state.internal_energy)
    near = abs(temperature - substance(name).critical_temperature) < 1e-3
    assert found == pytest.approx(temperature, abs=1e-3 if near else 1e-6)


@settings(max_examples=200, deadline=None)
@given(kind=st.sampled_from(list(ShapeKind)), one=shares, other=shares)
def test_height_rises_with_liquid(kind: ShapeKind, one: float, other: float) -> None:
    """More liquid never stands lower, in every shape."""
    shape = Shape(kind, 0.06, 250e-6 if kind is not ShapeKind.SPHERE else math.pi * 0.06**3 / 6.0)
    less, more = sorted((one, other))
    assert shape.height(less) <= shape.height(more) + 1e-12


@settings(max_examples=400, deadline=None)
@given(name=names, temperature=st.floats(1.0, 3000.0), density=st.floats(1e-6, 1e4))
def test_only_our_own_errors(name: str, temperature: float, density: float) -> None:
    """Whatever is asked, the answer is finite or one of this program's own errors."""
    fluid = substance(name)
    for ask in (fluid.pressure, fluid.dp_dT, fluid.dp_ddensity, fluid.pressure_uncertainty):
        try:
            assert math.isfinite(ask(temperature, density))
        except RunbookError:
            continue


@pytest.mark.parametrize("name", NAMES)
@pytest.mark.parametrize("share", [0.001, 0.05, 0.3, 0.7, 0.95, 0.999])
def test_regions_change_on_the_saturation_curve(name: str, share: float) -> None:
    """A charge as dense as one saturated phase has two of them a millikelvin below and one a millikelvin above."""
    fluid = substance(name)
    kelvin = fluid.triple_temperature + share * (fluid.critical_temperature - fluid.triple_temperature)
    both = fluid.saturation(kelvin)
    for density, alone in ((both.liquid_density, Region.LIQUID), (both.vapour_density, Region.VAPOUR)):
        if density < 1e-6:
            # Thinner than a vacuum nothing is computed: propane at its triple point.
            continue
        # Cold water grows on cooling: there it is the other way round.
        below, above = (fluid.region(kelvin + step, density) for step in (-1e-3, 1e-3))
        turned = alone is Region.LIQUID and fluid.saturation_slopes(kelvin).liquid_density > 0.0
        assert (below, above) == ((alone, Region.LIQUID_VAPOUR) if turned else (Region.LIQUID_VAPOUR, alone))
