"""SI into text: what is said reads back, and a pressure keeps its reference."""

from __future__ import annotations

import math

import pytest
from hypothesis import given
from hypothesis import strategies as st

from runbook.errors import QuantityError
from runbook.quantities import (
    UNITS,
    Dimension,
    Level,
    parse,
    parse_level,
    pressure_to_unit,
    say,
    say_level,
    to_unit,
)

PLAIN = sorted(
    {u.symbol for u in UNITS.values() if u.dimension is not Dimension.PRESSURE and u.symbol != "1"}
)
LEVELS = sorted({u.symbol for u in UNITS.values() if u.dimension is Dimension.PRESSURE})


@pytest.mark.parametrize(
    ("si", "symbol", "digits", "text"),
    [
        (62.6e5, "bar", None, "62.6 bar"),
        (62.6e5, "bar", 2, "62.60 bar"),
        (306.15, "degC", 0, "33 °C"),
        (273.15 - 1e-9, "degC", 1, "0.0 °C"),
        (0.117, "g", None, "117 g"),
        (1234567.0, "bar", None, "12.35 bar"),
        (1.2345678, "g", None, "1235 g"),
        (0.0, "g", None, "0 g"),
        (0.05, "%", None, "5 %"),
        (100.0, "W", None, "100 W"),
        (math.nan, "g", None, "not known"),
        (math.inf, "h", 1, "not known"),
    ],
)
def test_say(si: float, symbol: str, digits: int | None, text: str) -> None:
    """Decimals as asked, four figures where not, no minus before zero, never a number for the unknown."""
    assert say(si, symbol, digits) == text


def test_say_level() -> None:
    """One level in gauge and absolute at the room's pressure, from a Level or an absolute pressure."""
    assert say_level(62.6e5 + 101300, "bar(g)", 101300.0) == "62.6 bar(g)"
    assert say_level(Level(62.6e5, "gauge"), "bar(a)", 101300.0, 2) == "63.61 bar(a)"
    assert say_level(101325.0 - 20 * 3386.38864034, "inHg vac", 101325.0) == "20 inHg vac"
    with pytest.raises(QuantityError, match="gauge or absolute"):
        pressure_to_unit(1e5, "hPa", 101300.0)
    with pytest.raises(QuantityError, match="did you mean"):
        say(1.0, "Bar")


@given(st.sampled_from(PLAIN), st.floats(-200.0, 1e5))
def test_round_trip(symbol: str, number: float) -> None:
    """A value said with many decimals and read again is the value, in every unit."""
    unit = UNITS[symbol]
    if unit.dimension is Dimension.TEMPERATURE:
        number = abs(number)
    si = number * unit.factor + unit.offset
    again = parse(say(si, symbol, 12), unit.dimension)
    assert again == pytest.approx(si, rel=1e-12, abs=1e-12 * unit.factor)


@given(st.sampled_from(PLAIN), st.floats(-200.0, 1e5))
def test_four_figures_are_kept(symbol: str, number: float) -> None:
    """Without a number of decimals at most half of the fourth figure is lost."""
    shown = float(say(number * UNITS[symbol].factor + UNITS[symbol].offset, symbol).split(" ")[0])
    # The 1e-9 is for the offset of a temperature, which eats digits of a number near zero.
    assert shown == pytest.approx(number, rel=5.1e-4, abs=1e-9)


@given(st.sampled_from(LEVELS), st.floats(2e5, 3e7), st.floats(9e4, 1.06e5))
def test_level_round_trip(symbol: str, absolute: float, room: float) -> None:
    """An absolute pressure said in any unit and reference, and read again, is the same pressure."""
    if UNITS[symbol].reference == "vacuum":
        absolute = room * absolute / 3e7
    assert parse_level(say_level(absolute, symbol, room, 12)).absolute(room) == pytest.approx(
        absolute, rel=1e-9, abs=1e-3
    )


@given(st.floats(-1e5, 1e8), st.floats(3e4, 1.1e5))
def test_gauge_plus_barometer_is_absolute(gauge: float, room: float) -> None:
    """Gauge plus barometer is absolute, and back; a level asked in its own reference is untouched."""
    level = Level(gauge, "gauge")
    absolute = Level(level.absolute(room), "absolute")
    assert absolute.pascal == gauge + room
    assert absolute.gauge(room) == pytest.approx(gauge, abs=1e-6)
    assert level.gauge(room) == gauge
    assert absolute.absolute(room) == absolute.pascal


@pytest.mark.independent
def test_triple_point_on_a_gauge() -> None:
    """The triple point of carbon dioxide, 517.95 kPa (Span & Wagner 1996), on a gauge at 0 m and 1600 m."""
    assert pressure_to_unit(517950.0, "bar(g)", 101325.0) == pytest.approx(4.166, abs=0.002)
    assert pressure_to_unit(517950.0, "bar(g)", 83524.0) == pytest.approx(4.344, abs=0.002)
    assert to_unit(517950.0, "psi") == pytest.approx(75.12, abs=0.01)
