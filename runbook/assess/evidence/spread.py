"""How far readings may lie from their forecast with nothing more wrong than is allowed.

Instruments within their classes, volume and charge within their bounds, the equation within its uncertainty, and
a small second error of every kind: what one cause cannot explain exactly need not speak against it. Errors that
all readings of one instrument share are kept apart from those each reading has by itself.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, replace
from math import log, sqrt
from typing import Final

from runbook.assess.evidence.forecast import BEFORE, Fault, charge_then, forecast, wall_temperature
from runbook.assess.evidence.given import RECTANGULAR, Bounds, Given
from runbook.assess.evidence.looks import Look

SHARED: Final = 0.5
"""Share of the variance of a class that all readings of a gauge, window scale or balance have in common [1].

Common practice: of a dial about half of what the class allows is zero and span, the rest hysteresis and steps."""
SECOND_AIR: Final = 0.15e5
"""A second error of this size is always allowed for: air, at rest [Pa], standard uncertainty. All five are a tenth
or less of what would be looked for."""
SECOND_FILL: Final = 0.004
"""Charge [1]."""
SECOND_LAG: Final = 6.0
"""Time constant [s]."""
SECOND_PLACE: Final = 0.01
"""Place of the thermometer [1]."""
SECOND_OFFSET: Final = 0.1e5
"""Gauge [Pa]."""


@dataclass(frozen=True, slots=True)
class Spread:
    """A covariance as its lower triangular root."""

    root: tuple[tuple[float, ...], ...]
    """Row by row, each up to the diagonal [as the readings]."""
    log_det: float
    """Logarithm of the covariance's determinant."""

    def whitened(self, off: Sequence[float]) -> list[float]:
        """Differences in units of their own spread, independent of each other [1]."""
        found: list[float] = []
        for row, value in zip(self.root, off, strict=True):
            rest = value
            for r, w in zip(row, found, strict=False):
                rest -= r * w
            found.append(rest / row[-1])
        return found


def spread(given: Given, looks: Sequence[Look], about: Fault, air_at_rest: float) -> Spread:
    """The covariance of the readings about a fault; air_at_rest: moles that add 1 Pa at the first look [mol/Pa].

    Raises OutsideValidity.
    """
    base = forecast(given, looks, about)
    # A number in the wrong unit carries the gauge's error in that unit along.
    times = max(1.0, about.factor)
    shared = [_shift(given, looks, about, base, step) for step in _known(given)]
    shared += [_shift(given, looks, about, base, step) for step in _second(given)]
    shared += _shared_by_instrument(given, looks, times)
    air = [0.0 if look.pressure is None else SECOND_AIR * air_at_rest * _air(given, look) for look in looks]
    shared.append(_spread_over(looks, pressure=air))
    alone = _alone(given, looks, times)
    moving = _by_look(given, looks, about, base)
    size = len(base)
    covariance = [[0.0] * size for _ in range(size)]
    for i in range(size):
        covariance[i][i] = alone[i]
    for vector in (*shared, *moving):
        for i, left in enumerate(vector):
            if left:
                row = covariance[i]
                for j in range(i + 1):
                    row[j] += left * vector[j]
    return rooted(covariance)


def rooted(covariance: Sequence[Sequence[float]]) -> Spread:
    """The root of a covariance whose lower half is given (Cholesky)."""
    root: list[list[float]] = []
    log_det = 0.0
    for i, line in enumerate(covariance):
        row: list[float] = []
        for j in range(i + 1):
            left = line[j] - sum(a * b for a, b in zip(row[:j], root[j][:j] if j < i else row[:j], strict=True))
            row.append(sqrt(max(left, 1e-30)) if i == j else left / root[j][j])
        root.append(row)
        log_det += 2.0 * log(row[-1])
    return Spread(tuple(tuple(row) for row in root), log_det)


def _known(given: Given) -> list[dict[str, float]]:
    """Figures with bounds, each as a shift of one standard uncertainty."""
    return [
        {"probe": RECTANGULAR * given.probe.error},
        {"volume": RECTANGULAR * given.volume_bound},
        {"charge": RECTANGULAR * given.charge_bound},
        {"lag": RECTANGULAR * given.lag_bound},
    ]


def _second(given: Given) -> list[dict[str, float]]:
    return [
        {"fill": SECOND_FILL},
        {"lag": SECOND_LAG},
        {"place": SECOND_PLACE},
        {"offset": SECOND_OFFSET},
    ]


def _shift(
    given: Given, looks: Sequence[Look], about: Fault, base: Sequence[float], step: dict[str, float]
) -> list[float]:
    moved = forecast(given, looks, replace(about, **{n: getattr(about, n) + v for n, v in step.items()}))
    return [m - b for m, b in zip(moved, base, strict=True)]


def _shared_by_instrument(given: Given, looks: Sequence[Look], times: float) -> list[list[float]]:
    share = sqrt(SHARED) * RECTANGULAR
    found = [_spread_over(looks, pressure=[RECTANGULAR * given.barometer_bound] * len(looks))]
    if given.gauge is not None:
        found.append(_spread_over(looks, pressure=[times * share * given.gauge.error] * len(looks)))
    if given.height is not None:
        found.append(_spread_over(looks, height=share * given.height.error))
    if given.scale is not None:
        found.append(_spread_over(looks, mass=share * given.scale.error))
    return found


def _spread_over(
    looks: Sequence[Look], pressure: Sequence[float] | None = None, height: float = 0.0, mass: float = 0.0
) -> list[float]:
    """A shift as a vector in the order of the readings."""
    found = []
    for index, look in enumerate(looks):
        if look.pressure is not None:
            found.append(0.0 if pressure is None else pressure[index])
        if look.height is not None:
            found.append(height)
        if look.mass is not None:
            found.append(mass)
    return found


def _alone(given: Given, looks: Sequence[Look], times: float) -> list[float]:
    """Variances that each reading has by itself."""

    found = []
    for look in looks:
        if look.pressure is not None:
            found.append(times**2 * _variance(given.gauge))
        if look.height is not None:
            found.append(_variance(given.height))
        if look.mass is not None:
            found.append(_variance(given.scale))
    return found


def _variance(bounds: Bounds | None) -> float:
    if bounds is None:
        return 0.0
    return ((1.0 - SHARED) * bounds.error**2 + bounds.half_division**2) / 3.0


def _by_look(given: Given, looks: Sequence[Look], about: Fault, base: Sequence[float]) -> list[list[float]]:
    """What misreading one temperature and one rate does to the readings beside it."""
    found: list[list[float]] = []
    start = 0
    for index, look in enumerate(looks):
        count = sum(v is not None for v in (look.pressure, look.height, look.mass))
        lag = max(0.0, given.lag + about.lag)
        off = RECTANGULAR * sqrt(given.probe.half_division**2 + (lag * look.rate_bound) ** 2)
        moved = forecast(given, (look,), _only(given, looks, index, about, off))
        vector = [0.0] * len(base)
        for k in range(count):
            vector[start + k] = moved[k] - base[start + k]
        found.append(vector)
        start += count
    return found


def _only(given: Given, looks: Sequence[Look], index: int, about: Fault, off: float) -> Fault:
    """The same fault as seen from one look alone, whose temperature is off [K]."""
    lost = charge_then(given, looks, looks[index], replace(about, leak=0.0)) - charge_then(
        given, looks, looks[index], about
    )
    return replace(about, leak=lost, leak_from=BEFORE, probe=about.probe + off)


def _air(given: Given, look: Look) -> float:
    wall = wall_temperature(given, look, Fault())
    return given.air_per_mole(wall, given.charge / given.volume)
