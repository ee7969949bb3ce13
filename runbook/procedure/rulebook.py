"""The rules that `runbook check` knows by name, from the data file beside this module."""

from __future__ import annotations

import tomllib
from dataclasses import dataclass
from functools import cache
from importlib.resources import files

from runbook.errors import InputUnusable
from runbook.procedure.problems import nearest


@dataclass(frozen=True, slots=True)
class Rule:
    """One rule."""

    name: str
    """As it stands in brackets after a finding."""
    severity: str
    """'error' keeps a procedure from being within limits; 'warning' and 'advice' do not."""
    source: str
    """Where it comes from."""
    why: str
    """One or two plain sentences."""
    well: str
    """How it is done well: lines of a file, or a sentence."""


@cache
def rules() -> tuple[Rule, ...]:
    """Every rule, in the order of the data file."""
    text = files("runbook.procedure").joinpath("rulebook.toml").read_text(encoding="utf-8")
    return tuple(Rule(**one) for one in tomllib.loads(text)["rule"])


def rule(name: str) -> Rule:
    """The rule of that name. Raises InputUnusable, naming the nearest and all."""
    wanted = " ".join(name.split()).casefold()
    names = [one.name for one in rules()]
    if wanted not in names:
        raise InputUnusable(f"there is no rule '{name}'{nearest(wanted, names)}: {', '.join(names)}")
    return rules()[names.index(wanted)]


def explained(one: Rule) -> str:
    """The rule as a person reads it."""
    good = "\n".join(f"    {line}" for line in one.well.strip().splitlines())
    return f"{one.name} ({one.severity})\n{one.why}\nSource: {one.source}.\nWell done:\n{good}"
