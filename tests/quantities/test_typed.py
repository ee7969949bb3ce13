"""What is typed at the bench: nothing is silently changed, and everything is echoed in full."""

from __future__ import annotations

import pytest
from hypothesis import given
from hypothesis import strategies as st

from runbook.errors import QuantityError
from runbook.quantities import Dimension, Level, Typed, parse, reading_from_typed

D = Dimension


@pytest.mark.parametrize(
    ("text", "dial", "dimension", "si", "echo"),
    [
        ("29.5", "degC", D.TEMPERATURE, 302.65, "29.5 °C"),
        ("29,5", "degC", D.TEMPERATURE, 302.65, "29.5 °C"),
        ("-0,5", "degC", D.TEMPERATURE, 272.65, "-0.5 °C"),
        ("0,150", "kg", D.MASS, 0.15, "0.150 kg"),
        ("117.20", "g", D.MASS, 0.1172, "117.20 g"),
        ("1170", "g", D.MASS, 1.17, "1170 g"),
        ("1.170", "kg", D.MASS, 1.17, "1.170 kg"),
        ("0,117 kg", "g", D.MASS, 0.117, "0.117 kg"),
        ("300 K", "degC", D.TEMPERATURE, 300.0, "300 K"),
        (" 28 ", "mm", D.LENGTH, 0.028, "28 mm"),
        ("0.4", "%", D.CONCENTRATION, 0.004, "0.4 %"),
    ],
)
def test_typed(text: str, dial: str, dimension: Dimension, si: float, echo: str) -> None:
    """A bare number takes the dial's unit, one decimal comma is read, and the echo keeps every digit."""
    read = reading_from_typed(text, dial, dimension)
    assert isinstance(read.value, float)
    assert read.value == pytest.approx(si, rel=1e-14)
    assert read.echo == echo


def test_typed_pressure() -> None:
    """A pressure reading is a level: the dial's reference, or the one that was typed."""
    assert reading_from_typed("62,6", "bar(g)", D.PRESSURE) == Typed(
        Level(62.6e5, "gauge"), "62.6 bar(g)", "bar(g)"
    )
    assert reading_from_typed("63 bar(a)", "bar(g)", D.PRESSURE).value == Level(63e5, "absolute")
    assert reading_from_typed("20", "inHg vac", D.PRESSURE).echo == "20 inHg vac"


@pytest.mark.parametrize(
    ("text", "wrong", "mend"),
    [
        ("1,170", "read two ways", "1.170 or 1170"),
        ("62 bar", "does not say gauge or absolute", "bar(g) or bar(a)"),
        ("62 degC", "is a temperature where a pressure is wanted", "bar(g)"),
        ("", "is empty", "in bar(g)"),
        ("abc", "does not begin with a number", "in bar(g)"),
        ("1,170,000", "has a comma", "in bar(g)"),
        ("1,170.5", "has a comma", "in bar(g)"),
        ("6 2", "more than one number", ""),
        ("62 ± 1", "has a ±", "its error is known"),
        ("nan", "is not a number", "in bar(g)"),
        ("1e400", "too large", "exponent"),
        ("-3", "lower than an empty vessel", ""),
        ("6" * 41, "too long", "in bar(g)"),
        ("62..6", "not a plain number", "29.5"),
        ("safe", "does not begin with a number", ""),
    ],
)
def test_typed_refused(text: str, wrong: str, mend: str) -> None:
    """What cannot be understood in one way only is refused with a sentence."""
    with pytest.raises(QuantityError) as caught:
        reading_from_typed(text, "bar(g)", D.PRESSURE)
    assert wrong in caught.value.wrong
    assert mend in caught.value.mend


def test_a_dial_without_reference_is_refused() -> None:
    """A pressure dial whose unit does not say gauge or absolute gives no reading."""
    with pytest.raises(QuantityError, match="say gauge or absolute"):
        reading_from_typed("5", "bar", D.PRESSURE)


@given(st.text(max_size=60))
def test_any_text_is_understood_or_refused(text: str) -> None:
    """Whatever is typed gives a reading whose echo reads back to the same value, or a QuantityError."""
    try:
        read = reading_from_typed(text, "g", D.MASS)
    except QuantityError:
        return
    assert read.value == parse(read.echo, D.MASS)


@given(st.text(alphabet="0123456789.,-+eE xgk", max_size=12))
def test_number_like_text_is_understood_or_refused(text: str) -> None:
    """The same for texts that look like numbers, where a comma never changes the size a thousandfold."""
    try:
        read = reading_from_typed(text, "g", D.MASS)
    except QuantityError:
        return
    assert read.value == parse(read.echo, D.MASS)
    assert "," not in text or text.strip().replace(",", ".").split()[0].startswith(read.echo.split()[0][:2])
