"""The lines of a procedure to be ticked on paper: the warning before its step, room for what is read and signed.

A reading that proves something stands without its accepted range: what stands beside an empty box is copied. Those
ranges are on a sheet of their own, to be looked at when the reading has been written down.
"""

from __future__ import annotations

from xml.etree.ElementTree import Element

from runbook.answers import LineKind, Need, Plan, PlanLine
from runbook.paper.markup import Child, table, tag
from runbook.run.amounts import accepted, duration
from runbook.run.sentences import left_alone_verdict, left_alone_words

_PROVING = ("mass", "liquid height")
"""What is read to prove a charge."""
_ROOM = 5000.0
"""[Pa] within which a pressure is the room's: the barometer's own range."""


def part(plan: Plan, index: int) -> Element:
    """One part of the day as a sheet."""
    one = plan.parts[index]
    times = [f"begins {duration(one.lead_s)} before the lesson" if one.lead_s is not None else ""]
    times.append(f"fits into {duration(one.fits_s)}" if one.fits_s is not None else "")
    times.append("may be given again" if one.repeatable else "")
    said = ", ".join(t for t in times if t)
    sheet = tag("section", tag("h2", f"Part {index + 1}: {one.name}"), tag("p", said) if said else None, class_="sheet")
    for line in plan.lines:
        if line.part == index:
            sheet.extend(element for element in _line(plan, line) if element is not None)
    return sheet


def proving_ranges(plan: Plan) -> Element | None:
    """The sheet of accepted ranges that must not be seen before the reading is written; None where there are none."""
    rows: list[tuple[Child, ...]] = [
        (line.number, need.tag, accepted(plan, need), need.if_not)
        for line in plan.lines
        for need, proving in _needs(line)
        if proving and (need.low is not None or need.high is not None)
    ]
    if not rows:
        return None
    return tag(
        "section",
        tag("h2", "Accepted ranges of the readings that prove something"),
        tag("p", "Keep this sheet face down. Look here only when the reading is written in its step."),
        table(("step", "instrument", "accepted", "if it is not"), rows, "grid"),
        class_="sheet",
    )


def _needs(line: PlanLine) -> list[tuple[Need, bool]]:
    """Every reading of a line, and whether it proves something."""
    held = [line.hold.read] if line.hold is not None and line.hold.read is not None else []
    plain = [(n, n.what in _PROVING and n.every_s is None) for n in (*line.reads, *line.read_after)]
    return [*plain, *((n, True) for n in held)]


def _line(plan: Plan, line: PlanLine) -> tuple[Element | None, ...]:
    body = tag("div")
    body.append(tag("p", _text(line), class_="act"))
    if line.who is not None:
        body.append(tag("p", line.who, class_="who"))
    body.extend(_more(line))
    for sight in line.sights:
        body.append(tag("p", tag("b", "see: "), sight.words, class_="see"))
    if line.if_not:
        body.append(tag("p", tag("b", "if not: "), line.if_not, class_="ifnot"))
    body.extend(_readings(plan, line))
    body.append(_signature(line))
    if _under_pressure(plan, line):
        first = left_alone_verdict(line.left_alone, "").strip().rstrip(".")
        said = f"{first}. {left_alone_words(plan, line.left_alone)}"
        body.append(tag("p", tag("b", "left alone after this: "), said, class_="left"))
    classes = "line stop" if line.kind in (LineKind.HOLD, LineKind.WITNESS) else "line"
    row = tag("div", tag("div", class_="box"), tag("div", line.number, class_="number"), body, class_=classes)
    return _warning(line), row


def _under_pressure(plan: Plan, line: PlanLine) -> bool:
    """Left alone it does not simply stay at the room's pressure."""
    ends = [future.ends_Pa for future in line.left_alone.futures]
    return not line.left_alone.at_rest or any(e is None or e > plan.barometer + 2.0 * _ROOM for e in ends)


def _text(line: PlanLine) -> str:
    if line.kind is LineKind.QUICK:
        return "Quick sequence: no pause between these"
    return line.text


def _warning(line: PlanLine) -> Element | None:
    if line.warning is None:
        return None
    w = line.warning
    return tag("div", tag("b", w.word), f": {w.hazard} could {w.could} {w.avoid}", class_="warning")


def _more(line: PlanLine) -> list[Element]:
    """What a hold, a witness, a quick sequence and the four proofs say besides."""
    if line.hold is not None:
        return [tag("p", f"because {line.hold.because}")]
    if line.witness is not None:
        wait = duration(line.witness.wait_s)
        return [tag("p", f"because {line.witness.because}. Go on after {wait}, and write 'not attended'.")]
    if line.quick:
        items = (
            tag("li", f"☐ {i.text}, within {duration(i.latest_s)}", tag("br"), f"if that has passed: {i.if_not}")
            for i in line.quick
        )
        return [tag("ol", *items, class_="acts")]
    if line.empty is not None:
        e = line.empty
        joined = f"{e.isolator} open, " if e.isolator else ""
        return [
            tag(
                "ol",
                tag("li", f"☐ {e.vent} open, and proved clear: gas or air passes through it"),
                tag("li", f"☐ {e.wall} above -40 °C for 10 min at the coldest place one can reach"),
                tag("li", f"☐ {joined}{e.vent} shut for 10 min: {e.low_gauge} rises less than 0.1 bar"),
                tag("li", f"☐ {e.vent} open again, left open and tagged"),
                class_="acts",
            )
        ]
    return []


def _readings(plan: Plan, line: PlanLine) -> list[Element]:
    found = []
    for need, proving in _needs(line):
        often = f", every {duration(need.every_s)}" if need.every_s is not None else ""
        row = tag(
            "div",
            tag("span", f"read {need.tag}{often}: ", tag("span", class_="blank"), f" {need.unit}", class_="field"),
            tag("span", "time ", tag("span", class_="blank"), class_="field"),
            class_="fields",
        )
        found.append(row)
        if proving:
            found.append(tag("p", "accepted: on the sheet of accepted ranges", class_="ifnot"))
        elif need.low is not None or need.high is not None:
            act = f"; if not: {need.if_not}" if need.if_not else ""
            found.append(tag("p", f"accepted: {accepted(plan, need)}{act}", class_="ifnot"))
    return found


def _signature(line: PlanLine) -> Element:
    if line.hold is not None:
        who = f"signed, {line.hold.signed_by} (never who performed) "
        return _fields((who, "blank wide"), ("time ", "blank"))
    if line.witness is not None:
        return _fields(("came, or not attended ", "blank wide"), ("time ", "blank"))
    return _fields(("done ", "blank"), ("time ", "blank"))


def _fields(*blanks: tuple[str, str]) -> Element:
    return tag("div", *(tag("span", t, tag("span", class_=c), class_="field") for t, c in blanks), class_="fields")
