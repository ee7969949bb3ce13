"""The fluids this program knows, each from one data file: names, validity, how far to trust it, hazards.

A new fluid is one file in `data/`; nothing elsewhere asks for a fluid by name. A figure without a source, or
without a word on how sure it is, is refused when the file is read.
"""

from __future__ import annotations

import tomllib
from dataclasses import dataclass
from functools import cache
from importlib.resources import files
from typing import Any, Final

from runbook.errors import InputUnusable

SURE: Final = ("published", "handbook", "computed", "from memory")
"""How sure a figure is: read in its publication, in a handbook, worked out here, or remembered and to be confirmed."""
SOLIDS: Final = ("Jaeger and Span 2012", "IAPWS R10-06", "constant volume")
"""Equations of solids."""
BREATHING: Final = ("poison", "asphyxiant", "harmless")
"""What the gas does to whoever breathes it."""
RELEASE: Final = ("to the room", "forbidden")
"""Where it may be let out."""


@dataclass(frozen=True, slots=True)
class Figure:
    """A number with where it comes from."""

    value: float
    source: str
    sure: str
    """One of SURE."""


@dataclass(frozen=True, slots=True)
class SolidData:
    """What continues a fluid below its triple point."""

    model: str
    """One of SOLIDS."""
    heat_of_fusion: float | None
    """At the triple point [J/mol]; None: the two equations' own difference."""
    density: float | None
    """Of the constant-volume solid [kg/m3]."""
    heat_capacity: float | None
    """Of the constant-volume solid at the triple point [J/kg/K]."""
    heat_capacity_slope: float | None
    """[J/kg/K2]"""
    lowest_temperature: float
    """Below it nothing is computed [K]."""
    sublimation_uncertainty: float
    """Of the sublimation pressure, relative [1]."""
    melting_uncertainty: float
    """Of the melting pressure, relative [1]."""


@dataclass(frozen=True, slots=True)
class Hazards:
    """What the fluid does to people and to the law."""

    breathing: str
    """One of BREATHING."""
    exposure_limit: float | None
    """Long-term limit in air, volume fraction [1]; None: nobody stated one, or it is harmless."""
    short_limit: float | None
    """Over 15 min, volume fraction [1]."""
    background: float
    """In clean air, volume fraction [1]."""
    flammable: bool
    lower_flammable: float | None
    """Volume fraction in air [1]."""
    oxidiser: bool
    cold: bool
    """Letting it down can burn by cold."""
    scald: bool
    release_forbidden: bool
    """It may not be let out to the room."""
    release_law: str
    """Which law says so; empty where none does."""


@dataclass(frozen=True, slots=True)
class FluidData:
    """What has to be known of a fluid besides its equation of state."""

    name: str
    """Canonical name, as it is printed and written in records."""
    aliases: tuple[str, ...]
    """Other spellings accepted; compared without regard to case."""
    library_name: str
    """What the property library calls it."""
    source: str
    """Publication of the equation of state."""
    max_temperature: float
    """Upper end of the equation's validity [K]; the library accepts more, in silence."""
    max_pressure: float
    """Upper end of the equation's validity [Pa]."""
    saturation_uncertainty: float
    """Of the saturation pressure, relative [1]; a bound."""
    dense_uncertainty: float
    """Of the density where the vessel is filled by one dense phase, relative [1]; a bound."""
    thin_uncertainty: float
    """Of the density of vapour and gas below critical density, relative [1]."""
    densest_temperature: float | None
    """Below it liquid grows on cooling, so that a full vessel bursts [K]; None: it never does."""
    molar_refractivity: float | None
    """Lorentz-Lorenz, 589 nm [m3/mol]; None: not known."""
    haze: tuple[float, float] | None
    """Amplitudes near the critical point: correlation length [m], compressibility [1]; None: not known."""
    solid: SolidData | None
    """None: below its triple point it is refused."""
    hazards: Hazards
    figures: tuple[tuple[str, Figure], ...]
    """Every figure of the file with its source, by 'table.key'."""


@cache
def fluids() -> tuple[FluidData, ...]:
    """Every fluid, by name."""
    folder = files("runbook.fluids").joinpath("data")
    found = [read(f.read_text(encoding="utf-8"), f.name) for f in folder.iterdir() if f.name.endswith(".toml")]
    return tuple(sorted(found, key=lambda fluid: fluid.name))


def find(name: str) -> FluidData:
    """The fluid of that name or alias.

    Raises InputUnusable, naming the known fluids.
    """
    wanted = name.strip().casefold()
    for fluid in fluids():
        if wanted == fluid.name.casefold() or wanted in (alias.casefold() for alias in fluid.aliases):
            return fluid
    known = ", ".join(fluid.name for fluid in fluids())
    raise InputUnusable(f"no fluid is known as '{name}': write one of {known}")


def read(text: str, file: str) -> FluidData:
    """The fluid of one data file. Raises ValueError where it is not whole: that is a mistake of this program."""
    try:
        plain = tomllib.loads(text)
        figures = {f"{t}.{k}": _figure(v) for t, keys in plain.items() if isinstance(keys, dict)
                   for k, v in keys.items() if isinstance(v, dict)}  # fmt: skip
        return _fluid(plain, figures)
    except (KeyError, TypeError, ValueError) as error:
        raise ValueError(f"{file}: {error}") from error


def _fluid(plain: dict[str, Any], figures: dict[str, Figure]) -> FluidData:
    def number(key: str) -> float:
        return figures[key].value

    def maybe(key: str) -> float | None:
        return figures[key].value if key in figures else None

    length, compressed = maybe("optics.correlation_length"), maybe("optics.compressibility")
    return FluidData(
        name=plain["name"],
        aliases=tuple(plain["aliases"]),
        library_name=plain["library_name"],
        source=plain["equation"]["source"],
        max_temperature=number("equation.max_temperature"),
        max_pressure=number("equation.max_pressure"),
        saturation_uncertainty=number("equation.saturation_uncertainty"),
        dense_uncertainty=number("equation.dense_uncertainty"),
        thin_uncertainty=number("equation.thin_uncertainty"),
        densest_temperature=maybe("equation.densest_temperature"),
        molar_refractivity=maybe("optics.molar_refractivity"),
        haze=None if length is None or compressed is None else (length, compressed),
        solid=None if "solid" not in plain else SolidData(
            model=_one_of(plain["solid"]["model"], SOLIDS),
            heat_of_fusion=maybe("solid.heat_of_fusion"),
            density=maybe("solid.density"),
            heat_capacity=maybe("solid.heat_capacity"),
            heat_capacity_slope=maybe("solid.heat_capacity_slope"),
            lowest_temperature=number("solid.lowest_temperature"),
            sublimation_uncertainty=number("solid.sublimation_uncertainty"),
            melting_uncertainty=number("solid.melting_uncertainty"),
        ),
        hazards=_hazards(plain["hazards"], maybe),
        figures=tuple(figures.items()),
    )  # fmt: skip


def _hazards(plain: dict[str, Any], maybe: Any) -> Hazards:
    forbidden = _one_of(plain["release"], RELEASE) == "forbidden"
    return Hazards(
        breathing=_one_of(plain["breathing"], BREATHING),
        exposure_limit=maybe("hazards.exposure_limit"),
        short_limit=maybe("hazards.short_limit"),
        background=maybe("hazards.background") or 0.0,
        flammable=_truth(plain["flammable"]),
        lower_flammable=maybe("hazards.lower_flammable"),
        oxidiser=_truth(plain["oxidiser"]),
        cold=_truth(plain["cold"]),
        scald=_truth(plain["scald"]),
        release_forbidden=forbidden,
        release_law=plain["release_law"] if forbidden else "",
    )


def _figure(plain: dict[str, Any]) -> Figure:
    if not plain["source"].strip():
        raise ValueError("a figure without a source is no figure")
    return Figure(float(plain["value"]), plain["source"], _one_of(plain["sure"], SURE))


def _one_of(word: str, known: tuple[str, ...]) -> str:
    if word not in known:
        raise ValueError(f"'{word}' is none of {', '.join(known)}")
    return word


def _truth(value: object) -> bool:
    if not isinstance(value, bool):
        raise ValueError(f"{value!r} is neither true nor false")
    return value
