"""The causes that are looked for, each with the sizes it may have and why those.

A size is spread evenly in its logarithm between its ends, because its order of magnitude is what is not known
beforehand. The lower end is where a fault no longer matters beside what instruments are allowed; the upper where
somebody would have seen it without figures. All ends are common practice.
"""

from __future__ import annotations

from collections.abc import Callable, Sequence
from dataclasses import dataclass
from math import exp, log
from typing import Final

from runbook.assess.evidence.forecast import BEFORE, NONE, Fault, wall_temperature
from runbook.assess.evidence.given import Given
from runbook.assess.evidence.looks import Look

AIR: Final = (0.3e5, 6e5)
"""What trapped air adds at rest [Pa]. A cell closed over dry ice keeps about 1.2 bar; one filled from a cylinder
without a purge as much as the air it held, compressed into what the liquid leaves: up to some 6 bar."""
FILL: Final = (0.015, 1.0)
"""Charge over the stated one [1]: twice as much is a cell packed with powder where half was meant."""
EMPTY: Final = (0.015, 0.9)
"""Charge under the stated one [1]: nine tenths missing is a cell that shows no liquid."""
LEAK: Final = (0.01, 0.9)
"""Lost, as a share of the stated charge [1]: a smaller loss is a tenth of a millimetre of liquid."""
LAG: Final = (20.0, 900.0)
"""Time constant beyond the stated one [s]: from a thermometer wiped dry of its paste to one hung in the air."""
PLACE: Final = (0.03, 0.8)
"""Missed share of the wall's distance from the room [1]: a strap that has slipped, to a probe in the air. Where the
probe sits at the source, or a part of the wall is colder, it shows too much instead of too little."""
ASTRAY: Final = (0.5, 8.0)
"""How far a thermometer is from the wall's temperature wherever that is [K]: a wrong sensor or cable, or a place that
the source or a draught keeps warmer or colder. Below it is within its class."""
OFFSET: Final = (1.0, 25.0)
"""Gauge offset from its own permissible error up to so many times it [1]: beyond, it is not at zero when open."""
NODES: Final = 14
"""Sizes computed between the ends; forecasts are straight between neighbours."""
ONSETS: Final = (BEFORE, 0.0, 1.0 / 3.0, 2.0 / 3.0)
"""When a leak may have begun: before the first look, or as shares of the time since [1]."""
WRONG_UNITS: Final = (
    ("psi read as bar", 1e5 / 6894.757293168361),
    ("bar read as psi", 6894.757293168361 / 1e5),
    ("kPa read as bar", 100.0),
    ("bar read as kPa", 0.01),
    ("MPa read as bar", 0.1),
    ("bar read as MPa", 10.0),
    ("kgf/cm2 read as bar", 1e5 / 98066.5),
    ("bar read as kgf/cm2", 98066.5 / 1e5),
)
"""What the number read is over the right one [1]; factors as in NIST SP 811."""


@dataclass(frozen=True, slots=True)
class Node:
    """One size of one cause."""

    size: float
    """As Explanation.size."""
    fault: Fault
    detail: str = ""


@dataclass(frozen=True, slots=True)
class Track:
    """Neighbouring sizes of one cause, evenly spread in belief from the first to the last."""

    nodes: tuple[Node, ...]
    """One node is a size that is known."""
    weight: float
    """Share of the cause's belief [1]."""


@dataclass(frozen=True, slots=True)
class Cause:
    """One cause with all its sizes."""

    name: str
    unit: str
    tracks: tuple[Track, ...]
    """Their weights sum to 1."""


def causes(given: Given, looks: Sequence[Look], air_at_rest: float) -> tuple[Cause, ...]:
    """Every cause that bears on these readings; air_at_rest: moles that add 1 Pa at the first look [mol/Pa]."""
    heated = max((look.temperature - given.room for look in looks), key=abs, default=0.0)
    fastest = max((look.rate for look in looks), key=abs, default=0.0)
    found = [
        Cause("none", "", (Track((Node(0.0, NONE),), 1.0),)),
        _one("trapped air", "Pa", AIR, lambda x: Node(x, Fault(air=x * air_at_rest))),
        _one("over-filled", "kg", FILL, lambda x: Node(x * given.charge, Fault(fill=x)), nodes=2 * NODES),
        _one("under-filled", "kg", EMPTY, lambda x: Node(-x * given.charge, Fault(fill=-x)), nodes=2 * NODES),
        _leak(given, looks),
        _one("thermometer lag", "K", LAG, lambda x: Node(x * fastest, Fault(lag=x))),
        Cause(
            "thermometer place",
            "K",
            (
                Track(_sizes(PLACE, lambda x: Node(x * heated, Fault(place=x))), 0.25),
                Track(_sizes(PLACE, lambda x: Node(-x * heated, Fault(place=-x))), 0.25),
                Track(_sizes(ASTRAY, lambda x: Node(x, Fault(probe=x))), 0.25),
                Track(_sizes(ASTRAY, lambda x: Node(-x, Fault(probe=-x))), 0.25),
            ),
        ),
    ]
    if given.gauge is not None:
        found += _of_gauge(given, given.gauge.error)
    return tuple(found)


def moles_per_pascal(given: Given, look: Look) -> float:
    """Trapped air that adds 1 Pa at a look [mol/Pa]; 0 where it has no room."""
    wall = wall_temperature(given, look, NONE)
    added = given.air_per_mole(wall, given.charge / given.volume)
    return 1.0 / added if added > 0.0 else 0.0


def _of_gauge(given: Given, error: float) -> list[Cause]:
    ends = OFFSET[0] * error, OFFSET[1] * error
    slip = given.barometer
    units = [_known(Node(factor, Fault(factor=factor), name), len(WRONG_UNITS)) for name, factor in WRONG_UNITS]
    return [
        Cause(
            "gauge offset",
            "Pa",
            (
                Track(_sizes(ends, lambda x: Node(x, Fault(offset=x))), 0.5),
                Track(_sizes(ends, lambda x: Node(-x, Fault(offset=-x))), 0.5),
            ),
        ),
        Cause(
            "gauge/absolute slip",
            "Pa",
            (_known(Node(slip, Fault(offset=slip)), 2), _known(Node(-slip, Fault(offset=-slip)), 2)),
        ),
        Cause("wrong unit", "1", tuple(units)),
    ]


def _leak(given: Given, looks: Sequence[Look]) -> Cause:
    onsets = ONSETS if len(looks) > 1 and looks[-1].at_s > looks[0].at_s else ONSETS[:1]
    tracks = []
    for onset in onsets:
        nodes = _sizes(
            LEAK,
            lambda x, onset=onset: Node(x * given.charge, Fault(leak=x * given.charge, leak_from=onset)),  # type: ignore[misc] # the default binds the onset
            2 * NODES,
        )
        tracks.append(Track(nodes, 1.0 / len(onsets)))
    return Cause("leak", "kg", tuple(tracks))


def _one(name: str, unit: str, ends: tuple[float, float], node: Callable[[float], Node], nodes: int = NODES) -> Cause:
    return Cause(name, unit, (Track(_sizes(ends, node, nodes), 1.0),))


def _known(node: Node, among: int) -> Track:
    return Track((node,), 1.0 / among)


def _sizes(ends: tuple[float, float], node: Callable[[float], Node], nodes: int = NODES) -> tuple[Node, ...]:
    low, high = log(ends[0]), log(ends[1])
    return tuple(node(exp(low + (high - low) * k / (nodes - 1))) for k in range(nodes))
