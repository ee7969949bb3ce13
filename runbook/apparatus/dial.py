"""What is printed on an instrument: its two ends and its unit. What it measures follows from what it reads."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Final, Literal

from runbook.quantities import Bounded, Dimension, Level, parse_bounded, parse_level_range, parse_range, unit_in
from runbook.quantities.number import refuse

Reads = Literal["pressure", "temperature", "mass", "liquid height", "carbon dioxide", "oxygen"]
"""What an instrument can read."""

DIMENSION: Final[dict[str, Dimension]] = {
    "pressure": Dimension.PRESSURE,
    "temperature": Dimension.TEMPERATURE,
    "mass": Dimension.MASS,
    "liquid height": Dimension.LENGTH,
    "carbon dioxide": Dimension.CONCENTRATION,
    "oxygen": Dimension.CONCENTRATION,
}
"""The dimension of each of Reads."""
_STEP: Final = {
    Dimension.PRESSURE: Dimension.PRESSURE_DIFFERENCE,
    Dimension.TEMPERATURE: Dimension.TEMPERATURE_DIFFERENCE,
}
"""The dimension of an error or a division; that of the reading itself where it is not listed."""


@dataclass(frozen=True, slots=True)
class Dial:
    """The printed scale."""

    low: float | Level
    """Its lower end [SI]; of a gauge a Level, which needs the room's pressure to become absolute."""
    high: float | Level
    """Its upper end, above the lower, as `low`."""
    unit: str
    """The unit as printed, which a bare number typed at the bench takes."""

    @property
    def span(self) -> float:
        """From end to end [SI]."""
        low, high = (e.pascal if isinstance(e, Level) else e for e in (self.low, self.high))
        return high - low


def parse_dial(text: str, reads: str) -> Dial:
    """'0 bar(g) to 160 bar(g)' of an instrument that reads so. Raises QuantityError."""
    dimension = DIMENSION[reads]
    span = parse_level_range(text) if dimension is Dimension.PRESSURE else parse_range(text, dimension)
    if span.low is None or span.high is None:
        refuse(text, "is no dial", "write both ends, for example 0 bar(g) to 160 bar(g)")
    dial = Dial(span.low, span.high, unit_in(text).symbol)
    if dial.span <= 0.0:
        refuse(text, "is no dial", "the upper end lies above the lower")
    return dial


def parse_step(text: str, reads: str) -> Bounded:
    """An error or a division of an instrument that reads so, positive [SI]. Raises QuantityError."""
    dimension = DIMENSION[reads]
    found = parse_bounded(text, _STEP.get(dimension, dimension))
    if found.value <= 0.0 or found.plus_minus:
        refuse(text, "is no error or division", "write one amount above zero")
    return found
