"""The worst corner of a box of tolerances: proved, not sampled.

At fixed density pressure rises with temperature, at fixed temperature with density; an unevenly warm charge never
exceeds the pressure of the same charge uniformly at its hottest wall. So the worst corner is most charge, least
volume, hottest wall: one state, no search. Liquid that grows on cooling (water below 4 degC, and its ice) splits the
box there: along one density the pressure then has a single valley, so it is highest at one of the two ends.
"""

from __future__ import annotations

from dataclasses import dataclass

from runbook.answers import Corner
from runbook.assess.scene import Scene
from runbook.errors import OutsideValidity
from runbook.fluids.roots import bracketed_root


@dataclass(frozen=True, slots=True)
class Worst:
    """One bound and where it stands."""

    value: float | None
    """[Pa]; None: the models do not reach there."""
    uncertainty: float
    """Of the equation, already in value [Pa]."""
    at: Corner
    why: str = ""
    """Where unknown: what is missing."""


def highest_pressure(scene: Scene, high_kg: float, temperature: float) -> Worst:
    """Highest pressure of a charge of at most high_kg [kg] whose hottest wall is at temperature [K].

    Air and equation uncertainty included; instrument uncertainty is the caller's. Cached per scene.
    """
    volume = scene.volume[0]
    density = high_kg / volume
    at = Corner(high_kg, volume, temperature)
    if density <= 0.0:
        return Worst(scene.barometer.high_Pa, 0.0, at)
    try:
        pressure, uncertainty = scene.pressures(temperature, density)
    except OutsideValidity as error:
        return Worst(None, 0.0, at, str(error))
    return Worst(pressure + uncertainty, uncertainty, at)


def highest_between(scene: Scene, high_kg: float, cold: float, hot: float) -> Worst:
    """Highest pressure of a charge of at most high_kg [kg] with walls between cold and hot [K]."""
    at_hot = highest_pressure(scene, high_kg, hot)
    densest = scene.substance.data.densest_temperature
    if densest is None or cold >= densest:
        return at_hot
    at_cold = highest_pressure(scene, high_kg, cold)
    if at_cold.value is None or at_hot.value is None:
        return at_hot if at_hot.value is None else at_cold
    return at_cold if at_cold.value > at_hot.value else at_hot


def nominal_pressure(scene: Scene, mass: float, temperature: float) -> float:
    """Pressure [Pa] of a charge [kg] in the stated volume at a temperature [K]: no air, no uncertainty.

    Raises OutsideValidity.
    """
    return scene.substance.pressure(temperature, mass / scene.apparatus.volume.free.value)


def temperature_at_pressure(scene: Scene, high_kg: float, pressure: float, start: float) -> float | None:
    """Temperature [K] at which the worst corner of a charge [kg] reaches a pressure [Pa], from start [K] up.

    None where it is past already or is not reached within the models. Pressure only rises with temperature, so
    one temperature serves every start; it is kept.
    """
    key = (high_kg, pressure)
    if key not in scene.reached:
        scene.reached[key] = _reaching(scene, high_kg, pressure)
    found = scene.reached[key]
    return None if found is None or found <= start else found


def _reaching(scene: Scene, high_kg: float, pressure: float) -> float | None:
    top = min(scene.substance.max_temperature, 700.0)

    def excess(temperature: float) -> float:
        worst = highest_pressure(scene, high_kg, temperature)
        return float("inf") if worst.value is None else worst.value - pressure

    low = high = scene.coldest_in_the_open
    if excess(low) >= 0.0:
        return low
    while high < top:
        low, high = high, min(top, high + 16.0)
        if excess(high) >= 0.0:
            return None if excess(high) == float("inf") else bracketed_root(excess, low, high, 1e-3)
    return None
