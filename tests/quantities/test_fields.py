"""Quantities inside file models: one message a mistake, under the strictest model settings."""

from __future__ import annotations

import datetime
import json
from typing import Annotated, get_args

import pytest
from pydantic import BaseModel, ConfigDict, ValidationError

from runbook.quantities import NOT_KNOWN, Bounded, Level, LevelRange, NotKnown, Range, fields
from runbook.quantities.written import Bare, Written


class Sheet(BaseModel):
    """A model as strict as those of the files."""

    model_config = ConfigDict(strict=True, frozen=True, extra="forbid", allow_inf_nan=False)

    mass: fields.MassField
    height: fields.HeightField = Bounded(0.0)
    temperature: fields.TemperatureRangeOrUnknown = NOT_KNOWN
    pressure: fields.LevelRangeOrUnknown = NOT_KNOWN
    rating: fields.LevelField = Level(0.0, "gauge")
    tolerance: fields.FractionField = 0.0
    manufacturing: fields.FractionRangeField = Range(0.0, 0.0)
    done: fields.DateOrUnknown = NOT_KNOWN
    day: fields.DateField = datetime.date(2031, 3, 2)
    cycles: fields.BareCount = 0
    accuracy: fields.BareNumber = 0.0
    room: fields.BarometerField = 101300.0


def message(**given: object) -> str:
    """The one message of a refused model."""
    with pytest.raises(ValidationError) as caught:
        Sheet.model_validate({"mass": "117 g"} | given)
    errors = caught.value.errors()
    assert [e["type"] for e in errors] == ["quantity"]
    return errors[0]["msg"]


def test_read() -> None:
    """Texts become quantities; the static types are those of the values."""
    sheet = Sheet.model_validate(
        {
            "mass": "117 g ± 2 g",
            "height": "-3 m",
            "temperature": "-80 degC to 80 degC",
            "pressure": "up to 200 bar(g)",
            "rating": "160 bar(g)",
            "tolerance": "5 %",
            "manufacturing": "-4 % to 0 %",
            "done": "2031-02-11",
            "day": datetime.date(2031, 2, 14),
            "cycles": 500,
            "accuracy": 0.6,
            "room": "1008 hPa",
        }
    )
    mass: Bounded = sheet.mass
    pressure: LevelRange | NotKnown = sheet.pressure
    assert mass == Bounded(0.117, 0.002)
    assert pressure == LevelRange(None, Level(200e5, "gauge"))
    assert sheet.temperature == Range(193.14999999999998, 353.15)
    assert sheet.tolerance == pytest.approx(0.05)
    assert (sheet.done, sheet.day) == (datetime.date(2031, 2, 11), datetime.date(2031, 2, 14))
    assert (sheet.cycles, sheet.accuracy) == (500, 0.6)
    assert sheet.room == pytest.approx(100800.0)


def test_not_known() -> None:
    """The words give the singleton where they are taken, and are refused elsewhere."""
    assert Sheet.model_validate({"mass": "117 g", "pressure": "not known"}).pressure is NOT_KNOWN
    assert Sheet.model_validate({"mass": "117 g", "done": "Not known"}).done is NOT_KNOWN
    assert message(mass="not known") == "'not known' is not enough here: write for example 117 g ± 2 g"


@pytest.mark.parametrize(
    ("given", "part"),
    [
        ({"mass": 117}, "'117' has no unit: write for example 117 g"),
        ({"mass": 117.5}, "'117.5' has no unit: write for example 117"),
        ({"mass": True}, "'yes' is no quantity: write for example 117 g"),
        ({"mass": None}, "is empty: write for example 117 g"),
        ({"mass": {"117 g": None}}, "'dict' is no quantity"),
        ({"mass": float("nan")}, "'nan' has no unit"),
        ({"mass": "-1 g"}, "reaches below zero"),
        ({"mass": "1 g ± 2 g"}, "reaches below zero"),
        ({"mass": "1,170 g"}, "1.170 g or 1170 g"),
        ({"pressure": "up to 200 bar"}, "bar(g) or bar(a)"),
        ({"pressure": "unknown"}, "is no range"),
        ({"tolerance": "-5 %"}, "is negative"),
        ({"done": "11.02.2031"}, "is no date: write year-month-day"),
        ({"done": "2031-02-30"}, "a day that does not exist"),
        ({"done": datetime.datetime(2031, 2, 3, tzinfo=datetime.UTC)}, "is no quantity"),
        ({"cycles": 1.5}, "is no count"),
        ({"cycles": "500 g"}, "is no count"),
        ({"cycles": True}, "is no number"),
        ({"accuracy": float("nan")}, "is not a number"),
        ({"accuracy": "1e400"}, "too large to compute with"),
        ({"accuracy": "0.6 %"}, "has a unit: write the bare number"),
        ({"accuracy": -1}, "is negative"),
        ({"room": 1013}, "has no unit: write for example 1013 hPa"),
    ],
)
def test_one_message(given: dict[str, object], part: str) -> None:
    """A mistake gives exactly one message, which says what to write; also where `not known` is taken."""
    assert part in message(**given)


@pytest.mark.parametrize("text", ["{message}", "5 {0}", "{", "5 }{ g", "{wrong}"])
def test_braces_mean_nothing(text: str) -> None:
    """Text of an author is never a template."""
    assert message(mass=text).startswith(f"'{text}'")


def test_built_in_code() -> None:
    """A model takes quantities as they are, so that it can be built and copied in code."""
    sheet = Sheet(mass=Bounded(0.1), pressure=LevelRange(None, Level(1e5, "gauge")), done=NOT_KNOWN)
    assert sheet.mass == Bounded(0.1)
    assert sheet.model_copy() == sheet


FIELDS = {name: alias for name, alias in vars(fields).items() if get_args(alias) and name[0].isupper()}


@pytest.mark.parametrize("name", sorted(FIELDS))
def test_each_field_reads_its_own_example(name: str) -> None:
    """The example of each field, which messages and editors show, is good; `not known` where it says so."""
    marker = get_args(FIELDS[name])[1]
    assert isinstance(marker, (Written, Bare))
    value = marker(marker.example)
    assert value is not NOT_KNOWN
    if isinstance(marker, Written):
        assert marker.makes == () or type(value) in marker.makes
        assert marker.unknown == name.endswith("OrUnknown")
        assert not marker.unknown or marker("not known") is NOT_KNOWN


def test_schema() -> None:
    """An editor sees a text with an example, or a bare number."""
    schema = Sheet.model_json_schema()
    assert schema["properties"]["mass"]["type"] == "string"
    assert schema["properties"]["mass"]["examples"] == ["117 g ± 2 g"]
    assert "not known" in schema["properties"]["pressure"]["examples"]
    assert schema["properties"]["cycles"]["type"] == "integer"
    assert schema["properties"]["accuracy"]["type"] == "number"
    json.dumps(schema)


def test_annotated_is_what_fields_are() -> None:
    """Every public field is an annotation with one marker, so one validator and one message."""
    assert len(FIELDS) > 50
    for alias in FIELDS.values():
        assert type(alias) is type(Annotated[int, 0])
        assert len(get_args(alias)) == 2
