"""What is asked of a demonstration in one vessel: the charge, the room, the people; the steps are written from it.

Two kinds: a charge of dry ice that is weighed while it sublimes, closed in, warmed by the room and let down; and a
vessel that is loaded already, looked at and, where the fluid may be let out, let down. Heating is added by hand.
"""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from datetime import date
from typing import Final

from runbook.apparatus.model import OUTSIDE, Apparatus
from runbook.errors import InputUnusable, QuantityError
from runbook.procedure.dialogue.form import Form, Question, Slot
from runbook.procedure.reader import procedure_problems
from runbook.quantities import Dimension, parse_bounded

TEMPLATE: Final = """\
# One demonstration with one vessel and one charge. 'runbook check' says what is not yet right.
# Sentences stand on lines of their own: inside { } a comma would end them.
format: procedure 1
name: ‹name›
issue: {number: 1, date: ‹date›, written_by: ‹by›, checked_by: ‹checked›, review_by: ‹review›}
apparatus: ‹apparatus›
fluid: ‹fluid›
dry? charge: {mass: ‹charge›, loaded_as: dry ice}    # or: charge: already loaded
loaded? charge: already loaded
room: {hottest: ‹hottest›, coldest: ‹coldest›, volume: ‹room›, air_changes: ‹air›, height: ‹height›}
roles: [performer, second]
bring: [face shields, cryogenic gloves]
dry? at_start: {‹cap›: open, ‹vent›: open, ‹isolator›: open‹unplugged›}
loaded? at_start: {‹cap›: shut, ‹vent›: shut, ‹isolator›: shut‹unplugged›}

parts:
dry?   - name: Load and prove
dry?     steps:
dry?       - do: Look through the outlets of ‹relief› with a lamp
dry?         who: performer
dry?         see:
dry?           words: Light comes through each of them.
dry?         if_not: Stop here. Clear the outlet.
dry?       - do: Press the test button of ‹meter›
dry?         who: performer
dry?         see:
dry?           words: The alarm is heard at the door.
dry?         if_not: Stop here.
dry?       - do: Check that ‹low› stands at zero with ‹vent› open
dry?         who: performer
dry?         read:
dry?           - {what: pressure, with: ‹low›, accept: -0.1 bar(g) to 0.1 bar(g), if_not: Use the spare gauge.}
dry?       - do: Load dry ice until the scale shows ‹load›
dry?         who: performer
dry?         path: {load: ‹load› ± ‹load_off›}
dry?         warning:
dry?           word: WARNING
dry?           hazard: Dry ice at -79 degC
dry?           could: burn the skin in seconds.
dry?           avoid: Wear the cryogenic gloves.
dry?       - do: Tighten ‹cap› as its maker says
dry?         who: performer
dry?         valves: {‹cap›: shut}
dry?       - do: Shut ‹isolator›
dry?         who: performer
dry?         valves: {‹isolator›: shut}
dry?       - hold:
dry?           signed_by: second
dry?           because: once ‹vent› is shut the room alone warms the charge
dry?           read: {what: mass, with: ‹scale›, accept: ‹before›, if_not: Stop here.}
dry?       # Between closing and rest nobody types and nobody is waited for.
dry?       - quick:
dry?           - {do: Shut ‹vent› at ‹mass› on the falling scale, path: seal, valves: {‹vent›: shut}, latest: 20 min, if_not: Add dry ice and begin again.}
dry?           - {do: Shut the shield and step back, latest: 2 min, if_not: Open ‹vent›.}
dry?         read_after:
dry?           - {what: mass, with: ‹scale›, accept: ‹after›, if_not: Make safe.}
dry?         warning:
dry?           word: WARNING
dry?           hazard: Dry ice in a closed cell
dry?           could: bring it to its full pressure by the warmth of the room alone.
dry?           avoid: Keep the shield between the cell and every face.
dry?       - do: Let the cell warm to the room behind the shield
dry?         who: performer
dry?         path: {warm_to: room temperature, by_means_of: room air}
dry?         see: {show: [solid gone]}
dry?         if_not: Wait.
loaded?   - name: Look at it
loaded?     steps:
loaded?       - do: Look along every joint and the windows from behind the shield
loaded?         who: performer
loaded?         see:
loaded?           words: Every joint is dry. No mark on the glass.
loaded?         if_not: Make safe. Touch nothing.
loaded?       - do: Read ‹probe› and ‹gauge› with the cell at rest
loaded?         who: performer
loaded?         read:
loaded?           - {what: temperature, with: ‹probe›}
loaded?           - {what: pressure, with: ‹gauge›}
vented?   - name: Let down and prove empty
vented?     steps:
vented?       - do: Read ‹probe› and ‹gauge› once more with the cell at rest
vented?         who: performer
vented?         read:
vented?           - {what: temperature, with: ‹probe›}
vented?           - {what: pressure, with: ‹gauge›}
vented?       - hold:
vented?           signed_by: second
vented?           because: letting down makes the wall cold, and the gas goes where people breathe
vented?       - do: Let the gas out through ‹vent› until ‹gauge› shows zero
vented?         who: performer
vented?         path: {let_down_to: 0 bar(g), through: ‹vent›, pause_above: ‹pause›, until: no liquid seen}
vented?         valves: {‹vent›: open}
vented?         warning:
vented?           word: WARNING
vented?           hazard: Cold gas from ‹vent›
vented?           could: burn the skin, plug the outlet and take the air from a closed room.
vented?           avoid: Keep clear of the outlet. Leave ‹vent› open at the end.
vented?       - show_empty: {low_gauge: ‹low›, isolator: ‹isolator›, wall: ‹probe›, vent: ‹vent›}
vented?       - do: Hang the tag EMPTY on ‹vent›
vented?         who: performer
"""  # noqa: E501 - one line an entry: so it is written, and so it is read
"""The procedure file with its places; those that no question fills follow from the vessel and the charge."""


@dataclass(frozen=True, slots=True)
class Place:
    """Where the demonstration stands and what is known before anything is asked."""

    apparatus_file: str
    """As the procedure will name it."""
    apparatus: Apparatus | None
    """None: the commented start, which is written for the vessel that `runbook new apparatus` writes."""
    today: date
    charge: str = "117 g ± 2 g"
    """What is proposed, as a file would say it."""
    released: bool = True
    """The fluid may be let out."""
    dry_ice: bool = True
    """The fluid is carbon dioxide."""
    fluid: str = "carbon dioxide"


def demonstration_form(place: Place) -> Form:
    """The questions of one demonstration, nothing answered yet. Raises InputUnusable for a vessel of another kind."""
    tags = _tags(place.apparatus)
    ways = ("dry ice", "already loaded") if place.dry_ice else ("already loaded",)
    dates = f"{place.today}; {_in_a_year(place.today)}"
    questions = (
        Question("What is it called?", "Boiling and rest", (Slot("name", "my demonstration", "text"),)),
        Question("Who wrote it; who checked it?", "A. Lind; T. Berg",
                 (Slot("by", "my name", "text"), Slot("checked", "somebody else", "text"))),
        Question(f"Its date; to be looked at again by? (Enter: {dates})", dates,
                 (Slot("date", str(place.today)), Slot("review", str(_in_a_year(place.today)))), otherwise=dates),
        Question(f"How is it loaded: {' or '.join(ways)}?", ways[0], (Slot("way", ways[0], "word", ways),)),
        Question(f"How much, and how far may it be off? (Enter: {place.charge})", place.charge,
                 (Slot("charge", place.charge),), ("way", ("dry ice",)), otherwise=place.charge),
        Question("The room: hottest; coldest; volume; air changes; height above the sea?",
                 "30 degC; 18 degC; 180 m3; 2 per h; 120 m",
                 (Slot("hottest", "30 degC"), Slot("coldest", "18 degC"), Slot("room", "180 m3"),
                  Slot("air", "2 per h"), Slot("height", "120 m"))),
    )  # fmt: skip
    fixed = tags | {"apparatus": place.apparatus_file, "fluid": place.fluid}
    text = TEMPLATE
    for name, value in fixed.items():
        text = text.replace(f"‹{name}›", value)

    def shown(filled: Mapping[str, str]) -> set[str]:
        return {"dry" if filled["way"] == "dry ice" else "loaded", *(("vented",) if place.released else ())}

    return Form(text, questions, lambda made: procedure_problems(made, "your answers"), shown, derived=_weights)


def commented_start(apparatus_file: str) -> str:
    """A procedure for the vessel that `runbook new apparatus` writes, with nobody's figures."""
    return demonstration_form(Place(apparatus_file, None, date(2031, 1, 2))).text()


def _in_a_year(day: date) -> date:
    return date(day.year + 1, day.month, min(day.day, 28))


def _weights(filled: Mapping[str, str]) -> dict[str, str]:
    """Readings of the scale that belong to the charge, as a file says them."""
    try:
        charge = parse_bounded(filled["charge"], Dimension.MASS)
    except QuantityError:
        # The reader says what is wrong with it.
        return dict.fromkeys(("mass", "load", "load_off", "before", "after"), filled["charge"])
    mass, off = charge.value, charge.plus_minus
    load, spread = 1.2 * mass, 0.08 * mass
    return {
        "mass": _g(mass),
        "load": _g(load),
        "load_off": _g(spread),
        "before": f"{_g(mass - 2.0 * off)} to {_g(load + spread)}",
        "after": f"{_g(mass - off)} to {_g(mass + off)}",
    }


def _g(kilograms: float) -> str:
    """To a tenth of a gram."""
    return f"{round(kilograms * 1e3, 1):g} g"


def _tags(vessel: Apparatus | None) -> dict[str, str]:
    """What hangs on the valves and dials that the steps name."""
    if vessel is None:
        return dict(_START)
    inside = vessel.spaces[0]
    way = next((v for v in vessel.valves if set(v.joins) == {inside, OUTSIDE}), None)
    behind = next((v for v in vessel.valves if inside in v.joins and OUTSIDE not in v.joins), None)
    dials = {(i.reads, i.of): i.tag for i in reversed(vessel.instruments)}
    low_space = next((s for s in behind.joins if s != inside), "") if behind is not None else ""
    found = {
        "cap": vessel.openings[0].tag if vessel.openings else "",
        "vent": way.tag if way is not None else "",
        "isolator": behind.tag if behind is not None else "",
        "gauge": dials.get(("pressure", inside), ""),
        "low": dials.get(("pressure", low_space), ""),
        "probe": next((i.tag for i in vessel.instruments if i.reads == "temperature"), ""),
        "scale": next((i.tag for i in vessel.instruments if i.reads == "mass"), ""),
        "meter": next((i.tag for i in vessel.instruments if i.of == "room air"), ""),
        "relief": " and ".join(r.tag for r in vessel.relief),
    }
    missing = [_WHAT[name] for name, tag in found.items() if not tag]
    if missing:
        raise InputUnusable(
            f"{vessel.tag} has no {' and no '.join(missing)}, and these steps need it: write the procedure from the "
            "commented start, 'runbook new procedure FILE --start'"
        )
    source = vessel.heat_source
    return found | {"unplugged": "" if source is None else f", {source.tag}: unplugged", "pause": "20 bar(g)"}


_START: Final = {
    "cap": "V1", "vent": "V2", "isolator": "V3", "gauge": "PG1", "low": "PG2", "probe": "TT1", "scale": "BS1",
    "meter": "GD1", "relief": "RD1 and RV2", "unplugged": ", H1: unplugged", "pause": "20 bar(g)",
}  # fmt: skip
"""Tags of the vessel that `runbook new apparatus` writes."""
_WHAT: Final = {
    "cap": "loading cap",
    "vent": "valve from the cell to the room",
    "isolator": "gauge isolator",
    "gauge": "gauge on the cell",
    "low": "low gauge behind the isolator",
    "probe": "thermometer",
    "scale": "scale",
    "meter": "gas meter",
    "relief": "relief device",
}
"""What a step needs -> its name in a sentence."""
