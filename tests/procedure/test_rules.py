"""The writing rules: each finds its mistake in an otherwise good file, in its place, and nothing in the good one."""

from __future__ import annotations

from pathlib import Path

import pytest

from runbook.answers import Hazard
from runbook.procedure.model import DoStep
from runbook.procedure.rules_order import no_relief, order
from runbook.procedure.steps import HazardName
from runbook.procedure.writing import findings
from tests.procedure.files import PROCEDURE, found, read, word_at

ERRORS = [
    # rule, old, new, where the finding stands
    ("unknown tag", "with: BS1, accept: 117", "with: BS9, accept: 117", "BS9"),
    ("unknown tag", "through: V2, pause", "through: V8, pause", "V8"),
    ("unknown tag", "by_means_of: H1", "by_means_of: H2", "H2"),
    ("unknown tag", "low_gauge: PG2", "low_gauge: PG3", "PG3"),
    ("unknown tag", "wall: TT1, vent: V2", "wall: TT1, vent: V3", "V3"),
    ("unknown tag", "isolator: V3", "isolator: V2", "V2"),
    ("unknown tag", "valves: {H1: unplugged}", "valves: {H9: unplugged}", "unplugged"),
    ("unknown tag", "open_containment: V1", "open_containment: V2", "V2"),
    ("unknown tag", "do: Press tare", "do: Press V9 tare", "Press V9"),
    ("unknown tag", "at_start: {V1: open", "at_start: {V7: shut, V1: open", "shut"),
    ("start position", "V3: open, H1", "H1", "{V1"),
    ("position", "H1: unplugged}", "H1: shut}", "shut"),
    ("position", "at_start: {V1: open", 'at_start: {V1: "on"', '"on"'),
    ("wrong instrument", "{what: mass, with: BS1, accept: 117 g", "{what: mass, with: TT1, accept: 117 g", "TT1"),
    (
        "text and valves",
        "do: Shut V3\n        who: performer\n        valves: {V3: shut}",
        "do: Shut V3\n        who: performer",
        "Shut V3",
    ),
    ("role not declared", "called: teacher", "called: officer", "officer"),
    ("role not declared", "key_with: second", "key_with: porter", "porter"),
    ("role not declared", "who: teacher}", "who: caretaker}", "caretaker"),
    ("checks own text", "checked_by: T. Okoro", "checked_by: r.  amsel", "r.  amsel"),
    ("review date", "review_by: 2032-03-02", "review_by: 2031-03-02", "2031-03-02"),
    (
        "signs own work",
        "signed_by: second\n          because: once",
        "signed_by: performer\n          because: once",
        "performer",
    ),
    (
        "hold at an end",
        "      - do: Hang the tag EMPTY on V2\n        who: second",
        "      - hold: {signed_by: second, because: it is over}",
        "hold",
    ),
    (
        "hold at an end",
        "      - do: Set the laptop to stay awake, on mains power\n        who: performer",
        "      - hold: {signed_by: second, because: it begins}",
        "hold",
    ),
    (
        "order",
        "      - do: Press tare\n        who: performer",
        "      - do: Warm the cell\n        who: performer\n        path: {warm_to: 33 degC, by_means_of: H1}",
        "{warm_to",
    ),
    ("order", "      - show_empty: {low_gauge: PG2, isolator: V3, wall: TT1, vent: V2}\n", "", "{open_containment"),
    (
        "order",
        "      - do: Press tare\n        who: performer",
        "      - do: Let the gas out\n        who: performer\n        path: {let_down_to: 0 bar(g), through: V2}",
        "{let_down",
    ),
    ("order", "at_start: {V1: open, V2: open, V3: open", "at_start: {V1: shut, V2: shut, V3: open", "{load"),
    ("seal", "path: seal, valves: {V2: shut}", "valves: {V2: shut}", "{V2"),
    ("seal", "path: seal, valves: {V2: shut}", "path: seal", "seal"),
    ("charge", "charge: {mass: 117 g ± 2 g, loaded_as: dry ice}", "charge: already loaded", "{load"),
    ("charge", "path: {load: 145 g ± 5 g}", "path: {load: 80 g ± 10 g}", "80 g"),
    (
        "gauge isolated",
        "valves: {V3: shut}",
        "valves: {V3: shut}\n        read:\n          - {what: pressure, with: PG2}",
        "PG2",
    ),
    ("no act outside limits", "accept: 115 g to 119 g, if_not: Make safe.", "accept: 115 g to 119 g", "{what: mass"),
    ("reading outside dial", "accept: 115 g to 119 g", "accept: 115 g to 19 kg", "115 g to 19 kg"),
    ("reading outside dial", "accept: 17 degC to 30.5 degC", "accept: 17 degC to 126 degC", "17 degC to 126"),
    ("instrument too coarse", "accept: 115 g to 119 g", "accept: 116.9 g to 117.1 g", "116.9"),
    (
        "instrument too coarse",
        "accept: 27 mm to 32 mm, if_not: Make safe.}   #",
        "accept: 27 mm to 28 mm, if_not: Make safe.}   #",
        "27 mm",
    ),
    (
        "witness before a rise",
        "      - do: Load dry ice",
        "      - witness: {called: teacher, because: it is loaded, wait: 1 min}\n      - do: Load dry ice",
        "witness",
    ),
    ("warning parts", "avoid: Wear the cryogenic gloves.", "avoid: See warning above.", "See"),
    ("warning parts", "word: WARNING", "word: NOTICE", "NOTICE"),
    ("room", "hottest: 30 degC", "hottest: 3 degC", "3 degC"),
    (
        "hold missing",
        """      - hold:
          signed_by: second
          because: letting down can bring the wall to -78 degC, and the gas goes where people breathe
""",
        "",
        "{let_down_to",
    ),
    (
        "warning missing",
        """        warning:
          word: WARNING
          hazard: Dry ice in a closed cell
          could: bring it to 74 bar(g) by the warmth of the room alone.
          avoid: Keep the shield between the cell and every face.
      - do: Let the cell warm""",
        "      - do: Let the cell warm",
        "{do: Shut V2",
    ),
    (
        "tightened under pressure",
        "do: Look along V1, V2 and the windows with the camera",
        "do: Tighten the screws of V1 by a quarter turn",
        "Tighten",
    ),
]


@pytest.mark.parametrize(("rule", "old", "new", "at"), ERRORS)
def test_an_error_is_found_at_its_place(tmp_path: Path, rule: str, old: str, new: str, at: str) -> None:
    """The rule finds the mistake where it was made; the good file gives it no reason."""
    assert found(tmp_path, rule) == []
    problems = found(tmp_path, rule, {old: new})
    assert problems, f"{rule} found nothing"
    assert any(word_at(tmp_path / PROCEDURE, p).startswith(at) for p in problems), [str(p) for p in problems]
    assert all(p.severity in ("error", "warning") for p in problems)


WARNINGS = [
    ("verb first", "do: Press tare", "do: The tare is pressed", "warning"),
    ("one act", "do: Press tare", "do: Press tare and read the scale", "advice"),
    ("active voice", "do: Press tare", "do: When still tare should be pressed", "warning"),
    ("number instead", "do: Press tare", "do: Press tare gently", "warning"),
    ("condition first", "do: Press tare", "do: Press tare when nothing moves", "advice"),
    ("long sentence", "do: Press tare", "do: Press tare" + " and so on" * 12, "advice"),
    ("named by exception", "do: Press tare", "do: Shut all valves except V2", "warning"),
    ("and with or", "do: Press tare", "do: If it is cold and dry or still, press tare", "warning"),
    ("high on the dial", "accept: 48 bar(g) to 75 bar(g)", "accept: 48 bar(g) to 150 bar(g)", "advice"),
    ("set point at the cut-out", "set_to: 35 degC", "set_to: 37.5 degC", "warning"),
]


@pytest.mark.parametrize(("rule", "old", "new", "severity"), WARNINGS)
def test_wording_is_warned_of_not_refused(tmp_path: Path, rule: str, old: str, new: str, severity: str) -> None:
    """How a sentence reads is for people to judge: a warning or an advice, never an error."""
    assert found(tmp_path, rule) == []
    assert [p.severity for p in found(tmp_path, rule, {old: new})] == [severity]


@pytest.mark.parametrize("verb", ["Drive", "Lower", "Evacuate", "Bleed"])
def test_more_orders_are_known(tmp_path: Path, verb: str) -> None:
    """Verbs that a good author used are orders too."""
    assert found(tmp_path, "verb first", {"do: Press tare": f"do: {verb} the cell"}) == []


def test_the_shipped_procedure_is_clean(tmp_path: Path) -> None:
    """No rule finds anything in it, not even an advice."""
    assert [str(p) for p in findings(read(tmp_path))] == []


def test_the_shipped_procedure_is_a_real_one(tmp_path: Path) -> None:
    """Twenty steps or more in four parts, four holds of which two measure, a witness, a quick sequence, the proofs."""
    procedure = read(tmp_path).procedure
    kinds = [type(s).__name__ for part in procedure.parts for s in part.steps]
    holds = [s.hold for part in procedure.parts for s in part.steps if hasattr(s, "hold")]
    assert len(procedure.parts) == 4
    assert len(kinds) >= 20
    assert len(holds) >= 4
    assert sum(h.read is not None for h in holds) == 2
    assert kinds.count("WitnessStep") == 1
    assert kinds.count("QuickStep") == 1
    assert kinds.count("EmptyStep") == 1
    warned = [s.do for part in procedure.parts for s in part.steps if isinstance(s, DoStep) and s.warning is not None]
    assert any("Load" in text for text in warned)
    assert any("Warm" in text for text in warned)
    assert any("gas out" in text for text in warned)


def test_relief_that_can_be_shut_off_is_an_error(tmp_path: Path) -> None:
    """Relief behind a valve protects nothing of what is before it."""
    vessel = {"kind: bursting disc, space: cell": "kind: bursting disc, space: low gauge line"}
    (problem,) = found(tmp_path, "relief behind a valve", None, vessel)
    assert problem.severity == "error"
    assert found(tmp_path, "trapped space", None, vessel)


def test_a_vessel_that_nothing_relieves_is_judged_by_its_margins(tmp_path: Path) -> None:
    """Of a vessel without any relief its own space is no trap, as its charge is known; a line shut off is, told once.

    That nothing relieves it is an advice to ask whoever answers for it.
    """
    good = read(tmp_path)
    bare = good.apparatus.model_copy(update={"relief": ()})
    trap = [one.message for one in order(good.procedure, bare) if one.rule == "trapped space"]
    assert len(trap) == 1
    assert "shuts off low gauge line, where" in trap[0]
    (advice,) = no_relief(good.procedure, bare)
    assert advice.severity == "advice"
    assert bare.approved.by in advice.message
    assert list(no_relief(good.procedure, good.apparatus)) == []


def test_a_reading_below_the_dial_is_told_what_to_write(tmp_path: Path) -> None:
    """The finding names where the range may begin: what the gauge may be off below its first mark."""
    (problem,) = found(tmp_path, "reading outside dial", {"accept: -0.1 bar(g) to 0.1": "accept: -0.4 bar(g) to 0.1"})
    assert "begin at -0.15 bar(g), or leave that end out" in problem.message
    (problem,) = found(tmp_path, "reading outside dial", {"accept: up to 1.5 bar(g)": "accept: up to 200 bar(g)"})
    assert "ends on the dial" in problem.message


def test_a_tolerance_closer_than_the_code_is_doubted(tmp_path: Path) -> None:
    """ASME VIII-1 allows a disc of 130 bar 5 %: a file that says 1 % is warned."""
    (problem,) = found(tmp_path, "relief tolerance", None, {"tolerance: 5 %": "tolerance: 1 %"})
    assert "RD1" in problem.message
    assert problem.severity == "warning"


def test_a_let_down_port_that_is_not_on_top_is_an_error(tmp_path: Path) -> None:
    """Liquid would leave through a dip tube: it flashes to solid in the outlet."""
    vessel = {"joins: [cell, outside], port: top": "joins: [cell, outside], port: dip tube"}
    (problem,) = found(tmp_path, "let down from below", None, vessel)
    assert problem.severity == "error"
    assert word_at(tmp_path / PROCEDURE, problem).startswith("V2")


def test_a_protective_device_that_no_step_checks_is_an_advice(tmp_path: Path) -> None:
    """Each relief device and room meter is read, moved or named by some step."""
    (problem,) = found(tmp_path, "protective device unused", {"RD1 and RV2": "RD1"})
    assert "RV2" in problem.message
    assert problem.severity == "advice"


def test_an_old_charge_is_proved_again_before_it_is_warmed(tmp_path: Path) -> None:
    """A procedure for a loaded vessel that warms it without a height or a weighing is refused by rule."""
    good = read(tmp_path)
    step = next(s for part in good.procedure.parts for s in part.steps if isinstance(s, DoStep) and "Warm" in s.do)
    part = good.procedure.parts[2].model_copy(update={"steps": (step,)})
    start = dict(good.procedure.at_start) | {"V1": "shut", "V2": "shut"}
    changed = good.procedure.model_copy(update={"charge": "already loaded", "parts": (part,), "at_start": start})
    said = [f for f in order(changed, good.apparatus) if f.rule == "charge"]
    assert len(said) == 1
    assert "proved again" in said[0].message


def test_hazard_names_are_those_of_the_answers() -> None:
    """What an author may add is one of the eight hazards, by its name."""
    from typing import get_args

    assert get_args(HazardName) == tuple(h.value for h in Hazard)
