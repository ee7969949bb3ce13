"""The apparatus file: one vessel with its parts, ratings, spaces, valves, relief, heat source and instruments.

Data alone. A rating that is not known is written `not known`: the file loads, and nothing that leans on that
rating is ever within limits. The arithmetic stands in the modules beside this one.
"""

from __future__ import annotations

from typing import Annotated, Final, Literal

from pydantic import AfterValidator, Discriminator, Field, Tag
from pydantic_core import PydanticCustomError

from runbook.apparatus.base import FileModel, Name, Text, UnknownWords, mapping_or_words
from runbook.apparatus.dial import Dial
from runbook.apparatus.parts import HeatSource, Instrument, Relief
from runbook.quantities import Bounded, NotKnown, Range
from runbook.quantities import fields as f

__all__ = [
    "Apparatus",
    "Approved",
    "Body",
    "Component",
    "Cycles",
    "Dial",
    "HeatSource",
    "Instrument",
    "Mawp",
    "Opening",
    "ProofTest",
    "Relief",
    "Valve",
    "Volume",
]

OUTSIDE: Final = "outside"
"""The space that is the room; every apparatus has it, whether it lists it or not."""


def _window(window: Range) -> Range:
    if window.low is None or window.high is None or window.low < 0.0:
        raise PydanticCustomError("own", "a window has two ends above the inside bottom, for example 6 mm to 54 mm")
    return window


def _positive(box: Bounded) -> Bounded:
    if box.low <= 0.0:
        raise PydanticCustomError("own", "this reaches zero, with which nothing can be computed")
    return box


Positive = AfterValidator(_positive)


class Approved(FileModel):
    """Who answers for the figures in the file."""

    by: Text
    role: Text
    date: f.DateField


class Volume(FileModel):
    """What the fluid can fill."""

    free: Annotated[f.VolumeField, Positive]
    """Gauge line included, anything displaced taken off."""
    unheated: f.VolumeField | None = None
    """Of `free`: outside the heated body and out of view."""
    source: Text


class Body(FileModel):
    """The heat side of the vessel."""

    heat_capacity: Annotated[f.HeatCapacityField, Positive]
    from_fluid: Annotated[f.ConductanceField, Positive]
    """Between body and fluid."""
    loss_to_room: Annotated[f.ConductanceField, Positive]


class Mawp(FileModel):
    """Maximum allowable working pressure, at the top of the vessel."""

    rating: f.LevelOrUnknown
    source: Text


class ProofTest(FileModel):
    """The last pressure test."""

    pressure: f.LevelField
    done: f.DateField
    valid_until: f.DateField


class Cycles(FileModel):
    """Pressure cycles of the vessel's life."""

    allowed: f.BareCount
    before_this_log: f.BareCount


class Valve(FileModel):
    """What joins two spaces."""

    tag: Name
    what: Text
    bore: Annotated[f.LengthField, Positive] | None = None
    joins: tuple[Name, Name]
    port: Literal["top", "bottom", "dip tube"]
    """Where it takes from the first of its spaces."""
    let_go: Literal["stays", "opens", "shuts"]
    """What it does when a hand lets go of it."""


class Opening(FileModel):
    """A cap or plug: opening it opens the containment to the room."""

    tag: Name
    what: Text
    space: Name


Material = Literal["sapphire", "steel", "stainless steel", "aluminium", "glass", "acrylic", "polycarbonate"]
"""What bears the pressure, where it matters to a rule."""


class Component(FileModel):
    """A part that bears pressure, cold or heat."""

    tag: Name
    what: Text
    space: Name
    pressure: f.LevelRangeOrUnknown
    """From inside."""
    outside_pressure: f.LevelRangeOrUnknown | None = None
    """From outside, for what may be evacuated; None: not stated."""
    temperature: f.TemperatureRangeOrUnknown
    difference: f.TemperatureDifferenceRangeOrUnknown | None = None
    """Between its faces; None: it has no such limit."""
    material: (
        Literal["sapphire", "steel", "stainless steel", "aluminium", "glass", "acrylic", "polycarbonate"] | None
    ) = None
    source: Text
    """Where its ratings come from: a rating without a source is no rating."""


def _distinct(spaces: tuple[str, ...]) -> tuple[str, ...]:
    if len(set(spaces)) != len(spaces):
        raise PydanticCustomError("own", "a space is named twice")
    if spaces and spaces[0] == OUTSIDE:
        raise PydanticCustomError("own", "the first space is the one that holds the charge")
    return spaces


ProofTestOrUnknown = Annotated[
    Annotated[ProofTest, Tag("(mapping)")] | Annotated[NotKnown, UnknownWords, Tag("(words)")],
    Discriminator(mapping_or_words),
]
CyclesOrUnknown = Annotated[
    Annotated[Cycles, Tag("(mapping)")] | Annotated[NotKnown, UnknownWords, Tag("(words)")],
    Discriminator(mapping_or_words),
]


class Apparatus(FileModel):
    """One vessel. All quantities SI; a pressure is a Level with its reference."""

    format: Literal["apparatus 1"]
    name: Text
    tag: Name
    """Key of charge, margins, readings, valves and limits."""
    owner: Text
    approved: Approved
    volume: Volume
    shape: Literal["lying cylinder", "upright cylinder", "sphere"]
    diameter: Annotated[f.LengthField, Positive]
    """Inside."""
    window: Annotated[f.LengthRangeField, AfterValidator(_window)]
    """Lowest and highest visible height above the inside bottom."""
    body: Body
    mawp: Mawp
    proof_test: ProofTestOrUnknown
    cycles: CyclesOrUnknown
    spaces: Annotated[tuple[Name, ...], Field(min_length=1), AfterValidator(_distinct)]
    """The first holds the charge."""
    valves: tuple[Valve, ...] = ()
    openings: tuple[Opening, ...] = ()
    components: Annotated[tuple[Component, ...], Field(min_length=1)]
    relief: tuple[Relief, ...] = ()
    heat_source: HeatSource | None = None
    instruments: tuple[Instrument, ...] = ()
    logbook: Text | None = None
    """A shared folder of runs, relative to this file."""
