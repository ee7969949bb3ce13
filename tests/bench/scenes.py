"""An invented vessel, people and answers for the screens: nothing here is computed, so every state can be had.

The engine answers whatever it is told to; the run behind it is the real one, with its interlock.
"""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import replace
from typing import Any

from runbook.answers import (
    Agreement,
    Answer,
    BindRequest,
    Certificate,
    ChargeBounds,
    ChargeBox,
    Distance,
    Effect,
    Empty,
    Explanation,
    Future,
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
    Question,
    QuickItem,
    SafetyMessage,
    Sight,
    Unanswered,
    Witness,
)
from runbook.run.clock import FakeClock
from runbook.run.conductor import Conductor
from runbook.run.engine import Bound
from runbook.run.events import RunOpened
from runbook.run.opening import Participant, people

BARO = 1.0e5
"""[Pa]"""
NASTY = "[V-3] [/b] [@click=app.quit]x[/]"
"""What must come out verbatim on every screen."""
WHO = (
    Participant("R. Amsel", ("performer",), "111"),
    Participant("T. Okoro", ("second",), "222"),
    Participant("M. Ferrant", ("teacher",), "333"),
)
AT_REST = LeftAlone(
    True,
    True,
    (Future("heat off", 303.15, 7.2e6, True, None, None), Future("heat stuck on", 312.15, 8.8e6, True, None, None)),
)
RESTLESS = LeftAlone(
    False,
    True,
    (
        Future("heat off", 303.15, 12.2e6, False, "RD1", 4320.0),
        Future("heat stuck on", None, None, False, None, None),
    ),
)
TT1 = Need("TT1", "temperature", "degC", None, None, 600.0, 180.0)
PG1 = Need("PG1", "pressure", "bar(g)", None, None, 600.0, 180.0)
HS1 = Need("HS1", "liquid height", "mm", 0.027, 0.032)
INSTRUMENTS = (
    Instrument("TT1", "temperature", "wall", "degC", 173.15, 373.15, 0.15, 0.002, 0.05, 120.0, "shield"),
    Instrument("PG1", "pressure", "cell", "bar(g)", BARO, BARO + 160e5, 0.96e5, 0.0, 0.5e5, 0.0, "shield"),
    Instrument("PG2", "pressure", "low gauge line", "bar(g)", BARO, BARO + 10e5, 0.1e5, 0.0, 0.05e5, 0.0, "shield"),
    Instrument("HS1", "liquid height", "window", "mm", 0.0, 0.06, 0.001, 0.0, 0.0005, 0.0, "camera"),
)


def line(number: str, kind: LineKind, text: str, **changes: Any) -> PlanLine:
    """One line that changes nothing unless told to."""
    base = PlanLine(
        number=number, part=int(number[0]) - 1, kind=kind, text=text, who="performer", warning=None,
        effects=tuple((hazard, Effect.KEEPS) for hazard in Hazard), committing=False, leans_on=(), entry_needs=(),
        needs_charge_proof=False, opens_containment=False, reads=(), hold=None, witness=None, quick=(),
        read_after=(), empty=None, valves=(), source=None, seals=False, ahead=(), left_alone=AT_REST,
        phases=(Phase.C,), way_back="HEAT OFF. Then read PG1.", sights=(), if_not="", lasts_s=None,
    )  # fmt: skip
    return replace(base, **changes)


WARM = line(
    "1.2",
    LineKind.DO,
    "Warm the cell slowly to 33 degC while the class watches",
    warning=SafetyMessage(
        "WARNING",
        "Pressure near 80 bar(g)",
        "throw parts if a window fails.",
        "Keep the shield between the cell and every face.",
    ),
    effects=tuple((h, Effect.RAISES if h is Hazard.OVER_PRESSURE else Effect.KEEPS) for h in Hazard),
    reads=(TT1, PG1),
    source="on",
    sights=(
        Sight("The surface fades in the middle of the window and is gone.", False, "Switch the jacket off."),
        Sight(
            "From about 30.2 °C a haze, seen with a lamp from the side.", True, of="haze", at_K=303.32, trust="Good."
        ),
        Sight("At 31.0 °C the surface fades and is gone where it stands.", True, of="meniscus", at_K=304.13),
    ),
    if_not="Switch the jacket off and let it come back.",
)
LINES = (
    line("1.1", LineKind.HOLD, "", who=None, hold=Hold("second", "pressure cannot tell how much is in the cell", HS1)),
    WARM,
    line("1.3", LineKind.WITNESS, "", who=None, witness=Witness("teacher", "the class is behind the line", 120.0)),
    line(
        "1.4",
        LineKind.QUICK,
        "",
        who=None,
        quick=(
            QuickItem("Shut V2 on the falling scale", 60.0, "Open V1 and begin again.", (("V2", "shut"),), True),
            QuickItem("Shut the shield and step back", 30.0, "Open V2."),
        ),
        left_alone=RESTLESS,
    ),
    line("1.5", LineKind.EMPTY, "", who=None, empty=Empty("PG2", "V3", "TT1", "V2")),
    line("2.1", LineKind.DO, "Put everything away"),
)


def plan(lines: tuple[PlanLine, ...] = LINES, **changes: Any) -> Plan:
    """A vessel of 250 mL with a charge of 117 g that has been proved."""
    parts = (PlanPart("The lesson", 0, True, 3000.0, None),) + (
        (PlanPart("Afterwards", len(lines) - 1, False, None, None),) if lines[-1].part else ()
    )
    base = Plan(
        procedure="Carbon dioxide through its critical point", apparatus="view cell, 250 mL, two windows",
        vessel="VC-2", fluid="carbon dioxide", procedure_sha256="0" * 64, apparatus_sha256="1" * 64,
        verdict="within limits", approved="M. Ferrant, pressure equipment officer, 2031-02-14", findings=(),
        barometer=BARO, barometer_bound=3000.0, barometer_source="height above sea level", room_hottest=303.15,
        room_coldest=291.15, charge=ChargeBox(0.115, 0.119, True, ("height",)), planned_kg=(0.115, 0.119),
        free_volume=(2.48e-4, 2.52e-4), ceiling=BARO + 94.8e5, ceiling_by="RD1", pressure_unit="bar(g)",
        bounds=ChargeBounds(0.102, 0.117, 0.150, "the surface would sink out of view", "critical", "RD1 at 39 degC"),
        certificates=(Certificate("PG1", "calibration", "valid", "2032-01-31"),), instruments=INSTRUMENTS,
        roles=("performer", "second", "teacher"), bring=("face shield for each person at the cell",),
        valves=(("V2", "shut"), ("V3", "shut")), valve_lets_go=(("V2", "stays"), ("V3", "stays")),
        outside_valves=("V2",), source_tag="H1", source="off", source_away=True, let_down_valve="V2",
        release_forbidden=False, parts=parts, lines=lines, make_safe_also=(),
    )  # fmt: skip
    return replace(base, **changes)


def margin(share: float | None, kind: Judgement = Judgement.CLEAR, cause: str = "now") -> Margin:
    """Pressure at this share of the way to RD1; None: unknown."""
    allowed = BARO + 94.8e5
    worst = None if share is None else BARO + share * 94.8e5
    left = None if worst is None else allowed - worst
    return Margin(
        "RD1", "pressure", cause, worst, allowed, left, "Pa", kind, None, 1440.0, "" if left else "no reading"
    )


def answer(key: str, **changes: Any) -> Answer:
    """All is well: liquid and vapour at 24.1 degC, 62.6 bar(g)."""
    base = Answer(
        key=key, now=(margin(0.673),), ahead=(margin(0.884, cause="this step"),), left_alone=AT_REST,
        agreement=Agreement("agrees", "PG1", BARO + 62.6e5, 1.2e5, BARO + 62.0e5, 0.4e5, "thermometer and gauge"),
        charge=ChargeBox(0.115, 0.119, True, ("height",)), charge_proved=True, valid=True, good_for_s=240.0,
        phases=(Phase.C,), pressure=BARO + 62.0e5, pressure_U=0.4e5, region="liquid+vapour", liquid_height=0.030,
        distance=Distance(31.0e5, 19.0, 1440.0, 0.8 / 60.0),
        sights=(
            Sight("The surface stands at 30 mm on the scale and rises.", True, of="meniscus",
                  numbers=(("height", 0.030, "m"),), trust="As good as the charge is known."),
            Sight("A thin bluish haze, seen with a lamp from the side.", True, of="haze"),
        ),
    )  # fmt: skip
    return replace(base, **changes)


FAR = Agreement("disagrees", "PG1", BARO + 62.6e5, 1.2e5, BARO + 60.1e5, 0.4e5, "nothing")
EXPLAINED = (
    Explanation("gauge offset", 2.4e5, "Pa", 0.62, False, "re-zero", ("trapped air",)),
    Explanation("trapped air", 2.3e5, "Pa", 0.34, False, "re-zero", ("gauge offset",)),
    Explanation("thermometer place", 1.7, "K", 0.04, False, "second thermometer"),
    Explanation("none", 0.0, "", 1e-5, True, ""),
    Explanation("leak", 0.001, "kg", 1e-6, True, ""),
)
"""Of FAR: the gauge or air, which only the test tells."""


def lost(why: str) -> Callable[[str], Unanswered]:
    """An engine that cannot answer, and why."""

    def unanswered(key: str) -> Unanswered:
        return Unanswered(key, why)

    return unanswered


class FakeEngine:
    """Answers at once, with what it was told to say."""

    def __init__(self, made: Plan, say: Callable[[str], Answer | Unanswered] = answer) -> None:
        self.plan = made
        self.say = say
        """Key -> what is answered; may be changed during a test."""

    async def bind(self, request: BindRequest) -> Bound:
        """The plan, whatever is asked for."""
        return Bound(self.plan, "", "", (("runbook", "0"),))

    async def ask(self, question: Question) -> Answer | Unanswered:
        """What it was told to say."""
        return self.say(question.key)

    async def warm(self) -> None:
        """Nothing to start."""

    async def close(self) -> None:
        """Nothing to end."""


async def desk(made: Plan | None = None, rehearsal: bool = False) -> tuple[Conductor, FakeEngine, FakeClock]:
    """An open run before its first line, without a record."""
    made = plan() if made is None else made
    engine, clock = FakeEngine(made), FakeClock()
    conductor = Conductor(None, clock, engine)
    await conductor.open(
        RunOpened(made, people(WHO, made.roles), "", "", (("runbook", "0"),), rehearsal, 0, "2031-03-02")
    )
    await conductor.settled()
    return conductor, engine, clock
