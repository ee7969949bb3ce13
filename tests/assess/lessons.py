"""A lesson's readings from a vessel in which one thing is wrong, by a path of its own.

Nothing here leans on the code that looks for causes: the truth comes first (what is in, how warm the wall is, how
far its thermometer is behind by integrating it), the instruments are drawn within their classes, and the readings
are rounded as a person rounds them.
"""

from __future__ import annotations

from dataclasses import dataclass, replace
from random import Random

from runbook.answers import Past
from runbook.charge.filling import air_pressure
from runbook.charge.geometry import Shape, ShapeKind
from runbook.fluids.substance import Substance, substance

CAUSES = (
    "trapped air",
    "over-filled",
    "under-filled",
    "leak",
    "thermometer lag",
    "thermometer place",
    "gauge offset",
    "gauge/absolute slip",
    "wrong unit",
)
ROOM = 294.15
"""[K]"""
BAROMETER = 101325.0
"""[Pa]"""
STATED = 0.117
"""[kg]"""
PSI = 6894.757293168361
FACTORS = (1e5 / PSI, PSI / 1e5, 100.0, 0.01, 0.1, 10.0, 1e5 / 98066.5, 98066.5 / 1e5)
"""Number read over right number of the mistakes a person makes with psi, kPa, MPa and kgf/cm2 (NIST SP 811) [1]."""


@dataclass(frozen=True)
class Truth:
    """What is so, whether or not anybody knows."""

    volume: float
    """[m3]"""
    charge: float
    """At the first look [kg]."""
    air: float = 0.0
    """[mol]"""
    lost: float = 0.0
    """By the end [kg]."""
    leaks_from: float = 0.0
    """[s]"""
    lag: float = 120.0
    """Time constant of the thermometer [s]."""
    misses: float = 0.0
    """Share of the wall's distance from the room that it does not show [1]."""
    astray: float = 0.0
    """It shows so much too little everywhere [K]."""
    offset: float = 0.0
    """The gauge shows so much too much [Pa]."""
    factor: float = 1.0
    slip: float = 0.0
    """[Pa]"""


@dataclass(frozen=True)
class Moment:
    """When the person looks."""

    at_s: float
    height: bool = False
    weight: bool = False
    pressure: bool = True


BEGINS, ENDS = 600.0, 10800.0
"""Heating begins and the lesson ends [s]."""
HOT = BEGINS + 720.0
"""33 degC is reached at 1 K a minute [s]."""
LESSON = (
    Moment(0.0, height=True, weight=True),
    Moment(BEGINS + 180.0),
    Moment(BEGINS + 360.0),
    Moment(BEGINS + 480.0),
    Moment(HOT),
    Moment(HOT + 600.0),
    Moment(ENDS, height=True, weight=True),
)
AT_REST = (Moment(0.0, height=True),)


def wall(at_s: float) -> float:
    """The wall's temperature [K]: rest, 1 K a minute to 33 degC, there for 10 min, and back at rest."""
    if at_s <= BEGINS:
        return ROOM
    if at_s <= HOT + 700.0:
        return min(ROOM + 12.0, ROOM + (at_s - BEGINS) / 60.0)
    return max(ROOM, ROOM + 12.0 - (at_s - HOT - 700.0) / 240.0)


def shown(truth: Truth, until: float, step: float = 2.0) -> float:
    """What a thermometer of first order shows [K], by small steps from rest."""
    value, at = wall(0.0), 0.0
    while at < until:
        now = min(step, until - at)
        at += now
        value += (wall(at) - value) * (1.0 - 2.718281828459045 ** (-now / max(truth.lag, 1e-3)))
    return value - truth.misses * (value - ROOM) - truth.astray


def pressure_in(fluid: Substance, truth: Truth, at_s: float) -> float:
    """What is in the vessel [Pa]."""
    density = in_it(truth, at_s) / truth.volume
    pressure = fluid.state(wall(at_s), density).pressure
    if truth.air:
        pressure += air_pressure(fluid, wall(at_s), density, truth.air, truth.volume)
    return pressure


def in_it(truth: Truth, at_s: float) -> float:
    """How much is in [kg]."""
    if not truth.lost:
        return truth.charge
    gone = (at_s - truth.leaks_from) / (ENDS - truth.leaks_from)
    return truth.charge - truth.lost * min(1.0, max(0.0, gone))


def height_in(fluid: Substance, truth: Truth, at_s: float) -> float:
    """Of the surface [m]; 60 mm lying cylinder."""
    state = fluid.state(wall(at_s), in_it(truth, at_s) / truth.volume)
    return Shape(ShapeKind.LYING_CYLINDER, 0.06, truth.volume).height(state.liquid or 0.0)


def draw(random: Random, cause: str | None) -> Truth:
    """A truth with that cause at a random size, and a small second error of another kind."""
    truth = Truth(
        volume=250e-6 + random.uniform(-2e-6, 2e-6),
        charge=STATED + random.uniform(-0.00055, 0.00055),
        lag=120.0 * random.uniform(0.8, 1.2),
    )
    other = random.choice([c for c in CAUSES[:7] if c != cause])
    truth = _with(random, truth, other, small=True)
    return truth if cause is None else _with(random, truth, cause, small=False)


def _with(random: Random, truth: Truth, cause: str, small: bool) -> Truth:
    fluid = substance("carbon dioxide")
    sign = random.choice((-1.0, 1.0))
    if cause == "trapped air":
        bar = random.uniform(0.0, 0.3) if small else random.uniform(0.7, 4.0)
        room = (fluid.state(ROOM, truth.charge / truth.volume).vapour or 0.0) * truth.volume
        return replace(truth, air=truth.air + bar * 1e5 * room / (8.314462618 * ROOM))
    if cause in ("over-filled", "under-filled"):
        share = random.uniform(0.0, 0.01) if small else random.uniform(0.03, 0.2)
        way = 1.0 if cause == "over-filled" else -1.0
        return replace(truth, charge=truth.charge * (1.0 + way * share))
    if cause == "leak":
        lost = random.uniform(0.0, 0.001) if small else random.uniform(0.004, 0.025)
        return replace(truth, lost=lost, leaks_from=random.uniform(0.0, 0.7) * ENDS)
    if cause == "thermometer lag":
        return replace(truth, lag=truth.lag + (random.uniform(0.0, 15.0) if small else random.uniform(80.0, 360.0)))
    if cause == "thermometer place":
        if small:
            return replace(truth, misses=sign * random.uniform(0.0, 0.02))
        if random.random() < 0.5:
            return replace(truth, misses=sign * random.uniform(0.1, 0.5))
        return replace(truth, astray=sign * random.uniform(1.0, 5.0))
    if cause == "gauge offset":
        bar = random.uniform(0.0, 0.2) if small else random.uniform(1.0, 6.0)
        return replace(truth, offset=sign * bar * 1e5)
    if cause == "gauge/absolute slip":
        return replace(truth, slip=sign * BAROMETER)
    return replace(truth, factor=random.choice(FACTORS))


def readings(random: Random, truth: Truth, moments: tuple[Moment, ...]) -> tuple[Past, ...]:
    """What is written down: class 0.25 gauge of 160 bar read to 0.1 bar, class A probe, 1 mm, 0.5 g."""
    fluid = substance("carbon dioxide")
    probe = random.uniform(-1.0, 1.0)
    mix = {what: (random.random(), random.uniform(-1.0, 1.0)) for what in ("p", "h", "m")}

    def off(what: str) -> float:
        share, common = mix[what]
        return share * common + (1.0 - share) * random.uniform(-1.0, 1.0)

    found = []
    for one in moments:
        true = shown(truth, one.at_s)
        read = true + probe * (0.15 + 0.002 * abs(true - 273.15))
        found.append(Past("TT1", "temperature", round(read - 273.15, 1) + 273.15, one.at_s))
        if one.pressure:
            gauge = (pressure_in(fluid, truth, one.at_s) - BAROMETER) + truth.offset + 0.4e5 * off("p")
            number = round(gauge / 1e4) * 1e4 * truth.factor + truth.slip
            found.append(Past("PG1", "pressure", number + BAROMETER, one.at_s))
        if one.height:
            height = height_in(fluid, truth, one.at_s) + 0.001 * off("h")
            found.append(Past("HS1", "liquid height", round(height, 3), one.at_s))
        if one.weight:
            found.append(Past("BS1", "mass", round(in_it(truth, one.at_s) + 0.0005 * off("m"), 4), one.at_s))
    return tuple(found)
