"""The five kinds of a step, each with one key of its own that says which it is.

They are told apart by that key before anything else is looked at, so that one mistake gives one message.
"""

from __future__ import annotations

from typing import Annotated, Any, Final, Literal

from pydantic import BaseModel, Discriminator, Field, Tag

from runbook.apparatus.base import FileModel, Name, Positive, Text
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
    """Signal word of ANSI Z535.6: how bad it can become. Example: WARNING"""
    hazard: Text
    """What can hurt. Example: Dry ice at -79 degC"""
    could: Text
    """What happens if it is ignored. Example: burn the skin in seconds."""
    avoid: Text
    """How to avoid it: nothing the performer has to tick. Example: Wear the cryogenic gloves."""


class See(FileModel):
    """What should be seen: the author's words, or what the program computes and says."""

    words: Text | None = None
    """What should be seen, in the author's words. Example: Air comes out of the open cell."""
    show: tuple[Shown, ...] = ()
    """What the program computes and says itself. Example: [meniscus, haze]"""


class DoStep(FileModel):
    """One act."""

    do: Text
    """One act, as an order, its verb first. Example: Press tare"""
    who: Name = "performer"
    """The role that does it. Example: performer"""
    id: Name | None = None
    """A name that stays when steps are moved. Example: tare"""
    warning: StepWarning | None = None
    """Shown before the step, on the same screen. Example: {word: WARNING, hazard: Dry ice at -79 degC, could: burn the
    skin in seconds., avoid: Wear the cryogenic gloves.}"""
    takes: Annotated[f.TimeField, Positive] | None = None
    """How long the act itself takes, in a lesson all that is said over it; what the charge takes is computed.
    Example: 2 min ± 1 min"""
    path: Path | None = None
    """What the step does to the charge: one verb; left out: nothing. Example: {warm_to: 33 degC, by_means_of: H1}"""
    valves: dict[Name, Position] = Field(default_factory=dict)
    """Positions that the step leaves behind, by tag. Example: {V3: shut}"""
    read: tuple[ReadStep, ...] = ()
    """What is read in it. Example: [{what: pressure, with: PG1, accept: 48 bar(g) to 75 bar(g), if_not: Wait.}]"""
    see: See | None = None
    """What should be seen in it. Example: {words: Air comes out of the open cell.}"""
    if_not: Text | None = None
    """What to do when the sight does not come. Example: Make safe. Touch nothing."""
    raises: tuple[HazardName, ...] = ()
    """Hazards the author adds to those that are computed; none can be taken away. Example: [hot surfaces]"""


class Hold(FileModel):
    """No further without the signature of a role, never of the person who performed."""

    signed_by: Name
    """The role that signs: never one that performed. Example: second"""
    because: Text
    """What the signature is for. Example: pressure cannot tell how much is in the cell"""
    read: ReadStep | None = None
    """A measuring hold: the signer's own reading, taken without sight of the other. Example: {what: liquid height,
    with: HS1, accept: 27 mm to 32 mm, if_not: Make safe.}"""


class HoldStep(FileModel):
    """A hold point: a line of its own between two steps."""

    hold: Hold
    """Nobody goes on before the named role has signed. Example: {signed_by: teacher, because: the class is behind the
    line}"""
    id: Name | None = None
    """A name that stays when steps are moved. Example: class-ready"""


class Witness(FileModel):
    """Somebody is called; after the wait the run goes on."""

    called: Name
    """The role that is called. Example: teacher"""
    because: Text
    """What for. Example: the teacher knows the alarm and the way out"""
    wait: f.TimeField
    """How long before the run goes on without them. Example: 5 min"""


class WitnessStep(FileModel):
    """A witness point: a line of its own between two steps."""

    witness: Witness
    """Somebody is called; after the wait the run goes on without them. Example: {called: teacher, because: the teacher
    knows the alarm, wait: 5 min}"""
    id: Name | None = None
    """A name that stays when steps are moved. Example: alarm-shown"""


class QuickItem(FileModel):
    """One step of a quick sequence: one key, no typing."""

    do: Text
    """One act, one key. Example: Shut V2 at 117 g on the falling scale"""
    path: Path | None = None
    """What it does to the charge: one verb. Example: seal"""
    valves: dict[Name, Position] = Field(default_factory=dict)
    """Positions that it leaves behind, by tag. Example: {V2: shut}"""
    latest: f.TimeField
    """The latest time after the act before it; the first: after entry. Example: 20 min"""
    if_not: Text
    """The act when that time has passed. Example: Open V2."""


class QuickStep(FileModel):
    """A few steps on one screen, judged once, at entry, for all of them."""

    quick: Annotated[tuple[QuickItem, ...], Field(min_length=1)]
    """A few acts on one screen, one key each, judged once, at entry, for all of them. Example: [{do: Shut V2, path:
    seal, valves: {V2: shut}, latest: 20 min, if_not: Begin again.}]"""
    see: See | None = None
    """What should be seen while it lasts. Example: {show: [solid, snow]}"""
    read_after: tuple[ReadStep, ...] = ()
    """What is read when the vessel is at rest again. Example: [{what: mass, with: BS1, accept: 115 g to 119 g, if_not:
    Make safe.}]"""
    warning: StepWarning | None = None
    """Shown before the first act, on the same screen. Example: {word: WARNING, hazard: Dry ice in a closed cell, could:
    bring it to 74 bar(g)., avoid: Keep the shield shut.}"""
    id: Name | None = None
    """A name that stays when steps are moved. Example: close"""


class Empty(FileModel):
    """The instruments and valves of the four proofs that nothing is left."""

    low_gauge: Name
    """Tag of the gauge that shows a rise of 0.1 bar. Example: PG2"""
    isolator: Name | None = None
    """The valve between that gauge and the vessel; left out: the gauge is on the vessel itself. Example: V3"""
    wall: Name
    """Tag of the thermometer on the wall. Example: TT1"""
    vent: Name
    """The valve that stays open afterwards. Example: V2"""


class EmptyStep(FileModel):
    """Show that the vessel is empty."""

    show_empty: Empty
    """The four proofs that nothing is left in the vessel. Example: {low_gauge: PG2, isolator: V3, wall: TT1, vent:
    V2}"""
    id: Name | None = None
    """A name that stays when steps are moved. Example: empty"""


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
