"""The closed table: every unit against an independent library, and no spelling with two meanings."""

from __future__ import annotations

import pint
import pytest

from runbook.errors import QuantityError
from runbook.quantities import UNITS, Dimension, Unit, symbols, unit

REGISTRY: pint.UnitRegistry[float] = pint.UnitRegistry()

BARE = {
    "g": "gram", "kg": "kilogram", "mg": "milligram", "lb": "pound", "oz": "ounce",
    "mL": "milliliter", "L": "liter", "m3": "meter**3", "cm3": "centimeter**3", "mm3": "millimeter**3",
    "mm": "millimeter", "cm": "centimeter", "m": "meter", "um": "micrometer", "km": "kilometer", "in": "inch",
    "ft": "foot", "mm2": "millimeter**2", "cm2": "centimeter**2", "m2": "meter**2",
    "s": "second", "min": "minute", "h": "hour", "d": "day", "ms": "millisecond",
    "W": "watt", "kW": "kilowatt", "J/K": "joule/kelvin", "kJ/K": "kilojoule/kelvin", "W/K": "watt/kelvin",
    "kW/K": "kilowatt/kelvin", "kg/m3": "kilogram/meter**3", "g/L": "gram/liter", "kg/L": "kilogram/liter",
    "g/mL": "gram/milliliter", "g/cm3": "gram/centimeter**3",
    "K/min": "kelvin/minute", "K/h": "kelvin/hour", "K/s": "kelvin/second",
    "bar/min": "bar/minute", "bar/h": "bar/hour", "bar/s": "bar/second", "mbar/min": "millibar/minute",
    "mbar/h": "millibar/hour", "kPa/min": "kilopascal/minute", "Pa/s": "pascal/second",
    "N·m": "newton*meter", "lbf·ft": "force_pound*foot", "lbf·in": "force_pound*inch",
    "kgf·m": "kilogram_force*meter",
    "L/min": "liter/minute", "L/s": "liter/second", "L/h": "liter/hour", "mL/min": "milliliter/minute",
    "m3/h": "meter**3/hour", "m3/min": "meter**3/minute", "m3/s": "meter**3/second",
    "g/s": "gram/second", "g/min": "gram/minute", "g/h": "gram/hour", "kg/h": "kilogram/hour",
    "kg/s": "kilogram/second", "per h": "1/hour", "per min": "1/minute", "per s": "1/second",
    "m/s": "meter/second", "mm/s": "millimeter/second", "mm/min": "millimeter/minute",
    "K": "kelvin", "degC": "degree_Celsius", "degF": "degree_Fahrenheit",
    "%": "percent", "vol %": "percent", "ppm": "ppm", "1": "dimensionless",
}  # fmt: skip
PRESSURES = {
    "bar": "bar", "mbar": "millibar", "Pa": "pascal", "hPa": "hectopascal", "kPa": "kilopascal",
    "MPa": "megapascal", "psi": "psi", "atm": "standard_atmosphere",
    "kgf/cm2": "kilogram_force/centimeter**2", "Torr": "torr", "mmHg": "mmHg", "inHg": "inHg",
}  # fmt: skip
EACH = sorted({u.symbol: u for u in UNITS.values()}.items())


def referee(found: Unit) -> str:
    """The referee's name for a unit; a KeyError here is a unit that nobody has checked."""
    if found.dimension in (Dimension.PRESSURE, Dimension.PRESSURE_DIFFERENCE):
        bare = found.symbol.removesuffix("(g)").removesuffix("(a)").removesuffix(" vac")
        return PRESSURES["psi" if bare in ("psig", "psia") else bare]
    return BARE[found.symbol]


@pytest.mark.independent
@pytest.mark.parametrize(("symbol", "found"), EACH)
def test_factor_agrees_with_pint(symbol: str, found: Unit) -> None:
    """Every unit of the table converts as pint does; pint shares no code or table with this package."""
    for value in (1.0, 37.5):
        expected = REGISTRY.Quantity(value, referee(found)).to_base_units().magnitude
        if found.dimension is Dimension.MASS:
            expected = REGISTRY.Quantity(value, referee(found)).to("kilogram").magnitude
        if found.reference == "vacuum":
            expected = -expected
        assert value * found.factor + found.offset == pytest.approx(expected, rel=1e-12)


@pytest.mark.independent
@pytest.mark.parametrize(
    ("symbol", "printed", "half_digit"),
    [
        ("lb", 0.4535924, 5e-8),
        ("oz", 2.834952e-2, 5e-9),
        ("psi", 6.894757e3, 5e-4),
        ("atm", 1.01325e5, 1e-9),
        ("kgf/cm2", 9.80665e4, 1e-9),
        ("Torr", 1.333224e2, 5e-5),
        ("mmHg", 1.333224e2, 5e-5),
        ("inHg", 3.386389e3, 5e-4),
        ("lbf·ft", 1.355818, 5e-7),
        ("kgf·m", 9.80665, 1e-9),
    ],
)
def test_factor_agrees_with_nist(symbol: str, printed: float, half_digit: float) -> None:
    """Customary units have the factors printed in NIST SP 811 (2008), appendix B.8 (digits from memory)."""
    assert abs(unit(symbol).factor - printed) <= half_digit


@pytest.mark.independent
@pytest.mark.parametrize(("degF", "degC"), [(32.0, 0.0), (212.0, 100.0), (-40.0, -40.0), (98.6, 37.0)])
def test_fahrenheit(degF: float, degC: float) -> None:
    """Fahrenheit meets Celsius at its defining points."""
    f, c = unit("degF"), unit("degC")
    assert degF * f.factor + f.offset == pytest.approx(degC * c.factor + c.offset, abs=1e-10)


def test_symbols_are_spellings() -> None:
    """What a message proposes, and what a screen shows, can be written."""
    for found in UNITS.values():
        assert UNITS[found.symbol] == found
        assert UNITS[found.shown] == found


def test_reference_exactly_on_levels() -> None:
    """A unit says gauge, absolute or vacuum exactly where it measures a pressure level."""
    for found in UNITS.values():
        assert (found.reference is not None) == (found.dimension is Dimension.PRESSURE)


def test_spellings_have_no_outer_or_double_blanks() -> None:
    """A spelling is what remains after blanks are made single, or it could never be written."""
    for spelling in UNITS:
        assert spelling == " ".join(spelling.split())


@pytest.mark.parametrize("dimension", list(Dimension))
def test_each_dimension_is_offered(dimension: Dimension) -> None:
    """Each dimension has units to propose, and they serve it."""
    assert symbols(dimension)
    assert all(unit(s).serves(dimension) for s in symbols(dimension))


@pytest.mark.parametrize("bare", ["C", "F", "Bar", "degc", "ml", "gr", "KG", "M", "", "g/"])
def test_no_unit_is_guessed(bare: str) -> None:
    """A near miss is no unit; case counts, as mW and MW differ by a factor of a thousand million."""
    with pytest.raises(QuantityError):
        unit(bare)
