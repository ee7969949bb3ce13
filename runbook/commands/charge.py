"""`runbook charge APPARATUS FLUID`: how much to load into this vessel for the sight one wants, and how.

Judged by the same rules as a procedure, before one is written. What a file would say of the room is assumed and said.
"""

from __future__ import annotations

import argparse
import json
from pathlib import Path
from textwrap import fill
from typing import TYPE_CHECKING, Any

from runbook.commands.arguments import Arguments
from runbook.errors import ExitCode, InputUnusable
from runbook.quantities import Dimension, parse, say

if TYPE_CHECKING:
    from runbook.answers import ChargeBounds
    from runbook.assess.choice.sight import Choice


def main(argv: list[str]) -> int:
    """Say it; returns the exit code: 1 where no charge does it."""
    asked = _parser().parse_args(argv)
    room: dict[str, Any] = {
        "room_hottest": _figure(asked.room_hottest, Dimension.TEMPERATURE),
        "room_coldest": _figure(asked.room_coldest, Dimension.TEMPERATURE),
        "room_volume": _figure(asked.room_volume, Dimension.VOLUME),
        "tolerance": None if asked.tolerance is None else _figure(asked.tolerance, Dimension.MASS),
    }
    mass = None if asked.mass is None else _figure(asked.mass, Dimension.MASS)
    source = None if asked.source_hottest is None else _figure(asked.source_hottest, Dimension.TEMPERATURE)
    tare = None if asked.tare is None else _figure(asked.tare, Dimension.MASS)
    if room["room_hottest"] < room["room_coldest"]:
        raise InputUnusable("the hottest room is colder than the coldest")
    choice = _choice(asked.apparatus, asked.fluid, asked.sight, room)
    bounds = choice.bounds()
    if asked.json:
        print(json.dumps(_as_json(bounds), indent=2, allow_nan=False))
    else:
        _print(choice, bounds, mass, source, tare)
    good = bounds.best_kg is not None and (mass is None or _fits(bounds, mass))
    return int(ExitCode.GOOD if good else ExitCode.NOT_GOOD)


def _parser() -> argparse.ArgumentParser:
    parser = Arguments(prog="runbook charge", description=__doc__)
    parser.add_argument("apparatus", metavar="APPARATUS", help="an apparatus file, or the name of a shipped one")
    parser.add_argument("fluid", metavar="FLUID", help="for example CO2")
    parser.add_argument("--sight", choices=("vanishes", "fills", "dries"), default="vanishes",
                        help="what the class should see (vanishes)")  # fmt: skip
    parser.add_argument("--mass", metavar="M", help="one charge to judge, for example 117g")
    parser.add_argument("--tare", metavar="M", help="what the empty vessel weighs, to say the gross reading")
    parser.add_argument("--tolerance", metavar="M", help="how exactly it can be loaded (four times the scale's error)")
    parser.add_argument("--source-hottest", metavar="T", help="hottest that a source one already has can become")
    parser.add_argument("--room-hottest", metavar="T", default="30degC", help="hottest room (30degC)")
    parser.add_argument("--room-coldest", metavar="T", default="18degC", help="coldest room (18degC)")
    parser.add_argument("--room-volume", metavar="V", default="100m3", help="air that people breathe (100m3)")
    parser.add_argument("--json", action="store_true", help="one document, SI")
    return parser


def _figure(text: str, dimension: Dimension) -> float:
    value = parse(text, dimension)
    if not value > 0.0:
        raise InputUnusable(f"'{text}' is not above zero")
    return value


def _choice(file: str, fluid: str, sight: str, room: dict[str, Any]) -> Choice:
    from runbook.procedure.reader import read_apparatus
    from runbook.procedure.shelf import find_apparatus

    path = find_apparatus(file)
    apparatus = read_apparatus(path)
    # Physics only for a file that reads well.
    from runbook.assess.choice.sight import Choice
    from runbook.assess.choice.standard import Wanted, hottest_target

    target = hottest_target(apparatus, room["room_hottest"])
    return Choice(apparatus, str(Path(path)), Wanted(fluid, warm_to=target, **room), sight)


def _as_json(bounds: ChargeBounds) -> dict[str, object]:
    return {
        "least_kg": bounds.least_kg,
        "best_kg": bounds.best_kg,
        "most_kg": bounds.most_kg,
        "least_reason": bounds.least_reason,
        "best_reason": bounds.best_reason,
        "most_reason": bounds.most_reason,
    }


def _fits(bounds: ChargeBounds, mass: float) -> bool:
    least, most = bounds.least_kg, bounds.most_kg
    return most is not None and mass <= most and (least is None or mass >= least)


def _print(choice: Choice, bounds: ChargeBounds, mass: float | None, source: float | None, tare: float | None) -> None:
    """For the desk: bounds, then how to load and prove the best or the asked charge."""
    wanted, apparatus = choice.wanted, choice.apparatus
    print(f"{choice.fluid.name} in {apparatus.tag}, {apparatus.name}: the surface {_SIGHT_WORDS[choice.sight]}")
    print(
        f"assumed: room {_degC(wanted.room_coldest)} to {_degC(wanted.room_hottest)}, {say(wanted.room_volume, 'm3')}; "
        f"loaded to within {_g(choice.half)}; warmed to {_degC(wanted.warm_to)} at most;"
    )
    print("         air closed in at the worst; heat source stuck on; barometer 1013 hPa ± 5 %")
    print()
    for word in ("least", "best", "most"):
        value, reason = getattr(bounds, f"{word}_kg"), getattr(bounds, f"{word}_reason")
        print(f"  {word:<6}{'none' if value is None else _g(value):>10}   {reason}")
    if mass is not None:
        print(f"  asked {_g(mass):>10}   {_judged(bounds, mass)}")
    chosen = mass if mass is not None else bounds.best_kg
    if chosen is None or chosen <= choice.half:
        return
    print(f"\nwith {_g(chosen)} ± {_g(choice.half)}:")
    # How to load what this vessel does not bear is not said.
    loading = _loading(choice, chosen, tare) if mass is None or _fits(bounds, mass) else []
    for line in (*loading, *_limits(choice, chosen, source), *_law(choice)):
        print(fill(line, 79, initial_indent="  - ", subsequent_indent="    "))


_SIGHT_WORDS = {
    "vanishes": "vanishes inside the window",
    "fills": "rises until liquid fills the vessel",
    "dries": "falls until the last liquid has gone",
}


def _judged(bounds: ChargeBounds, mass: float) -> str:
    if bounds.most_kg is None or mass > bounds.most_kg:
        return "TOO MUCH: " + bounds.most_reason
    if bounds.least_kg is not None and mass < bounds.least_kg:
        return "too little: " + bounds.least_reason
    return "within these bounds"


def _loading(choice: Choice, mass: float, tare: float | None) -> list[str]:
    from runbook.assess.choice.loading import height, ice

    lines = []
    scale = next((i for i in choice.apparatus.instruments if i.reads == "mass"), None)
    if scale is not None:
        gross = "" if tare is None else f", {say(tare + mass, 'kg')} with the vessel"
        lines.append(
            f"close on the falling weight at {_g(mass)} on {scale.tag}{gross}, tared with all its parts; "
            "what sublimes meanwhile is not counted on"
        )
    solid = ice(choice, mass)
    if solid is not None:
        lines.append(
            f"bring {_g(solid.bring)} of solid: {_g(solid.charge)} charge, {_g(solid.cooling)} to cool the body "
            f"unless it is pre-cooled, {_g(solid.handling)} lost on the way (common practice)"
        )
    found = height(choice, mass)
    if found is None:
        lines.append("at room temperature there is no surface whose height could prove it: weigh the closed vessel")
        return lines
    band = f"{found.low * 1e3:.1f} to {found.high * 1e3:.1f} mm"
    where = "" if found.seen else "; NOT all of it inside the window"
    lines.append(
        f"at rest at {_degC(found.temperature)} the surface stands at {found.middle * 1e3:.1f} mm ({band}){where}"
    )
    if found.proves is not None:
        lines.append(f"a reading of that height proves the charge to within {_g(found.proves)}")
    return lines


def _limits(choice: Choice, mass: float, source: float | None) -> list[str]:
    from runbook.assess.choice.loading import most_for_source
    from runbook.assess.hottest_place import hottest_place

    hottest = hottest_place(choice.scene(mass), mass + choice.half)
    lines = []
    if hottest is None:
        lines.append("hottest source and hottest place for it: not known, or never within the models")
    else:
        lines.append(f"no source, and no place it stands in, may be able to become hotter than {_degC(hottest)}")
    if source is not None:
        most = most_for_source(choice, source)
        said = "no charge" if most is None else f"at most {_g(most)}"
        lines.append(f"with a source that can become {_degC(source)}: {said}")
    return lines


def _law(choice: Choice) -> list[str]:
    hazards, name = choice.fluid.data.hazards, choice.fluid.name
    lines = []
    if hazards.release_forbidden:
        lines.append(f"{name} may not be let out to the room: {hazards.release_law}")
    if hazards.flammable:
        lines.append(f"{name} burns: no procedure with it is within limits here")
    return lines


def _g(kilograms: float) -> str:
    return say(kilograms, "g", 1)


def _degC(kelvin: float) -> str:
    return say(kelvin, "degC", 1)
