"""Which readings a line asks for, and which it leans on before anybody may enter it."""

from __future__ import annotations

from collections.abc import Sequence

from runbook.answers import Need
from runbook.assess.scene import Scene
from runbook.assess.walk import Walked, is_closed, outside_tags
from runbook.procedure.model import OpenContainment, QuickStep, ReadStep
from runbook.quantities import Level, LevelRange, Range

FRESH_S = 600.0
"""How long a reading holds where a step says nothing [s]."""


def need_of(scene: Scene, read: ReadStep) -> Need:
    """The reading that a step asks for; accepted pressures absolute at the day's barometer."""
    dial = scene.instrument(read.with_).dial
    low, high = _ends(scene, read.accept)
    return Need(
        tag=read.with_,
        what=read.what,
        unit=dial.unit,
        low=low,
        high=high,
        fresh_s=FRESH_S if read.fresh_for is None else read.fresh_for.value,
        every_s=None if read.every is None else read.every.value,
        if_not=read.if_not or "",
    )


def entry_needs(scene: Scene, lines: Sequence[Walked], index: int) -> tuple[Need, ...]:
    """Readings that must be there before line `index` is entered: what its margins are computed from.

    Closing leans on the weighing, warming on temperature and pressure, letting down on both.
    """
    line = lines[index]
    wanted: list[str] = []
    if line.seals:
        # Gas is measured by what it presses; all else by what it weighs.
        wanted = ["temperature", "pressure"] if scene.comes_as_gas else ["mass"]
    elif line.warms and (not line.during.closed or proved_by_height_alone(scene)):
        wanted = ["temperature"]
    elif line.warms or (line.lets_down and line.before.closed):
        wanted = ["temperature", "pressure"]
    elif isinstance(line.verb, OpenContainment):
        # The last reading was taken before the gas went: without a new one it still governs.
        wanted = ["pressure"]
    needs = []
    for what in wanted:
        tag = _instrument_for(scene, what)
        if tag is None:
            # No instrument can give it: the need stays, so that the step stays blocked.
            needs.append(Need(f"no {what} instrument", what, "", fresh_s=FRESH_S))
            continue
        needs.append(Need(tag, what, scene.instrument(tag).dial.unit, fresh_s=_fresh_s(line, tag)))
    return tuple(needs)


def proved_by_height_alone(scene: Scene) -> bool:
    """A tube that no gauge can read: sealed for good, without a valve, its charge is proved by its height.

    A vessel that could have a gauge and has none stays blocked.
    """
    able = {one.reads for one in scene.apparatus.instruments}
    return not outside_tags(scene) and "pressure" not in able and {"temperature", "liquid height"} <= able


def seal_items(scene: Scene, line: Walked) -> tuple[int, ...]:
    """Items of a quick sequence that close the last vent."""
    if not isinstance(line.step, QuickStep):
        return ()
    valves = dict(line.before.valves)
    found = []
    for index, item in enumerate(line.step.quick):
        before = is_closed(scene, valves)
        valves |= item.valves
        if is_closed(scene, valves) and not before:
            found.append(index)
    return tuple(found)


def _instrument_for(scene: Scene, what: str) -> str | None:
    if what == "temperature":
        probe = scene.wall_probe()
        return None if probe is None else probe.tag
    able = [i for i in scene.apparatus.instruments if i.reads == what]
    if what == "pressure":
        # The gauge that bears the charge, never the low one behind its isolator.
        able = [i for i in able if i.of == scene.charge_space]
    return able[0].tag if able else None


def _fresh_s(line: Walked, tag: str) -> float:
    reads: tuple[ReadStep, ...] = getattr(line.step, "read", ())
    own = [r.fresh_for.value for r in reads if r.with_ == tag and r.fresh_for is not None]
    return min(own, default=FRESH_S)


def _ends(scene: Scene, accept: Range | LevelRange | None) -> tuple[float | None, float | None]:
    if accept is None:
        return None, None
    middle = scene.barometer.middle_Pa
    low, high = accept.low, accept.high
    return (
        low.absolute(middle) if isinstance(low, Level) else low,
        high.absolute(middle) if isinstance(high, Level) else high,
    )
