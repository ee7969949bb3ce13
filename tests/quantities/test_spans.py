"""Values with their bound, and ranges."""

from __future__ import annotations

import pytest

from runbook.errors import QuantityError
from runbook.quantities import (
    Bounded,
    BoundedLevel,
    Dimension,
    Level,
    LevelRange,
    Range,
    parse_bounded,
    parse_bounded_level,
    parse_level_range,
    parse_range,
)

D = Dimension


@pytest.mark.parametrize(
    ("text", "dimension", "value", "plus_minus"),
    [
        ("117 g ± 2 g", D.MASS, 0.117, 0.002),
        ("117 g±2 g", D.MASS, 0.117, 0.002),
        ("117 g +- 2 g", D.MASS, 0.117, 0.002),
        ("117 g +/- 2000 mg", D.MASS, 0.117, 0.002),
        ("117 g", D.MASS, 0.117, 0.0),
        ("250 mL ± 2 mL", D.VOLUME, 250e-6, 2e-6),
        ("250 mL ± 1 %", D.VOLUME, 250e-6, 2.5e-6),
        ("5 W/K ± 10 %", D.CONDUCTANCE, 5.0, 0.5),
        ("38 degC ± 1 K", D.TEMPERATURE, 311.15, 1.0),
        ("5 % ± 1 %", D.FRACTION, 0.05, 0.01),
    ],
)
def test_bounded(text: str, dimension: Dimension, value: float, plus_minus: float) -> None:
    """A bound has its own unit, or is a percentage of the value; of a percentage it means points."""
    read = parse_bounded(text, dimension)
    assert read.value == pytest.approx(value, rel=1e-14)
    assert read.plus_minus == pytest.approx(plus_minus, rel=1e-12)
    assert read.low == pytest.approx(value - plus_minus, rel=1e-12)
    assert read.high == pytest.approx(value + plus_minus, rel=1e-12)


@pytest.mark.parametrize(
    ("text", "dimension", "wrong"),
    [
        ("38 degC ± 1 degC", D.TEMPERATURE, "is a temperature where a temperature difference"),
        ("38 degC ± 1 %", D.TEMPERATURE, "percentage of a temperature"),
        ("117 ± 2 g", D.MASS, "has no unit"),
        ("117 g ± 2", D.MASS, "has no unit"),
        ("117 g ±", D.MASS, "nothing after its ±"),
        ("± 2 g", D.MASS, "is empty"),
        ("117 g ± -2 g", D.MASS, "negative ±"),
        ("117 g ± 2 g ± 1 g", D.MASS, "more than one ±"),
        ("117 g ± 2 mL", D.MASS, "is a volume where a mass"),
    ],
)
def test_bounded_refused(text: str, dimension: Dimension, wrong: str) -> None:
    """A bound that is not one is refused."""
    with pytest.raises(QuantityError) as caught:
        parse_bounded(text, dimension)
    assert wrong in caught.value.wrong


def test_bounded_level() -> None:
    """The ± of a level says neither gauge nor absolute, or is a percentage of the level as written."""
    assert parse_bounded_level("100 bar(g) ± 3 bar") == BoundedLevel(Level(100e5, "gauge"), 3e5)
    assert parse_bounded_level("100 bar(g) ± 3 %").plus_minus == pytest.approx(3e5)
    assert parse_bounded_level("9 bar(a)") == BoundedLevel(Level(9e5, "absolute"), 0.0)
    box = parse_bounded_level("100 bar(g) ± 3 bar")
    assert (box.low, box.high) == (Level(97e5, "gauge"), Level(103e5, "gauge"))
    with pytest.raises(QuantityError, match="neither gauge nor absolute"):
        parse_bounded_level("100 bar(g) ± 3 bar(g)")
    with pytest.raises(QuantityError, match=r"bar\(g\) or bar\(a\)"):
        parse_bounded_level("100 bar ± 3 bar")


@pytest.mark.parametrize(
    ("text", "dimension", "low", "high"),
    [
        ("105 g to 150 g", D.MASS, 0.105, 0.15),
        ("from 105 g to 150 g", D.MASS, 0.105, 0.15),
        ("105 g to 105 g", D.MASS, 0.105, 0.105),
        ("-80 degC to 80 degC", D.TEMPERATURE, 193.15, 353.15),
        ("-4 % to 0 %", D.FRACTION, -0.04, 0.0),
        ("up to 110 K", D.TEMPERATURE_DIFFERENCE, None, 110.0),
        ("at most 110 K", D.TEMPERATURE_DIFFERENCE, None, 110.0),
        ("at least 5 degC", D.TEMPERATURE, 278.15, None),
        ("Up to 1 K/min", D.TEMPERATURE_RATE, None, 1 / 60),
    ],
)
def test_range(text: str, dimension: Dimension, low: float | None, high: float | None) -> None:
    """A range has one or two ends, each with its unit."""
    read = parse_range(text, dimension)
    for found, wanted in ((read.low, low), (read.high, high)):
        assert (found is None) if wanted is None else found == pytest.approx(wanted, rel=1e-14)


@pytest.mark.parametrize(
    ("text", "wrong", "mend"),
    [
        ("105 to 150 g", "no unit at its lower end", "105 g to 150 g"),
        ("150 g to 105 g", "ends below where it begins", "lowest first"),
        ("150 g", "is no range", "'A to B'"),
        ("105 g - 150 g", "is no range", "'A to B'"),
        ("105 g to 150 g ± 1 g", "± in a range", "lowest and the highest"),
        ("105 g to", "is no range", ""),
        ("up to", "is no range", ""),
        ("1 g to 2 g to 3 g", "is a range", "one value"),
        ("", "is no range", ""),
    ],
)
def test_range_refused(text: str, wrong: str, mend: str) -> None:
    """A range that is not one is refused with what to write."""
    with pytest.raises(QuantityError) as caught:
        parse_range(text, D.MASS)
    assert wrong in caught.value.wrong
    assert mend in caught.value.mend


def test_level_range() -> None:
    """Two pressure ends share a reference: without a barometer nothing else says which is lower."""
    assert parse_level_range("-0.1 bar(g) to 0.1 bar(g)") == LevelRange(
        Level(-1e4, "gauge"), Level(1e4, "gauge")
    )
    assert parse_level_range("up to 200 bar(g)") == LevelRange(None, Level(200e5, "gauge"))
    assert parse_level_range("at least 1 bar(a)") == LevelRange(Level(1e5, "absolute"), None)
    with pytest.raises(QuantityError, match="mixes gauge and absolute"):
        parse_level_range("1 bar(g) to 3 bar(a)")
    with pytest.raises(QuantityError, match="lowest first"):
        parse_level_range("3 bar(g) to 1 bar(g)")
    # More vacuum is less pressure.
    vacuum = parse_level_range("20 inHg vac to 0 bar(g)").low
    assert vacuum is not None
    assert vacuum.pascal == pytest.approx(-67727.77, abs=0.01)


def test_values_are_plain() -> None:
    """What is read can be built in code and compared."""
    assert parse_bounded("1 kg", D.MASS) == Bounded(1.0)
    assert parse_range("up to 1 kg", D.MASS) == Range(None, 1.0)
