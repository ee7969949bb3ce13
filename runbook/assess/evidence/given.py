"""What is known before the readings are judged: the vessel, its instruments and the charge as it was stated.

Refuses to take a reading's own value for granted: every figure here comes with its half-width.
"""

from __future__ import annotations

from dataclasses import dataclass, field
from math import sqrt

from runbook.answers import Observation
from runbook.apparatus.instruments import permissible_error
from runbook.assess.boxes import viewed_shape
from runbook.assess.scene import Scene
from runbook.charge.filling import air_pressure
from runbook.charge.geometry import Shape
from runbook.errors import OutsideValidity
from runbook.fluids.substance import Substance

RECTANGULAR = 1.0 / sqrt(3.0)
"""From the half-width of a bound to a standard uncertainty [1], JCGM 100."""
LAG_BOUND = 0.25
"""How far a stated time constant may be off where the file gives no bound, as a share of it [1]; common
practice: it depends on how the probe is clamped."""


@dataclass(frozen=True, slots=True)
class Bounds:
    """How far an instrument may be off."""

    error: float
    """Permissible error, half-width [SI]."""
    half_division: float
    """How far a careful reading may miss, half-width [SI]."""


@dataclass(slots=True)
class Given:
    """Everything a forecast of readings rests on. Half-widths are of rectangular distributions."""

    substance: Substance
    shape: Shape
    volume_bound: float
    """Half-width of the free volume, whose middle is the shape's [m3]."""
    charge: float
    """As stated: weighed at closing, else by the record, else by the plan [kg]."""
    charge_bound: float
    """[kg]"""
    barometer: float
    """[Pa]"""
    barometer_bound: float
    """[Pa]"""
    room: float
    """What is outside the vessel [K]."""
    gauge: Bounds | None
    """[Pa]"""
    span: float
    """Of the gauge's dial [Pa]."""
    unit: str
    """Printed on the gauge's dial."""
    probe: Bounds
    """At the middle of the working range [K]."""
    lag: float
    """Stated time constant of the thermometer [s]."""
    lag_bound: float
    """[s]"""
    height: Bounds | None
    """[m]"""
    scale: Bounds | None
    """[kg]"""
    _air: dict[tuple[float, float], float] = field(default_factory=dict)

    @property
    def volume(self) -> float:
        """[m3]"""
        return self.shape.volume

    def air_per_mole(self, temperature: float, density: float) -> float:
        """What a mole of air adds to the pressure [Pa/mol]; temperature [K], density [kg/m3].

        Zero where liquid leaves it no room to be computed in. Kept, because it searches for the meniscus' end.
        """
        key = temperature, density
        if key not in self._air:
            if len(self._air) > 512:
                self._air.clear()
            try:
                # Linear in the amount: a thousandth of a mole keeps it inside every check.
                added = air_pressure(self.substance, temperature, density, 1e-3, self.volume)
            except OutsideValidity:
                added = 0.0
            self._air[key] = added * 1e3
        return self._air[key]


def given(
    scene: Scene, observations: tuple[Observation, ...], gauge: str | None, thermometer: str | None, at: float
) -> Given | None:
    """What the files and the weighing at closing say; None without a thermometer.

    gauge, thermometer: tags compared. at: a typical temperature of the readings [K].
    """
    by_tag = {i.tag: i for i in scene.apparatus.instruments}
    probe = by_tag.get(thermometer or "")
    if probe is None:
        return None
    dial = by_tag.get(gauge or "")
    charge, bound = stated_charge(scene, observations)
    lag, lag_bound = 0.0, 0.0
    if probe.lag is not None:
        lag = probe.lag.value
        lag_bound = probe.lag.plus_minus or LAG_BOUND * lag
    barometer = scene.barometer
    return Given(
        substance=scene.substance,
        shape=viewed_shape(scene),
        volume_bound=scene.apparatus.volume.free.plus_minus,
        charge=charge,
        charge_bound=bound,
        barometer=barometer.middle_Pa,
        barometer_bound=0.5 * (barometer.high_Pa - barometer.low_Pa),
        room=min(max(at, scene.room_coldest), scene.room_hottest),
        gauge=None if dial is None else Bounds(permissible_error(dial, 0.0), 0.5 * dial.division.value),
        span=0.0 if dial is None else dial.dial.span,
        unit="bar(g)" if dial is None else dial.dial.unit,
        probe=Bounds(permissible_error(probe, at), 0.5 * probe.division.value),
        lag=lag,
        lag_bound=lag_bound,
        height=_first(scene, "liquid height"),
        scale=_first(scene, "mass"),
    )


def stated_charge(scene: Scene, observations: tuple[Observation, ...]) -> tuple[float, float]:
    """Charge and half-width [kg] that was meant: the plan's, as far as the weighing before closing bears it out.

    A cell is closed on the falling weight, so a reading above the plan says only that it had not fallen yet; more
    than the plan is then an explanation like others, and not what was stated. Without a weighing: the record's.
    """
    low, high = scene.planned
    weighed = weighed_bounds(scene, observations)
    if weighed is not None:
        low, high = weighed[0], min(weighed[1], max(high, weighed[0]) + weighed[2])
    elif scene.charge is not None:
        low, high = scene.charge.low_kg, scene.charge.high_kg
    return 0.5 * (low + high), 0.5 * (high - low)


def weighed_bounds(scene: Scene, observations: tuple[Observation, ...]) -> tuple[float, float, float] | None:
    """Least and most charge by the last weighing before closing, and that scale's error [kg]; None without one.

    Until it was closed it may have lost what brings it down to the least that was meant.
    """
    weighed = [o for o in observations if o.what == "mass" and not o.closed]
    if not weighed:
        return None
    last = max(weighed, key=lambda o: o.sequence)
    bounds = _of(scene, last.tag)
    error = bounds.error + bounds.half_division
    return min(last.value, scene.planned[0]) - error, last.value + error, error


def _first(scene: Scene, reads: str) -> Bounds | None:
    found = next((i for i in scene.apparatus.instruments if i.reads == reads), None)
    return None if found is None else _of(scene, found.tag)


def _of(scene: Scene, tag: str) -> Bounds:
    instrument = scene.instrument(tag)
    return Bounds(permissible_error(instrument, 0.0), 0.5 * instrument.division.value)
