"""The procedure file: who does what, in which order, with one vessel and one charge.

What an author writes, and nothing computed from it. Whether it may be done is not decided here.
"""

from __future__ import annotations

from typing import Annotated, Any, Literal

from pydantic import BeforeValidator, Discriminator, Field, Tag
from pydantic_core import PydanticCustomError

from runbook.apparatus.base import FileModel, Name, Text, mapping_or_words
from runbook.procedure.path import (
    CoolTo,
    KeepAt,
    LetDownTo,
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
    date: f.DateField
    written_by: Text
    checked_by: Text
    """Another person than the author."""
    review_by: f.DateField


class Charge(FileModel):
    """How much is sealed in."""

    mass: f.MassField
    loaded_as: Literal["dry ice", "liquid", "gas", "already loaded"]


class Room(FileModel):
    """The room for which the procedure is written."""

    hottest: f.TemperatureField
    coldest: f.TemperatureField
    volume: f.VolumeField
    air_changes: f.AirChangesField
    height: f.HeightField | None = None
    """Above sea level: the barometer's value where nobody has read it."""


class Parked(FileModel):
    """How the vessel is left at rest between two parts of the day."""

    heat: Literal["unplugged", "off"]
    shield: Literal["shut"]
    key_with: Name
    """The role that has the key."""


class Part(FileModel):
    """One part of the day: steps, or the vessel parked."""

    name: Text
    lead: f.TimeField | None = None
    """How long before the lesson it begins."""
    fits: f.TimeField | None = None
    """The time it must fit into."""
    repeatable: bool = False
    parked: Parked | None = None
    steps: tuple[Step, ...] = ()


class Also(FileModel):
    """What the author adds to make safe; its built-in acts stay and come first."""

    do: Text
    who: Name


def _one_vessel(given: Any) -> Any:
    if isinstance(given, list | tuple):
        raise PydanticCustomError(
            "own", "a procedure serves one vessel for now: write the name of one apparatus file, not a list"
        )
    return given


class Procedure(FileModel):
    """One written demonstration. All quantities SI."""

    format: Literal["procedure 1"]
    name: Text
    issue: Issue
    apparatus: Annotated[Text, BeforeValidator(_one_vessel)]
    """The apparatus file, relative to this one."""
    fluid: Text
    charge: Annotated[
        Annotated[Charge, Tag("(mapping)")] | Annotated[Literal["already loaded"], Tag("(words)")],
        Discriminator(mapping_or_words),
    ]
    room: Room
    roles: Annotated[tuple[Name, ...], Field(min_length=1)]
    bring: tuple[Text, ...] = ()
    at_start: dict[Name, Position]
    """Position of every valve, opening and heat source when the procedure begins."""
    parts: Annotated[tuple[Part, ...], Field(min_length=1)]
    make_safe_also: tuple[Also, ...] = ()
