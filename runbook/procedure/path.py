"""What a step does to the charge: one verb, with what that verb needs.

In a file a verb is a mapping whose key is the verb (`{warm_to: 33 degC, by_means_of: H1}`), or the bare word
where it needs nothing (`seal`). The union is dispatched on that key alone, so that one wrong unit gives one
message.
"""

from __future__ import annotations

from typing import Annotated, Any, Final, Literal

from pydantic import BaseModel, Discriminator, Field, Tag, model_validator

from runbook.apparatus.base import FileModel, Name
from runbook.quantities import fields as f

ROOM_TEMPERATURE: Final = "room temperature"


def _room_or_number(given: object) -> str:
    words = isinstance(given, str) and given.strip().casefold() == ROOM_TEMPERATURE
    return "(words)" if words else "(number)"


Aim = Annotated[
    Annotated[Literal["room temperature"], Tag("(words)")] | Annotated[f.TemperatureField, Tag("(number)")],
    Discriminator(_room_or_number),
]
"""A temperature [K], or the room's, whatever that is."""


class Load(FileModel):
    """Put charge in, the vessel open."""

    load: f.MassField


class _Word(FileModel):
    """A verb that needs nothing."""

    @model_validator(mode="before")
    @classmethod
    def _bare(cls, given: Any) -> Any:
        return {} if isinstance(given, str) else given


class Seal(_Word):
    """The last way out is shut: from here the charge moves the pressure by itself."""


class Move(_Word):
    """The vessel is carried."""


class Park(_Word):
    """The vessel is left at rest."""


class OpenContainment(FileModel):
    """A closure of the vessel is opened to the room."""

    open_containment: Name | None = None
    """Tag of the opening; None: any."""

    @model_validator(mode="before")
    @classmethod
    def _bare(cls, given: Any) -> Any:
        return {} if isinstance(given, str) else given


class WarmTo(FileModel):
    """The fluid becomes warmer."""

    warm_to: Aim
    by_means_of: Name
    """Tag of the heat source, or 'room air', or 'water by hand'."""
    set_to: f.TemperatureField | None = None
    """Set point of the source, where it is not the target."""
    rate: f.TemperatureRateRangeField | None = None
    overshoot: f.TemperatureDifferenceField | None = None
    """How far it may pass the target, in the direction of the step only."""


class CoolTo(FileModel):
    """The fluid becomes colder."""

    cool_to: Aim
    by_means_of: Name
    set_to: f.TemperatureField | None = None
    rate: f.TemperatureRateRangeField | None = None
    overshoot: f.TemperatureDifferenceField | None = None


class KeepAt(FileModel):
    """The fluid stays where it is."""

    keep_at: Aim
    by_means_of: Name
    for_: Annotated[f.TimeField, Field(alias="for")]
    overshoot: f.TemperatureDifferenceField | None = None


class LetDownTo(FileModel):
    """Gas leaves through a valve until a pressure is reached. It fixes a pressure, not a temperature."""

    let_down_to: f.LevelField
    through: Name
    pause_above: f.LevelField | None = None
    """Above it the valve is shut again for as long as liquid is seen."""
    until: Literal["no liquid seen", "gauge at zero"] | None = None


class Purge(FileModel):
    """Filled with gas and let down again, to drive the air out."""

    purge: Annotated[int, Field(ge=1, le=10)]
    """How often."""
    up_to: f.LevelField
    down_to: f.LevelField
    through: Name


VERBS: Final = ("load", "seal", "warm_to", "cool_to", "keep_at", "let_down_to", "purge", "open_containment",
                "move", "park")  # fmt: skip
"""Every verb."""
WORDS: Final = ("seal", "open_containment", "move", "park")
"""Verbs that may stand as a bare word."""
_CLASSES: Final = {
    "Load": "load", "Seal": "seal", "WarmTo": "warm_to", "CoolTo": "cool_to", "KeepAt": "keep_at",
    "LetDownTo": "let_down_to", "Purge": "purge", "OpenContainment": "open_containment", "Move": "move",
    "Park": "park",
}  # fmt: skip


def _verb(given: Any) -> str | None:
    """The verb of what was written, as a union tag; None where there is not exactly one."""
    if isinstance(given, BaseModel):
        found = [_CLASSES.get(type(given).__name__, "")]
    elif isinstance(given, str):
        found = [given] if given in WORDS else []
    elif isinstance(given, dict):
        found = [key for key in given if key in VERBS]
        if len(found) == 1 and found[0] in WORDS and found[0] != "open_containment":
            found = []
    else:
        found = []
    return f"({found[0]})" if len(found) == 1 else None


Path = Annotated[
    Annotated[Load, Tag("(load)")]
    | Annotated[Seal, Tag("(seal)")]
    | Annotated[WarmTo, Tag("(warm_to)")]
    | Annotated[CoolTo, Tag("(cool_to)")]
    | Annotated[KeepAt, Tag("(keep_at)")]
    | Annotated[LetDownTo, Tag("(let_down_to)")]
    | Annotated[Purge, Tag("(purge)")]
    | Annotated[OpenContainment, Tag("(open_containment)")]
    | Annotated[Move, Tag("(move)")]
    | Annotated[Park, Tag("(park)")],
    Discriminator(_verb, custom_error_type="verb", custom_error_message="a path has one verb"),
]
"""One of the verbs."""
