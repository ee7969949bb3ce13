"""`runbook state`: a fluid sealed at one density and temperature, and where its path bends.

The answer is on stdout, in SI with --json; what is wrong is a sentence on stderr. The property library is
imported only when there is something to compute.
"""

from __future__ import annotations

import argparse
import json
import sys
from typing import TYPE_CHECKING, NoReturn

from runbook.errors import ExitCode, InputUnusable, RunbookError
from runbook.quantities import Dimension, parse

if TYPE_CHECKING:
    from runbook.fluids.substance import Landmarks, State


class _Parser(argparse.ArgumentParser):
    """Errors become one of ours: one sentence, no usage text before it."""

    def error(self, message: str) -> NoReturn:
        raise InputUnusable(f"{self.prog}: {message}")


def main(argv: list[str]) -> int:
    """Runs the command on its own arguments; returns the exit code."""
    try:
        asked = _parser().parse_args(_joined(argv))
        temperature = parse(asked.temperature, Dimension.TEMPERATURE)
        density = _density(asked.density, asked.mass, asked.volume)
        if not temperature > 0.0:
            raise InputUnusable(f"a temperature of {temperature:.6g} K is below absolute zero")
        name, state, landmarks = _compute(asked.fluid, temperature, density)
    except RunbookError as error:
        print(
            f"runbook state: {error}".replace("runbook state: runbook state:", "runbook state:"),
            file=sys.stderr,
        )
        # Beyond the models is an input that cannot be used here: there is no answer to judge.
        return int(ExitCode.FAILED if error.exit_code is ExitCode.FAILED else ExitCode.UNUSABLE)
    print(json.dumps(as_json(name, state, landmarks), indent=2) if asked.json else as_text(name, state, landmarks))
    return int(ExitCode.GOOD)


def as_json(name: str, state: State, landmarks: Landmarks) -> dict[str, object]:
    """The documented object: SI, absolute pressure, null where this charge has none."""
    return {
        "fluid": name,
        "temperature_K": state.temperature,
        "density_kg_m3": state.density,
        "pressure_Pa": state.pressure,
        "region": state.region.value,
        "volume_fractions": {"solid": state.solid, "liquid": state.liquid, "vapour": state.vapour},
        "landmarks": {
            "triple_K": landmarks.triple,
            "liquid_full_K": landmarks.liquid_full,
            "dry_K": landmarks.dry,
            "critical_K": landmarks.critical,
        },
    }


def as_text(name: str, state: State, landmarks: Landmarks) -> str:
    """The same for people: degC and bar absolute."""
    lines = [
        f"{name} at {_celsius(state.temperature)} and {state.density:.1f} kg/m3",
        f"pressure     {state.pressure / 1e5:.2f} bar(a)",
        f"region       {state.region.value}",
    ]
    shares = [("solid", state.solid), ("liquid", state.liquid), ("vapour", state.vapour)]
    there = [f"{word} {100.0 * share:.1f} %" for word, share in shares if share is not None and share > 0.0]
    lines.append("volume       " + (", ".join(there) if there else "not divided into phases, or not fixed"))
    marks = [
        ("triple", landmarks.triple),
        ("liquid-full", landmarks.liquid_full),
        ("dry", landmarks.dry),
        ("critical", landmarks.critical),
    ]
    lines += [f"{word:<12} {_celsius(mark)}" for word, mark in marks if mark is not None]
    return "\n".join(lines)


def _joined(argv: list[str]) -> list[str]:
    """`--temperature -20degC` as one argument: argparse would take the value for an option."""
    joined: list[str] = []
    for word in argv:
        if word[:1] == "-" and word[1:2].isdigit() and joined and joined[-1].startswith("--"):
            joined[-1] += "=" + word
        else:
            joined.append(word)
    return joined


def _parser() -> argparse.ArgumentParser:
    parser = _Parser(prog="runbook state", description="A fluid sealed at one density and temperature.")
    parser.add_argument("fluid", metavar="FLUID", help="for example CO2")
    parser.add_argument("--temperature", required=True, metavar="T", help="for example 20degC")
    parser.add_argument("--density", metavar="R", help="mass over free volume, for example '468 kg/m3'")
    parser.add_argument("--mass", metavar="M", help="for example 117g, with --volume")
    parser.add_argument("--volume", metavar="V", help="for example 250mL, with --mass")
    parser.add_argument("--json", action="store_true", help="one JSON document in SI")
    return parser


def _density(density: str | None, mass: str | None, volume: str | None) -> float:
    """[kg/m3] from either way of saying it. Raises InputUnusable."""
    if density is not None and mass is None and volume is None:
        value = parse(density, Dimension.DENSITY)
    elif density is None and mass is not None and volume is not None:
        space = parse(volume, Dimension.VOLUME)
        if not space > 0.0:
            raise InputUnusable(f"a volume of '{volume}' holds nothing: it must be above zero")
        value = parse(mass, Dimension.MASS) / space
    else:
        raise InputUnusable("give either --density, or --mass and --volume together")
    if not value > 0.0:
        raise InputUnusable("there is no charge: mass and density must be above zero")
    return value


def _compute(fluid: str, temperature: float, density: float) -> tuple[str, State, Landmarks]:
    # Here and not above: the library takes seconds to load, and a mistyped argument needs none of it.
    from runbook.fluids.substance import substance

    chosen = substance(fluid)
    return chosen.name, chosen.state(temperature, density), chosen.landmarks(density)


def _celsius(kelvin: float) -> str:
    return f"{kelvin - 273.15:.3f} degC"
