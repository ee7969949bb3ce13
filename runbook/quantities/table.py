"""The closed table of units.

Factors are those of NIST SP 811 (2008), appendix B; where it defines a unit exactly the exact product stands
here. A unit that is not in this table is not read: there are no prefixes to combine and no expressions, so
that nothing can be read that nobody has checked.
"""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass
from typing import Final, Literal

from runbook.quantities.dimension import Dimension as D

Reference = Literal["gauge", "absolute", "vacuum"]


@dataclass(frozen=True, slots=True)
class Unit:
    """One unit; SI = value * factor + offset."""

    symbol: str
    """The spelling proposed to people; a key of UNITS itself."""
    dimension: D
    """What it measures."""
    factor: float
    """SI units in one of this, [SI]; negative only for a vacuum, which counts downwards."""
    offset: float = 0.0
    """SI value of this unit's zero, [K]; not 0 for degC and degF only."""
    reference: Reference | None = None
    """Present exactly where the dimension is a pressure level. A vacuum counts down from the barometer."""
    also: D | None = None
    """A second dimension it serves: K for a difference, % for a gas in air."""

    def serves(self, dimension: D) -> bool:
        """Whether a quantity of this dimension may be written in this unit."""
        return dimension in (self.dimension, self.also)

    @property
    def shown(self) -> str:
        """The symbol as screens and paper print it; also a key of UNITS."""
        return _SHOWN.get(self.symbol, self.symbol)


_SHOWN: Final = {"degC": "°C", "degF": "°F"}

_POUND: Final = 0.45359237
_GRAVITY: Final = 9.80665
_INCH: Final = 0.0254
_FOOT: Final = 0.3048
_MINUTE: Final = 60.0
_HOUR: Final = 3600.0
_FAHRENHEIT: Final = 5.0 / 9.0

_PLAIN: Final[tuple[tuple[D, tuple[tuple[str, float], ...]], ...]] = (
    # First spelling of each is the symbol; the others stand behind it, parted by '|'.
    (D.MASS, (("g", 1e-3), ("kg", 1.0), ("mg", 1e-6), ("lb", _POUND), ("oz", _POUND / 16))),
    (
        D.VOLUME,
        (("mL", 1e-6), ("L|l", 1e-3), ("m3|m³", 1.0), ("cm3|cm³|cc", 1e-6), ("mm3|mm³", 1e-9)),
    ),
    (
        D.LENGTH,
        (
            ("mm", 1e-3),
            ("cm", 1e-2),
            ("m", 1.0),
            ("um|µm|μm", 1e-6),
            ("km", 1e3),
            ("in", _INCH),
            ("ft", _FOOT),
        ),
    ),
    (D.AREA, (("mm2|mm²", 1e-6), ("cm2|cm²", 1e-4), ("m2|m²", 1.0))),
    (D.TIME, (("s", 1.0), ("min", _MINUTE), ("h", _HOUR), ("d", 86400.0), ("ms", 1e-3))),
    (D.POWER, (("W", 1.0), ("kW", 1e3))),
    (D.HEAT_CAPACITY, (("J/K", 1.0), ("kJ/K", 1e3))),
    (D.CONDUCTANCE, (("W/K", 1.0), ("kW/K", 1e3))),
    (
        D.DENSITY,
        (
            ("kg/m3|kg/m³", 1.0),
            ("g/L|g/l", 1.0),
            ("kg/L|kg/l", 1e3),
            ("g/mL", 1e3),
            ("g/cm3|g/cm³|g/cc", 1e3),
        ),
    ),
    (D.TEMPERATURE_RATE, (("K/min", 1 / _MINUTE), ("K/h", 1 / _HOUR), ("K/s", 1.0))),
    (
        D.PRESSURE_RATE,
        (
            ("bar/min", 1e5 / _MINUTE),
            ("bar/h", 1e5 / _HOUR),
            ("bar/s", 1e5),
            ("mbar/min", 1e2 / _MINUTE),
            ("mbar/h", 1e2 / _HOUR),
            ("kPa/min", 1e3 / _MINUTE),
            ("Pa/s", 1.0),
        ),
    ),
    (
        D.TORQUE,
        (
            ("N·m|N m|Nm|N*m|N⋅m", 1.0),
            ("lbf·ft|lbf ft|lbf*ft|ft·lbf|ft lbf", _POUND * _GRAVITY * _FOOT),
            ("lbf·in|lbf in|lbf*in|in·lbf|in lbf", _POUND * _GRAVITY * _INCH),
            ("kgf·m|kgf m|kgf*m", _GRAVITY),
        ),
    ),
    (
        D.FLOW,
        (
            ("L/min|l/min", 1e-3 / _MINUTE),
            ("L/s|l/s", 1e-3),
            ("L/h|l/h", 1e-3 / _HOUR),
            ("mL/min", 1e-6 / _MINUTE),
            ("m3/h|m³/h", 1 / _HOUR),
            ("m3/min|m³/min", 1 / _MINUTE),
            ("m3/s|m³/s", 1.0),
        ),
    ),
    (
        D.MASS_FLOW,
        (("g/s", 1e-3), ("g/min", 1e-3 / _MINUTE), ("g/h", 1e-3 / _HOUR), ("kg/h", 1 / _HOUR), ("kg/s", 1.0)),
    ),
    (
        D.AIR_CHANGES,
        (("per h|/h|1/h", 1 / _HOUR), ("per min|/min|1/min", 1 / _MINUTE), ("per s|/s|1/s", 1.0)),
    ),
    (D.VELOCITY, (("m/s", 1.0), ("mm/s", 1e-3), ("mm/min", 1e-3 / _MINUTE))),
)

_PRESSURES: Final[tuple[tuple[str, float], ...]] = (
    ("bar", 1e5),
    ("mbar", 1e2),
    ("Pa", 1.0),
    ("hPa", 1e2),
    ("kPa", 1e3),
    ("MPa", 1e6),
    ("psi", _POUND * _GRAVITY / _INCH**2),
    ("atm", 101325.0),
    ("kgf/cm2|kgf/cm²", _GRAVITY * 1e4),
    ("Torr", 101325.0 / 760),
    # Conventional columns of mercury: 13 595.1 kg/m3 under standard gravity.
    ("mmHg", 13595.1 * _GRAVITY * 1e-3),
    ("inHg", 13595.1 * _GRAVITY * _INCH),
)
_SHORT: Final = ("bar", "mbar", "kPa", "MPa", "psi")
"""Pressures whose reference the trade also writes as one more letter: barg, psia."""
_VACUUM: Final = ("inHg", "mmHg", "mbar", "kPa", "Torr")


def _spelled() -> Iterator[tuple[str, Unit]]:
    """Every spelling with its unit."""
    for dimension, rows in _PLAIN:
        for names, factor in rows:
            first, *_ = spellings = names.split("|")
            yield from ((s, Unit(first, dimension, factor)) for s in spellings)
    kelvin = Unit("K", D.TEMPERATURE, 1.0, also=D.TEMPERATURE_DIFFERENCE)
    celsius = Unit("degC", D.TEMPERATURE, 1.0, offset=273.15)
    fahrenheit = Unit("degF", D.TEMPERATURE, _FAHRENHEIT, offset=459.67 * _FAHRENHEIT)
    yield "K", kelvin
    yield from ((s, celsius) for s in ("degC", "°C", "deg C", "° C", "℃"))
    yield from ((s, fahrenheit) for s in ("degF", "°F", "deg F", "° F", "℉"))
    for names, factor in (("%", 1e-2), ("vol %|vol%|% vol|vol.-%", 1e-2), ("ppm", 1e-6), ("1", 1.0)):
        first, *_ = spellings = names.split("|")
        yield from ((s, Unit(first, D.FRACTION, factor, also=D.CONCENTRATION)) for s in spellings)
    for names, factor in _PRESSURES:
        yield from _pressure(names, factor)


def _pressure(names: str, factor: float) -> Iterator[tuple[str, Unit]]:
    """One pressure unit bare (a difference), gauge, absolute and, where the trade has it, as a vacuum."""
    first, *_ = bases = names.split("|")
    levels: tuple[tuple[Reference, str, str], ...] = (("gauge", "g", "gauge"), ("absolute", "a", "abs"))
    for base in bases:
        yield base, Unit(first, D.PRESSURE_DIFFERENCE, factor)
        for reference, letter, word in levels:
            symbol = f"psi{letter}" if first == "psi" else f"{first}({letter})"
            level = Unit(symbol, D.PRESSURE, factor, reference=reference)
            endings = [f"({letter})", f" ({letter})", f" {letter}", f" {word}", f"({word})"]
            endings += [letter] if base in _SHORT else []
            yield from ((base + e, level) for e in endings)
        if base in _VACUUM:
            vacuum = Unit(f"{base} vac", D.PRESSURE, -factor, reference="vacuum")
            yield from ((base + e, vacuum) for e in (" vac", " vacuum", "(vac)"))


UNITS: Final[dict[str, Unit]] = dict(_spelled())
"""Every spelling that is read, exactly as it must be written; nothing else is."""


def symbols(dimension: D) -> tuple[str, ...]:
    """The proposed spellings for a dimension, commonest first, for the end of a message."""
    found = dict.fromkeys(u.symbol for u in UNITS.values() if u.serves(dimension) and u.symbol != "1")
    if dimension is D.PRESSURE:
        return ("bar(g)", "bar(a)", "kPa(a)", "MPa(g)", "psig", "psia")
    if dimension is D.PRESSURE_DIFFERENCE:
        return ("bar", "mbar", "kPa", "MPa", "psi")
    return tuple(found)
