"""Charges denser than liquid at the triple point: what melting does to them, and the curves behind it."""

from __future__ import annotations

import math
from collections.abc import Callable

import CoolProp.CoolProp as cp
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from runbook.charge.isochore import Isochore
from runbook.errors import OutsideValidity
from runbook.fluids.catalogue import fluids
from runbook.fluids.solids.curves import Solid
from runbook.fluids.state import Region, State
from runbook.fluids.substance import Substance, substance

NAMES = [data.name for data in fluids() if data.solid is not None]
HEAVY = [name for name in NAMES if name != "water"]
"""Those whose solid sinks."""


def with_solid(name: str) -> tuple[Substance, Solid]:
    """A fluid and its solid."""
    fluid = substance(name)
    assert fluid.solid is not None
    return fluid, fluid.solid


def on_the_curve(solid: Solid, low: float, high: float, count: int) -> list[float]:
    """Temperatures [K] at which solid and liquid meet, between two distances [K] from the triple point."""
    sign = -1.0 if solid.melts_downwards else 1.0
    steps = (low * (high / low) ** (k / (count - 1)) for k in range(count))
    return [t for t in (solid.triple_temperature + sign * step for step in steps) if solid.melts_at(t)]


def known(fluid: Substance, temperature: float, density: float) -> State | None:
    """The state, or None where the models end."""
    try:
        return fluid.state(temperature, density)
    except OutsideValidity:
        return None


def published(name: str) -> Callable[[float], float]:
    """Melting pressure [Pa] over temperature [K] by its own published equation, which knows no solid's energy."""
    if name == "sulfur hexafluoride":
        return lambda t: 231424.0 + 223.7e6 * ((t / 223.555) ** 1.555 - 1.0)
    if name == "xenon":
        return lambda t: 101325.0 * (-2573.936225 + 0.7983277028 * t**1.589165)
    library = cp.AbstractState("HEOS", substance(name).data.library_name)
    return lambda t: float(library.melting_line(cp.iP, cp.iT, t))


@pytest.mark.independent
@pytest.mark.parametrize("name", HEAVY)
def test_melting_curve_within_what_its_file_states(name: str) -> None:
    """Harvey 2017 (SF6), Michels and Prins 1962 (xenon), Span and Wagner 1996, Span and others 2000, Tegeler and
    others 1999 (carbon dioxide, nitrogen, argon): within the share stated, and what each of them misses the
    triple point by (xenon 1 bar). Carbon dioxide to 270 K."""
    fluid, solid = with_solid(name)
    theirs = published(name)
    miss = abs(theirs(fluid.triple_temperature) - fluid.triple_pressure)
    for t in on_the_curve(solid, 0.05, 53.0, 60):
        assert abs(solid.melting_pressure(t) - theirs(t)) <= solid.melting_uncertainty(t) + miss, t


@pytest.mark.parametrize("name", NAMES)
def test_liquid_is_found_all_along_the_curve(name: str) -> None:
    """At no temperature of the curve the liquid beside the solid is missed, however small the steps."""
    _, solid = with_solid(name)
    for t in on_the_curve(solid, 1e-5, 20.0, 1500):
        ice, liquid = solid.beside_liquid(t)
        assert (ice.volume > liquid.volume) is solid.melts_downwards


@settings(max_examples=500, deadline=None)
@given(
    name=st.sampled_from(NAMES), warm=st.floats(0.0, 120.0), fill=st.tuples(st.floats(0.9, 1.3), st.floats(0.9, 1.3))
)
def test_pressure_never_falls_on_filling_more(name: str, warm: float, fill: tuple[float, float]) -> None:
    """At one temperature a denser charge has no lower pressure, liquid or partly frozen; 1e-6 is the table's."""
    fluid = substance(name)
    full = fluid.saturation(fluid.triple_temperature).liquid_density
    thin, dense = (known(fluid, fluid.triple_temperature + warm, share * full) for share in sorted(fill))
    if thin is not None and dense is not None:
        assert dense.pressure >= thin.pressure * (1.0 - 1e-6)


@pytest.mark.parametrize("name", NAMES)
def test_region_changes_on_the_melting_curve(name: str) -> None:
    """A charge of the liquid's density there is partly solid a millikelvin below and liquid a millikelvin above."""
    fluid, solid = with_solid(name)
    for t in on_the_curve(solid, 0.2, 12.0, 12):
        density = 1.0 / solid.beside_liquid(t)[1].volume
        assert fluid.region(t - 1e-3, density) is Region.SOLID_LIQUID, t
        assert fluid.region(t + 1e-3, density) is Region.LIQUID, t
        below, above = (fluid.pressure(t + step, density) for step in (-1e-6, 1e-6))
        assert above == pytest.approx(below, rel=1e-4, abs=200.0)


@pytest.mark.parametrize("name", NAMES)
def test_partly_frozen_charges_on_their_path(name: str) -> None:
    """T -> u -> T within 1e-6 K, T ds = du to 2e-6, fractions sum to 1: beside solid, above the plateau or below."""
    fluid, solid = with_solid(name)
    ice, liquid = (1.0 / phase.volume for phase in solid.beside_liquid(solid.triple_temperature))
    density = liquid + 0.4 * (ice - liquid)
    path = Isochore(fluid, density)
    for t in on_the_curve(solid, 1e-4, 6.0, 40):
        state = fluid.state(t, density)
        if state.region is not Region.SOLID_LIQUID:
            continue
        assert state.internal_energy is not None
        assert path.temperature_of_energy(state.internal_energy) == pytest.approx(t, abs=1e-6)
        assert math.fsum(part or 0.0 for part in (state.solid, state.liquid, state.vapour)) == pytest.approx(1.0)
        step = min(1e-3, 0.5 * abs(t - solid.triple_temperature))
        a, b = (fluid.state(t + s, density) for s in (-step, step))
        assert a.entropy is not None
        assert b.entropy is not None
        assert a.internal_energy is not None
        assert b.internal_energy is not None
        du = b.internal_energy - a.internal_energy
        assert t * (b.entropy - a.entropy) == pytest.approx(du, rel=2e-6, abs=1e-6)
