"""What can these instruments tell? Asked at the desk, before anybody stands at the bench.

For each gauge, height and scale: would the faults that happen be seen with the vessel at rest, from which size,
and what class of gauge would see them. Refuses to count a gauge whose dial ends below the pressure at rest.
"""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass
from math import hypot, sqrt
from typing import Final

from runbook.answers import ChargeBox, Observation, Telling
from runbook.apparatus.instruments import expanded_uncertainty, gauge_error, permissible_error
from runbook.apparatus.parts import EN_837_CLASSES, Instrument
from runbook.assess.agreement import computed_pressure, reading_U
from runbook.assess.boxes import viewed_shape
from runbook.assess.evidence.given import RECTANGULAR
from runbook.assess.scene import Scene
from runbook.errors import RunbookError
from runbook.quantities import Level

AIR: Final = 1e5
"""[Pa] about what a cell closed over dry ice keeps."""
LAG: Final = 2.0
"""[K] of a thermometer with 2 min at 1 K/min."""
LEAK: Final = 0.006
"""[kg] a weeping joint overnight; common practice."""
WRONG_CHARGE: Final = 0.05
"""[1] over or under: where the meniscus no longer vanishes in the middle of the window."""
READ_TO: Final = 0.25
"""A finer gauge is read to this share of its permissible error [1]: its divisions follow its class."""


@dataclass(frozen=True, slots=True)
class Rest:
    """The vessel at rest as planned."""

    temperature: float
    """[K]"""
    pressure: float
    """[Pa]"""
    charge: float
    """[kg]"""
    per_kelvin: float
    """Slope of the pressure [Pa/K]."""


def what_instruments_tell(scene: Scene) -> tuple[Telling, ...]:
    """One row for each instrument and fault; nothing where the state at rest is not within the models."""
    try:
        rest = _at_rest(scene)
        found: list[Telling] = []
        for one in scene.apparatus.instruments:
            if one.reads == "pressure" and one.of == scene.charge_space:
                found += _gauge(scene, one, rest)
            elif one.reads == "liquid height":
                found += _height(scene, one, rest)
            elif one.reads == "mass":
                found += _scale(one, rest)
    except RunbookError:
        return ()
    return tuple(found)


def _at_rest(scene: Scene) -> Rest:
    """In the middle of the rooms the procedure allows, with the charge it plans."""
    temperature = 0.5 * (scene.room_coldest + scene.room_hottest)
    low, high = scene.planned
    charge = 0.5 * (low + high)
    density = charge / scene.apparatus.volume.free.value
    fluid = scene.substance
    return Rest(temperature, fluid.pressure(temperature, density), charge, fluid.dp_dT(temperature, density))


def _gauge(scene: Scene, one: Instrument, rest: Rest) -> list[Telling]:
    """Against the pressure computed from the thermometer."""
    high = one.dial.high
    top = high.absolute(scene.barometer.middle_Pa) if isinstance(high, Level) else float(high)
    probe = scene.wall_probe()
    if probe is None or top < rest.pressure:
        return []
    wall = Observation(probe.tag, "temperature", rest.temperature, 0, "", True)
    box = ChargeBox(rest.charge, rest.charge, True, ())
    computed = computed_pressure(scene, box, wall, 0.0)
    if computed is None:
        return []
    barometer_U = RECTANGULAR * (scene.barometer.high_Pa - scene.barometer.low_Pa)
    band = hypot(reading_U(scene, Observation(one.tag, "pressure", rest.pressure, 0, "", True)), computed.U)

    def wanted(shift: float) -> str:
        for klass in sorted(EN_837_CLASSES, reverse=True):
            error = gauge_error(klass, one.dial.span)
            half = min(0.5 * one.division.value, READ_TO * error)
            if hypot(expanded_uncertainty(error, half), barometer_U, computed.U) <= shift:
                return f"{klass:g}"
        return ""

    by_mass = _pressure_by_mass(scene, rest)
    shifts = [
        ("trapped air", AIR, "Pa", AIR),
        ("gauge/absolute slip", scene.barometer.middle_Pa, "Pa", scene.barometer.middle_Pa),
        ("thermometer lag", LAG, "K", LAG * rest.per_kelvin),
        *((fault, kg, "kg", by_mass(moved)) for fault, kg, moved in _masses(rest)),
    ]
    quality = f"{one.klass:g}" if isinstance(one.klass, float) else ""
    return [_row(one, quality, fault, size, unit, shift, band, wanted) for fault, size, unit, shift in shifts]


def _height(scene: Scene, one: Instrument, rest: Rest) -> list[Telling]:
    """Against the height of the charge as weighed."""
    shape, fluid = viewed_shape(scene), scene.substance
    if not rest.temperature < fluid.critical_temperature:
        return []

    def height(kg: float, volume: float, temperature: float) -> float:
        both = fluid.saturation(temperature)
        share = (kg / volume - both.vapour_density) / (both.liquid_density - both.vapour_density)
        return shape.height(min(1.0, max(0.0, share)))

    free = scene.apparatus.volume.free
    at = height(rest.charge, free.value, rest.temperature)
    probe, scale = scene.wall_probe(), next((i for i in scene.apparatus.instruments if i.reads == "mass"), None)
    warmer = rest.temperature + (0.0 if probe is None else 0.5 * _U(probe, rest.temperature))
    heavier = rest.charge + (0.0 if scale is None else 0.5 * _U(scale, rest.charge))
    band = 2.0 * hypot(
        0.5 * _U(one, at),
        height(rest.charge, free.value, warmer) - at,
        height(heavier, free.value, rest.temperature) - at,
        height(rest.charge, free.value + RECTANGULAR * free.plus_minus, rest.temperature) - at,
    )
    return [
        _row(one, "", fault, kg, "kg", abs(height(moved, free.value, rest.temperature) - at), band, _no_class)
        for fault, kg, moved in _masses(rest)
    ]


def _scale(one: Instrument, rest: Rest) -> list[Telling]:
    """Against an earlier weighing with the same scale."""
    band = sqrt(2.0) * _U(one, rest.charge)
    return [_row(one, "", fault, kg, "kg", kg, band, _no_class) for fault, kg, _ in _masses(rest)]


def _masses(rest: Rest) -> list[tuple[str, float, float]]:
    """(fault, size [kg], the charge it leaves [kg])."""
    off = WRONG_CHARGE * rest.charge
    leak = min(LEAK, 0.5 * rest.charge)
    return [
        ("leak", leak, rest.charge - leak),
        ("over-filled", off, rest.charge + off),
        ("under-filled", off, rest.charge - off),
    ]


def _pressure_by_mass(scene: Scene, rest: Rest) -> Callable[[float], float]:
    volume = scene.apparatus.volume.free.value
    return lambda kg: abs(scene.substance.pressure(rest.temperature, kg / volume) - rest.pressure)


def _no_class(shift: float) -> str:
    return ""


def _row(
    one: Instrument,
    quality: str,
    fault: str,
    size: float,
    unit: str,
    shift: float,
    band: float,
    wanted: Callable[[float], str],
) -> Telling:
    """What moves the reading by less than a hundredth of the band is taken not to move it at all."""
    seen = shift > band
    least = size * band / shift if shift > 0.01 * band else None
    return Telling(
        fault, size, unit, one.tag, one.reads, quality, shift, band, seen, least, "" if seen else wanted(shift)
    )


def _U(one: Instrument, value: float) -> float:
    return expanded_uncertainty(permissible_error(one, value), 0.5 * one.division.value)
