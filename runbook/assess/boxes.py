"""How much is in the vessel, from what has been read.

At closing it is the last reading plus the scale's error, no loss assumed. After closing a height at a known
temperature, or a weighing of the closed vessel, proves it; of a charge that comes as gas, pressure and temperature
do. The most it can be comes down only when two different people's measurements both say so; a contradiction leaves
the worse standing.
"""

from __future__ import annotations

from dataclasses import dataclass

from runbook.answers import ChargeBox, Observation
from runbook.apparatus.instruments import permissible_error
from runbook.apparatus.spaces import isolated
from runbook.assess.scene import GAS_CONSTANT, Scene
from runbook.charge.filling import mass_from_height
from runbook.charge.geometry import Shape, ShapeKind
from runbook.errors import RunbookError

GAS_LEFT = "gas left"
"""What a box rests on that was inferred after letting down: never what the charge record keeps."""
_FAR_BELOW = 0.5
"""Share of the saturation pressure under which neither liquid nor solid stays [1]."""


@dataclass(frozen=True, slots=True)
class Measured:
    """One measurement of the charge after closing."""

    low_kg: float
    high_kg: float
    by: str
    how: str
    """'weighing', 'height' or 'pressure'."""


def charge_box(
    scene: Scene, record: ChargeBox | None, observations: tuple[Observation, ...], closed: bool
) -> ChargeBox | None:
    """What is known of the charge; None where nothing has been loaded and nothing weighed.

    record: what the charge record said when the run was opened. closed: the vessel is, or may be, closed.
    """
    opened_by = _before_closing(scene, record, observations, closed)
    if opened_by is None:
        return None
    measured = _after_closing(scene, observations) if closed else []
    if not measured:
        return opened_by
    return _combined(opened_by, measured)


def _before_closing(
    scene: Scene, record: ChargeBox | None, observations: tuple[Observation, ...], closed: bool
) -> ChargeBox | None:
    if scene.comes_as_gas:
        gauges = [o for o in observations if o.what == "pressure"]
        open_yet = [o for o in gauges if not o.closed]
        filled = _by_pressure(scene, open_yet, observations) or _by_pressure(scene, gauges, observations)
        if filled:
            # A gauge read before the filling says too little: the plan counts beside it.
            low, high = scene.planned
            return ChargeBox(min(filled[-1].low_kg, low), max(filled[-1].high_kg, high), False, ("pressure",))
    weighings = [o for o in observations if o.what == "mass" and not o.closed]
    if weighings:
        last = max(weighings, key=lambda o: o.sequence)
        error = _error(scene, last)
        # Two readings that contradict each other are both handed over: the heavier governs.
        high = max(o.value + _error(scene, o) for o in weighings) if scene.assume.no_loss else 0.0
        if not scene.assume.no_loss:
            high = scene.planned[1]
        return ChargeBox(max(0.0, last.value - error), high, False, ("weighing",))
    if record is not None:
        return ChargeBox(record.low_kg, record.high_kg, False, ("charge record",), record.contradiction)
    if closed:
        return ChargeBox(0.0, scene.brim_full, False, ("brim-full",))
    return None


def _after_closing(scene: Scene, observations: tuple[Observation, ...]) -> list[Measured]:
    found = []
    for one in observations:
        if not one.closed:
            continue
        if one.what == "mass":
            error = _error(scene, one)
            found.append(Measured(one.value - error, one.value + error, one.by, "weighing"))
        elif one.what == "liquid height":
            beside = _temperature_beside(one, observations)
            measured = None if beside is None else _from_height(scene, one, beside)
            if measured is not None:
                found.append(measured)
    if scene.comes_as_gas:
        found += _by_pressure(scene, [o for o in observations if o.what == "pressure" and o.closed], observations)
    return found


def _by_pressure(scene: Scene, gauges: list[Observation], observations: tuple[Observation, ...]) -> list[Measured]:
    """Gas measured by what it presses at the temperature read beside it; where liquid could be, not at all."""
    found = []
    for one in gauges:
        beside = _temperature_beside(one, observations)
        if beside is None or isolated(scene.apparatus, one.tag, {}):
            continue
        off, warm = _error(scene, one), _error(scene, beside)
        off += 0.5 * (scene.barometer.high_Pa - scene.barometer.low_Pa)
        try:
            thin = scene.substance.equation.gas_density(beside.value + warm, max(one.value - off, 1.0))
            dense = scene.substance.equation.gas_density(beside.value - warm, one.value + off)
        except RunbookError:
            continue
        if thin is not None and dense is not None:
            found.append(Measured(thin * scene.volume[0], dense * scene.volume[1], one.by, "pressure"))
    return found


def _combined(start: ChargeBox, measured: list[Measured]) -> ChargeBox:
    """The least high of two people's measurements, each person at their worst; else the start's."""
    fits = [m for m in measured if m.low_kg <= start.high_kg]
    over = [m for m in measured if m.low_kg > start.high_kg]
    by = tuple(dict.fromkeys([*start.by, *(m.how for m in measured)]))
    if over:
        worst = max(m.high_kg for m in over)
        said = f"a {over[0].how} by {over[0].by} says more than was weighed in at closing"
        return ChargeBox(start.low_kg, max(worst, start.high_kg), False, by, said)
    each: dict[str, float] = {}
    for one in fits:
        each[one.by] = max(each.get(one.by, 0.0), one.high_kg)
    high = start.high_kg
    if len(each) >= 2:
        high = min(high, max(each.values()))
    low = min(min(m.low_kg for m in fits), high)
    return ChargeBox(max(0.0, low), high, True, by)


def _temperature_beside(one: Observation, observations: tuple[Observation, ...]) -> Observation | None:
    """The temperature read nearest to a height, in the order of the record."""
    near = [o for o in observations if o.what == "temperature"]
    return min(near, key=lambda o: abs(o.sequence - one.sequence), default=None)


def _from_height(scene: Scene, height: Observation, temperature: Observation) -> Measured | None:
    key = (height.value, temperature.value)
    if key not in scene.weighed_by_height:
        scene.weighed_by_height[key] = _inverted(scene, height, temperature)
    found = scene.weighed_by_height[key]
    return None if found is None else Measured(found[0], found[1], height.by, "height")


def _inverted(scene: Scene, height: Observation, temperature: Observation) -> tuple[float, float] | None:
    """Least and most charge [kg] that a height means; None where it proves nothing."""
    try:
        found = mass_from_height(
            scene.substance,
            viewed_shape(scene),
            height.value,
            temperature.value,
            height_error=_error(scene, height),
            temperature_error=_error(scene, temperature),
            volume_error=scene.apparatus.volume.free.plus_minus,
        )
    except RunbookError:
        # No meniscus at that temperature, or a height outside the vessel.
        return None
    return found.least, found.greatest


def viewed_shape(scene: Scene) -> Shape:
    """The inside as the window shows it.

    The part outside the heated body (gauge line, valve) is left in: cold and out of view it holds liquid or
    vapour, which the volume's tolerance has to cover.
    """
    apparatus = scene.apparatus
    return Shape(ShapeKind(apparatus.shape), apparatus.diameter.value, apparatus.volume.free.value)


def gas_left(
    scene: Scene, box: ChargeBox, temperature: Observation | None, pressure: Observation | None
) -> ChargeBox | None:
    """What is left after letting down when the vent is shut again: gas alone, where the readings say so.

    Far below the saturation pressure at the wall's temperature neither liquid nor solid can stay. None where
    the readings do not say that; then everything may still be in.
    """
    if temperature is None or pressure is None:
        return None
    highest = pressure.value + _error(scene, pressure) + (scene.barometer.high_Pa - scene.barometer.middle_Pa)
    coldest = temperature.value - _error(scene, temperature)
    fluid = scene.substance
    if not fluid.triple_temperature < coldest < fluid.critical_temperature:
        return None
    if highest > _FAR_BELOW * fluid.saturation(coldest).pressure:
        return None
    # Real gas below saturation is denser than an ideal one by less than the share it may come near to it.
    density = highest * fluid.molar_mass / (GAS_CONSTANT * coldest) / (1.0 - _FAR_BELOW)
    most = density * scene.volume[1]
    return ChargeBox(0.0, min(most, box.high_kg), box.proved, (GAS_LEFT,), box.contradiction)


def _error(scene: Scene, one: Observation) -> float:
    """Permissible error plus half a division, added plainly: a bound [SI]."""
    instrument = scene.instrument(one.tag)
    return permissible_error(instrument, one.value) + instrument.division.value / 2.0
