"""Whether gauge and model agree, and what that agreement proves.

Below liquid-full the pressure says nothing about how much is in the cell: agreement there proves thermometer
and gauge, not the charge. Agreement that is looser than the margin it is leaned on for is 'cannot tell'.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, replace
from math import hypot

from runbook.answers import Agreement, ChargeBox, Observation
from runbook.apparatus.instruments import expanded_uncertainty, permissible_error
from runbook.assess.scene import Scene
from runbook.assess.walk import Walked
from runbook.errors import OutsideValidity
from runbook.fluids.state import Region
from runbook.procedure.model import CoolTo, LetDownTo, WarmTo

NO_READING = Agreement("no reading", None, None, None, None, None, "nothing")
_PROVES_CHARGE = 0.05
"""In one phase pressure proves the charge only where its band is under this share of it [1]."""


@dataclass(frozen=True, slots=True)
class Computed:
    """Pressure computed from charge and temperature as read."""

    pressure: float
    """At the middle of the box [Pa]."""
    U: float
    """Expanded uncertainty, k = 2 [Pa]."""
    region: Region
    per_kg: float
    """Slope with the charge at that temperature [Pa/kg]; 0 with two phases."""


def computed_pressure(scene: Scene, box: ChargeBox, temperature: Observation, rate: float) -> Computed | None:
    """Pressure of the charge at the temperature read; rate: fastest warming under way [K/s].

    None where the models do not reach. Air is left out: it is an explanation of a difference.
    """
    volume = scene.apparatus.volume.free
    middle = 0.5 * (box.low_kg + box.high_kg)
    density = middle / volume.value
    fluid = scene.substance
    if not density > 0.0:
        return None
    try:
        state = fluid.state(temperature.value, density)
        by_temperature = fluid.dp_dT(temperature.value, density)
        by_density = fluid.dp_ddensity(temperature.value, density)
        equation = fluid.pressure_uncertainty(temperature.value, density)
    except OutsideValidity:
        return None
    # Bounds of charge and volume are taken as rectangular, like every permissible error (JCGM 100).
    half_charge = 0.5 * (box.high_kg - box.low_kg)
    spread = hypot(half_charge / volume.value, density * volume.plus_minus / volume.value)
    U = hypot(
        by_temperature * reading_U(scene, temperature),
        2.0 / 3.0**0.5 * by_density * spread,
        equation,
    )
    # A lagging thermometer is behind by lag x rate: a known direction, so it is added plainly.
    probe = scene.instrument(temperature.tag)
    lag = probe.lag.value if probe.lag is not None else 0.0
    U += abs(by_temperature) * lag * rate
    return Computed(state.pressure, U, state.region, by_density / volume.value)


def read_apart(lines: Sequence[Walked], wall: Observation | None, gauge: Observation | None) -> bool:
    """The one was read in a line whose path moved the vessel, the other in a later line."""
    if wall is None or gauge is None or min(wall.line, gauge.line) < 0:
        return False
    first, last = sorted((wall.line, gauge.line))
    return any(isinstance(one.verb, WarmTo | CoolTo | LetDownTo) for one in lines[first:last])


def agreement(
    scene: Scene,
    computed: Computed | None,
    box: ChargeBox | None,
    pressure: Observation | None,
    margin_left: float | None,
    apart: bool = False,
) -> Agreement:
    """Compare; margin_left: the smallest pressure margin of the step leaned on [Pa], None where unknown.

    apart: a step moved the vessel between the two readings, which then say nothing of each other.
    """
    if pressure is None:
        return NO_READING
    read_U = reading_U(scene, pressure)
    if computed is None or box is None:
        # Nothing to compare it with; it is shown all the same.
        return replace(NO_READING, tag=pressure.tag, read=pressure.value, read_U=read_U)
    band = hypot(read_U, computed.U)
    off = abs(pressure.value - computed.pressure)
    if apart:
        verdict, proves = "cannot tell", "read apart"
    elif off > band:
        verdict, proves = "disagrees", "nothing"
    elif margin_left is None or band >= margin_left:
        verdict, proves = "cannot tell", "nothing"
    else:
        verdict, proves = "agrees", _proves(computed, band, box)
    return Agreement(verdict, pressure.tag, pressure.value, read_U, computed.pressure, computed.U, proves)


def reading_U(scene: Scene, one: Observation) -> float:
    """Expanded uncertainty of a reading, k = 2 [SI]; of a gauge the barometer's included."""
    instrument = scene.instrument(one.tag)
    error = permissible_error(instrument, one.value)
    U = expanded_uncertainty(error, instrument.division.value / 2.0)
    if one.what == "pressure":
        bound = 0.5 * (scene.barometer.high_Pa - scene.barometer.low_Pa)
        U = hypot(U, 2.0 / 3.0**0.5 * bound)
    return U


def _proves(computed: Computed, band: float, box: ChargeBox) -> str:
    if computed.region in (Region.LIQUID_VAPOUR, Region.SOLID_VAPOUR, Region.THREE_PHASE):
        return "thermometer and gauge"
    if computed.per_kg > 0.0 and band / computed.per_kg < _PROVES_CHARGE * box.high_kg:
        return "charge"
    return "thermometer and gauge"
