"""Frozen data that crosses the process boundary between the run and the physics.

It exists so that the run (words, keys, record) needs no physics and the physics needs no screen: the one asks
with a Question, the other answers with data of this package, and everything here is written into the journal
as it stands. No logic lives here. All quantities are SI; all pressures are absolute.
"""

from runbook.answers.card import GaugeCard, GaugeRow, VesselCard
from runbook.answers.explanation import ChargeEstimate, ChargePart, Explanation, Past, Telling
from runbook.answers.lines import Empty, Hold, LineKind, Need, PlanLine, QuickItem, SafetyMessage, Sight, Witness
from runbook.answers.margins import (
    Agreement,
    ChargeBox,
    Corner,
    Distance,
    Effect,
    Future,
    Hazard,
    Judgement,
    LeftAlone,
    Margin,
    Phase,
)
from runbook.answers.plan import Certificate, ChargeBounds, Finding, Instrument, Plan, PlanPart, VesselBeside
from runbook.answers.question import Answer, Observation, Question, Unanswered
from runbook.answers.request import BindRequest

__all__ = [
    "Agreement",
    "Answer",
    "BindRequest",
    "Certificate",
    "ChargeBounds",
    "ChargeBox",
    "ChargeEstimate",
    "ChargePart",
    "Corner",
    "Distance",
    "Effect",
    "Empty",
    "Explanation",
    "Finding",
    "Future",
    "GaugeCard",
    "GaugeRow",
    "Hazard",
    "Hold",
    "Instrument",
    "Judgement",
    "LeftAlone",
    "LineKind",
    "Margin",
    "Need",
    "Observation",
    "Past",
    "Phase",
    "Plan",
    "PlanLine",
    "PlanPart",
    "Question",
    "QuickItem",
    "SafetyMessage",
    "Sight",
    "Telling",
    "Unanswered",
    "VesselBeside",
    "VesselCard",
    "Witness",
]
