"""What the instruments of a simulated vessel show: true value, lag, a fixed error within class, resolution.

One draw of the seed fixes each instrument's error for the whole rehearsal: real gauges err the same way all
morning. Refuses to show anything beyond the dial's ends: the needle stands at the pin.
"""

from __future__ import annotations

from dataclasses import dataclass
from math import exp
from random import Random

from runbook.answers import Instrument


@dataclass(frozen=True, slots=True)
class Shown:
    """What lags behind the truth, instrument by instrument."""

    lagging: tuple[tuple[str, float], ...] = ()
    """Tag -> value the instrument has come to [SI]."""


class Dials:
    """The instruments of one rehearsal."""

    def __init__(self, instruments: tuple[Instrument, ...], seed: int) -> None:
        self._instruments = {one.tag: one for one in instruments}
        random = Random(seed)
        self._share = {tag: random.uniform(-1.0, 1.0) for tag in sorted(self._instruments)}

    def follow(self, shown: Shown, truth: dict[str, float], dt: float) -> Shown:
        """Where the instruments have come to after dt [s] of the true values [SI] by tag."""
        before = dict(shown.lagging)
        after = {}
        for tag, value in truth.items():
            lag = self._instruments[tag].lag_s
            old = before.get(tag, value)
            after[tag] = value if lag <= 0.0 else old + (value - old) * (1.0 - exp(-dt / lag))
        return Shown(tuple(sorted(after.items())))

    def read(self, shown: Shown, tag: str) -> float | None:
        """What a careful person reads [SI]; None where the instrument shows nothing."""
        value = dict(shown.lagging).get(tag)
        if value is None:
            return None
        one = self._instruments[tag]
        error = one.error + one.error_slope * abs(value - 273.15)
        # Well inside the class, as most are; the outermost tenth is left to faults.
        off = value + 0.9 * error * self._share[tag]
        step = one.half_division
        rounded = one.low + round((off - one.low) / step) * step if step > 0.0 else off
        return min(one.high, max(one.low, rounded))
