"""The order of things: nothing is loaded into a closed vessel, sealed empty, or opened full.

Valve positions are followed from the start; which pressure is behind them is not known here.
"""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass, field

from runbook.apparatus.model import Apparatus
from runbook.apparatus.spaces import is_closed, isolated, joined_spaces, trapped, ways_out
from runbook.procedure.document import Route
from runbook.procedure.lines import Found, Line, acts_of, lines_of, listed, readings_of
from runbook.procedure.model import (
    Charge,
    DoStep,
    EmptyStep,
    LetDownTo,
    Load,
    OpenContainment,
    Path,
    Procedure,
    Seal,
    WarmTo,
)


@dataclass
class _Vessel:
    """Where the vessel stands, as far as words tell."""

    apparatus: Apparatus
    positions: dict[str, str]
    loaded: bool
    empty_shown: bool = False
    told: set[frozenset[str]] = field(default_factory=set)
    found: list[Found] = field(default_factory=list)

    @property
    def closed(self) -> bool:
        """Every way out is shut."""
        return is_closed(self.apparatus, self.positions)

    def say(self, route: Route, message: str, rule: str = "order", severity: str = "error") -> None:
        """Note a finding."""
        self.found.append(Found(rule, route, message, severity))


def order(procedure: Procedure, apparatus: Apparatus) -> Iterator[Found]:
    """Rules 'order', 'seal', 'trapped space', 'gauge isolated' and 'charge'."""
    already = not isinstance(procedure.charge, Charge) or procedure.charge.loaded_as == "already loaded"
    vessel = _Vessel(apparatus, dict(procedure.at_start), loaded=already)
    if already and vessel.closed is False:
        vessel.say(("at_start",), "the vessel is already loaded, but a way out is open at the start")
    sealed = already
    for line in lines_of(procedure):
        for route, valves, path, _ in acts_of(line):
            sealed = _act(vessel, route, valves, path) or sealed
        _readings(vessel, line)
        if isinstance(line.step, EmptyStep):
            vessel.empty_shown, vessel.loaded = True, False
    yield from vessel.found
    yield from _charge(procedure, already, sealed)
    yield from _proved(procedure, already)


def _act(vessel: _Vessel, route: Route, valves: dict[str, str], path: Path | None) -> bool:
    """One act; True where it closes the last way out on a charge."""
    was_closed = vessel.closed
    _verb(vessel, route, path, was_closed)
    vessel.positions |= valves
    if isinstance(path, Load):
        vessel.loaded, vessel.empty_shown = True, False
    closes = vessel.loaded and vessel.closed and not was_closed
    says_seal = isinstance(path, Seal)
    if closes and not says_seal and isinstance(path, Load):
        vessel.say((*route, "valves"), "this loads and closes in one step: make closing a step of its own", "seal")
    elif closes and not says_seal:
        vessel.say((*route, "valves"), "this shuts the last way out: say so with path: seal", "seal")
    if says_seal and not closes:
        vessel.say((*route, "path"), _why_no_seal(vessel, was_closed), "seal")
    if vessel.loaded and valves:
        _trapped(vessel, route)
    opened = {tag for tag, at in valves.items() if at == "open"} & {o.tag for o in vessel.apparatus.openings}
    if opened and was_closed and vessel.loaded and not vessel.empty_shown:
        vessel.say((*route, "valves"), f"{listed(sorted(opened))} is opened before the vessel is shown to be empty")
    return closes


def _trapped(vessel: _Vessel, route: Route) -> None:
    """Spaces shut off without relief, each told once.

    The charge's own space in a vessel without any relief is not among them: how much is in it is known, so its
    pressure is, and the margins judge it; that nothing relieves it is told as an advice.
    """
    own, relieved = vessel.apparatus.spaces[0], {device.space for device in vessel.apparatus.relief}
    everything = joined_spaces(vessel.apparatus, {}, own)
    for group in trapped(vessel.apparatus, vessel.positions):
        if group in vessel.told or (own in group and not everything & relieved):
            continue
        vessel.told.add(group)
        vessel.say(
            (*route, "valves"),
            f"this shuts off {listed(sorted(group))}, where no relief device is: "
            "liquid caught there has nowhere to go when it warms",
            "trapped space",
        )


def no_relief(procedure: Procedure, apparatus: Apparatus) -> Iterator[Found]:
    """Rule 'no relief device': a sealed vessel that nothing relieves is for whoever answers for it to allow."""
    own = joined_spaces(apparatus, {}, apparatus.spaces[0])
    if not own & {device.space for device in apparatus.relief}:
        yield Found(
            "no relief device",
            ("apparatus",),
            f"nothing relieves the {apparatus.spaces[0]}: only charge and temperature keep its pressure; "
            f"ask {apparatus.approved.by} whether it may be used so",
            "advice",
        )


def _why_no_seal(vessel: _Vessel, was_closed: bool) -> str:
    if was_closed:
        return "the vessel is closed already: nothing is sealed here"
    if not vessel.loaded:
        return "nothing is in the vessel: an empty one is not sealed"
    space = vessel.apparatus.spaces[0]
    still = [t for t in ways_out(vessel.apparatus, space) if vessel.positions.get(t) == "open"]
    return f"the vessel is not closed by this: still open is {listed(still)}; say in 'valves' what is shut"


def _verb(vessel: _Vessel, route: Route, path: Path | None, closed: bool) -> None:
    at = (*route, "path")
    if isinstance(path, Load) and closed:
        vessel.say(at, "the vessel is closed here: open a way in before it is loaded")
    if isinstance(path, WarmTo) and not vessel.loaded:
        vessel.say(at, "nothing is in the vessel here: there is nothing to warm")
    if isinstance(path, LetDownTo) and not vessel.loaded:
        vessel.say(at, "nothing is in the vessel here: there is nothing to let down")
    if isinstance(path, OpenContainment) and vessel.loaded and not vessel.empty_shown:
        vessel.say(at, "the vessel is opened before it is shown to be empty: put show_empty before")


def _readings(vessel: _Vessel, line: Line) -> None:
    gauges = {i.tag for i in vessel.apparatus.instruments if i.reads == "pressure"}
    for route, read in readings_of(line):
        if read.with_ in gauges and isolated(vessel.apparatus, read.with_, vessel.positions):
            vessel.say(
                (*route, "with"),
                f"{read.with_} is shut off from the charge as the valves stand here: it reads only itself",
                "gauge isolated",
            )


def _charge(procedure: Procedure, already: bool, sealed: bool) -> Iterator[Found]:
    loads = [(r, p) for line in lines_of(procedure) for r, _, p, _ in acts_of(line) if isinstance(p, Load)]
    if already and loads:
        yield Found("charge", (*loads[0][0], "path"), "the charge is already loaded, says 'charge': nothing is added")
    if not already and not loads:
        yield Found("charge", ("charge",), "no step loads this charge: write path: {load: ...}, or already loaded")
    if not already and loads and not sealed:
        yield Found("seal", ("charge",), "no step seals this charge: write path: seal where the last way out is shut")
    if isinstance(procedure.charge, Charge):
        for route, load in loads:
            if isinstance(load, Load) and load.load.high < procedure.charge.mass.low:
                yield Found("charge", (*route, "path", "load"), "this loads less than is to be sealed in")


def _proved(procedure: Procedure, already: bool) -> Iterator[Found]:
    """An old charge is proved again before anything else is done with it."""
    if not already:
        return
    for line in lines_of(procedure):
        if any(read.what in ("mass", "liquid height") for _, read in readings_of(line)):
            return
        if isinstance(line.step, DoStep) and isinstance(line.step.path, WarmTo):
            yield Found(
                "charge",
                (*line.route, "path"),
                "this warms a charge of an earlier day that nobody has proved again: read its height before",
            )
            return
