"""What a fluid itself bars: letting it out, fire, what it softens, and air that nobody stated a limit for."""

from __future__ import annotations

import asyncio
from collections.abc import Mapping
from dataclasses import replace
from datetime import date
from pathlib import Path

import pytest

from runbook.answers import Effect, Hazard, Judgement, Margin, Plan, PlanLine
from runbook.assess import scene as scene_module
from runbook.assess.bind import bind
from runbook.fluids.catalogue import find
from runbook.fluids.substance import Substance
from runbook.rehearsal.headless import rehearse
from runbook.run.reason_words import margin_words
from tests.assess.scenes import changed_files, loaded

ISSUED = date(2031, 3, 2)
HOSE = "      - do: Put the hose of V2 out of the window\n        who: performer\n"
DOWN = "through: V2, pause_above: 20 bar(g), until: no liquid seen}\n        valves: {V2: open}"
BOTTLE = {
    "spaces: [cell, low gauge line, outside]": "spaces: [cell, low gauge line, bottle, outside]",
    "openings:\n": "  - {tag: V4, what: to the bottle, bore: 2 mm, joins: [cell, bottle], port: top, let_go: stays}\n"
    "openings:\n",
}
OPEN_BOTTLE = BOTTLE | {
    "openings:\n": BOTTLE["openings:\n"].replace(
        "openings:\n",
        "  - {tag: V5, what: of the bottle, joins: [bottle, outside], port: top, let_go: stays}\nopenings:\n",
    )
}
RECOVERED = {
    DOWN: DOWN.replace("V2", "V4"),
    "V3: open, H1: unplugged}": "V3: open, V4: shut, H1: unplugged}",
}


def plan(
    folder: Path, fluid: str, changes: Mapping[str, str] | None = None, vessel: Mapping[str, str] | None = None
) -> Plan:
    """The shipped procedure with another fluid in it, and other words changed."""
    words = {"fluid: carbon dioxide": f"fluid: {fluid}", **(changes or {})}
    return bind(loaded(folder, words, vessel), ISSUED)


def forbidden(found: Plan) -> dict[str, Margin]:
    """Margins of a release that the law forbids, by line."""
    return {line.number: m for line in found.lines for m in line.ahead if m.kind == "forbidden release"}


def line_of(found: Plan, number: str) -> PlanLine:
    """A line of a plan."""
    return next(line for line in found.lines if line.number == number)


# -- a law against letting it out -------------------------------------------------------------------------


@pytest.mark.parametrize("fluid", ["SF6", "R134a"])
def test_what_may_not_be_let_out_is_outside_limits(tmp_path: Path, fluid: str) -> None:
    """Loading beside an open vent and letting down through it: each an error at its step, with the law."""
    found = plan(tmp_path, fluid)
    assert found.verdict == "outside limits"
    assert set(forbidden(found)) == {"1.13", "4.5"}
    text = (tmp_path / "co2-critical-point.yaml").read_text("utf-8").splitlines()
    said = [f for f in found.findings if "Regulation (EU) 2024/573" in f.message]
    assert [text[f.line - 1][f.column - 1 :].split(":")[1].split()[0] for f in said] == ["Load", "Let"]
    assert all(f.severity == "error" for f in said)


def test_a_forbidden_release_lowers_nothing(tmp_path: Path) -> None:
    """A step that lowers one hazard may be entered while the vessel is not at rest; this one may not."""
    step = line_of(plan(tmp_path, "SF6"), "4.5")
    effects = dict(step.effects)
    assert effects[Hazard.RELEASE] is Effect.RAISES
    assert Effect.LOWERS not in effects.values()
    assert forbidden(plan(tmp_path, "SF6"))["4.5"].judgement is Judgement.BLOCKED
    assert dict(line_of(plan(tmp_path, "carbon dioxide"), "4.5").effects)[Hazard.OVER_PRESSURE] is Effect.LOWERS
    assert forbidden(plan(tmp_path, "carbon dioxide")) == {}


def test_recovered_into_a_closed_bottle_it_is_not_let_out(tmp_path: Path) -> None:
    """A space of the apparatus that no way leads out of is no room."""
    found = plan(tmp_path, "SF6", RECOVERED, BOTTLE)
    assert set(forbidden(found)) == {"1.13"}
    assert dict(line_of(found, "4.5").effects)[Hazard.RELEASE] is Effect.KEEPS


def test_a_bottle_whose_own_valve_nobody_knows_counts_as_open(tmp_path: Path) -> None:
    """Unknown never permits a step that raises a hazard."""
    assert "4.5" in forbidden(plan(tmp_path, "SF6", RECOVERED, OPEN_BOTTLE))


def test_a_puff_within_a_quick_sequence_is_a_release(tmp_path: Path) -> None:
    """Valves stand at the end as at the beginning, and gas has got out."""
    item = "{{do: {0} V2, valves: {{V2: {1}}}, latest: 1 min, if_not: Shut V2.}}"
    items = f"[{item.format('Open', 'open')}, {item.format('Shut', 'shut')}]"
    found = plan(tmp_path, "SF6", {HOSE: f"      - quick: {items}\n"})
    assert "4.1" in forbidden(found)


def test_a_purge_with_it_is_a_release(tmp_path: Path) -> None:
    """What a purge is filled with is let out again: three fillings of 252 mL to 2 bar, some 9 g."""
    purge = "        path: {purge: 3, up_to: 2 bar(a), down_to: 1 bar(a), through: V2}\n"
    found = plan(tmp_path, "SF6", {"      - do: Press tare\n": "      - do: Purge the cell\n" + purge})
    worst = forbidden(found)["1.11"].worst
    assert worst == pytest.approx(3 * 2e5 * 252e-6 * 0.14606 / (8.314 * 293.15), rel=0.03)


def test_a_refusal_says_the_law(tmp_path: Path) -> None:
    """On the bench the reason is the law and what to do, not a margin of grams."""
    found = plan(tmp_path, "SF6")
    said = margin_words(found, forbidden(found)["4.5"])
    assert "sulfur hexafluoride could get out to the room, which is forbidden (Regulation (EU) 2024/573)" in said
    assert "recover it" in said


# -- what it softens --------------------------------------------------------------------------------------


@pytest.mark.parametrize("name", ["carbon dioxide", "CO2", "R744"])
@pytest.mark.parametrize(("material", "wanted"), [("acrylic", 1), ("polycarbonate", 1), ("sapphire", 0)])
def test_plastic_that_carries_carbon_dioxide_cannot_be_judged(
    tmp_path: Path, name: str, material: str, wanted: int
) -> None:
    """By whatever name it is called; told once, and no step with it in the vessel is entered."""
    vessel = {"what: two sapphire windows": f"what: two windows, material: {material}"}
    found = plan(tmp_path, name, None, vessel)
    said = [f for f in found.findings if f.rule == "softened material"]
    assert len(said) == wanted
    assert all("W1 cannot be judged" in f.message and f.severity == "error" for f in said)
    unknown = {line.number for line in found.lines for m in line.ahead if m.kind == "softened material"}
    assert bool(unknown) is bool(wanted)
    if wanted:
        assert found.verdict == "not proved"


def test_plastic_below_its_pressure_and_in_other_fluids(tmp_path: Path) -> None:
    """A disc that bursts below 10 bar keeps it there; nothing is known against other fluids."""
    low = {"what: two sapphire windows": "what: two windows, material: acrylic", "bursts_at: 130": "bursts_at: 10"}
    for fluid, vessel in (("carbon dioxide", low), ("SF6", {"what: body": "what: body, material: acrylic"})):
        found = plan(tmp_path, fluid, None, vessel)
        assert not any(f.rule == "softened material" for f in found.findings)


# -- fire -------------------------------------------------------------------------------------------------


@pytest.mark.parametrize("fluid", ["ethane", "n-butane", "propane"])
def test_no_step_with_what_burns_is_entered(tmp_path: Path, fluid: str) -> None:
    """From loading to the proof of empty every line has a margin that is not known; check tells it once."""
    found = plan(tmp_path, fluid)
    burning = [line.number for line in found.lines if any(m.kind == "ignition" for m in line.ahead)]
    assert burning[0] == "1.13"
    assert burning[-1] == "4.6"
    assert {m.margin for line in found.lines for m in line.ahead if m.kind == "ignition"} == {None}
    assert sum("ignition" in f.message for f in found.findings if f.severity == "error") == 1
    cold = plan(tmp_path, "carbon dioxide")
    assert not any(m.kind == "ignition" for line in cold.lines for m in line.ahead)


def test_what_feeds_a_fire_is_barred_like_what_burns(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    """An oxidiser asks for rules about oil, dust and cloth that are not there."""
    data = find("nitrogen")
    feeds = Substance(replace(data, hazards=replace(data.hazards, oxidiser=True)))
    monkeypatch.setattr(scene_module, "substance", lambda name: feeds)
    found = plan(tmp_path, "nitrogen")
    assert any(f.rule == "flammable" and "feeds a fire" in f.message for f in found.findings)
    assert any(m.kind == "ignition" and m.margin is None for m in line_of(found, "1.13").ahead)


@pytest.mark.parametrize(("fluid", "why"), [("SF6", "which is forbidden"), ("propane", "propane burns")])
def test_a_run_does_not_go_on_past_it(tmp_path: Path, fluid: str, why: str) -> None:
    """The whole way through the gate: an ideal operator gets as far as loading and no further."""
    path = changed_files(tmp_path, {"fluid: carbon dioxide": f"fluid: {fluid}"})
    found = asyncio.run(rehearse(path, 1))
    assert found.outcome == "refused"
    assert why in (found.reason or "")
    assert found.steps_done == 11


# -- breathing --------------------------------------------------------------------------------------------


def test_a_limit_that_nobody_stated_is_unknown_and_not_absent(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    """Gas in the room of a fluid without exposure limits: no margin, and the plan is not proved."""
    data = find("carbon dioxide")
    unstated = Substance(replace(data, hazards=replace(data.hazards, exposure_limit=None, short_limit=None)))
    monkeypatch.setattr(scene_module, "substance", lambda name: unstated)
    found = plan(tmp_path, "carbon dioxide")
    gas = [m for line in found.lines for m in line.ahead if m.kind == "gas in the room"]
    assert gas
    assert {(m.margin, m.judgement) for m in gas} == {(None, Judgement.BLOCKED)}
    assert found.verdict == "not proved"
