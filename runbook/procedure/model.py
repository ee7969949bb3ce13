"""The procedure file: who does what, in which order, with one vessel and one charge.

What an author writes, and nothing computed from it. Whether it may be done is not decided here.
"""

from __future__ import annotations

from typing import Annotated, Any, Literal

from pydantic import BeforeValidator, Discriminator, Field, Tag
from pydantic_core import PydanticCustomError

from runbook.apparatus.base import FileModel, Name, Positive, Text, mapping_or_words
from runbook.procedure.path import (
    CoolTo,
    KeepAt,
    LetDownTo,
    LetRiseTo,
    Load,
    Move,
    OpenContainment,
    Park,
    Path,
    Purge,
    Seal,
    WarmTo,
)
from runbook.procedure.reading import ReadStep
from runbook.procedure.steps import (
    DoStep,
    Empty,
    EmptyStep,
    Hold,
    HoldStep,
    Position,
    QuickItem,
    QuickStep,
    See,
    Step,
    StepWarning,
    Witness,
    WitnessStep,
)
from runbook.quantities import fields as f

__all__ = [
    "Also",
    "Charge",
    "CoolTo",
    "DoStep",
    "Empty",
    "EmptyStep",
    "Hold",
    "HoldStep",
    "Issue",
    "KeepAt",
    "LetDownTo",
    "LetRiseTo",
    "Load",
    "Move",
    "OpenContainment",
    "Park",
    "Parked",
    "Part",
    "Path",
    "Procedure",
    "Purge",
    "QuickItem",
    "QuickStep",
    "ReadStep",
    "Room",
    "Seal",
    "See",
    "Step",
    "StepWarning",
    "WarmTo",
    "Witness",
    "WitnessStep",
]


class Issue(FileModel):
    """Which edition of the text this is, and who answers for it."""

    number: f.BareCount
    """Counts up with every change. Example: 3"""
    date: f.DateField
    """When it was issued. Example: 2031-03-02"""
    written_by: Text
    """Who wrote it. Example: R. Amsel"""
    checked_by: Text
    """Another person than the author. Example: T. Okoro"""
    review_by: f.DateField
    """When it has to be looked at again. Example: 2032-03-02"""


class Charge(FileModel):
    """How much is sealed in."""

    mass: Annotated[f.MassField, Positive]
    """What is sealed in, and the most it may be off. Example: 117 g ± 2 g"""
    loaded_as: Literal["dry ice", "liquid", "gas", "already loaded"]
    """How it comes in: dry ice and liquid as cold as they lie in the open; gas as warm as the room, let in under its
    pressure and measured by gauge and thermometer. Example: dry ice"""


class Room(FileModel):
    """The room for which the procedure is written."""

    hottest: f.TemperatureField
    """The hottest the room may become with everybody gone. Example: 30 degC"""
    coldest: f.TemperatureField
    """The coldest it may be. Example: 18 degC"""
    volume: Annotated[f.VolumeField, Positive]
    """Of the air people breathe. Example: 180 m3"""
    air_changes: f.AirChangesField
    """Of the ventilation. Example: 2 per h"""
    height: f.HeightField | None = None
    """Above sea level: gives the barometer where nobody has read it. Example: 120 m"""
    dry_ice: Annotated[f.MassField, Positive] | None = None
    """Dry ice brought for cooling, besides the charge: all of it ends in the room's air. Example: 300 g"""


class Parked(FileModel):
    """How the vessel is left at rest between two parts of the day."""

    heat: Literal["unplugged", "off"]
    """How the source is left. Example: unplugged"""
    shield: Literal["shut"]
    """How the shield is left. Example: shut"""
    key_with: Name
    """The role that has the key. Example: second"""


class Part(FileModel):
    """One part of the day: steps, or the vessel parked."""

    name: Text
    """What people call this part of the day. Example: The lesson"""
    lead: f.TimeField | None = None
    """How long before the lesson it begins. Example: 3 h"""
    fits: f.TimeField | None = None
    """The time it must fit into. Example: 50 min"""
    repeatable: bool = False
    """Whether it may be given again: it begins and ends at rest. Example: true"""
    parked: Parked | None = None
    """The vessel is left at rest: in place of `steps`. Example: {heat: unplugged, shield: shut, key_with: second}"""
    steps: tuple[Step, ...] = ()
    """What is done, in order. Example: [{do: Press tare, who: performer}]"""


class Also(FileModel):
    """What the author adds to make safe; its built-in acts stay and come first."""

    do: Text
    """An act added to make safe; the built-in ones stay and come first. Example: Send the class out by the upper
    door"""
    who: Name
    """The role that does it. Example: teacher"""


def _one_vessel(given: Any) -> Any:
    if isinstance(given, list | tuple):
        raise PydanticCustomError(
            "own", "write the name of one apparatus file, not a list: further vessels stand in it under 'beside'"
        )
    return given


class Procedure(FileModel):
    """One written demonstration. All quantities SI."""

    format: Literal["procedure 1"]
    """What kind of file this is, and which version of its rules. Example: procedure 1"""
    name: Text
    """What the demonstration is called. Example: Carbon dioxide through its critical point"""
    issue: Issue
    """Which edition this is, and who answers for it. Example: {number: 3, date: 2031-03-02, written_by: R. Amsel,
    checked_by: T. Okoro, review_by: 2032-03-02}"""
    apparatus: Annotated[Text, BeforeValidator(_one_vessel)]
    """The apparatus file, relative to this one and in its folder or beneath. Example: apparatus/view-cell-250.yaml"""
    fluid: Text
    """What is in the vessel: R134a, argon, carbon dioxide, nitrogen, sulfur hexafluoride, water, xenon; ethane,
    n-butane and propane, which burn, are known but refused. Example: carbon dioxide"""
    charge: Annotated[
        Annotated[Charge, Tag("(mapping)")] | Annotated[Literal["already loaded"], Tag("(words)")],
        Discriminator(mapping_or_words),
    ]
    """How much is sealed in; or the words `already loaded`. Example: {mass: 117 g ± 2 g, loaded_as: dry ice}"""
    beside: dict[Name, Charge] = Field(default_factory=dict)
    """What is in each vessel beside the first, by its tag; they come loaded. Example: {T14: {mass: 12.5 g ± 0.1 g,
    loaded_as: already loaded}}"""
    room: Room
    """The room it is written for. Example: {hottest: 30 degC, coldest: 18 degC, volume: 180 m3, air_changes: 2 per h,
    height: 120 m}"""
    roles: Annotated[tuple[Name, ...], Field(min_length=1)]
    """Everybody who does or signs something. Example: [performer, second, teacher]"""
    bring: tuple[Text, ...] = ()
    """What has to be there before it begins. Example: [a lamp, cryogenic gloves]"""
    at_start: dict[Name, Position]
    """How every valve, opening and heat source stands when it begins. Example: {V1: open, V2: open, V3: open, H1:
    unplugged}"""
    parts: Annotated[tuple[Part, ...], Field(min_length=1)]
    """The parts of the day, in order. Example: [{name: At rest, parked: {heat: unplugged, shield: shut, key_with:
    second}}]"""
    make_safe_also: tuple[Also, ...] = ()
    """What the author adds to make safe. Example: [{do: Send the class out by the upper door, who: teacher}]"""
