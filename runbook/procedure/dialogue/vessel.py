"""What is asked of a vessel: a windowed cell with a loading cap, a let-down valve on top and two gauges.

For another kind of vessel the answers that fit are kept and the file is changed by hand: it is commented for that.
"""

from __future__ import annotations

from collections.abc import Mapping
from typing import Final

from runbook.procedure.dialogue.form import KNOWN, Form, Question, Slot
from runbook.procedure.reader import apparatus_problems

TEMPLATE: Final = """\
# One vessel. Where nothing was answered the figure stands for none that is right: replace it by yours.
# ± is the most a figure can be off. Pressures say gauge or absolute: bar(g), bar(a). The decimal sign is a point.
# A rating that nobody knows stays 'not known': nothing that leans on it is ever within limits.
format: apparatus 1
name: ‹name›
tag: ‹tag›
owner: ‹owner›
approved: {by: ‹by›, role: ‹role›, date: ‹approved›}   # answers for the figures below

volume:
  free: ‹free›          # what the fluid can fill, gauge line included
  unheated: ‹unheated›         # of it, outside the heated body
  source: ‹measured›
shape: ‹shape›          # or: lying cylinder, upright cylinder, sphere
diameter: ‹diameter›         # inside
window: ‹window›          # lowest and highest visible height above the inside bottom; no window: no line
body: {heat_capacity: ‹metal›, from_fluid: ‹from_fluid›, loss_to_room: ‹loss›}

mawp: {rating: ‹mawp›, source: ‹mawp_source›}
proven? proof_test: {pressure: ‹proof›, done: ‹proof_done›, valid_until: ‹proof_until›}
unproven? proof_test: not known          # {pressure: 240 bar(g), done: 2031-01-01, valid_until: 2033-01-01}
counted? cycles: {allowed: ‹cycles›, before_this_log: ‹cycles_before›}
uncounted? cycles: not known              # {allowed: 500, before_this_log: 0}

# The first space holds the charge. 'outside' is the room.
spaces: [cell, low gauge line, outside]
valves:
  - {tag: V2, what: let-down valve, bore: ‹bore›, joins: [cell, outside], port: top, let_go: stays}
  - {tag: V3, what: gauge isolator, joins: [cell, low gauge line], port: top, let_go: stays}
openings:
  - {tag: V1, what: loading cap, space: cell}

components:
  - {tag: W1, what: windows, space: cell, pressure: ‹w_pressure›, temperature: ‹w_temperature›, difference: ‹w_difference›, source: ‹w_source›}
  - {tag: B1, what: body, space: cell, pressure: ‹b_pressure›, temperature: ‹b_temperature›, source: ‹b_source›}

# A disc has bursts_at and, where it has one, a manufacturing_range; a valve has opens_at.
relief:
disc?   - {tag: RD1, kind: bursting disc, space: cell, bursts_at: ‹bursts›, manufacturing_range: ‹range›, tolerance: ‹bursts_tolerance›, run_below: ‹bursts_below›, fitted: ‹bursts_fitted›, valid_until: ‹bursts_until›, source: tag on the holder}
valve?   - {tag: RV1, kind: relief valve, space: cell, opens_at: ‹opens›, tolerance: ‹opens_tolerance›, run_below: ‹opens_below›, fitted: ‹opens_fitted›, valid_until: ‹opens_until›, source: test sheet}
  - {tag: RV2, kind: relief valve, space: low gauge line, opens_at: ‹low_opens›, tolerance: ‹low_tolerance›, run_below: ‹low_below›, fitted: ‹low_fitted›, valid_until: ‹low_until›, source: test sheet}

# Without a heat source take these lines away.
heated? heat_source: {tag: H1, kind: ‹source›, power: ‹power›, cut_out: ‹cut_out›, heat_capacity: ‹source_heat›, taken_away_in_one_motion: ‹away›}
tested? heat_source: {tag: H1, kind: ‹source›, power: ‹power›, cut_out: ‹cut_out›, tested: ‹tripped›, heat_capacity: ‹source_heat›, taken_away_in_one_motion: ‹away›}

# Each has a class (0.6 of a gauge, A of a thermometer) or an error, and the smallest step one can read.
instruments:
  - {tag: PG1, reads: pressure, of: cell, dial: ‹pg1›, class: ‹pg1_class›, division: ‹pg1_step›, read_from: shield, valid_until: ‹pg1_until›}
  - {tag: PG2, reads: pressure, of: low gauge line, dial: ‹pg2›, class: ‹pg2_class›, division: ‹pg2_step›, read_from: shield, valid_until: ‹pg2_until›}
  - {tag: TT1, reads: temperature, of: wall, dial: ‹tt1›, class: ‹tt1_class›, division: ‹tt1_step›, lag: ‹tt1_lag›, read_from: shield, valid_until: ‹tt1_until›}
  - {tag: BS1, reads: mass, of: scale, dial: ‹bs1›, error: ‹bs1_error›, division: ‹bs1_step›, read_from: at the cell, valid_until: ‹bs1_until›}
  - {tag: HS1, reads: liquid height, of: window, dial: ‹hs1›, error: ‹hs1_error›, division: 1 mm, read_from: camera, valid_until: ‹hs1_until›}
  - {tag: GD1, reads: carbon dioxide, of: room air, dial: ‹gd1›, error: ‹gd1_error›, division: 0.01 %, read_from: shield, valid_until: ‹gd1_until›}
"""  # noqa: E501 - one line an entry: so it is written, and so it is read
"""The apparatus file with its places."""

_SHAPES = ("lying cylinder", "upright cylinder", "sphere")
_SOURCES = ("none", "water jacket", "water bath", "heating tape", "heater cartridge", "hot air")


def _until(name: str) -> Slot:
    return Slot(name, "not known", "rating")


def _text(name: str, start: str) -> Slot:
    return Slot(name, start, "text")


QUESTIONS: Final = (
    Question("What do people call the vessel?", "view cell, 250 mL", (_text("name", "my vessel"),)),
    Question("Its tag?", "VC-1", (_text("tag", "VC-1"),)),
    Question("Whose is it?", "Teaching laboratory", (_text("owner", "who it belongs to"),)),
    Question(
        "Who answers for its figures; in which role; since when?",
        "A. Lind; pressure equipment officer; 2031-01-01",
        (_text("by", "nobody yet"), _text("role", "pressure equipment officer"), Slot("approved", "2031-01-01")),
    ),
    Question(
        "How much can the fluid fill, gauge line included, and how far may that be off; how was it measured?",
        "250 mL ± 2 mL; filled with water and weighed",
        (Slot("free", "250 mL ± 5 mL"), _text("measured", "how it was measured")),
    ),
    Question("How much of that lies outside the heated body?", "4 mL", (Slot("unheated", "4 mL"),)),
    Question(
        "How does the inside lie: lying cylinder, upright cylinder or sphere; its inside diameter?",
        "lying cylinder; 60 mm",
        (Slot("shape", "lying cylinder", "word", _SHAPES), Slot("diameter", "60 mm")),
    ),
    Question(
        "From which height to which above the inside bottom does one see in?",
        "6 mm to 54 mm",
        (Slot("window", "6 mm to 54 mm"),),
    ),
    Question(
        "Heat capacity of the metal; conductance from fluid to metal; from metal to room?",
        "1.2 kJ/K; 5 W/K; 0.5 W/K",
        (Slot("metal", "1.2 kJ/K"), Slot("from_fluid", "5 W/K"), Slot("loss", "0.5 W/K")),
    ),
    Question(
        "Maximum allowable working pressure? (Enter: not known)", "160 bar(g)", (Slot("mawp", "not known", "rating"),)
    ),
    Question("Where does that stand?", "drawing or name plate", (_text("mawp_source", "drawing or name plate"),)),
    Question(
        "Last proof test: at what pressure? (Enter: not known)", "240 bar(g)", (Slot("proof", "not known", "rating"),)
    ),
    Question(
        "Done when; good until when?",
        "2031-01-01; 2033-01-01",
        (Slot("proof_done", "2031-01-01"), Slot("proof_until", "2033-01-01")),
        ("proof", KNOWN),
    ),
    Question(
        "How often may it be brought to pressure in its life? (Enter: not known)",
        "500",
        (Slot("cycles", "not known", "rating"),),
    ),
    Question("How often has it been so far?", "36", (Slot("cycles_before", "0"),), ("cycles", KNOWN)),
    Question("Narrowest bore of the let-down valve V2?", "0.15 mm", (Slot("bore", "0.15 mm"),)),
    Question(
        "Windows: pressure; temperatures; difference between their faces; source? (? for what is not known)",
        "up to 200 bar(g); -80 degC to 80 degC; up to 110 K; maker's sheet",
        (
            Slot("w_pressure", "not known", "rating"),
            Slot("w_temperature", "not known", "rating"),
            Slot("w_difference", "not known", "rating"),
            _text("w_source", "maker's sheet"),
        ),
    ),
    Question(
        "Body with its seals: pressure; temperatures; source? (? for what is not known)",
        "up to 250 bar(g); -100 degC to 100 degC; drawing",
        (
            Slot("b_pressure", "not known", "rating"),
            Slot("b_temperature", "not known", "rating"),
            _text("b_source", "drawing"),
        ),
    ),
    Question(
        "What relieves the cell: disc, valve or none?",
        "disc",
        (Slot("relief", "disc", "word", ("disc", "valve", "none")),),
    ),
    Question(
        "Disc: bursts at; manufacturing range; tolerance; run below; fitted; good until?",
        "130 bar(g); -4 % to 0 %; 5 %; 80 %; 2031-01-01; 2032-01-01",
        (
            Slot("bursts", "130 bar(g)"),
            Slot("range", "-4 % to 0 %"),
            Slot("bursts_tolerance", "5 %"),
            Slot("bursts_below", "80 %"),
            Slot("bursts_fitted", "2031-01-01"),
            _until("bursts_until"),
        ),
        ("relief", ("disc",)),
    ),
    Question(
        "Valve: opens at; tolerance; run below; fitted; good until?",
        "100 bar(g); 3 %; 90 %; 2031-01-01; 2032-01-01",
        (
            Slot("opens", "100 bar(g)"),
            Slot("opens_tolerance", "3 %"),
            Slot("opens_below", "90 %"),
            Slot("opens_fitted", "2031-01-01"),
            _until("opens_until"),
        ),
        ("relief", ("valve",)),
    ),
    Question(
        "Relief valve of the low gauge line: opens at; tolerance; run below; fitted; good until?",
        "9 bar(g); 3 %; 90 %; 2031-01-01; 2032-01-01",
        (
            Slot("low_opens", "9 bar(g)"),
            Slot("low_tolerance", "3 %"),
            Slot("low_below", "90 %"),
            Slot("low_fitted", "2031-01-01"),
            _until("low_until"),
        ),
    ),
    Question(
        f"What warms it: {', '.join(_SOURCES)}?", "water jacket", (Slot("source", "water jacket", "word", _SOURCES),)
    ),
    Question(
        "Its power; what it holds in heat itself; can a hand take it away in one motion: true or false?",
        "60 W; 2.5 kJ/K; true",
        (Slot("power", "60 W"), Slot("source_heat", "2.5 kJ/K"), Slot("away", "true", "word", ("true", "false"))),
        ("source", _SOURCES[1:]),
    ),
    Question(
        "Its independent cut-out? (Enter: not known)",
        "38 degC ± 1 K",
        (Slot("cut_out", "not known", "rating"),),
        ("source", _SOURCES[1:]),
    ),
    Question(
        "When was the cut-out last tripped on purpose?",
        "2031-01-01",
        (Slot("tripped", "not known"),),
        ("cut_out", KNOWN),
    ),
    Question(
        "High gauge PG1: dial; class; smallest step; certificate until?",
        "0 bar(g) to 160 bar(g); 0.6; 1 bar; 2032-01-31",
        (
            Slot("pg1", "0 bar(g) to 160 bar(g)"),
            Slot("pg1_class", "0.6"),
            Slot("pg1_step", "1 bar"),
            _until("pg1_until"),
        ),
    ),
    Question(
        "Low gauge PG2 behind its isolator V3: dial; class; smallest step; certificate until?",
        "0 bar(g) to 10 bar(g); 1.0; 0.1 bar; 2032-01-31",
        (
            Slot("pg2", "0 bar(g) to 10 bar(g)"),
            Slot("pg2_class", "1.0"),
            Slot("pg2_step", "0.1 bar"),
            _until("pg2_until"),
        ),
    ),
    Question(
        "Thermometer TT1 on the wall: dial; class; smallest step; lag; certificate until?",
        "-100 degC to 100 degC; A; 0.1 K; 2 min; 2032-01-31",
        (
            Slot("tt1", "-100 degC to 100 degC"),
            _text("tt1_class", "A"),
            Slot("tt1_step", "0.1 K"),
            Slot("tt1_lag", "2 min"),
            _until("tt1_until"),
        ),
    ),
    Question(
        "Scale BS1 under the cell: dial; permissible error; smallest step; certificate until?",
        "0 g to 6000 g; 0.5 g; 0.1 g; 2032-01-31",
        (Slot("bs1", "0 g to 6000 g"), Slot("bs1_error", "0.5 g"), Slot("bs1_step", "0.1 g"), _until("bs1_until")),
    ),
    Question(
        "Height scale HS1 at the window: dial; permissible error; certificate until?",
        "0 mm to 60 mm; 1 mm; 2032-01-31",
        (Slot("hs1", "0 mm to 60 mm"), Slot("hs1_error", "1 mm"), _until("hs1_until")),
    ),
    Question(
        "Gas meter GD1 of the room: dial; permissible error; certificate until?",
        "0 % to 5 %; 0.1 %; 2032-01-31",
        (Slot("gd1", "0 % to 5 %"), Slot("gd1_error", "0.1 %"), _until("gd1_until")),
    ),
)
"""In the order in which one walks around the vessel: papers, inside, ratings, relief, heat, dials."""


def _shown(filled: Mapping[str, str]) -> set[str]:
    known = {name for name in ("proof", "cycles", "cut_out") if filled[name] != "not known"}
    tested = "cut_out" in known and filled["tripped"] != "not known"
    heat = "" if filled["source"] == "none" else "tested" if tested else "heated"
    return {
        "proven" if "proof" in known else "unproven",
        "counted" if "cycles" in known else "uncounted",
        filled["relief"],
        heat,
    }


def vessel_form() -> Form:
    """The questions of one vessel, nothing answered yet."""
    return Form(TEMPLATE, QUESTIONS, lambda text: apparatus_problems(text, "your answers"), _shown)
