"""What a quantity is once it has been read: SI, and a pressure never without its reference.

No arithmetic beyond ends and references. Nothing here rounds.
"""

from __future__ import annotations

from dataclasses import dataclass
from enum import Enum
from typing import Final, Literal


class NotKnown(Enum):
    """The one value of `not known`: the file loads, and nothing that needs the number is within limits."""

    NOT_KNOWN = "not known"


NOT_KNOWN: Final = NotKnown.NOT_KNOWN


@dataclass(frozen=True, slots=True)
class Level:
    """A pressure level. Gauge and absolute differ by the barometer, which is asked for each time."""

    pascal: float
    """Above the reference, [Pa]; a gauge level below the room's pressure is negative."""
    reference: Literal["gauge", "absolute"]
    """Which zero `pascal` counts from."""

    def absolute(self, barometer_Pa: float) -> float:
        """Absolute pressure, [Pa], at this room pressure, [Pa]."""
        return self.pascal + barometer_Pa if self.reference == "gauge" else self.pascal

    def gauge(self, barometer_Pa: float) -> float:
        """Gauge pressure, [Pa], at this room pressure, [Pa]."""
        return self.pascal if self.reference == "gauge" else self.pascal - barometer_Pa


@dataclass(frozen=True, slots=True)
class Bounded:
    """A value and the most it can be off: a bound, not a statistical uncertainty."""

    value: float
    """[SI]."""
    plus_minus: float = 0.0
    """[SI], never negative; of a temperature a difference, [K]."""

    @property
    def low(self) -> float:
        """Least it can be, [SI]."""
        return self.value - self.plus_minus

    @property
    def high(self) -> float:
        """Most it can be, [SI]."""
        return self.value + self.plus_minus


@dataclass(frozen=True, slots=True)
class BoundedLevel:
    """A pressure level and the most it can be off."""

    level: Level
    """The level as written."""
    plus_minus: float = 0.0
    """[Pa], never negative."""

    @property
    def low(self) -> Level:
        """Least it can be, with the same reference."""
        return Level(self.level.pascal - self.plus_minus, self.level.reference)

    @property
    def high(self) -> Level:
        """Most it can be, with the same reference."""
        return Level(self.level.pascal + self.plus_minus, self.level.reference)


@dataclass(frozen=True, slots=True)
class Range:
    """From low to high, both included."""

    low: float | None
    """[SI]; None where the text sets no lower end. At least one end is set, and low is not above high."""
    high: float | None
    """[SI]; None where the text sets no upper end."""


@dataclass(frozen=True, slots=True)
class LevelRange:
    """From low to high, both included; two ends have the same reference."""

    low: Level | None
    """None where the text sets no lower end. At least one end is set, and low is not above high."""
    high: Level | None
    """None where the text sets no upper end."""
