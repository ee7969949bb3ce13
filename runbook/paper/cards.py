"""The cards that hang at the bench, on the vessel, at the door and at the fire panel."""

from __future__ import annotations

from collections.abc import Sequence
from typing import Final
from xml.etree.ElementTree import Element

from runbook.answers import Certificate, Effect, GaugeCard, Hazard, Phase, Plan, VesselCard
from runbook.paper.dial import face
from runbook.paper.markup import Child, table, tag
from runbook.run.amounts import grams, pressure, pressure_number, temperature
from runbook.run.safe import ORDER, make_safe
from runbook.run.sentences import phase_words

_ALWAYS: Final = (Phase.J, Phase.F, Phase.I)
"""What may happen to any vessel."""
_DANGERS: Final = {
    Hazard.OVER_PRESSURE: "A vessel under pressure",
    Hazard.COLD: "Surfaces that burn by cold",
    Hazard.GAS: "Gas that takes the place of air",
    Hazard.UNDER_PRESSURE: "Glass under vacuum",
    Hazard.HOT: "Hot surfaces",
}
"""What the door says of a hazard that some step raises."""


def phases(plan: Plan) -> Element:
    """What to do first, for every phase this procedure can be in."""
    reached = {phase for line in plan.lines for phase in line.phases} | set(_ALWAYS)
    sheet = tag("section", tag("h2", "Make safe: first acts"), class_="sheet")
    sheet.append(tag("p", "Where you cannot tell which of these it is, do the one that stands first."))
    rows: list[tuple[Child, ...]] = []
    for phase in (p for p in ORDER if p in reached):
        one = make_safe(plan, phase)
        acts = tag("ol", *(tag("li", act) for act in one.acts), class_="acts")
        what = phase_words(phase.value).removeprefix("phase ")
        rows.append((tag("b", what), acts, one.never, one.may_wait))
    sheet.append(table(("what you see", "do, in this order", "never", "may one wait?"), rows, "grid acts-table"))
    return sheet


def gauge(plan: Plan, card: GaugeCard) -> Element:
    """The card beside the gauge: the pointer against the thermometer, for this charge and barometer."""
    rows: list[tuple[Child, ...]] = [
        (temperature(r.temperature), *(pressure_number(plan, p) for p in (r.low, r.expected, r.high)))
        for r in card.rows
    ]
    head = ("wall", "least", "expected", "most")
    charge = f"{grams(plan.planned_kg[0])} to {grams(plan.planned_kg[1])} of {plan.fluid}"
    barometer = f"{plan.barometer / 100.0:.0f} hPa ({plan.barometer_source})"
    ceiling = pressure(plan, card.ceiling)
    return tag(
        "section",
        tag("h2", f"Gauge card for {card.tag}"),
        tag("p", f"{charge} in {plan.apparatus}, barometer {barometer}. All in {card.unit}, the vessel at rest."),
        tag(
            "div",
            face(card, plan.barometer),
            table(head, rows, "grid numbers"),
            class_="pair",
        ),
        tag("p", tag("b", f"Ceiling {ceiling}, by {card.ceiling_by}. "), "The thick dashes are never entered."),
        tag(
            "p",
            "Below the least: a cold place, the thermometer high, or the gauge low; with no liquid in view, too little "
            "in the cell. Above the most: make safe. Liquid beside vapour reads the same whatever the charge is: "
            "only height or weight proves the charge.",
        ),
        class_="sheet",
    )


def vessel_tag(plan: Plan, card: VesselCard) -> Element:
    """What hangs on the loaded vessel."""
    opens = ", ".join(f"{name} ({kind}) from {pressure(plan, at)}" for name, kind, at in card.relief)
    relief = f"Relief: {opens}. Keep clear of its outlet." if opens else "Nothing relieves it."
    if not card.left_closed:
        return tag(
            "div",
            tag("p", f"{card.vessel}: NOT EMPTY", class_="huge"),
            tag("p", f"{plan.fluid}, at most {grams(card.most_kg)}, {plan.let_down_valve} open", class_="big"),
            tag("p", f"Keep your hands off {plan.let_down_valve}. Never plug its outlet.", class_="big"),
            tag("p", f"Relief: {opens}. Keep clear of both outlets." if opens else relief),
            tag("p", "Do not carry, undo, tighten or warm. It is empty when the record says so."),
            _blanks(("date", "blank"), ("name", "blank wide")),
            class_="card",
        )
    hottest = "Nobody can say how hot its place may be: keep it in the room."
    if card.hottest_place is not None:
        hottest = f"Never in a place hotter than {temperature(card.hottest_place)}."
    return tag(
        "div",
        tag("p", f"{card.vessel}: LOADED", class_="huge"),
        tag("p", f"{plan.fluid}, at most {grams(card.most_kg)}", class_="big"),
        tag("p", hottest, class_="big"),
        tag("p", relief),
        tag("p", "Do not carry, undo, tighten or warm. The charge was proved by "),
        _blanks(("charge", "blank"), ("date", "blank"), ("name", "blank wide"), ("key with", "blank wide")),
        class_="card",
    )


def door_sign(plan: Plan) -> Element:
    """What the door says while the vessel is loaded."""
    raised = {h for line in plan.lines for h, effect in line.effects if effect in (Effect.RAISES, Effect.UNKNOWN)}
    dangers = [words for hazard, words in _DANGERS.items() if hazard in raised]
    return tag(
        "div",
        tag("p", "DEMONSTRATION UNDER PRESSURE", class_="huge"),
        tag("ul", *(tag("li", d) for d in dangers)),
        tag("p", "Do not come in while the lamp is on. When the alarm sounds: out, and stay out.", class_="big"),
        _blanks(("from", "blank"), ("to", "blank"), ("who answers for it", "blank wide"), ("telephone", "blank wide")),
        class_="card",
    )


def fire_card(plan: Plan, vessels: Sequence[VesselCard]) -> Element:
    """What the fire service is told."""
    opens = ", ".join(f"{name} opens from {pressure(plan, at)}" for one in vessels for name, _, at in one.relief)
    raises = "a fire raises it until a device opens" if opens else "in a fire it bursts, for nothing relieves it"
    held = [f"at most {grams(one.most_kg)} in one closed vessel of {one.volume * 1e6:.0f} mL" for one in vessels]
    named = [f"{one.vessel}: {words}" for one, words in zip(vessels, held, strict=True)]
    rows: list[tuple[Child, ...]] = [
        ("substance", plan.fluid),
        ("how much", held[0] if len(held) == 1 else "; ".join(named)),
        ("pressure", f"in the lesson at most {pressure(plan, plan.ceiling)}; {raises}"),
        ("relief", opens or "none on the vessel"),
        ("what then", "the whole charge comes out at once, cold and loud; parts may fly if a window fails"),
        ("where it stands", tag("span", class_="blank wide")),
        ("who knows it", tag("span", class_="blank wide")),
    ]
    return tag("div", tag("p", f"FIRE SERVICE: {', '.join(one.vessel for one in vessels)}", class_="big"),
               table((), rows, "grid"), class_="card")  # fmt: skip


def shopping(plan: Plan, extra: tuple[str, ...] = ()) -> Element:
    """What has to be there before anything begins."""
    things = (*plan.bring, *extra)
    return tag(
        "div",
        tag("h3", "To bring"),
        tag("ul", *(tag("li", f"☐ {thing}") for thing in things), class_="list")
        if things
        else tag("p", "Nothing is listed."),
        tag("h3", "Papers that must be valid on the day"),
        tag("ul", *(tag("li", f"☐ {c.tag}: {c.what}{_until(c)}") for c in plan.certificates), class_="list"),
    )


def _until(one: Certificate) -> str:
    return f", until {one.until}" if one.until[:1].isdigit() else ""


def _blanks(*named: tuple[str, str]) -> Element:
    return tag("div", *(tag("span", f"{n} ", tag("span", class_=c), class_="field") for n, c in named), class_="fields")
