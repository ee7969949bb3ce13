"""A small plan written by hand, answers to go with it, and a run to drive. People and vessel are invented."""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import dataclass, field, replace

from runbook.answers import (
    Agreement,
    Answer,
    Certificate,
    ChargeBounds,
    ChargeBox,
    Corner,
    Distance,
    Effect,
    Empty,
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
    QuickItem,
    Unanswered,
    Witness,
)
from runbook.run.acts import Act, Read
from runbook.run.clock import FakeClock, Moment
from runbook.run.decide import Refused, decide
from runbook.run.events import Answered, Event, NoAnswer, Person, ReadingTaken, RunOpened
from runbook.run.ledger import Ledger, fold
from runbook.run.questions import question
from runbook.run.signing import number_sha256

ROOM = 101_325.0
"""[Pa]"""
REST = LeftAlone(True, True, (Future("heat off", 303.15, 72.0e5, True, None, None),))
MOVING = LeftAlone(False, True, (Future("heat off", 303.15, 121.0e5, False, "RD1", 4320.0),))

PG1 = Need("PG1", "pressure", "bar(g)", fresh_s=300.0)
TT1 = Need("TT1", "temperature", "degC", fresh_s=300.0)
BS1 = Need("BS1", "mass", "g", low=0.115, high=0.119, fresh_s=120.0)
HS1 = Need("HS1", "liquid height", "mm", low=0.027, high=0.032)

PEOPLE = (
    Person("Ada", ("performer",), number_sha256("Ada", "111")),
    Person("Bo", ("second",), number_sha256("Bo", "222")),
    Person("Cy", ("teacher",), number_sha256("Cy", "333")),
)


def instrument(tag: str, reads: str, unit: str, low: float, high: float, error: float, half: float) -> Instrument:
    """One instrument; the wall probe grows by 0.005 K/K like class B."""
    slope = 0.005 if reads == "temperature" else 0.0
    return Instrument(tag, reads, "cell", unit, low, high, error, slope, half, 0.0, "at the bench")


INSTRUMENTS = (
    instrument("PG1", "pressure", "bar(g)", ROOM - 1e5, ROOM + 160e5, 0.96e5, 0.5e5),
    instrument("PG2", "pressure", "bar(g)", ROOM, ROOM + 10e5, 0.1e5, 0.05e5),
    instrument("TT1", "temperature", "degC", 193.15, 373.15, 0.3, 0.05),
    instrument("BS1", "mass", "g", 0.0, 3.0, 0.0005, 0.00005),
    instrument("HS1", "liquid height", "mm", 0.0, 0.08, 0.001, 0.0005),
    instrument("GD1", "carbon dioxide", "%", 0.0, 0.05, 0.001, 0.00005),
)


def line(number: int, text: str = "Do it", **changes: object) -> PlanLine:
    """A line that keeps every hazard, at rest, unless told otherwise; `raises` and `lowers` set one each."""
    effects = dict.fromkeys(Hazard, Effect.KEEPS)
    if changes.pop("raises", False):
        effects[Hazard.OVER_PRESSURE] = Effect.RAISES
    if changes.pop("lowers", False):
        effects[Hazard.GAS] = Effect.LOWERS
    made = PlanLine(
        number=f"1.{number}",
        part=0,
        kind=LineKind.DO,
        text=text,
        who=None,
        warning=None,
        effects=tuple(effects.items()),
        committing=False,
        leans_on=(),
        entry_needs=(),
        needs_charge_proof=False,
        opens_containment=False,
        reads=(),
        hold=None,
        witness=None,
        quick=(),
        read_after=(),
        empty=None,
        valves=(),
        source=None,
        seals=False,
        ahead=(),
        left_alone=REST,
        phases=(Phase.C,),
        way_back="HEAT OFF: switch H1 off. Then read PG1.",
        sights=(),
        if_not="",
        lasts_s=None,
    )
    return replace(made, **changes)  # type: ignore[arg-type] # a test names fields of PlanLine


def plan(*lines: PlanLine, **changes: object) -> Plan:
    """A plan of one part with these lines."""
    made = Plan(
        procedure="Carbon dioxide in a window",
        apparatus="Window cell",
        vessel="C7",
        fluid="carbon dioxide",
        procedure_sha256="p",
        apparatus_sha256="a",
        verdict="within limits",
        approved="I. Brandt, safety officer, 2031-01-15",
        findings=(),
        barometer=ROOM,
        barometer_bound=500.0,
        barometer_source="read",
        room_hottest=303.15,
        room_coldest=291.15,
        charge=None,
        planned_kg=(0.115, 0.119),
        free_volume=(0.248e-3, 0.252e-3),
        ceiling=ROOM + 94.8e5,
        ceiling_by="RD1",
        pressure_unit="bar(g)",
        bounds=ChargeBounds(0.060, 0.117, 0.150, "", "", ""),
        certificates=(Certificate("RD1", "inspection", "valid", "2032-01-01"),),
        instruments=INSTRUMENTS,
        roles=("performer", "second", "teacher"),
        bring=(),
        valves=(("V1", "open"), ("V2", "open"), ("V3", "shut")),
        valve_lets_go=(("V1", "stays"), ("V2", "stays"), ("V3", "stays")),
        outside_valves=("V1", "V2"),
        source_tag="H1",
        source="off",
        source_away=True,
        let_down_valve="V2",
        release_forbidden=False,
        parts=(PlanPart("Day", 0, False, None, None),),
        lines=lines,
        make_safe_also=(),
    )
    return replace(made, **changes)  # type: ignore[arg-type] # a test names fields of Plan


def margin(left: float | None, **changes: object) -> Margin:
    """A pressure margin of RD1 with so much left [Pa]."""
    good = left is not None and left > 0.0
    made = Margin(
        limit="RD1",
        kind="pressure",
        cause="now",
        worst=None if left is None else ROOM + 94.8e5 - left,
        allowed=ROOM + 94.8e5,
        margin=left,
        unit="Pa",
        judgement=Judgement.CLEAR if good else Judgement.BLOCKED,
        at=Corner(0.119, 0.248e-3, 308.15),
    )
    return replace(made, **changes)  # type: ignore[arg-type] # a test names fields of Margin


AGREES = Agreement("agrees", "PG1", ROOM + 62.6e5, 1.2e5, ROOM + 62.0e5, 0.4e5, "thermometer and gauge")


def answer(key: str, **changes: object) -> Answer:
    """An answer with which everything is well."""
    made = Answer(
        key=key,
        now=(margin(31.0e5),),
        ahead=(margin(11.0e5, cause="this step"),),
        left_alone=REST,
        agreement=AGREES,
        charge=ChargeBox(0.115, 0.119, True, ("weighing", "height")),
        charge_proved=True,
        valid=True,
        good_for_s=240.0,
        phases=(Phase.C,),
        pressure=ROOM + 62.0e5,
        pressure_U=0.4e5,
        region="liquid and vapour",
        liquid_height=0.03,
        distance=Distance(31.0e5, 19.0, 1440.0, 0.8 / 60.0),
        sights=(),
    )
    return replace(made, **changes)  # type: ignore[arg-type] # a test names fields of Answer


@dataclass
class Run:
    """A run without conductor: acts in, events folded, everything kept."""

    plan: Plan
    clock: FakeClock = field(default_factory=FakeClock)
    ledger: Ledger = field(default_factory=Ledger.start)
    pairs: list[tuple[Event, Moment]] = field(default_factory=list)

    def put(self, event: Event) -> None:
        """Something has happened."""
        at = self.clock.now()
        self.pairs.append((event, at))
        self.ledger = fold(self.ledger, event, at)

    def act(self, act: Act) -> Event | Refused | None:
        """Ask; what is granted happens."""
        decided = decide(self.plan, self.ledger, self.clock.now(), act)
        if decided is not None and not isinstance(decided, Refused):
            self.put(decided)
        return decided

    def must(self, act: Act) -> Event:
        """Ask for what has to be granted."""
        decided = self.act(act)
        assert decided is not None, act
        assert not isinstance(decided, Refused), decided.reasons
        return decided

    def codes(self, act: Act) -> list[str]:
        """Why it is not granted; empty where it is (and then it has not happened)."""
        decided = decide(self.plan, self.ledger, self.clock.now(), act)
        return [str(r.code) for r in decided.reasons] if isinstance(decided, Refused) else []

    def read(self, tag: str, value: float, by: str = "Ada", blind: bool = False) -> ReadingTaken:
        """Enter a reading [SI]."""
        taken = self.must(Read(tag, value, f"{value}", f"{tag} {value}", by, blind))
        assert isinstance(taken, ReadingTaken)
        return taken

    def answered(self, **changes: object) -> None:
        """The standing question is answered."""
        asked = question(self.plan, self.ledger)
        assert asked is not None
        self.put(Answered(answer(asked.key, **changes)))

    def lost(self, why: str = "the process was lost") -> None:
        """The standing question is not answered."""
        self.put(NoAnswer(Unanswered(self.ledger.key, why)))


def begun(made: Plan, people: Iterable[Person] = PEOPLE, part: int = 0) -> Run:
    """A run that has been opened."""
    run = Run(made)
    run.put(RunOpened(made, tuple(people), "", "", (("runbook", "0"),), False, part, "2031-03-02"))
    return run


def hold(role: str = "second", read: Need | None = None, number: int = 9) -> PlanLine:
    """A hold point."""
    return line(number, "Stop", kind=LineKind.HOLD, hold=Hold(role, "it matters", read))


def witness(wait_s: float = 300.0) -> PlanLine:
    """A witness point."""
    return line(8, "Call", kind=LineKind.WITNESS, witness=Witness("teacher", "to see it", wait_s))


def quick(**changes: object) -> PlanLine:
    """A quick sequence that closes V2."""
    items = (
        QuickItem("Shut V2", 60.0, "Begin again.", (("V2", "shut"),), True),
        QuickItem("Step back", 30.0, "Open V2."),
    )
    return line(7, "Shut V2; step back", kind=LineKind.QUICK, quick=items, **changes)


def empty() -> PlanLine:
    """Show empty."""
    return line(6, "Show empty", kind=LineKind.EMPTY, empty=Empty("PG2", "V3", "TT1", "V2"))
