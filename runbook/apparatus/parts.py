"""Relief devices, the heat source and the instruments of an apparatus file, as written."""

from __future__ import annotations

from collections.abc import Callable
from typing import Any, Final, Literal, Self, TypeVar

from pydantic import Field, ValidationInfo, field_validator, model_validator
from pydantic_core import PydanticCustomError

from runbook.apparatus.base import FileModel, Name, Text
from runbook.apparatus.dial import Dial, Reads, parse_dial, parse_step
from runbook.errors import QuantityError
from runbook.quantities import Bounded, Level
from runbook.quantities import fields as f

T = TypeVar("T")

EN_837_CLASSES: Final = (0.1, 0.25, 0.6, 1.0, 1.6, 2.5, 4.0)
"""Accuracy classes of pressure gauges, % of span: EN 837-1:1996 table 11."""
IEC_60751_CLASSES: Final = ("AA", "A", "B", "C")
"""Tolerance classes of platinum thermometers: IEC 60751."""


class Relief(FileModel):
    """A bursting disc or a relief valve."""

    tag: Name
    """As it stands on its holder. Example: RD1"""
    kind: Literal["bursting disc", "relief valve"]
    """A disc or a valve. Example: bursting disc"""
    space: Name
    """The space it relieves. Example: cell"""
    bursts_at: f.LevelField | None = None
    """Of a disc: rated bursting pressure, gauge. Example: 130 bar(g)"""
    opens_at: f.LevelField | None = None
    """Of a valve: set pressure, gauge. Example: 9 bar(g)"""
    at_temperature: f.TemperatureRangeField | None = None
    """The coincident temperature of the rating; above it the device is not what its tag says. Example: 20 degC to 50
    degC"""
    manufacturing_range: f.FractionRangeField | None = None
    """Of a disc: how far its rating may lie from what was ordered, both ends. Example: -4 % to 0 %"""
    tolerance: f.FractionField
    """Of the opening pressure, half-width. Example: 5 %"""
    run_below: f.FractionField
    """The vessel is run below this share of the lowest opening pressure. Example: 80 %"""
    fitted: f.DateField
    """When. Example: 2031-02-11"""
    valid_until: f.DateOrUnknown
    """The last day on which it counts, or `not known`. Example: 2032-02-11"""
    source: Text
    """Where its figures come from. Example: tag on the holder"""

    @field_validator("bursts_at", "opens_at")
    @classmethod
    def _gauge(cls, level: Level | None) -> Level | None:
        if level is not None and (level.reference != "gauge" or level.pascal <= 0.0):
            raise PydanticCustomError("own", "a relief device opens at a gauge pressure above zero: write bar(g)")
        return level

    @field_validator("run_below")
    @classmethod
    def _share(cls, share: float) -> float:
        if not 0.0 < share <= 1.0:
            raise PydanticCustomError("own", "run_below is a share of the lowest opening, above 0 % up to 100 %")
        return share

    @field_validator("tolerance")
    @classmethod
    def _narrow(cls, share: float) -> float:
        if share >= 1.0:
            raise PydanticCustomError("own", "a tolerance of 100 % or more leaves nothing to open at")
        return share

    @model_validator(mode="after")
    def _of_its_kind(self) -> Self:
        disc = self.kind == "bursting disc"
        if (self.bursts_at is None) == disc or (self.opens_at is None) != disc:
            wanted, other = ("bursts_at", "opens_at") if disc else ("opens_at", "bursts_at")
            raise PydanticCustomError(
                "own",
                "a {kind} has '{wanted}' and no '{other}'",
                {"kind": self.kind, "wanted": wanted, "other": other},
            )
        if not disc and self.manufacturing_range is not None:
            raise PydanticCustomError("own", "a relief valve has no manufacturing range: it is set, not ordered")
        if self.manufacturing_range is not None and self.manufacturing_range.low is None:
            raise PydanticCustomError("own", "a manufacturing range has two ends, for example -4 % to 0 %")
        if self.manufacturing_range is not None and (self.manufacturing_range.low or 0.0) <= -1.0:
            raise PydanticCustomError("own", "a manufacturing range of -100 % leaves nothing to burst at")
        return self


class HeatSource(FileModel):
    """What warms the vessel besides the room."""

    tag: Name
    """As it stands on its plug. Example: H1"""
    kind: Literal["water jacket", "water bath", "heating tape", "heater cartridge", "hot air"]
    """What it is. Example: water jacket"""
    power: f.PowerField
    """The most it gives. Example: 60 W"""
    hottest: f.TemperatureField | None = None
    """Hottest it can become by its nature, such as boiling water. Example: 100 degC"""
    cut_out: f.TemperatureOrUnknown | None = None
    """Independent of its controller, or `not known`; left out: it has none. Example: 38 degC ± 1 K"""
    tested: f.DateField | None = None
    """When the cut-out was last tripped on purpose. Example: 2031-02-12"""
    heat_capacity: f.HeatCapacityField
    """Of the source itself, water included: what it still gives when it is off. Example: 2.5 kJ/K"""
    taken_away_in_one_motion: bool
    """Whether a hand can take it from the vessel at once. Example: true"""


class Instrument(FileModel):
    """What gives a reading."""

    tag: Name
    """As it stands on its face. Example: PG1"""
    reads: Reads
    """What it reads. Example: pressure"""
    of: Name
    """A space for a pressure; else 'wall', 'fluid', 'bath', 'scale', 'window' or 'room air'. Example: cell"""
    dial: Dial
    """First and last mark in the unit that is printed there. Example: 0 bar(g) to 160 bar(g)"""
    klass: float | str | None = Field(default=None, alias="class")
    """EN 837-1 class of a gauge, IEC 60751 class of a thermometer; where it has none, write `error`. Example: 0.6"""
    error: Bounded | None = None
    """Permissible error at any point, half-width; where it has no class. Example: 0.5 g"""
    division: Bounded
    """Smallest printed or shown step. Example: 1 bar"""
    lag: f.TimeField | None = None
    """Time constant: how long until it has followed two thirds of a change. Example: 2 min"""
    read_from: Text
    """Where one stands to read it. Example: shield"""
    valid_until: f.DateOrUnknown
    """Last day of its certificate, or `not known`. Example: 2032-01-31"""

    @field_validator("dial", mode="plain")
    @classmethod
    def _dial(cls, given: Any, info: ValidationInfo) -> Dial:
        if isinstance(given, Dial):
            return given
        return _read(given, info, parse_dial)

    @field_validator("error", "division", mode="plain")
    @classmethod
    def _step(cls, given: Any, info: ValidationInfo) -> Bounded | None:
        if given is None or isinstance(given, Bounded):
            return given
        return _read(given, info, parse_step)

    @field_validator("klass", mode="plain")
    @classmethod
    def _class(cls, given: Any, info: ValidationInfo) -> float | str | None:
        reads = info.data.get("reads")
        if given is None or reads is None:
            return None
        if reads == "pressure":
            if isinstance(given, int | float) and not isinstance(given, bool) and given in EN_837_CLASSES:
                return float(given)
            raise _no_class("a pressure gauge", EN_837_CLASSES)
        if reads == "temperature":
            if given in IEC_60751_CLASSES:
                return str(given)
            raise _no_class("a thermometer", IEC_60751_CLASSES)
        raise PydanticCustomError("own", "only pressure gauges and thermometers have a class: write its error instead")

    @model_validator(mode="after")
    def _one_accuracy(self) -> Self:
        if (self.klass is None) == (self.error is None):
            raise PydanticCustomError("own", "an instrument has either a class or an error, not both")
        return self


def _no_class(what: str, classes: tuple[object, ...]) -> PydanticCustomError:
    return PydanticCustomError(
        "own",
        "the class of {what} is one of {classes}; where it has none, write its error instead",
        {"what": what, "classes": ", ".join(f"{c:g}" if isinstance(c, float) else str(c) for c in classes)},
    )


def _read(given: Any, info: ValidationInfo, parse: Callable[[str, str], T]) -> T:
    """A text whose dimension follows from what the instrument reads."""
    reads = info.data.get("reads")
    try:
        if not isinstance(given, str):
            raise QuantityError(str(given), "has no unit", "write the number with its unit")
        if reads is None:
            # What it reads was refused already; any dimension will do to go on looking for mistakes.
            raise PydanticCustomError("follows", "cannot be judged before 'reads' is mended")
        return parse(given, reads)
    except QuantityError as problem:
        raise PydanticCustomError("quantity", "{message}", {"message": str(problem)}) from None
