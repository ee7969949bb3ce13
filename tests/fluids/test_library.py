"""The one door to the property library: what it refuses, what it costs, and that there is no other door."""

from __future__ import annotations

import re
import time
from collections.abc import Callable
from pathlib import Path

import CoolProp.CoolProp as cp
import pytest

import runbook
from runbook.errors import OutsideValidity
from runbook.fluids.library import Equation, Frozen
from runbook.fluids.substance import substance


def test_only_one_module_imports_the_library() -> None:
    """No module but runbook/fluids/library.py names the property library in an import."""
    root = Path(runbook.__file__).parent
    naming = re.compile(r"^\s*(import|from)\s+CoolProp", re.MULTILINE)
    found = [p.relative_to(root).as_posix() for p in root.rglob("*.py") if naming.search(p.read_text("utf-8"))]
    assert found == ["fluids/library.py"]


def test_an_unknown_library_name_is_refused() -> None:
    """A name that the library does not know raises this program's own error."""
    with pytest.raises(OutsideValidity):
        Equation("NoSuchFluid", 1000.0, 1e9)


def test_the_library_answers_where_the_door_refuses() -> None:
    """Each refusal stands where the bare library gives a number: its limits are not those of the equation."""
    bare = cp.AbstractState("HEOS", "CarbonDioxide")
    equation = Equation("CarbonDioxide", 1100.0, 800e6, freezes=lambda t, p: p > 16.7e6)
    for kelvin, density in ((200.0, 480.0), (320.0, 1800.0), (1500.0, 1.0), (220.0, 1300.0)):
        bare.update(cp.DmassT_INPUTS, density, kelvin)
        assert bare.p() > 0.0
        with pytest.raises(OutsideValidity):
            equation.pressure(kelvin, density)


def test_beyond_the_melting_curve_is_frozen() -> None:
    """Fluid above its melting pressure is refused as frozen, and where that curve is unknown refused all the same."""
    knowing = Equation("CarbonDioxide", 1100.0, 800e6, freezes=lambda t, p: p > 16.7e6)
    with pytest.raises(Frozen):
        knowing.pressure(220.0, 1250.0)
    with pytest.raises(OutsideValidity, match="melting curve unknown"):
        Equation("CarbonDioxide", 1100.0, 800e6).pressure(220.0, 1190.0)


def test_one_instance_each() -> None:
    """Two equations of one fluid do not disturb each other: update and read are two calls of the library."""
    one, two = (Equation("CarbonDioxide", 1100.0, 800e6) for _ in range(2))
    first = one.pressure(313.15, 468.0)
    two.pressure(350.0, 100.0)
    assert one.pressure(313.15, 468.0) == first


@pytest.mark.parametrize("temperature", [216.0, 304.2, float("nan"), 0.0])
def test_saturation_outside_its_ends_is_refused(temperature: float) -> None:
    """There is no liquid beside vapour below the triple point, above the critical point, or at no temperature."""
    for ask in (substance("CO2").saturation, substance("CO2").saturation_slopes):
        with pytest.raises(OutsideValidity):
            ask(temperature)


@pytest.mark.parametrize("temperature", [220.0, 250.0, 280.0, 300.0, 304.0])
def test_saturation_slopes_are_those_of_saturation(temperature: float) -> None:
    """Slopes along the saturation curve agree with its differences: within 1e-4."""
    co2 = substance("CO2")
    step = 1e-4
    low, high = co2.saturation(temperature - step), co2.saturation(temperature + step)
    slopes = co2.saturation_slopes(temperature)
    for name in ("liquid_density", "vapour_density", "liquid_energy", "vapour_energy"):
        by_difference = (getattr(high, name) - getattr(low, name)) / (2.0 * step)
        assert getattr(slopes, name) == pytest.approx(by_difference, rel=1e-4), name


def best(call: Callable[[], object], rounds: int = 7, times: int = 2000) -> float:
    """Least time of one call [s]."""

    def once() -> float:
        start = time.perf_counter()
        for _ in range(times):
            call()
        return (time.perf_counter() - start) / times

    return min(once() for _ in range(rounds))


@pytest.mark.parametrize(("kelvin", "density"), [(293.15, 468.0), (313.15, 468.0), (293.15, 900.0), (195.0, 468.0)])
def test_a_pressure_costs_at_most_three_bare_updates(kelvin: float, density: float) -> None:
    """One pressure, guards and phases included, takes no longer than three bare two-phase updates."""
    bare = cp.AbstractState("HEOS", "CarbonDioxide")
    co2 = substance("CO2")
    unit = best(lambda: bare.update(cp.DmassT_INPUTS, 468.0, 293.15))
    assert best(lambda: co2.pressure(kelvin, density)) <= 3.0 * unit
