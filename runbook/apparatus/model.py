"""The apparatus file: one vessel with its parts, ratings, spaces, valves, relief, heat source and instruments.

Data alone. A rating that is not known is written `not known`: the file loads, and nothing that leans on that
rating is ever within limits. The arithmetic stands in the modules beside this one.
"""

from __future__ import annotations

from typing import Annotated, Final, Literal

from pydantic import AfterValidator, Discriminator, Field, Tag
from pydantic_core import PydanticCustomError

from runbook.apparatus.base import FileModel, Name, Positive, Text, UnknownWords, mapping_or_words
from runbook.apparatus.dial import Dial
from runbook.apparatus.parts import HeatSource, Instrument, Relief
from runbook.quantities import NotKnown, Range
from runbook.quantities import fields as f

__all__ = [
    "Apparatus",
    "Approved",
    "Bead",
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


class Approved(FileModel):
    """Who answers for the figures in the file."""

    by: Text
    """Who answers for the figures. Example: M. Ferrant"""
    role: Text
    """In which role. Example: pressure equipment officer"""
    date: f.DateField
    """When. Example: 2031-02-14"""


class Volume(FileModel):
    """What the fluid can fill."""

    free: Annotated[f.VolumeField, Positive]
    """What the fluid can fill: gauge line included, anything displaced taken off. Example: 250 mL ± 2 mL"""
    unheated: f.VolumeField | None = None
    """Of `free`: outside the heated body and out of view. Example: 4 mL"""
    source: Text
    """How it was measured. Example: filled with water and weighed"""


class Body(FileModel):
    """The heat side of the vessel."""

    heat_capacity: Annotated[f.HeatCapacityField, Positive]
    """Of the vessel's metal: mass times specific heat capacity. Example: 1.2 kJ/K"""
    from_fluid: Annotated[f.ConductanceField, Positive]
    """Between body and fluid. Example: 5 W/K"""
    loss_to_room: Annotated[f.ConductanceField, Positive]
    """Between body and room, from how fast it cools. Example: 0.5 W/K"""


class Mawp(FileModel):
    """Maximum allowable working pressure, at the top of the vessel."""

    rating: f.LevelOrUnknown
    """Maximum allowable working pressure at the top of the vessel. Example: 160 bar(g)"""
    source: Text
    """Where the rating comes from. Example: drawing VC-2 sheet 3"""


class ProofTest(FileModel):
    """The last pressure test."""

    pressure: f.LevelField
    """At which it was tested. Example: 240 bar(g)"""
    done: f.DateField
    """When. Example: 2031-02-11"""
    valid_until: f.DateField
    """The last day on which it counts. Example: 2033-02-11"""


class Cycles(FileModel):
    """Pressure cycles of the vessel's life."""

    allowed: f.BareCount
    """How often the vessel may be brought to pressure in its life. Example: 500"""
    before_this_log: f.BareCount
    """How often it had been before the logbook began. Example: 36"""


class Valve(FileModel):
    """What joins two spaces."""

    tag: Name
    """As it stands on the valve: letters and a number. Example: V2"""
    what: Text
    """What it is for. Example: let-down valve"""
    bore: Annotated[f.LengthField, Positive] | None = None
    """Narrowest opening when it is fully open. Example: 0.15 mm"""
    joins: tuple[Name, Name]
    """The two spaces it parts; 'outside' is the room. Example: [cell, outside]"""
    port: Literal["top", "bottom", "dip tube"]
    """Where it takes from the first of its spaces. Example: top"""
    let_go: Literal["stays", "opens", "shuts"]
    """What it does when a hand lets go of it. Example: stays"""


class Bead(FileModel):
    """A bead of known density in the vessel, which tells the density of what is around it."""

    tag: Name
    """What people call it. Example: K1"""
    density: Annotated[f.DensityField, Positive]
    """At room temperature, with the most it can be off. Example: 0.45 g/cm3 ± 0.01 g/cm3"""
    colour: Text
    """By which it is told from the others. Example: red"""


class Opening(FileModel):
    """A cap or plug: opening it opens the containment to the room."""

    tag: Name
    """As it stands on the cap or plug. Example: V1"""
    what: Text
    """What it is for. Example: loading cap"""
    space: Name
    """The space it opens to the room. Example: cell"""


Material = Literal["sapphire", "steel", "stainless steel", "aluminium", "glass", "acrylic", "polycarbonate"]
"""What bears the pressure, where it matters to a rule."""


class Component(FileModel):
    """A part that bears pressure, cold or heat."""

    tag: Name
    """As it stands on the drawing. Example: W1"""
    what: Text
    """What it is. Example: two sapphire windows"""
    space: Name
    """The space whose pressure it bears. Example: cell"""
    pressure: f.LevelRangeOrUnknown
    """What it bears from inside, or `not known`. Example: up to 200 bar(g)"""
    outside_pressure: f.LevelRangeOrUnknown | None = None
    """What it bears from outside, for what may be evacuated; left out: not stated. Example: up to 1.1 bar(a)"""
    temperature: f.TemperatureRangeOrUnknown
    """Coldest and hottest it may become, or `not known`. Example: -80 degC to 80 degC"""
    difference: f.TemperatureDifferenceRangeOrUnknown | None = None
    """Between its faces; left out: it has no such limit. Example: up to 110 K"""
    temperature_rate: f.TemperatureRateRangeOrUnknown | None = None
    """Fastest it may become warmer or colder; left out: it has no such limit. Example: up to 3 K/min"""
    pressure_rate: f.PressureRateRangeOrUnknown | None = None
    """Fastest the pressure on it may fall; left out: it has no such limit. Example: up to 20 bar/min"""
    material: (
        Literal["sapphire", "steel", "stainless steel", "aluminium", "glass", "acrylic", "polycarbonate"] | None
    ) = None
    """What bears the pressure, where a rule asks for it. Example: sapphire"""
    source: Text
    """Where its ratings come from: a rating without a source is no rating. Example: maker's sheet"""


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


class Beside(FileModel):
    """A further vessel, sealed for good, in the bath of the first: what is shared stands in the first alone."""

    name: Text
    """What people call it. Example: tube with much in it"""
    tag: Name
    """Of this vessel. Example: T14"""
    volume: Volume
    """What the fluid can fill. Example: {free: 12.0 mL ± 0.1 mL, source: filled with water and weighed}"""
    shape: Literal["lying cylinder", "upright cylinder", "sphere"]
    """How the inside lies. Example: upright cylinder"""
    diameter: Annotated[f.LengthField, Positive]
    """Inside. Example: 14 mm"""
    window: Annotated[f.LengthRangeField, AfterValidator(_window)] | None = None
    """Lowest and highest visible height above the inside bottom. Example: 2 mm to 76 mm"""
    body: Body
    """The heat side of this vessel. Example: {heat_capacity: 60 J/K, from_fluid: 0.5 W/K, loss_to_room: 0.2 W/K}"""
    mawp: Mawp
    """Maximum allowable working pressure. Example: {rating: 70 bar(g), source: drawing}"""
    proof_test: ProofTestOrUnknown
    """The last pressure test, or `not known`. Example: {pressure: 105 bar(g), done: 2031-01-14, valid_until:
    2033-01-13}"""
    cycles: CyclesOrUnknown
    """Pressure cycles of its life, or `not known`. Example: {allowed: 2000, before_this_log: 120}"""
    components: Annotated[tuple[Component, ...], Field(min_length=1)]
    """Every part that bears pressure, cold or heat; `space` is the first vessel's. Example: [{tag: G14, what: quartz
    tube, space: tube, pressure: up to 80 bar(g), temperature: -20 degC to 150 degC, source: proof test}]"""
    instruments: tuple[Instrument, ...] = ()
    """What is read on this vessel alone. Example: [{tag: HS14, reads: liquid height, of: window, dial: 0 mm to 80 mm,
    error: 1 mm, division: 1 mm, read_from: camera, valid_until: 2032-01-19}]"""


class Apparatus(FileModel):
    """One vessel. All quantities SI; a pressure is a Level with its reference."""

    format: Literal["apparatus 1"]
    """What kind of file this is, and which version of its rules. Example: apparatus 1"""
    name: Text
    """What people call the vessel. Example: view cell, 250 mL, two windows"""
    tag: Name
    """Of the vessel: the key of charge, margins, readings, valves and limits. Example: VC-2"""
    owner: Text
    """Whose it is. Example: Teaching Laboratory, Larkfield College"""
    approved: Approved
    """Who answers for all figures of this file. Example: {by: M. Ferrant, role: pressure equipment officer, date:
    2031-02-14}"""
    volume: Volume
    """What the fluid can fill. Example: {free: 250 mL ± 2 mL, source: filled with water and weighed}"""
    shape: Literal["lying cylinder", "upright cylinder", "sphere"]
    """How the inside lies, for the height of the liquid. Example: lying cylinder"""
    diameter: Annotated[f.LengthField, Positive]
    """Inside. Example: 60 mm"""
    window: Annotated[f.LengthRangeField, AfterValidator(_window)] | None = None
    """Lowest and highest visible height above the inside bottom; left out: nothing is seen of the inside.
    Example: 6 mm to 54 mm"""
    body: Body
    """The heat side of the vessel. Example: {heat_capacity: 1.2 kJ/K, from_fluid: 5 W/K, loss_to_room: 0.5 W/K}"""
    mawp: Mawp
    """Maximum allowable working pressure. Example: {rating: 160 bar(g), source: drawing VC-2 sheet 3}"""
    proof_test: ProofTestOrUnknown
    """The last pressure test, or `not known`. Example: {pressure: 240 bar(g), done: 2031-02-11, valid_until:
    2033-02-11}"""
    cycles: CyclesOrUnknown
    """Pressure cycles of the vessel's life, or `not known`. Example: {allowed: 500, before_this_log: 36}"""
    spaces: Annotated[tuple[Name, ...], Field(min_length=1), AfterValidator(_distinct)]
    """What valves part from each other; the first holds the charge, 'outside' is the room. Example: [cell, low gauge
    line, outside]"""
    valves: tuple[Valve, ...] = ()
    """What joins two spaces. Example: [{tag: V2, what: let-down valve, bore: 0.15 mm, joins: [cell, outside], port:
    top, let_go: stays}]"""
    openings: tuple[Opening, ...] = ()
    """Caps and plugs that open to the room. Example: [{tag: V1, what: loading cap, space: cell}]"""
    components: Annotated[tuple[Component, ...], Field(min_length=1)]
    """Every part that bears pressure, cold or heat. Example: [{tag: B1, what: body, space: cell, pressure: up to 250
    bar(g), temperature: -100 degC to 100 degC, source: drawing}]"""
    relief: tuple[Relief, ...] = ()
    """Bursting discs and relief valves; left out: nothing relieves it, and only charge and temperature keep its
    pressure. Example: [{tag: RV2, kind: relief valve, space: cell, opens_at: 9 bar(g),
    tolerance: 3 %, run_below: 90 %, fitted: 2031-02-11, valid_until: 2032-02-11, source: test sheet}]"""
    heat_source: HeatSource | None = None
    """What warms the vessel besides the room; left out: nothing does. Example: {tag: H1, kind: water jacket, power: 60
    W, cut_out: 38 degC ± 1 K, heat_capacity: 2.5 kJ/K, taken_away_in_one_motion: true}"""
    instruments: tuple[Instrument, ...] = ()
    """Everything that is read. Example: [{tag: PG1, reads: pressure, of: cell, dial: 0 bar(g) to 160 bar(g), class:
    0.6, division: 1 bar, read_from: shield, valid_until: 2032-01-31}]"""
    beads: tuple[Bead, ...] = ()
    """Beads in view that tell the density around them; their own volume is taken off the free volume. Example:
    [{tag: K1, density: 0.45 g/cm3 ± 0.01 g/cm3, colour: red}]"""
    beside: tuple[Beside, ...] = ()
    """Further vessels, sealed for good, in the same bath; only of a vessel without valve and opening. Example: [{name:
    tube with much in it, tag: T14, volume: {free: 12.0 mL ± 0.1 mL, source: weighed}, shape: upright cylinder,
    diameter: 14 mm, body: {heat_capacity: 60 J/K, from_fluid: 0.5 W/K, loss_to_room: 0.2 W/K}, mawp: {rating: 70
    bar(g), source: drawing}, proof_test: not known, cycles: not known, components: [{tag: G14, what: quartz tube,
    space: tube, pressure: up to 80 bar(g), temperature: -20 degC to 150 degC, source: proof test}]}]"""
    logbook: Text | None = None
    """A shared folder of runs, relative to this file. Example: ../logbook"""
