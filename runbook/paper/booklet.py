"""The whole booklet of one procedure. Refuses a plan that is not within limits: paper cannot stop anybody."""

from __future__ import annotations

from collections.abc import Sequence
from datetime import date
from xml.etree.ElementTree import Element

from runbook.answers import GaugeCard, Plan, VesselCard
from runbook.errors import InputUnusable
from runbook.paper import cards, lines
from runbook.paper.markup import Child, document, tag
from runbook.paper.style import STYLE
from runbook.procedure.model import Issue
from runbook.run.amounts import planned, pressure, temperature
from runbook.run.amounts import vessels as vessel_words


def booklet(plan: Plan, issue: Issue, gauge: GaugeCard | None, vessels: Sequence[VesselCard], on: date) -> str:
    """One self-contained page; on: the day its certificates were judged on; vessels: of each its card, the first first.

    Raises InputUnusable for a plan that is not within limits.
    """
    if plan.verdict != "within limits":
        raise InputUnusable(
            f"this procedure is {plan.verdict}: it is not printed, for a sheet of paper refuses no step. "
            "`runbook check` says what to mend"
        )
    sheets: list[Element | None] = [_cover(plan, issue, on), cards.phases(plan)]
    sheets += [lines.part(plan, index) for index in range(len(plan.parts))]
    shut = vessels[0].left_closed
    sheets += [lines.proving_ranges(plan), cards.gauge(plan, gauge) if gauge is not None and shut else None]
    sheets.append(
        tag(
            "section",
            tag("h2", "To cut out"),
            *(cards.vessel_tag(plan, one) for one in vessels),
            cards.door_sign(plan),
            cards.fire_card(plan, vessels),
            class_="sheet",
        )
    )
    return document(f"{plan.procedure}, issue {issue.number}", STYLE, *(s for s in sheets if s is not None))


def _cover(plan: Plan, issue: Issue, on: date) -> Element:
    facts: list[tuple[str, str]] = [
        ("issue", f"{issue.number} of {issue.date.isoformat()}, written by {issue.written_by}, "
                  f"checked by {issue.checked_by}, review by {issue.review_by.isoformat()}"),
        ("vessel", f"{vessel_words(plan)}; figures approved by {plan.approved}"),
        ("verdict", f"within limits of those figures on {on.isoformat()}"),
        ("charge", f"{planned(plan)} of {plan.fluid}"),
        ("ceiling", f"{pressure(plan, plan.ceiling)} by {plan.ceiling_by}"),
        ("room", f"{temperature(plan.room_coldest)} to {temperature(plan.room_hottest)}; hotter or colder: not today"),
        ("files", f"procedure {plan.procedure_sha256[:12]}, apparatus {plan.apparatus_sha256[:12]}"),
    ]  # fmt: skip
    people: list[Child] = [
        tag("div", tag("span", f"{role}: ", tag("span", class_="blank wide"), class_="field"),
            tag("span", "initials ", tag("span", class_="blank"), class_="field"), class_="fields")
        for role in plan.roles
    ]  # fmt: skip
    return tag(
        "section",
        tag("h1", plan.procedure),
        tag("table", tag("tbody", *(tag("tr", tag("td", a), tag("td", b)) for a, b in facts)), class_="facts"),
        tag(
            "div",
            tag("b", "This paper stops nobody. "),
            "It certifies no vessel and replaces neither relief device, risk assessment, local codes nor licensed "
            "practice. The verdict is arithmetic on the figures of the two files. On paper nothing is computed from "
            "what you read: where a reading is outside what is accepted, stop, and make safe by the sheet of first "
            "acts. Mark a step before you begin it, tick it when it is done, never ahead.",
            class_="stop",
        ),
        tag("h3", "People"),
        *people,
        tag("div", tag("span", "date ", tag("span", class_="blank"), class_="field"),
            tag("span", "barometer ", tag("span", class_="blank"), " hPa", class_="field"), class_="fields"),
        cards.shopping(plan),
    )  # fmt: skip
