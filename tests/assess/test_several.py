"""Several vessels in one bath: each judged alone, a step taken with all of them, the worst of each."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import replace
from datetime import date
from pathlib import Path

import pytest

from runbook.answers import Answer, BindRequest, Observation, Phase, Plan, Question
from runbook.assess.bind import bind, plan_of_all
from runbook.assess.local import LocalEngine
from runbook.assess.scene import open_scene
from runbook.assess.several import asked_of, merged_answer, open_all
from runbook.errors import FileProblems
from runbook.fluids.substance import substance
from runbook.procedure.reader import read_procedure
from runbook.procedure.several import seen_from_each, whole
from runbook.procedure.writing import findings
from runbook.run.safe import make_safe
from tests.published.test_de_reuck import DE_REUCK

SHIPPED = Path(__file__).parents[2] / "procedures"
VESSEL = "tubes-in-a-bath.yaml"


def files(folder: Path, procedure: Mapping[str, str] | None = None, vessel: Mapping[str, str] | None = None) -> Path:
    """The three tubes in a folder, with words changed."""
    (folder / "apparatus").mkdir(exist_ok=True)
    for source, target, changes in (
        (SHIPPED / "sf6-three-tubes.yaml", folder / "sf6-three-tubes.yaml", procedure or {}),
        (SHIPPED / "apparatus" / VESSEL, folder / "apparatus" / VESSEL, vessel or {}),
    ):
        text = source.read_text("utf-8")
        for old, new in changes.items():
            assert old in text, f"the shipped file no longer says: {old}"
            text = text.replace(old, new)
        target.write_text(text, "utf-8")
    return folder / "sf6-three-tubes.yaml"


def plan(path: Path) -> Plan:
    """On the day of issue."""
    loaded = read_procedure(path)
    return bind(loaded, loaded.procedure.issue.date)


# -- seen from each --------------------------------------------------------------------------------------


def test_each_vessel_sees_its_own_readings_and_the_bath(tmp_path: Path) -> None:
    """Three views of the same steps: each has its charge, its scale and the bath's thermometer, in its own place."""
    loaded = read_procedure(files(tmp_path))
    views = seen_from_each(loaded)
    assert [v.apparatus.tag for v in views] == ["T06", "T10", "T14"]
    assert [{i.tag for i in v.apparatus.instruments} for v in views] == [{"TT1", f"HS{n}"} for n in ("06", "10", "14")]
    assert [v.apparatus.heat_source for v in views] == [loaded.apparatus.heat_source] * 3
    for number, view in enumerate(views):
        step = view.procedure.parts[0].steps[4]
        assert [r.with_ for r in step.read] == ["TT1", f"HS{('06', '10', '14')[number]}"]  # type: ignore[union-attr] # a do step
        line = view.positions["parts", 0, "steps", 4, "read", 1][0]
        assert f"HS{('06', '10', '14')[number]}" in loaded.procedure_text.splitlines()[line - 1]
        line = view.apparatus_positions["components", 0, "tag"][0]
        assert view.apparatus.components[0].tag in loaded.apparatus_text.splitlines()[line - 1]


def test_one_vessel_is_seen_as_it_is() -> None:
    """Where there is but one nothing is taken apart."""
    loaded = read_procedure(SHIPPED / "co2-critical-point.yaml")
    assert seen_from_each(loaded) == (loaded,)
    assert whole(loaded.apparatus) is loaded.apparatus


# -- the plan --------------------------------------------------------------------------------------------


def test_the_plan_has_every_limit_of_every_vessel(tmp_path: Path) -> None:
    """Margins of all three stand in the warming step, and readings of all three before it."""
    found = plan(files(tmp_path))
    assert found.verdict == "within limits"
    assert [b.vessel for b in found.beside] == ["T10", "T14"]
    warming = next(line for line in found.lines if line.number == "3.4")
    assert {"G06", "G10", "G14"} <= {m.limit for m in warming.ahead}
    assert {"HS06", "HS10", "HS14"} <= {n.tag for n in next(x for x in found.lines if x.number == "1.5").reads}
    assert [x.hold.read.tag for x in found.lines if x.hold is not None and x.hold.read] == ["HS06", "HS10", "HS14"]
    assert len({c.tag for c in found.certificates if c.tag in ("T06", "T10", "T14")}) == 3


def test_sights_say_which_vessel_they_are_of(tmp_path: Path) -> None:
    """Computed words carry the tag; what the author wrote stands once."""
    words = [s.words for s in next(x for x in plan(files(tmp_path)).lines if x.number == "3.4").sights]
    assert any(w.startswith("T06: ") and "last liquid is gone" in w for w in words)
    assert any(w.startswith("T10: ") and "fades" in w for w in words)
    assert any(w.startswith("T14: ") and "liquid fills" in w for w in words)
    assert sum("comes to its own end" in w for w in words) == 1


def test_what_one_vessel_does_not_bear_is_outside_for_all(tmp_path: Path) -> None:
    """A weaker tube: outside limits, with its tag; a rating that nobody knows: not proved."""
    text = "{tag: G14, what: fused quartz tube, space: tube, pressure: up to 110 bar(g)"
    weak = plan(files(tmp_path, vessel={text: text.replace("110", "60")}))
    assert weak.verdict == "outside limits"
    assert any(f.severity == "error" and f.message.startswith("T14: ") and "G14" in f.message for f in weak.findings)
    unknown = plan(files(tmp_path, vessel={text: text.replace("up to 110 bar(g)", "not known")}))
    assert unknown.verdict == "not proved"


def test_the_ceiling_is_the_lowest_of_all(tmp_path: Path) -> None:
    """Whichever vessel governs; one that nobody knows is lower than any."""
    text = "pressure: up to 110 bar(g), temperature: -20 degC to 150 degC, difference: up to 80 K, material: glass"
    tube = f"{{tag: G14, what: fused quartz tube, space: tube, {text}"
    weak = plan(files(tmp_path, vessel={tube: tube.replace("up to 110 bar(g)", "up to 90 bar(g)")}))
    assert weak.ceiling is not None
    assert (round((weak.ceiling - weak.barometer) / 1e5), weak.ceiling_by) == (90, "G14")
    unknown = plan(files(tmp_path, vessel={tube: tube.replace("up to 110 bar(g)", "not known")}))
    assert unknown.ceiling is None


def test_what_is_shared_is_told_once(tmp_path: Path) -> None:
    """An expired thermometer of the bath is one finding of no vessel; an expired proof test is each tube's own."""
    loaded = read_procedure(files(tmp_path))
    said = [f.message for f in bind(loaded, date(2034, 3, 5)).findings if f.rule == "certificate"]
    assert [m for m in said if "TT1" in m] == ["TT1: temperature instrument has expired (until 2032-02-11). "
                                               "Renew it, or plan another date."]  # fmt: skip
    assert sum("proof test" in m for m in said) == 3
    assert not any(m.startswith("T06: T06") for m in said)


def test_a_charge_too_heavy_in_one_tube_is_outside_for_all(tmp_path: Path) -> None:
    """Half as much again in the last tube."""
    assert plan(files(tmp_path, {"mass: 12.47 g": "mass: 15.5 g"})).verdict == "outside limits"


# -- the answer ------------------------------------------------------------------------------------------


async def _answers(path: Path, heights: Mapping[str, float]) -> Answer:
    engine = LocalEngine()
    bound = await engine.bind(BindRequest(procedure_path=str(path), on="2031-03-02"))
    at = {line.number: i for i, line in enumerate(bound.plan.lines)}
    seen = [Observation("TT1", "temperature", 297.15, 5, "You", True, line=at["1.5"])]
    for n, (tag, height) in enumerate(heights.items(), 6):
        seen.append(Observation("TT1", "temperature", 297.15, 5, "You", True, beside=True, line=at["1.5"]))
        seen.append(Observation(tag, "liquid height", height, n, "You", True, line=at["1.5"]))
    asked = Question("key", at["3.3"], at["3.4"], "closed", (), "off", bound.plan.charge, tuple(dict.fromkeys(seen)))
    found = await engine.ask(asked)
    assert isinstance(found, Answer)
    return found


PROVED = {"HS06": 15.5e-3, "HS10": 36e-3, "HS14": 56.5e-3}
"""What the three scales show at 24 degC [m]."""


async def test_every_charge_has_to_be_proved(tmp_path: Path) -> None:
    """The height of one tube proves nothing of another: with one missing the charge is not proved."""
    path = files(tmp_path)
    assert (await _answers(path, PROVED)).charge_proved
    for missing in PROVED:
        found = await _answers(path, {tag: h for tag, h in PROVED.items() if tag != missing})
        assert not found.charge_proved, missing


async def test_make_safe_leaves_tubes_in_their_bath(tmp_path: Path) -> None:
    """Bath off, leave it in the water: nothing is let out of a sealed tube, and none is lifted out warm."""
    path = files(tmp_path)
    found = plan(path)
    assert {phase for line in found.lines for phase in line.phases} == {Phase.L}
    assert (await _answers(path, PROVED)).phases == (Phase.L,)
    acts = make_safe(found, Phase.L, True).acts
    assert (acts[0], acts[1]) == ("HEAT OFF: switch H1 off.", "LEAVE IT in the water.")
    assert not any("OPEN" in act or "TAKE" in act for act in acts)


async def test_one_height_too_high_blocks_the_step(tmp_path: Path) -> None:
    """A tube that is fuller than its file says is judged by its height, and with it the step."""
    good = await _answers(files(tmp_path), PROVED)
    assert all(m.margin is not None and m.margin > 0.0 for m in good.ahead)
    full = await _answers(files(tmp_path), PROVED | {"HS14": 74e-3})
    assert any(m.margin is None or m.margin <= 0.0 for m in full.ahead)


async def test_the_worst_of_the_answers_counts(tmp_path: Path) -> None:
    """Unknown, invalid or unproved in any one is so of all; the shortest time is the time."""
    one = await _answers(files(tmp_path), PROVED)
    for worse, name in (
        (replace(one, valid=False), "valid"),
        (replace(one, charge_proved=False), "charge_proved"),
    ):
        assert getattr(merged_answer((one, worse), ("A", "B"), "k"), name) is False
        assert getattr(merged_answer((worse, one), ("A", "B"), "k"), name) is False
    soon = merged_answer((replace(one, good_for_s=None), replace(one, good_for_s=90.0)), ("A", "B"), "k")
    assert (soon.good_for_s, soon.key) == (90.0, "k")
    away = replace(one.left_alone, at_rest=False, known=False)
    alone = merged_answer((one, replace(one, left_alone=away)), ("A", "B"), "k").left_alone
    assert (alone.at_rest, alone.known) == (False, False)


def test_a_vessel_hears_what_was_read_of_it(tmp_path: Path) -> None:
    """Of a question each vessel gets the bath, its own scale and its own charge."""
    views = [open_scene(v, None, None) for v in seen_from_each(read_procedure(files(tmp_path)))]
    seen = tuple(
        Observation(tag, what, 1.0, n, "You", True)
        for n, (tag, what) in enumerate((("TT1", "temperature"), ("HS06", "liquid height"), ("HS14", "liquid height")))
    )
    asked = Question("key", 0, 1, "closed", (), "off", views[0].charge, seen)
    last = asked_of(views[2], asked, first=False)
    assert [o.tag for o in last.observations] == ["TT1", "HS14"]
    assert last.charge == views[2].charge
    assert asked_of(views[0], asked, first=True).charge == views[0].charge


# -- what cannot be written ------------------------------------------------------------------------------


MILLIMETRES = "{tag: HS14, reads: liquid height, of: window, dial: 0 mm to 80 mm, error: 1 mm, division: 1 mm"
KELVINS = "{tag: HS14, reads: temperature, of: bath, dial: 0 degC to 80 degC, error: 1 K, division: 1 K"


@pytest.mark.parametrize(
    ("procedure", "vessel", "says"),
    [
        ({"  T14: {mass: 12.47 g": "  T15: {mass: 12.47 g"}, {}, "T15"),
        ({"  T10: {mass: 8.91 g ± 0.05 g, loaded_as: already loaded}     # the critical density\n": ""}, {}, "T10"),
        ({"8.91 g ± 0.05 g, loaded_as: already loaded": "8.91 g ± 0.05 g, loaded_as: liquid"}, {}, "already loaded"),
        ({}, {"tag: G14": "tag: G10"}, "twice"),
        ({}, {MILLIMETRES: KELVINS}, "shared"),
        ({}, {"\ncomponents:\n": "\nopenings: [{tag: C1, what: cap, space: tube}]\ncomponents:\n"}, "sealed for good"),
    ],
)
def test_what_does_not_fit_together_is_refused(
    tmp_path: Path, procedure: dict[str, str], vessel: dict[str, str], says: str
) -> None:
    """A vessel without a charge, a charge without a vessel, one to be loaded, a tag used twice: told with its line."""
    path = files(tmp_path, procedure, vessel)
    with pytest.raises(FileProblems) as refused:
        plan(path)
    assert any(says in p.message and p.line > 1 for p in refused.value.problems)


def test_rules_know_the_tags_of_all_vessels(tmp_path: Path) -> None:
    """A reading of a scale that only the third tube has is found by no rule."""
    assert not [f for f in findings(read_procedure(files(tmp_path))) if f.severity == "error"]


# -- checked from outside --------------------------------------------------------------------------------


@pytest.mark.independent
@pytest.mark.parametrize(("share", "bar"), [(0.6, 39.5), (1.0, 43.0), (1.4, 48.9)])
def test_the_pressures_at_the_cut_out(share: float, bar: float) -> None:
    """At 52 degC, against the equation of de Reuck, Craven and Cole 1991: 0.25 %."""
    fluid = substance("sulfur hexafluoride")
    density = share * 742.3
    ours = fluid.pressure(325.15, density)
    assert ours == pytest.approx(DE_REUCK.pressure(325.15, density), rel=2.5e-3)
    assert ours / 1e5 == pytest.approx(bar, abs=0.06)


@pytest.mark.independent
def test_where_the_last_surface_goes() -> None:
    """The thin charge is dry where de Reuck's saturated vapour is as dense, and the full one fills where his liquid is.

    He gives 315.1 K and 315.5 K; the equations part by 0.3 K so near the critical point, 318.7 K.
    """
    fluid = substance("sulfur hexafluoride")
    for share, of, celsius in ((0.6, 2, 42.0), (1.4, 1, 42.4)):
        density = share * 742.3
        marks = fluid.landmarks(density)
        ours = marks.dry if of == 2 else marks.liquid_full
        assert ours is not None
        assert ours - 273.15 == pytest.approx(celsius, abs=0.1)
        both = fluid.saturation(ours)
        _, liquid, vapour = DE_REUCK.saturation(ours, both.liquid_density, both.vapour_density)
        slope = (fluid.saturation(ours + 0.1).vapour_density - both.vapour_density) / 0.1
        if of == 1:
            slope = (fluid.saturation(ours + 0.1).liquid_density - both.liquid_density) / 0.1
        assert abs((liquid if of == 1 else vapour) - density) < abs(slope) * 0.5


@pytest.mark.parametrize("name", ["co2-critical-point", "co2-triple-point", "sf6-three-tubes"])
def test_a_heat_source_is_no_valve_in_any_part(name: str) -> None:
    """Whatever part is begun with: what the screens offer to state as a valve is one."""
    loaded = read_procedure(SHIPPED / f"{name}.yaml")
    scenes = open_all(loaded, None)
    valves = {v.tag for v in loaded.apparatus.valves} | {o.tag for o in loaded.apparatus.openings}
    for part in range(len(loaded.procedure.parts)):
        found = plan_of_all(loaded, scenes, loaded.procedure.issue.date, part)
        assert {tag for tag, _ in found.valves} <= valves
