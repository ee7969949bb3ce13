"""The fluids this program knows, each from one data file: names, validity, how far to trust it, hazards.

A new fluid is one file in `data/`; nothing elsewhere asks for a fluid by name. Nothing is read before somebody asks.
"""

from __future__ import annotations

from functools import cache
from importlib.resources import files

from runbook.errors import InputUnusable
from runbook.fluids.facts import FluidData, Hazards, SolidData
from runbook.fluids.facts_file import read

__all__ = ["FluidData", "Hazards", "SolidData", "find", "fluids"]


@cache
def fluids() -> tuple[FluidData, ...]:
    """Every fluid, by name."""
    folder = files("runbook.fluids").joinpath("data")
    found = [read(f.read_text(encoding="utf-8"), f.name) for f in folder.iterdir() if f.name.endswith(".toml")]
    names = [name.casefold() for fluid in found for name in {fluid.name, *fluid.aliases}]
    twice = sorted({name for name in names if names.count(name) > 1})
    if twice:
        raise ValueError(f"two data files answer to {', '.join(twice)}")
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
