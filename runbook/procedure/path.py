"""What a step does to the charge: one verb, with what that verb needs.

In a file a verb is a mapping whose key is the verb (`{warm_to: 33 degC, by_means_of: H1}`), or the bare word
where it needs nothing (`seal`). The union is dispatched on that key alone, so that one wrong unit gives one
message.
"""

from __future__ import annotations

from typing import Annotated, Any, Final, Literal

from pydantic import BaseModel, Discriminator, Field, Tag, model_validator

from runbook.apparatus.base import FileModel, Name, Positive
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

    load: Annotated[f.MassField, Positive]
    """Put charge in, the vessel open: what the scale may show. Example: 140 g ± 10 g"""


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
    """A closure is opened to the room: tag of the opening; left out: any. A valve, also to let air in, is opened by
    `valves` alone. Example: V1"""

    @model_validator(mode="before")
    @classmethod
    def _bare(cls, given: Any) -> Any:
        return {} if isinstance(given, str) else given


class WarmTo(FileModel):
    """The fluid becomes warmer."""

    warm_to: Aim
    """The fluid becomes warmer: to a temperature, or to `room temperature`; in the open by a source only what boils
    above the room's temperature, such as water. Example: 33 degC"""
    by_means_of: Name
    """Tag of the heat source, or `room air`, `lukewarm water`, `cold water`. Example: H1"""
    set_to: f.TemperatureField | None = None
    """Set point of the source, where it is not the target. Example: 34 degC"""
    rate: f.TemperatureRateRangeField | None = None
    """How fast it may go. Example: up to 1 K/min"""
    overshoot: f.TemperatureDifferenceField | None = None
    """How far it may pass the target. Example: 2 K"""


class CoolTo(FileModel):
    """The fluid becomes colder."""

    cool_to: Aim
    """The fluid becomes colder: to a temperature, or to `room temperature`. Example: 28 degC"""
    by_means_of: Name
    """Tag of the heat source, or `room air`, `lukewarm water`, `cold water`. Example: room air"""
    set_to: f.TemperatureField | None = None
    """Where a jacket or bath cools: temperature of the water that is let into it. Example: 25 degC"""
    rate: f.TemperatureRateRangeField | None = None
    """How fast it may go. Example: up to 2 K/min"""
    overshoot: f.TemperatureDifferenceField | None = None
    """How far it may pass the target, downwards. Example: 1 K"""


class KeepAt(FileModel):
    """The fluid stays where it is."""

    keep_at: Aim
    """The fluid stays where it is: at a temperature, or at `room temperature`. Example: 33 degC"""
    by_means_of: Name
    """Tag of the heat source, or `room air`, `lukewarm water`, `cold water`. Example: H1"""
    for_: Annotated[f.TimeField, Field(alias="for")]
    """For how long. Example: 10 min"""
    overshoot: f.TemperatureDifferenceField | None = None
    """How far it may leave it. Example: 0.5 K"""


class LetDownTo(FileModel):
    """Gas leaves through a valve until a pressure is reached. It fixes a pressure, not a temperature."""

    let_down_to: f.LevelField
    """Gas leaves until this pressure is reached; it fixes a pressure, not a temperature. To stop above the room's
    pressure write a quick sequence: open the valve, shut it with `path: seal` at the level. Example: 0 bar(g)"""
    through: Name
    """Tag of the valve. Example: V2"""
    pause_above: f.LevelField | None = None
    """Above it the valve is shut again for as long as liquid is seen. Example: 20 bar(g)"""
    until: Literal["no liquid seen", "gauge at zero"] | None = None
    """What ends it besides the pressure. Example: no liquid seen"""


class LetRiseTo(FileModel):
    """A vent that springs open is held shut by hand while the closed charge warms by itself; then it is let go."""

    let_rise_to: f.LevelField
    """A vent that springs open is held shut by hand until the gauge shows this, at the most. Example: 4.6 bar(g)"""
    read_on: Name
    """Tag of the gauge, on the vessel itself. Example: PG1"""
    let_go_within: f.TimeField
    """How long after that the hand lets go, at the most. Example: 3 s"""
    until: Literal["liquid seen", "solid gone"] | None = None
    """What ends it before: a sight. Example: solid gone"""


class Purge(FileModel):
    """Filled with gas and let down again, to drive the air out."""

    purge: Annotated[int, Field(ge=1, le=10)]
    """Filled with gas and let down again to drive the air out: how often. Example: 3"""
    up_to: f.LevelField
    """To which pressure it is filled. Example: 5 bar(a)"""
    down_to: f.LevelField
    """To which it is let down. Example: 1 bar(a)"""
    through: Name
    """Tag of the valve. Example: V2"""


VERBS: Final = ("load", "seal", "warm_to", "cool_to", "keep_at", "let_down_to", "let_rise_to", "purge",
                "open_containment", "move", "park")  # fmt: skip
"""Every verb."""
WORDS: Final = ("seal", "open_containment", "move", "park")
"""Verbs that may stand as a bare word."""
_CLASSES: Final = {
    "Load": "load", "Seal": "seal", "WarmTo": "warm_to", "CoolTo": "cool_to", "KeepAt": "keep_at",
    "LetDownTo": "let_down_to", "LetRiseTo": "let_rise_to", "Purge": "purge",
    "OpenContainment": "open_containment", "Move": "move", "Park": "park",
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
    | Annotated[LetRiseTo, Tag("(let_rise_to)")]
    | Annotated[Purge, Tag("(purge)")]
    | Annotated[OpenContainment, Tag("(open_containment)")]
    | Annotated[Move, Tag("(move)")]
    | Annotated[Park, Tag("(park)")],
    Discriminator(_verb, custom_error_type="verb", custom_error_message="a path has one verb"),
]
"""One of the verbs."""
