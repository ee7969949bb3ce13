"""bind: procedure + apparatus + charge record + room -> Plan. Everything a briefing shows and a run leans on."""

from __future__ import annotations

from collections.abc import Sequence
from datetime import date

from runbook.answers import (
    ChargeBox,
    Finding,
    Instrument,
    Plan,
    PlanPart,
)
from runbook.apparatus.ceiling import ceiling
from runbook.apparatus.certificates import certificates
from runbook.apparatus.instruments import permissible_error
from runbook.apparatus.spaces import joined_spaces
from runbook.assess.barred import barred_findings
from runbook.assess.bounds import charge_bounds
from runbook.assess.evidence.desk import what_instruments_tell
from runbook.assess.making_safe import making_safe_findings
from runbook.assess.mend import mends
from runbook.assess.open_heat import open_heat_findings
from runbook.assess.path import planned_path
from runbook.assess.plan_line import plan_line
from runbook.assess.scene import Scene
from runbook.assess.several import Scenes, merged_plan, open_all
from runbook.assess.single_faults import single_fault_findings
from runbook.assess.truth import truth_findings
from runbook.assess.verdict import line_findings, mend_findings, position, verdict_of
from runbook.assess.walk import VesselState, Walked, outside_tags, start_state, walk
from runbook.procedure.model import (
    LetDownTo,
)
from runbook.procedure.reader import Loaded
from runbook.procedure.rules_guard import LOADS
from runbook.procedure.writing import findings as writing_findings
from runbook.quantities import Level


def bind(
    loaded: Loaded,
    on: date,
    barometer_Pa: float | None = None,
    charge: ChargeBox | None = None,
) -> Plan:
    """The plan of one procedure on one day. barometer_Pa: read in the room [Pa]; None: from its height.

    charge: what the vessel's charge record says is in it. Raises InputUnusable, never OutsideValidity: what
    the models do not reach is an unknown margin, and the verdict is not proved.
    """
    return plan_of_all(loaded, open_all(loaded, barometer_Pa, charge), on)


def plan_of_all(loaded: Loaded, scenes: Scenes, on: date, part: int = 0) -> Plan:
    """The plan of all vessels of a procedure, each in its scene, the first one first."""
    plans = [plan_of(scene, on, lines, part) for scene, lines in scenes]
    return merged_plan(plans, _written(scenes[0][0], loaded)) if len(plans) > 1 else plans[0]


def plan_of(scene: Scene, on: date, lines: tuple[Walked, ...] | None = None, part: int = 0) -> Plan:
    """The plan of a scene that is open already; part: the one that is begun with, from 0."""
    walked = walk(scene) if lines is None else lines
    loaded, apparatus, procedure = scene.loaded, scene.apparatus, scene.procedure
    plan_lines = tuple(plan_line(scene, walked, i) for i in range(len(walked)))
    dated = certificates(apparatus, on)
    places = [position(loaded, walked, i) for i in range(len(walked))]
    outside = outside_tags(scene)
    lets_down = next((w.verb.through for w in walked if isinstance(w.verb, LetDownTo)), None)
    vent = lets_down or next((t for t in outside if any(v.tag == t for v in apparatus.valves)), None)
    forbidden = scene.substance.data.hazards.release_forbidden
    found = (
        (() if loaded.one_of_several else _written(scene, loaded))
        + barred_findings(scene)
        + line_findings(loaded, walked, plan_lines, dated)
        + truth_findings(scene, walked, places)
        + tuple(open_heat_findings(scene, walked, places))
        + single_fault_findings(scene, walked, places)
        + making_safe_findings(scene, walked, plan_lines, None if forbidden else vent, places)
    )
    verdict = verdict_of(plan_lines, found)
    if verdict == "outside limits":
        found += mend_findings(loaded, mends(scene))
    top = _ceiling(scene)
    low, high = scene.barometer.low_Pa, scene.barometer.high_Pa
    source = apparatus.heat_source
    begun = _begun(scene, walked, part)
    return Plan(
        procedure=procedure.name,
        apparatus=apparatus.name,
        vessel=apparatus.tag,
        fluid=scene.substance.name,
        procedure_sha256=loaded.procedure_sha256,
        apparatus_sha256=loaded.apparatus_sha256,
        verdict=verdict,
        approved=f"{apparatus.approved.by}, {apparatus.approved.role}, {apparatus.approved.date.isoformat()}",
        findings=found,
        barometer=scene.barometer.middle_Pa,
        barometer_bound=0.5 * (high - low),
        barometer_source=scene.barometer.source,
        room_hottest=scene.room_hottest,
        room_coldest=scene.room_coldest,
        charge=scene.charge,
        planned_kg=scene.planned,
        free_volume=scene.volume,
        ceiling=top[0],
        ceiling_by=top[1],
        pressure_unit=_pressure_unit(scene),
        bounds=charge_bounds(scene),
        certificates=dated,
        instruments=tuple(_instrument(scene, i.tag) for i in apparatus.instruments),
        roles=tuple(procedure.roles),
        bring=tuple(procedure.bring),
        valves=tuple(sorted((t, p) for t, p in begun.valves.items() if source is None or t != source.tag)),
        valve_lets_go=tuple((v.tag, v.let_go) for v in apparatus.valves),
        outside_valves=outside,
        source_tag=None if source is None else source.tag,
        source=begun.source,
        source_away=source is not None and source.taken_away_in_one_motion,
        let_down_valve=vent,
        release_forbidden=forbidden,
        parts=_parts(scene, walked),
        lines=plan_lines,
        make_safe_also=tuple((a.do, a.who or "") for a in procedure.make_safe_also),
        path=planned_path(scene, walked),
        telling=what_instruments_tell(scene),
    )


def _written(scene: Scene, loaded: Loaded) -> tuple[Finding, ...]:
    """What the writing rules find, but for what they cannot know: a fluid that is neither cold nor under pressure."""
    mild = f"this {LOADS}" if scene.stays_liquid else None
    return tuple(
        Finding(p.rule, p.severity, p.line, p.column, p.message)
        for p in writing_findings(loaded)
        if mild is None or not p.message.startswith(mild)
    )


def _begun(scene: Scene, walked: Sequence[Walked], part: int) -> VesselState:
    """How the vessel stands where the run begins: as the file says, or as the parts before leave it."""
    before = [line for line in walked if line.part < part]
    return before[-1].after if before else start_state(scene)


def _parts(scene: Scene, walked: Sequence[Walked]) -> tuple[PlanPart, ...]:
    found = []
    for index, part in enumerate(scene.procedure.parts):
        first = next((i for i, w in enumerate(walked) if w.part == index), len(walked))
        fits = None if part.fits is None else part.fits.value
        lead = None if part.lead is None else part.lead.value
        found.append(PlanPart(part.name, first, bool(part.repeatable), fits, lead))
    return tuple(found)


def _ceiling(scene: Scene) -> tuple[float | None, str]:
    """Lowest limit of the charge's space alone: isolators shut, as the vessel stands at rest [Pa]."""
    shut = {v.tag: "shut" for v in scene.apparatus.valves}
    lowest = ceiling(scene.apparatus, joined_spaces(scene.apparatus, shut, scene.charge_space))
    if lowest is None:
        return None, ""
    return (None if lowest.level is None else lowest.level.absolute(scene.barometer.middle_Pa)), lowest.tag


def _pressure_unit(scene: Scene) -> str:
    high = [i for i in scene.apparatus.instruments if i.reads == "pressure" and i.of == scene.charge_space]
    return high[0].dial.unit if high else "bar(g)"


def _instrument(scene: Scene, tag: str) -> Instrument:
    one = scene.instrument(tag)
    middle = scene.barometer.middle_Pa
    low, high = (_absolute(x, middle) for x in (one.dial.low, one.dial.high))
    # IEC 60751 tolerances grow with |t| in degC; everything else is flat.
    zero = 273.15 if one.reads == "temperature" else low
    error = permissible_error(one, zero)
    slope = permissible_error(one, zero + 1.0) - error if one.reads == "temperature" else 0.0
    return Instrument(
        tag=one.tag,
        reads=one.reads,
        of=one.of,
        unit=one.dial.unit,
        low=low,
        high=high,
        error=error,
        error_slope=slope,
        half_division=one.division.value / 2.0,
        lag_s=one.lag.value if one.lag is not None else 0.0,
        read_from=one.read_from,
    )


def _absolute(value: float | Level, barometer: float) -> float:
    return value.absolute(barometer) if isinstance(value, Level) else float(value)
