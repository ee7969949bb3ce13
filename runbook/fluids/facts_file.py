"""A fluid's data file, read whole or refused whole.

A figure without a source, or without a word on how sure it is, is refused. So is a key that nobody knows: misspelt, a
hazard would be forgotten in silence.
"""

from __future__ import annotations

import tomllib
from collections.abc import Callable, Mapping
from math import isfinite
from typing import Any, Final

from runbook.fluids.facts import BREATHING, RELEASE, SURE, Figure, FluidData, Hazards, SolidData

_SHARE: Final = (0.0, 1.0)
_FIGURES: Final[Mapping[str, tuple[float, float]]] = {
    "equation.max_temperature": (50.0, 5000.0),
    "equation.max_pressure": (1e6, 1e10),
    "equation.saturation_uncertainty": _SHARE,
    "equation.dense_uncertainty": _SHARE,
    "equation.thin_uncertainty": _SHARE,
    "equation.densest_temperature": (10.0, 1000.0),
    "optics.molar_refractivity": (1e-7, 1e-3),
    "optics.correlation_length": (1e-11, 1e-8),
    "optics.compressibility": _SHARE,
    "solid.heat_of_fusion": (1.0, 1e6),
    "solid.density": (10.0, 1e5),
    "solid.heat_capacity": (10.0, 1e5),
    "solid.heat_capacity_slope": (-1e3, 1e3),
    "solid.lowest_temperature": (1.0, 1000.0),
    "solid.sublimation_uncertainty": _SHARE,
    "solid.melting_uncertainty": _SHARE,
    "hazards.exposure_limit": _SHARE,
    "hazards.short_limit": _SHARE,
    "hazards.background": _SHARE,
    "hazards.lower_flammable": _SHARE,
    "hazards.upper_flammable": _SHARE,
    "hazards.softens_above": (1e4, 1e9),
}
"""Every figure there is, above the one and not above the other [SI]: a slip of unit lands outside."""
_WORDS: Final[Mapping[str, frozenset[str]]] = {
    "": frozenset({"name", "aliases", "library_name", "equation", "optics", "solid", "hazards"}),
    "equation": frozenset({"source"}),
    "optics": frozenset(),
    "solid": frozenset({"model"}),
    "hazards": frozenset(
        {"breathing", "flammable", "oxidiser", "cold", "scald", "release", "release_law", "softens"},
    ),
}
"""What is no figure, by table."""
_OF_SOLID: Final[Mapping[str, tuple[str, ...]]] = {
    "Jaeger and Span 2012": ("heat_of_fusion",),
    "IAPWS R10-06": (),
    "constant volume": ("heat_of_fusion", "density", "heat_capacity", "heat_capacity_slope"),
}
"""Figures that each equation of a solid asks for."""

Maybe = Callable[[str], float | None]


def read(text: str, file: str) -> FluidData:
    """The fluid of one data file. Raises ValueError where it is not whole: that is a mistake of this program."""
    try:
        plain = tomllib.loads(text)
        return _fluid(plain, _figures(plain))
    except KeyError as missing:
        raise ValueError(f"{file}: {missing.args[0]} is missing") from missing
    except (AttributeError, TypeError, ValueError) as error:
        raise ValueError(f"{file}: {error}") from error


def _figures(plain: dict[str, Any]) -> dict[str, Figure]:
    _known(plain, "", _WORDS[""])
    found: dict[str, Figure] = {}
    for table, keys in plain.items():
        if not isinstance(keys, dict):
            continue
        figures = {name.partition(".")[2] for name in _FIGURES if name.startswith(table + ".")}
        _known(keys, table, _WORDS[table] | figures)
        found |= {f"{table}.{key}": _figure(f"{table}.{key}", keys[key]) for key in figures & keys.keys()}
    return found


def _known(keys: Mapping[str, Any], table: str, known: frozenset[str] | set[str]) -> None:
    for key in keys:
        if key not in known:
            raise ValueError(f"'{table}.{key}' is no key here".replace("'.", "'"))


def _figure(name: str, plain: Any) -> Figure:
    if not isinstance(plain, dict) or set(plain) != {"value", "source", "sure"}:
        raise ValueError(f"{name} has to be a table of value, source and sure")
    value = plain["value"]
    if isinstance(value, bool) or not isinstance(value, int | float) or not isfinite(value):
        raise ValueError(f"{name}: {value!r} is no number")
    low, high = _FIGURES[name]
    if not low < value <= high:
        raise ValueError(f"{name}: {value:g} does not lie between {low:g} and {high:g}")
    return Figure(float(value), _text(f"source of {name}", plain["source"]), _one_of(plain["sure"], SURE))


def _fluid(plain: dict[str, Any], figures: dict[str, Figure]) -> FluidData:
    def number(key: str) -> float:
        return figures[key].value

    def maybe(key: str) -> float | None:
        return figures[key].value if key in figures else None

    length, compressed = maybe("optics.correlation_length"), maybe("optics.compressibility")
    if (length is None) is not (compressed is None):
        raise ValueError("optics: correlation length and compressibility go together")
    aliases = plain["aliases"]
    if not isinstance(aliases, list):
        raise ValueError("aliases have to be a list")
    return FluidData(
        name=_text("name", plain["name"]),
        aliases=tuple(_text("aliases", alias) for alias in aliases),
        library_name=_text("library_name", plain["library_name"]),
        source=_text("equation.source", plain["equation"]["source"]),
        max_temperature=number("equation.max_temperature"),
        max_pressure=number("equation.max_pressure"),
        saturation_uncertainty=number("equation.saturation_uncertainty"),
        dense_uncertainty=number("equation.dense_uncertainty"),
        thin_uncertainty=number("equation.thin_uncertainty"),
        densest_temperature=maybe("equation.densest_temperature"),
        molar_refractivity=maybe("optics.molar_refractivity"),
        haze=None if length is None or compressed is None else (length, compressed),
        solid=_solid(plain["solid"], number, maybe) if "solid" in plain else None,
        hazards=_hazards(plain["hazards"], maybe),
        figures=tuple(sorted(figures.items())),
    )


def _solid(plain: dict[str, Any], number: Callable[[str], float], maybe: Maybe) -> SolidData:
    model = _one_of(plain["model"], tuple(_OF_SOLID))
    for key in _OF_SOLID["constant volume"]:
        if (key in plain) is not (key in _OF_SOLID[model]):
            raise ValueError(f"solid.{key} is {'not used' if key in plain else 'needed'} by {model}")
    return SolidData(
        model=model,
        heat_of_fusion=maybe("solid.heat_of_fusion"),
        density=maybe("solid.density"),
        heat_capacity=maybe("solid.heat_capacity"),
        heat_capacity_slope=maybe("solid.heat_capacity_slope"),
        lowest_temperature=number("solid.lowest_temperature"),
        sublimation_uncertainty=number("solid.sublimation_uncertainty"),
        melting_uncertainty=number("solid.melting_uncertainty"),
    )


def _hazards(plain: dict[str, Any], maybe: Maybe) -> Hazards:
    forbidden = _one_of(plain["release"], RELEASE) == "forbidden"
    if forbidden is not ("release_law" in plain):
        raise ValueError("hazards: a forbidden release has its law, and no other has one")
    flammable = _truth("flammable", plain["flammable"])
    if {flammable} != {key in plain for key in ("lower_flammable", "upper_flammable")}:
        raise ValueError("hazards: what burns has both its limits, and nothing else has them")
    if ("softens" in plain) is not ("softens_above" in plain):
        raise ValueError("hazards: what softens a material does so above a pressure")
    breathing = _one_of(plain["breathing"], BREATHING)
    if breathing == "harmless" and "exposure_limit" in plain:
        raise ValueError("hazards: what has an exposure limit is not harmless")
    for lower, upper in (("exposure_limit", "short_limit"), ("lower_flammable", "upper_flammable")):
        least, most = maybe(f"hazards.{lower}"), maybe(f"hazards.{upper}")
        if most is not None and (least is None or most < least):
            raise ValueError(f"hazards.{upper} is less than {lower}, or stands without it")
    return Hazards(
        breathing=breathing,
        exposure_limit=maybe("hazards.exposure_limit"),
        short_limit=maybe("hazards.short_limit"),
        background=maybe("hazards.background") or 0.0,
        flammable=flammable,
        lower_flammable=maybe("hazards.lower_flammable"),
        upper_flammable=maybe("hazards.upper_flammable"),
        oxidiser=_truth("oxidiser", plain["oxidiser"]),
        cold=_truth("cold", plain["cold"]),
        scald=_truth("scald", plain["scald"]),
        release_forbidden=forbidden,
        release_law=_text("hazards.release_law", plain["release_law"]) if forbidden else "",
        softens=tuple(_text("hazards.softens", one) for one in plain.get("softens", ())),
        softens_above=maybe("hazards.softens_above"),
    )


def _text(name: str, value: object) -> str:
    if not isinstance(value, str) or not value.strip():
        raise ValueError(f"{name} has to be a text")
    return value


def _one_of(word: object, known: tuple[str, ...]) -> str:
    if not isinstance(word, str) or word not in known:
        raise ValueError(f"'{word}' is none of {', '.join(known)}")
    return word


def _truth(name: str, value: object) -> bool:
    if not isinstance(value, bool):
        raise ValueError(f"hazards.{name}: {value!r} is neither true nor false")
    return value
