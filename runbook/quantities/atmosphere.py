"""The room's pressure: between every gauge reading and every absolute one.

Refuses to take a guess for a reading: each way to know it has its own width, and the worst corner uses it.
"""

from __future__ import annotations

from dataclasses import dataclass
from typing import Final, Literal

from runbook.errors import OutsideValidity

Source = Literal["reading of the day", "height above sea level", "not known"]

_SEA_LEVEL_PA: Final = 101325.0
_SEA_LEVEL_K: Final = 288.15
_LAPSE_K_PER_M: Final = 0.0065
_EXPONENT: Final = 5.25588
"""g0 M / (R* lapse) with the constants of ISO 2533:1975."""
_LOWEST_M: Final = -1000.0
_HIGHEST_M: Final = 11000.0

_READING_PA: Final = 100.0
"""What a room barometer read on the day can be off, common practice, [Pa]."""
_WEATHER_PA: Final = 3000.0
"""What the weather moves the pressure at one height, common practice, [Pa]."""
_UNKNOWN_PA: Final = 101300.0
_UNKNOWN_FRACTION: Final = 0.05


@dataclass(frozen=True, slots=True)
class Barometer:
    """The room's absolute pressure as a box."""

    low_Pa: float
    """Least it can be, [Pa]."""
    high_Pa: float
    """Most it can be, [Pa]."""
    source: Source
    """How it is known."""

    @property
    def middle_Pa(self) -> float:
        """The value to display with, [Pa]; a margin takes the worse end."""
        return 0.5 * (self.low_Pa + self.high_Pa)


def standard_atmosphere(height_m: float) -> float:
    """Pressure of the standard atmosphere, [Pa], at a geopotential height above sea level, [m].

    Valid from -1000 m to 11000 m, OutsideValidity beyond. Source: ISO 2533:1975.
    """
    if not _LOWEST_M <= height_m <= _HIGHEST_M:
        raise OutsideValidity(
            f"{height_m:g} m above sea level is outside -1000 m to 11000 m: read a barometer in the room"
        )
    return _SEA_LEVEL_PA * float((1 - _LAPSE_K_PER_M * height_m / _SEA_LEVEL_K) ** _EXPONENT)


def barometer(reading_Pa: float | None, height_m: float | None) -> Barometer:
    """The box of the room's pressure from the best that is known.

    Args:
        reading_Pa: read in the room on the day, [Pa]; None where it was not.
        height_m: the room's height above sea level, [m]; None where it is not known.

    Raises OutsideValidity for a height out of range, and for a reading that cannot belong to the height:
    weather services report pressures reduced to sea level, and those are wrong for this.
    """
    if reading_Pa is not None:
        if height_m is not None:
            _belongs(reading_Pa, height_m)
        return _around(reading_Pa, _READING_PA, "reading of the day")
    if height_m is not None:
        return _around(standard_atmosphere(height_m), _WEATHER_PA, "height above sea level")
    return _around(_UNKNOWN_PA, _UNKNOWN_PA * _UNKNOWN_FRACTION, "not known")


def _belongs(reading_Pa: float, height_m: float) -> None:
    expected = standard_atmosphere(height_m)
    # Twice the usual weather: deep storms pass, a sea-level value above about 500 m does not.
    if not abs(reading_Pa - expected) <= 2 * _WEATHER_PA:
        raise OutsideValidity(
            f"a barometer of {reading_Pa / 100:.0f} hPa does not belong to {height_m:g} m above sea level,"
            f" where about {expected / 100:.0f} hPa is usual: read it in the room, not reduced to sea level"
        )


def _around(middle_Pa: float, width_Pa: float, source: Source) -> Barometer:
    return Barometer(middle_Pa - width_Pa, middle_Pa + width_Pa, source)
