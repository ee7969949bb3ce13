"""Heat under an open vessel: water may be boiled there, a liquefied gas may not."""

from __future__ import annotations

from dataclasses import replace
from pathlib import Path

import pytest

from runbook.answers import Finding
from runbook.assess.bind import plan_of
from runbook.assess.open_heat import steam_rise
from runbook.assess.scene import Scene, open_scene
from runbook.assess.walk import walk
from runbook.procedure.model import WarmTo
from runbook.procedure.reader import read_procedure

GOOD = Path(__file__).parents[1] / "procedure" / "good"


def boiler(bore: str = "bore: 3 mm, ") -> Scene:
    """The Marcet boiler with its steam outlet's bore as given."""
    loaded = read_procedure(GOOD / "marcet.yaml")
    if not bore:
        valves = tuple(valve.model_copy(update={"bore": None}) for valve in loaded.apparatus.valves)
        loaded = replace(loaded, apparatus=loaded.apparatus.model_copy(update={"valves": valves}))
    return open_scene(loaded, 101325.0, None)


def open_and_warm(scene: Scene) -> int:
    """Index of the first line that warms in the open."""
    return next(i for i, line in enumerate(walk(scene)) if isinstance(line.verb, WarmTo) and not line.before.closed)


def findings(scene: Scene, rule: str) -> list[Finding]:
    """Of the plan, under one rule."""
    return [f for f in plan_of(scene, scene.procedure.issue.date).findings if f.rule == rule]


@pytest.mark.independent
def test_steam_finds_its_way_out() -> None:
    """1.5 kW boils 0.66 g/s (steam tables: 2257 kJ/kg) through 3 mm: (m / 0.6 A)^2 / 2 rho, steam of 0.598 kg/m3."""
    scene = boiler()
    line = walk(scene)[open_and_warm(scene)]
    flux = 1500.0 / 2257e3 / (0.6 * 3.14159 / 4 * 0.003**2)
    assert steam_rise(scene, line.during) == pytest.approx(flux**2 / (2 * 0.598), rel=0.03)


def test_without_a_bore_nobody_knows() -> None:
    """The margins of boiling through a valve whose bore is not written are unknown, and say what to write."""
    scene = boiler("")
    assert steam_rise(scene, walk(scene)[open_and_warm(scene)].during) is None
    plan = plan_of(scene, scene.procedure.issue.date)
    assert plan.verdict != "within limits"
    blocked = [m for m in plan.lines[open_and_warm(scene)].ahead if m.kind == "pressure"]
    assert blocked
    assert all(m.margin is None and "bore" in m.why for m in blocked)


def test_a_liquefied_gas_is_sealed_before_it_is_heated() -> None:
    """What boils in the room by itself is not driven by a source through an open vent; water may be."""
    assert findings(boiler(), "order") == []
    loaded = boiler().loaded
    other = replace(loaded, procedure=loaded.procedure.model_copy(update={"fluid": "carbon dioxide"}))
    said = findings(open_scene(other, 101325.0, None), "order")
    assert said
    assert all(f.severity == "error" and "warm it after it is sealed" in f.message for f in said)


def test_pouring_water_wants_no_warning() -> None:
    """Water of the room is neither cold nor under pressure; carbon dioxide is, and its loading warns."""
    assert findings(boiler(), "warning missing") == []
    loaded = boiler().loaded
    other = replace(loaded, procedure=loaded.procedure.model_copy(update={"fluid": "carbon dioxide"}))
    assert any("loads" in f.message for f in findings(open_scene(other, 101325.0, None), "warning missing"))


def test_liquid_has_driven_out_its_air() -> None:
    """Of a litre with 590 g of water 0.41 litres of air are left at most, not a whole litre."""
    scene = boiler()
    whole = scene.barometer.high_Pa * scene.volume[1] / (8.314462618 * scene.room_coldest)
    assert scene.moles_of_air == pytest.approx(whole * (1.0 - 0.590 / 0.999 / 1.01), rel=5e-3)
