"""The five kinds of a step, each with one key of its own that says which it is.

They are told apart by that key before anything else is looked at, so that one mistake gives one message.
"""

from __future__ import annotations

from typing import Annotated, Any, Final, Literal

from pydantic import BaseModel, Discriminator, Field, Tag

from runbook.apparatus.base import FileModel, Name, Text
from runbook.procedure.path import Path
from runbook.procedure.reading import ReadStep
from runbook.quantities import fields as f

Position = Literal["open", "shut", "on", "off", "unplugged"]
"""Of a valve or opening 'open' or 'shut', of a heat source one of the others."""
Shown = Literal[
    "solid", "solid gone", "liquid height", "meniscus", "haze", "rain", "frost", "snow", "beads", "no liquid"
]
"""Sights that can be computed."""
HazardName = Literal[
    "over-pressure",
    "broken containment",
    "cold metal, seal or window",
    "thermal shock",
    "pressure below the room's",
    "gas in the room",
    "forbidden release",
    "hot surfaces",
]
"""The eight hazards by name."""


class StepWarning(FileModel):
    """Shown before its step, on the same screen. Signal words of ANSI Z535.6."""

    word: Literal["DANGER", "WARNING", "CAUTION", "NOTICE"]
    hazard: Text
    could: Text
    """What happens if it is ignored."""
    avoid: Text
    """How to avoid it: nothing the performer has to tick."""


class See(FileModel):
    """What should be seen: the author's words, or what the program computes and says."""

    words: Text | None = None
    show: tuple[Shown, ...] = ()


class DoStep(FileModel):
    """One act."""

    do: Text
    """An imperative sentence."""
    who: Name = "performer"
    id: Name | None = None
    """A name that stays when steps are moved."""
    warning: StepWarning | None = None
    path: Path | None = None
    valves: dict[Name, Position] = Field(default_factory=dict)
    """Positions that the step leaves behind, by tag."""
    read: tuple[ReadStep, ...] = ()
    see: See | None = None
    if_not: Text | None = None
    """What to do when the sight does not come."""
    raises: tuple[HazardName, ...] = ()
    """Hazards the author adds to those that are computed; none can be taken away."""


class Hold(FileModel):
    """No further without the signature of a role, never of the person who performed."""

    signed_by: Name
    because: Text
    read: ReadStep | None = None
    """A measuring hold: the signer's own reading."""


class HoldStep(FileModel):
    """A hold point: a line of its own between two steps."""

    hold: Hold
    id: Name | None = None


class Witness(FileModel):
    """Somebody is called; after the wait the run goes on."""

    called: Name
    because: Text
    wait: f.TimeField


class WitnessStep(FileModel):
    """A witness point: a line of its own between two steps."""

    witness: Witness
    id: Name | None = None


class QuickItem(FileModel):
    """One step of a quick sequence: one key, no typing."""

    do: Text
    path: Path | None = None
    valves: dict[Name, Position] = Field(default_factory=dict)
    latest: f.TimeField
    """After the item before it; the first: after entry."""
    if_not: Text
    """The act when that time has passed."""


class QuickStep(FileModel):
    """A few steps on one screen, judged once, at entry, for all of them."""

    quick: Annotated[tuple[QuickItem, ...], Field(min_length=1)]
    read_after: tuple[ReadStep, ...] = ()
    """Taken when the vessel is at rest again."""
    warning: StepWarning | None = None
    id: Name | None = None


class Empty(FileModel):
    """The instruments and valves of the four proofs that nothing is left."""

    low_gauge: Name
    isolator: Name
    """The valve between that gauge and the vessel."""
    wall: Name
    """A thermometer."""
    vent: Name


class EmptyStep(FileModel):
    """Show that the vessel is empty."""

    show_empty: Empty
    id: Name | None = None


KINDS: Final = ("do", "hold", "witness", "quick", "show_empty")
"""The key that says what a step is."""


def _kind(given: Any) -> str | None:
    """The kind of what was written, as a union tag; None where there is not exactly one."""
    if isinstance(given, BaseModel):
        found = [kind for kind in KINDS if kind in type(given).model_fields]
    elif isinstance(given, dict):
        found = [kind for kind in KINDS if kind in given]
    else:
        found = []
    return f"({found[0]})" if len(found) == 1 else None


Step = Annotated[
    Annotated[DoStep, Tag("(do)")]
    | Annotated[HoldStep, Tag("(hold)")]
    | Annotated[WitnessStep, Tag("(witness)")]
    | Annotated[QuickStep, Tag("(quick)")]
    | Annotated[EmptyStep, Tag("(show_empty)")],
    Discriminator(_kind, custom_error_type="kind", custom_error_message="a step has one kind"),
]
"""One step, of one kind."""
