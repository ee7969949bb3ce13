"""Small random plans, people and answers, each a function of its seed alone.

The plans make no physical sense, on purpose: the interlock must hold for whatever is written and computed, so
every kind of line, effect, need and answer stands beside every other. Nothing here is taken from real apparatus.
"""

from __future__ import annotations

import math
from dataclasses import replace
from hashlib import sha256
from random import Random
from typing import Final

from runbook.answers import (
    Agreement,
    Answer,
    Certificate,
    ChargeBounds,
    ChargeBox,
    Distance,
    Effect,
    Empty,
    Hazard,
    Hold,
    Instrument,
    Judgement,
    LeftAlone,
    LineKind,
    Margin,
    Need,
    Phase,
    Plan,
    PlanLine,
    PlanPart,
    QuickItem,
    Witness,
)
from runbook.run.events import Person, RunOpened

ROLES: Final = ("demonstrator", "second", "supervisor")
VALVES: Final = ("V1", "V2", "V3")
"""V1 is the let-down valve and the vent of the proofs, V2 the isolator of the low gauge."""
TAGS: Final = {
    "PG1": ("pressure", "bar", 1.0e5, 1.01e7, 5.0e4),
    "PG2": ("pressure", "bar", 1.0e5, 3.0e5, 2.0e3),
    "T1": ("temperature", "degC", 193.15, 373.15, 0.5),
    "T2": ("temperature", "degC", 193.15, 373.15, 0.5),
}
"""What each instrument reads, its unit, the ends of its dial and its permissible error [SI]."""
KINDS: Final = (
    *(LineKind.DO,) * 9,
    *(LineKind.HOLD,) * 4,
    *(LineKind.QUICK,) * 2,
    *(LineKind.EMPTY,) * 2,
    LineKind.WITNESS,
    LineKind.PARKED,
)


def number_of(name: str) -> str:
    """The number that person set at the briefing."""
    return f"{sum(map(ord, name)) % 10_000:04d}"


def _instrument(tag: str) -> Instrument:
    what, unit, low, high, error = TAGS[tag]
    return Instrument(tag, what, "cell", unit, low, high, error, 0.0, error / 2.0, 1.0, "bench")


def _need(r: Random, tag: str | None = None, *, every: bool = False) -> Need:
    tag = tag or r.choice(("PG1", "T1", "T1", "T2"))
    what, unit, low, high, _ = TAGS[tag]
    ranged = r.random() < 0.4
    return Need(
        tag,
        what,
        unit,
        low=low + 0.1 * (high - low) if ranged else None,
        high=low + 0.8 * (high - low) if ranged else None,
        fresh_s=r.choice((60.0, 200.0, 600.0, 600.0)),
        every_s=r.choice((30.0, 120.0, 300.0)) if every and r.random() < 0.4 else None,
    )


def _needs(r: Random, most: int, *, every: bool = False) -> tuple[Need, ...]:
    needs = [_need(r, every=every) for _ in range(r.choice((0, 0, 1, most)))]
    return tuple({need.tag: need for need in needs}.values())


def _effects(r: Random) -> tuple[tuple[Hazard, Effect], ...]:
    mood = r.choice(("keeps", "raises", "raises", "lowers", "mixed", "any"))
    effects = dict.fromkeys(Hazard, Effect.KEEPS)
    some = r.sample(list(Hazard), 2)
    if mood in ("raises", "mixed"):
        effects[some[0]] = r.choice((Effect.RAISES, Effect.RAISES, Effect.UNKNOWN))
    if mood in ("lowers", "mixed"):
        effects[some[1]] = Effect.LOWERS
    if mood == "any":
        effects = {hazard: r.choice(list(Effect)) for hazard in Hazard}
    return tuple(effects.items())


def _moves(r: Random) -> tuple[tuple[str, str], ...]:
    return tuple((tag, r.choice(("open", "shut"))) for tag in VALVES if r.random() < 0.15)


def _line(r: Random, i: int, part: int, kind: LineKind) -> PlanLine:
    quick = tuple(
        QuickItem(f"item {k}", r.choice((5.0, 20.0, 60.0)), "shut it", _moves(r), seals=r.random() < 0.1)
        for k in range(r.choice((1, 2, 3)) if kind is LineKind.QUICK else 0)
    )
    does = kind in (LineKind.DO, LineKind.PARKED)
    seals = any(item.seals for item in quick) or (kind is LineKind.DO and r.random() < 0.15)
    hold = Hold(r.choice(ROLES), "because", _need(r, "T1") if r.random() < 0.5 else None)
    return PlanLine(
        number=f"{part + 1}.{i + 1}",
        part=part,
        kind=kind,
        text=f"line {i}",
        who=r.choice((None, *ROLES)) if kind is not LineKind.HOLD else None,
        warning=None,
        effects=_effects(r),
        committing=r.random() < 0.2,
        leans_on=tuple(w for w in ("temperature", "pressure", "charge") if r.random() < 0.1),
        entry_needs=_needs(r, 2),
        needs_charge_proof=r.random() < 0.15,
        opens_containment=r.random() < 0.03,
        reads=_needs(r, 2, every=True) if does else (),
        hold=hold if kind is LineKind.HOLD else None,
        witness=Witness(r.choice(ROLES), "because", r.choice((30.0, 300.0))) if kind is LineKind.WITNESS else None,
        quick=quick,
        read_after=_needs(r, 1) if kind is LineKind.QUICK else (),
        empty=Empty("PG2", "V2", "T2", "V1") if kind is LineKind.EMPTY else None,
        valves=_moves(r) if kind in (LineKind.DO, LineKind.QUICK) else (),
        source=r.choice(("on", "off", "unplugged")) if does and r.random() < 0.3 else None,
        seals=seals,
        ahead=(),
        left_alone=LeftAlone(r.random() < 0.5, True, ()),
        phases=_phases(r),
        way_back="HEAT OFF. Then read PG1.",
        sights=(),
        if_not="",
        lasts_s=None,
    )


def _phases(r: Random) -> tuple[Phase, ...]:
    return tuple(r.sample(list(Phase), r.choice((1, 1, 2, 4))))


def random_plan(r: Random) -> Plan:
    """Three to eight lines in one or two parts."""
    kinds = [r.choice(KINDS) for _ in range(r.randint(3, 8))]
    second = r.randint(1, len(kinds) - 1) if r.random() < 0.3 else None
    if second is not None:
        kinds[second - 1] = LineKind.PARKED
    # Else containment would hardly ever be opened rightly.
    arranged = LineKind.EMPTY in kinds[:-1] and r.random() < 0.7
    after = kinds.index(LineKind.EMPTY) + 1 if arranged else -1
    lines = tuple(_line(r, i, int(second is not None and i >= second), kind) for i, kind in enumerate(kinds))
    lines = tuple(replace(line, opens_containment=True) if i == after else line for i, line in enumerate(lines))
    parts = [PlanPart("morning", 0, False, None, None)]
    if second is not None:
        parts.append(PlanPart("lesson", second, r.random() < 0.5, None, None))
    box = ChargeBox(0.04, 0.05, True, ("charge record",)) if r.random() < 0.5 else None
    states = (*("valid",) * 12, "expired", "not yet valid", "not known")
    return Plan(
        procedure="warm",
        apparatus="cell",
        vessel="C1",
        fluid="carbon dioxide",
        procedure_sha256="0" * 64,
        apparatus_sha256="1" * 64,
        verdict="within limits",
        approved="nobody",
        findings=(),
        barometer=1.0e5,
        barometer_bound=500.0,
        barometer_source="read",
        room_hottest=303.15,
        room_coldest=288.15,
        charge=box,
        planned_kg=(0.04, 0.05),
        free_volume=(9.8e-5, 1.0e-4),
        ceiling=1.0e7,
        ceiling_by="C1",
        pressure_unit="bar",
        bounds=ChargeBounds(0.03, 0.045, 0.05, "", "", ""),
        certificates=tuple(Certificate(f"X{k}", "proof", r.choice(states), "2032-01-01") for k in range(2)),
        instruments=tuple(_instrument(tag) for tag in TAGS),
        roles=ROLES,
        bring=(),
        valves=tuple((tag, r.choice(("open", "shut", "shut", "do not know"))) for tag in VALVES),
        valve_lets_go=tuple((tag, "stays") for tag in VALVES),
        outside_valves=("V1", "V3") if r.random() < 0.8 else ("V1",),
        source_tag="H1",
        source=r.choice(("on", "off", "unplugged")),
        source_away=r.random() < 0.5,
        let_down_valve="V1" if r.random() < 0.9 else None,
        release_forbidden=r.random() < 0.2,
        parts=tuple(parts),
        lines=lines,
        make_safe_also=(("Call the office.", "second"),) if r.random() < 0.3 else (),
    )


def random_people(r: Random) -> tuple[Person, ...]:
    """Two to four; every role is held by somebody, some people hold two."""
    names = ("Adla", "Bero", "Cifa", "Dumo")[: r.choice((2, 3, 3, 4))]
    roles: dict[str, set[str]] = {name: set() for name in names}
    for i, role in enumerate(ROLES):
        roles[names[i % len(names)]].add(role)
    for name in names:
        if not roles[name] or r.random() < 0.15:
            roles[name].add(r.choice(ROLES))
    return tuple(
        Person(name, tuple(sorted(held)), sha256(f"{name}:{number_of(name)}".encode()).hexdigest())
        for name, held in roles.items()
    )


def random_opening(r: Random) -> RunOpened:
    """A plan, its people and the part the run begins with."""
    plan = random_plan(r)
    part = r.randrange(len(plan.parts))
    versions = (("runbook", "0"), ("python", "3"), ("CoolProp", "8"))
    return RunOpened(plan, random_people(r), "", "", versions, r.random() < 0.5, part, "2031-03-02")


def _margin(r: Random, sound: bool) -> Margin:
    value: float | None = r.choice((2.0e6, 1.0e6, 1.0e5))
    if not sound:
        value = r.choice((None, 0.0, -1.0e5))
    blocked = value is None or value <= 0.0
    judgement = Judgement.BLOCKED if blocked else r.choice((Judgement.CLEAR, Judgement.NARROW))
    worst = None if value is None else 1.0e7 - value
    return Margin("C1", "pressure", "now", worst, 1.0e7, value, "Pa", judgement, None)


def random_answer(seed: int, key: str) -> Answer:
    """The one answer to this question in this run, whenever it is asked."""
    r = Random(f"{seed} {key}")
    good = r.random() < 0.75
    """Most worlds are sound, or hardly any gate would ever be passed; each fault also comes alone."""
    fault = None if good else r.choice(("now", "ahead", "invalid", "disagrees", "cannot tell", "unproved", "many"))

    def is_at(name: str) -> bool:
        return fault == name or (fault == "many" and r.random() < 0.5)

    disagrees, cannot_tell = is_at("disagrees"), is_at("cannot tell")
    verdict = "disagrees" if disagrees else r.choice(("cannot tell", "no reading")) if cannot_tell else "agrees"
    return Answer(
        key=key,
        now=tuple(_margin(r, not (i == 0 and is_at("now"))) for i in range(r.choice((0, 1, 2)) + 1)),
        ahead=tuple(_margin(r, not (i == 0 and is_at("ahead"))) for i in range(r.choice((1, 2)))),
        left_alone=LeftAlone(r.random() < 0.6, True, ()),
        agreement=Agreement(verdict, "PG1", None, None, None, None, "nothing"),
        charge=None,
        charge_proved=not is_at("unproved"),
        valid=not is_at("invalid"),
        good_for_s=r.choice((None, None, 15.0, 90.0, 400.0)),
        phases=_phases(r),
        pressure=None,
        pressure_U=None,
        region=None,
        liquid_height=None,
        distance=Distance(None, None, None, None),
        sights=(),
    )


def random_value(r: Random, tag: str, low: float | None, high: float | None) -> float:
    """A reading [SI] of this instrument; now and then off its dial, outside the range, or no number at all."""
    _, _, bottom, top, error = TAGS[tag]
    chance = r.random()
    if chance < 0.02:
        return r.choice((math.nan, math.inf, -math.inf))
    if chance < 0.05:
        return r.choice((bottom - 1.0, top + 1.0, math.nextafter(top, math.inf)))
    if chance < 0.1:
        return r.choice((bottom, top, low if low is not None else bottom, high if high is not None else top))
    middle = bottom + 0.55 * (top - bottom)
    return middle + r.choice((0.0, 0.0, 0.5, -0.5, 2.0, 8.0)) * error
