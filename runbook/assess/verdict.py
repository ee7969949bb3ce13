"""The verdict of check, and the findings that need physics: margins, certificates, gates while rising."""

from __future__ import annotations

from collections.abc import Sequence

from runbook.answers import Certificate, Effect, Finding, LineKind, Margin, PlanLine
from runbook.assess.barred import FORBIDDEN, TOLD_ONCE
from runbook.assess.mend import Mend
from runbook.assess.walk import Walked
from runbook.procedure.document import Place, Route
from runbook.procedure.reader import Loaded
from runbook.quantities import say

_DATED = {
    "expired": "has expired",
    "not yet valid": "is not valid yet on this date",
    "not known": "is not known",
}


def line_findings(
    loaded: Loaded,
    walked: Sequence[Walked],
    lines: Sequence[PlanLine],
    dated: Sequence[Certificate],
) -> tuple[Finding, ...]:
    """Findings with the position of the step in the procedure file."""
    found = [
        Finding(
            "certificate",
            "error" if c.state != "not known" else "warning",
            *_dated_at(loaded, c),
            f"{c.tag}: {c.what} {_DATED[c.state]}{_what_to_do(c, loaded)}",
            loaded.apparatus_file,
        )
        for c in dated
        if c.state != "valid"
    ]
    for index, line in enumerate(lines):
        at = position(loaded, walked, index)
        found += [
            Finding("margin", "error", *at, f"step {line.number}: {margin_sentence(m)}")
            for m in line.ahead
            if (m.margin is None or m.margin <= 0.0) and m.kind not in TOLD_ONCE
        ]
        found += _gates(lines, index, at)
    return tuple(found)


def _what_to_do(one: Certificate, loaded: Loaded) -> str:
    if one.state == "not known":
        return f": find it out, or ask {loaded.apparatus.approved.by}; until then nothing is within limits"
    return f" (until {one.until}). Renew it, or plan another date."


def _dated_at(loaded: Loaded, one: Certificate) -> Place:
    """Where in the apparatus file a dated proof stands."""
    apparatus, places = loaded.apparatus, loaded.apparatus_positions
    routes: list[Route] = [("relief", i, "valid_until") for i, r in enumerate(apparatus.relief) if r.tag == one.tag]
    routes += [("instruments", i, "valid_until") for i, r in enumerate(apparatus.instruments) if r.tag == one.tag]
    if apparatus.heat_source is not None and apparatus.heat_source.tag == one.tag:
        routes += [("heat_source", "tested"), ("heat_source",)]
    if one.tag == apparatus.tag:
        word = "approved" if "approval" in one.what else "cycles" if "cycles" in one.what else "proof_test"
        routes += [(word, "date"), (word, "valid_until"), (word, "allowed"), (word,)]
    return next((places[route] for route in routes if route in places), (1, 1))


def mend_findings(loaded: Loaded, found: Sequence[Mend]) -> tuple[Finding, ...]:
    """What would bring it within limits, each at the value that would change."""
    said = []
    for one in found:
        first = one.edits[0]
        file = loaded.apparatus_file if first.in_apparatus else ""
        said.append(Finding("mend", "advice", *first.at, f"within limits with {one.words}, all else as it is", file))
    return tuple(said)


def verdict_of(lines: Sequence[PlanLine], findings: Sequence[Finding]) -> str:
    """'within limits', 'outside limits' or 'not proved'; of several the second before the third."""
    margins = [m for line in lines for m in line.ahead]
    if any(m.margin is not None and m.margin <= 0.0 for m in margins):
        return "outside limits"
    errors = [f for f in findings if f.severity == "error" and f.rule != "margin"]
    if any(f.rule == "certificate" for f in errors):
        return "outside limits"
    if errors or any(m.margin is None for m in margins):
        return "not proved"
    if any(f.rule == "certificate" for f in findings):
        return "not proved"
    return "within limits"


def margin_sentence(margin: Margin) -> str:
    """One margin for a report: limit, number, corner."""
    if margin.kind == FORBIDDEN:
        return margin.why
    what = f"{margin.limit} {margin.kind}, {margin.cause}"
    if margin.margin is None:
        return f"{what}: not proved, {margin.why or 'not known'}"
    worst, allowed = (amount(x, margin.unit) for x in (margin.worst or 0.0, margin.allowed or 0.0))
    corner = ""
    if margin.at is not None and margin.at.charge_kg is not None:
        corner = (
            f" with {margin.at.charge_kg * 1000:.1f} g in {margin.at.volume_m3 * 1e6:.1f} mL"
            f" at {margin.at.temperature_K - 273.15:.1f} degC"
        )
    return f"{what}: {worst}{corner}, allowed {allowed}"


def amount(value: float, unit: str) -> str:
    """A margin's figure for a report: bar(a), degC or K, ppm."""
    if unit == "Pa":
        return say(value, "bar(a)", 1)
    if unit == "m3/m3":
        return f"{value * 1e6:.0f} ppm"
    if unit == "K":
        # Above 150 K it is a temperature, below a difference: ratings of differences never reach so far.
        return say(value, "degC", 1) if value > 150.0 else f"{value:.1f} K"
    if unit == "K/s":
        return say(value, "K/min", 2)
    if unit == "Pa/s":
        return say(value, "bar/min", 1)
    return f"{value:.4g} {unit}"


def _falls(line: PlanLine) -> bool:
    """A limit falls, or what is in the vessel cannot be computed: a rating nobody knows is told by itself."""
    unknown = any(m.margin is None for m in line.ahead)
    return not line.left_alone.known or not unknown or any(m.margin is not None and m.margin <= 0.0 for m in line.ahead)


def _gates(lines: Sequence[PlanLine], index: int, at: tuple[int, int]) -> list[Finding]:
    """A hold, witness, reading or wait only where the vessel, left alone, is at rest."""
    line = lines[index]
    before = lines[index - 1]
    if index == 0 or before.left_alone.at_rest or not _falls(before):
        return []
    gate = line.kind in (LineKind.HOLD, LineKind.WITNESS) or bool(line.reads)
    raising = any(e in (Effect.RAISES, Effect.UNKNOWN) for _, e in line.effects)
    if not gate or raising:
        return []
    return [
        Finding(
            "gate while rising",
            "error",
            *at,
            f"step {line.number} waits for somebody while the vessel, left alone, is not at rest: "
            "make these steps a quick sequence, or move it",
        )
    ]


def position(loaded: Loaded, walked: Sequence[Walked], index: int) -> tuple[int, int]:
    """(line, column) of a step in the procedure file."""
    part = walked[index].part
    place = sum(1 for w in walked[:index] if w.part == part)
    for path in (("parts", part, "steps", place), ("parts", part, "parked"), ("parts", part)):
        if path in loaded.positions:
            return loaded.positions[path]
    return 1, 1
