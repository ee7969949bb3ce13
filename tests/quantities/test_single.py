"""One quantity from a text: what is read, and each refusal with what to write instead."""

from __future__ import annotations

import math
import subprocess
import sys
from collections.abc import Callable

import pytest
from hypothesis import given
from hypothesis import strategies as st

from runbook.errors import QuantityError
from runbook.quantities import (
    EXAMPLES,
    UNITS,
    Dimension,
    Level,
    parse,
    parse_barometer,
    parse_bounded,
    parse_bounded_level,
    parse_level,
    parse_level_range,
    parse_range,
    unit_in,
)

D = Dimension


@pytest.mark.parametrize(
    ("text", "dimension", "si"),
    [
        ("117 g", D.MASS, 0.117),
        ("117g", D.MASS, 0.117),
        ("  117   g ", D.MASS, 0.117),
        ("250 mL", D.VOLUME, 250e-6),
        ("180 m³", D.VOLUME, 180.0),
        ("33 degC", D.TEMPERATURE, 306.15),
        ("33 °C", D.TEMPERATURE, 306.15),
        ("-78.5 degC", D.TEMPERATURE, 194.65),
        ("−78.5 degC", D.TEMPERATURE, 194.65),
        ("+5 degC", D.TEMPERATURE, 278.15),
        ("0 K", D.TEMPERATURE, 0.0),
        ("2 K", D.TEMPERATURE_DIFFERENCE, 2.0),
        ("1.2 kJ/K", D.HEAT_CAPACITY, 1200.0),
        ("1 K/min", D.TEMPERATURE_RATE, 1 / 60),
        ("12 N·m", D.TORQUE, 12.0),
        ("12 N m", D.TORQUE, 12.0),
        ("12 Nm", D.TORQUE, 12.0),
        ("2 per h", D.AIR_CHANGES, 2 / 3600),
        ("2 /h", D.AIR_CHANGES, 2 / 3600),
        ("2/h", D.AIR_CHANGES, 2 / 3600),
        ("5 %", D.FRACTION, 0.05),
        ("0.5 vol %", D.CONCENTRATION, 0.005),
        ("5000 ppm", D.CONCENTRATION, 0.005),
        ("1 bar", D.PRESSURE_DIFFERENCE, 1e5),
        ("1.5e3 g", D.MASS, 1.5),
        ("0.15 mm", D.LENGTH, 0.15e-3),
    ],
)
def test_read(text: str, dimension: Dimension, si: float) -> None:
    """A number, a unit of the table and free blanks between them are read into SI."""
    assert parse(text, dimension) == pytest.approx(si, rel=1e-14)


@pytest.mark.parametrize(
    ("text", "dimension", "wrong", "mend"),
    [
        ("117", D.MASS, "has no unit", "117 g"),
        ("117", D.MASS, "has no unit", "g, kg, mg, lb or oz"),
        ("", D.MASS, "is empty", "a number and its unit"),
        ("g", D.MASS, "does not begin with a number", "a number and its unit"),
        ("1,170 g", D.MASS, "read two ways", "1.170 g or 1170 g"),
        ("0,15 mm", D.LENGTH, "has a comma", "0.15 mm"),
        ("-4,5 degC", D.TEMPERATURE, "has a comma", "-4.5 degC"),
        ("1,170.5 g", D.MASS, "has a comma", "nothing stands between thousands"),
        ("1.170.000 g", D.MASS, "not a plain number", "one point at most"),
        ("1 170 g", D.MASS, "more than one number", "one number"),
        ("1_000 g", D.MASS, "not a plain number", "1170"),
        ("1'000 g", D.MASS, "not a plain number", "1170"),
        ("0x1F g", D.MASS, "not a plain number", "1170"),
        ("nan g", D.MASS, "is not a number", ""),
        ("-inf g", D.MASS, "is not a number", ""),
        ("Infinity g", D.MASS, "is not a number", ""),
        ("1e400 g", D.MASS, "too large", "exponent"),
        ("1e-400 g", D.MASS, "too small", "exponent"),
        ("1e308 kW", D.POWER, "too large", "exponent"),
        (".5 g", D.MASS, "begins with a point", "0.5"),
        ("12:30", D.TIME, "time of day", "30 min"),
        ("2 min 30 s", D.TIME, "more than one number", "one number"),
        ("6 2", D.MASS, "more than one number", "one number"),
        ("6 1", D.FRACTION, "more than one number", "one number"),
        ("0.05", D.FRACTION, "has no unit", "0.05 %"),
        ("105-150 g", D.MASS, "more than one number", "'A to B'"),
        ("105 g to 150 g", D.MASS, "is a range", "one value"),
        ("up to 150 g", D.MASS, "is a range", "one value"),
        ("117 g ± 2 g", D.MASS, "has a ±", "one value"),
        ("117 g +- 2 g", D.MASS, "has a ±", "one value"),
        ("١١٧ g", D.MASS, "does not begin with a number", ""),
        ("5 gr", D.MASS, "unknown unit", "did you mean g?"),
        ("5 gr", D.MASS, "unknown unit", "grain"),
        ("5 Kg", D.MASS, "unknown unit", "kg"),
        ("250 ml", D.VOLUME, "unknown unit", "mL"),
        ("5 litres", D.VOLUME, "unknown unit", "L"),
        ("33 C", D.TEMPERATURE, "unknown unit", "degC"),
        ("33 C", D.TEMPERATURE, "unknown unit", "coulomb"),
        ("33 degc", D.TEMPERATURE, "unknown unit", "degC"),
        ("33 celcius", D.TEMPERATURE, "unknown unit", "degC"),
        ("90 F", D.TEMPERATURE, "unknown unit", "degF"),
        ("5 sec", D.TIME, "unknown unit", "did you mean s?"),
        ("1 degC/min", D.TEMPERATURE_RATE, "unknown unit", "K/min"),
        ("5 Bar", D.PRESSURE_DIFFERENCE, "unknown unit", "did you mean bar?"),
        ("2 C", D.TEMPERATURE_DIFFERENCE, "unknown unit", "a temperature difference is in K"),
        ("5 in²", D.AREA, "unknown unit", "mm2"),
        ("5 blorp", D.MASS, "unknown unit", "g, kg"),
        ("2 degC", D.TEMPERATURE_DIFFERENCE, "is a temperature where", "a temperature difference is in K"),
        ("5 bar(g)", D.PRESSURE_DIFFERENCE, "is a pressure where", "neither gauge nor absolute"),
        ("5 kg", D.VOLUME, "is a mass where a volume is wanted", "250 mL"),
        ("5 mm2", D.LENGTH, "is an area where a length is wanted", "60 mm"),
        ("-300 degC", D.TEMPERATURE, "below absolute zero", "sign"),
        ("-1 K", D.TEMPERATURE, "below absolute zero", "sign"),
    ],
)
def test_refused(text: str, dimension: Dimension, wrong: str, mend: str) -> None:
    """Each mistake is refused with what is wrong and what to write."""
    with pytest.raises(QuantityError) as caught:
        parse(text, dimension)
    assert wrong in caught.value.wrong
    assert mend in caught.value.mend
    assert str(caught.value).startswith(f"'{text}'")


@pytest.mark.parametrize(
    ("text", "level"),
    [
        ("160 bar(g)", Level(160e5, "gauge")),
        ("160 barg", Level(160e5, "gauge")),
        ("160 bar g", Level(160e5, "gauge")),
        ("160 bar gauge", Level(160e5, "gauge")),
        ("1 bar(a)", Level(1e5, "absolute")),
        ("1 bara", Level(1e5, "absolute")),
        ("1 bar abs", Level(1e5, "absolute")),
        ("101.325 kPa(a)", Level(101325.0, "absolute")),
        ("-1 bar(g)", Level(-1e5, "gauge")),
        ("760 Torr(a)", Level(101325.0, "absolute")),
    ],
)
def test_level(text: str, level: Level) -> None:
    """A pressure level keeps what its unit said."""
    read = parse_level(text)
    assert read.reference == level.reference
    assert read.pascal == pytest.approx(level.pascal, rel=1e-14)


@pytest.mark.independent
def test_vacuum_counts_down_from_the_barometer() -> None:
    """20 inHg vac is 20 inches of mercury below the room (NIST SP 811: 3386.389 Pa an inch)."""
    level = parse_level("20 inHg vac")
    assert level.reference == "gauge"
    assert level.pascal == pytest.approx(-20 * 3386.389, rel=1e-6)
    assert level.absolute(101325.0) == pytest.approx(33597.2, abs=0.1)


@pytest.mark.parametrize(
    ("text", "wrong", "mend"),
    [
        ("5 bar", "does not say gauge or absolute", "bar(g) or bar(a)"),
        ("70 psi", "does not say gauge or absolute", "psig or psia"),
        ("1 atm", "does not say gauge or absolute", "atm(g) or atm(a)"),
        ("1013 hPa", "does not say gauge or absolute", "hPa(g) or hPa(a)"),
        ("5 Bar", "unknown unit", "bar(g) or bar(a)"),
        ("5 bargg", "unknown unit", "bar(g)"),
        ("5 BARG", "unknown unit", "bar(g)"),
        ("5 bar(G)", "unknown unit", "bar(g)"),
        ("5 Mpa", "unknown unit", "MPa(g) or MPa(a)"),
        ("5 ata", "unknown unit", "bar(a)"),
        ("5", "has no unit", "5 bar(g)"),
        ("-0.1 bar(a)", "absolute pressure below zero", "gauge"),
        ("-1.2 bar(g)", "lower than an empty vessel", "-1 bar(g)"),
        ("40 inHg vac", "lower than an empty vessel", "-1 bar(g)"),
        ("5 degC", "is a temperature where a pressure is wanted", "bar(g)"),
    ],
)
def test_level_refused(text: str, wrong: str, mend: str) -> None:
    """A level without its reference, or one that cannot exist, is refused."""
    with pytest.raises(QuantityError) as caught:
        parse_level(text)
    assert wrong in caught.value.wrong
    assert mend in caught.value.mend


@pytest.mark.parametrize(
    ("text", "pascal"),
    [
        ("1013 hPa", 101300.0),
        ("1013 mbar", 101300.0),
        ("101.3 kPa", 101300.0),
        ("760 mmHg", 101325.0),
        ("1 bar(a)", 1e5),
        ("29.92 inHg", 101320.8),
    ],
)
def test_barometer(text: str, pascal: float) -> None:
    """A barometer is absolute whether its unit says so or not."""
    assert parse_barometer(text) == pytest.approx(pascal, rel=1e-6)


@pytest.mark.parametrize(
    ("text", "wrong"),
    [
        ("1 bar(g)", "not an absolute pressure"),
        ("20 inHg vac", "not an absolute pressure"),
        ("1013", "has no unit"),
        ("1013 hpa", "unknown unit"),
        ("1013 bar", "pressure of no room"),
        ("29.92 hPa", "pressure of no room"),
        ("20 degC", "is a temperature"),
    ],
)
def test_barometer_refused(text: str, wrong: str) -> None:
    """A barometer refuses gauge units and what no room has."""
    with pytest.raises(QuantityError) as caught:
        parse_barometer(text)
    assert wrong in caught.value.wrong


@pytest.mark.parametrize("dimension", list(Dimension))
def test_examples_are_good(dimension: Dimension) -> None:
    """The example that a message proposes for a dimension is itself read."""
    if dimension is D.PRESSURE:
        parse_level(EXAMPLES[dimension])
    else:
        parse(EXAMPLES[dimension], dimension)


def test_level_never_becomes_a_bare_number() -> None:
    """Asking for a pressure level as a number is a mistake of the program, not of the text."""
    for function in (parse, parse_bounded, parse_range):
        with pytest.raises(ValueError, match="reference"):
            function("5 bar(g)", D.PRESSURE)


@pytest.mark.parametrize(
    ("text", "symbol"),
    [
        ("0 bar(g) to 160 bar(g)", "bar(g)"),
        ("Up to 1 K/min", "K/min"),
        ("2 1/h", "per h"),
        ("117 g ± 2 g", "g"),
        ("1 °C", "degC"),
    ],
)
def test_unit_in(text: str, symbol: str) -> None:
    """The unit printed on a dial is the unit of the first quantity of its text."""
    assert unit_in(text).symbol == symbol


ANY_TEXT = st.one_of(
    st.text(max_size=40),
    st.text(alphabet="0123456789.,-+±eE %()/abrgmKkC to", max_size=24),
    st.builds(
        "{} {}".format, st.text("0123456789.,-", max_size=6), st.sampled_from(sorted(UNITS)).map(str.swapcase)
    ),
)


@given(ANY_TEXT, st.sampled_from([d for d in D if d is not D.PRESSURE]))
def test_any_text_is_read_or_refused(text: str, dimension: Dimension) -> None:
    """Every function gives a finite value or a QuantityError for any text, and nothing else."""
    functions: list[Callable[[], object]] = [
        lambda: parse(text, dimension),
        lambda: parse_bounded(text, dimension).value,
        lambda: parse_range(text, dimension).high or 0.0,
        lambda: parse_level(text).pascal,
        lambda: parse_bounded_level(text).level.pascal,
        lambda: parse_level_range(text) and 0.0,
        lambda: parse_barometer(text),
        lambda: unit_in(text) and 0.0,
    ]
    for function in functions:
        try:
            result = function()
        except QuantityError:
            continue
        assert isinstance(result, float)
        assert math.isfinite(result)


def test_reading_units_needs_no_heavy_package() -> None:
    """The table, the bench's own words and typed readings load without pydantic, numpy or the library."""
    heavy = "{'pydantic', 'numpy', 'CoolProp', 'textual', 'pint'}"
    code = f"import runbook.quantities, sys; print(*sorted({heavy} & set(sys.modules)))"
    done = subprocess.run([sys.executable, "-c", code], capture_output=True, text=True, check=True)
    assert done.stdout.strip() == ""


def test_hostile_text_is_clipped_and_cleaned() -> None:
    """A message repeats neither a megabyte nor a control character, and a long text costs no time."""
    with pytest.raises(QuantityError) as caught:
        parse("9" * 1_000_000 + " g", D.MASS)
    assert "too long" in caught.value.wrong
    assert len(str(caught.value)) < 200
    with pytest.raises(QuantityError) as caught:
        parse("5 \x1b[2Jg", D.MASS)
    assert "\x1b" not in str(caught.value)
    with pytest.raises(QuantityError) as caught:
        parse_range("1 " + " " * 200_000 + "x", D.MASS)
    assert "too long" in caught.value.wrong
    assert len(str(caught.value)) < 200
