"""What the vessel's protection asks of a procedure, as far as it needs no physics."""

from __future__ import annotations

from collections.abc import Iterator

from runbook.apparatus.model import Apparatus
from runbook.apparatus.relief import code_tolerance
from runbook.procedure.lines import Found, acts_of, lines_of, readings_of, texts_of
from runbook.procedure.model import DoStep, KeepAt, Procedure, WarmTo
from runbook.quantities import NotKnown


def protection(procedure: Procedure, apparatus: Apparatus) -> Iterator[Found]:
    """Rules 'protective device unused', 'relief behind a valve' and 'relief tolerance'."""
    sights = [step.see.words for step in steps_of(procedure) if step.see is not None and step.see.words is not None]
    said = " ".join([*(text for _, text in texts_of(procedure)), *sights])
    read = {r.with_ for line in lines_of(procedure) for _, r in readings_of(line)}
    moved = {tag for line in lines_of(procedure) for _, valves, _, _ in acts_of(line) for tag in valves}
    moved |= set(procedure.at_start)
    guards: list[tuple[str, str]] = [(d.tag, d.kind) for d in apparatus.relief]
    guards += [(i.tag, i.reads + " meter") for i in apparatus.instruments if i.of == "room air"]
    for tag, what in guards:
        if tag not in read and tag not in moved and tag not in said:
            yield Found("protective device unused", ("apparatus",), f"no step checks {tag}, the {what}", "advice")
    if apparatus.relief and not any(d.space == apparatus.spaces[0] for d in apparatus.relief):
        yield Found(
            "relief behind a valve",
            ("apparatus",),
            "no relief device is on the charge's own space: every one of them can be shut off from it",
        )
    for device in apparatus.relief:
        if device.tolerance < code_tolerance(device) * (1.0 - 1e-9):
            yield Found(
                "relief tolerance",
                ("apparatus",),
                f"{device.tag} is said to open within {device.tolerance:.1%}, closer than ASME VIII-1 asks of such "
                f"a device ({code_tolerance(device):.1%}): use that, or have the source confirm it",
                "warning",
            )


def steps_of(procedure: Procedure) -> Iterator[DoStep]:
    """Every single act."""
    return (line.step for line in lines_of(procedure) if isinstance(line.step, DoStep))


def heating(procedure: Procedure, apparatus: Apparatus) -> Iterator[Found]:
    """Rules 'room' and 'set point at the cut-out'."""
    room, source = procedure.room, apparatus.heat_source
    if room.hottest.high < room.coldest.low:
        yield Found("room", ("room", "hottest"), "the hottest room is colder than the coldest")
    if source is None or source.cut_out is None or isinstance(source.cut_out, NotKnown):
        return
    for line in lines_of(procedure):
        for route, _, path, _ in acts_of(line):
            if not isinstance(path, WarmTo | KeepAt) or path.by_means_of != source.tag:
                continue
            target = path.warm_to if isinstance(path, WarmTo) else path.keep_at
            aims = [] if isinstance(target, str) else [target]
            aims += [path.set_to] if isinstance(path, WarmTo) and path.set_to is not None else []
            if any(aim.high > source.cut_out.low for aim in aims):
                yield Found(
                    "set point at the cut-out",
                    (*route, "path"),
                    f"the cut-out of {source.tag} may trip before this temperature is reached",
                    "warning",
                )
