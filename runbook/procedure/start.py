"""The commented starts that `runbook new` writes. They read well as they are, and are never within limits: what
nobody knows yet says so, and only a number with a source takes its place.
"""

from __future__ import annotations

from typing import Final

APPARATUS: Final = """\
# One vessel. Replace every figure by yours: none of these is right for it.
# ± is the most a figure can be off. Pressures say gauge or absolute: bar(g), bar(a). The decimal sign is a point.
# A rating that nobody knows stays 'not known': nothing that leans on it is ever within limits.
format: apparatus 1
name: my vessel
tag: VC-1
owner: who it belongs to
approved: {by: nobody yet, role: pressure equipment officer, date: 2031-01-01}   # answers for the figures below

volume:
  free: 250 mL ± 5 mL          # what the fluid can fill, gauge line included
  unheated: 4 mL               # of it, outside the heated body
  source: how it was measured
shape: lying cylinder          # or: upright cylinder, sphere
diameter: 60 mm                # inside
window: 6 mm to 54 mm          # lowest and highest visible height above the inside bottom
body: {heat_capacity: 1.2 kJ/K, from_fluid: 5 W/K, loss_to_room: 0.5 W/K}

mawp: {rating: not known, source: drawing or name plate}
proof_test: not known          # {pressure: 240 bar(g), done: 2031-01-01, valid_until: 2033-01-01}
cycles: not known              # {allowed: 500, before_this_log: 0}

# The first space holds the charge. 'outside' is the room.
spaces: [cell, low gauge line, outside]
valves:
  - {tag: V2, what: let-down valve, bore: 0.15 mm, joins: [cell, outside], port: top, let_go: stays}
  - {tag: V3, what: gauge isolator, joins: [cell, low gauge line], port: top, let_go: stays}
openings:
  - {tag: V1, what: loading cap, space: cell}

components:
  - {tag: W1, what: windows, space: cell, pressure: not known, temperature: not known, difference: not known, source: maker's sheet}
  - {tag: B1, what: body, space: cell, pressure: not known, temperature: not known, source: drawing}

# A disc has bursts_at and, where it has one, a manufacturing_range; a valve has opens_at.
relief:
  - {tag: RD1, kind: bursting disc, space: cell, bursts_at: 130 bar(g), manufacturing_range: -4 % to 0 %, tolerance: 5 %, run_below: 80 %, fitted: 2031-01-01, valid_until: not known, source: tag on the holder}
  - {tag: RV2, kind: relief valve, space: low gauge line, opens_at: 9 bar(g), tolerance: 3 %, run_below: 90 %, fitted: 2031-01-01, valid_until: not known, source: test sheet}

# Without a heat source take these lines away.
heat_source: {tag: H1, kind: water jacket, power: 60 W, cut_out: not known, heat_capacity: 2.5 kJ/K, taken_away_in_one_motion: true}

# Each has a class (0.6 of a gauge, A of a thermometer) or an error, and the smallest step one can read.
instruments:
  - {tag: PG1, reads: pressure, of: cell, dial: 0 bar(g) to 160 bar(g), class: 0.6, division: 1 bar, read_from: shield, valid_until: not known}
  - {tag: PG2, reads: pressure, of: low gauge line, dial: 0 bar(g) to 10 bar(g), class: 1.0, division: 0.1 bar, read_from: shield, valid_until: not known}
  - {tag: TT1, reads: temperature, of: wall, dial: -100 degC to 100 degC, class: A, division: 0.1 K, lag: 2 min, read_from: shield, valid_until: not known}
  - {tag: BS1, reads: mass, of: scale, dial: 0 kg to 6 kg, error: 0.5 g, division: 0.1 g, read_from: at the cell, valid_until: not known}
  - {tag: HS1, reads: liquid height, of: window, dial: 0 mm to 60 mm, error: 1 mm, division: 1 mm, read_from: camera, valid_until: not known}
  - {tag: GD1, reads: carbon dioxide, of: room air, dial: 0 % to 5 %, error: 0.1 %, division: 0.01 %, read_from: shield, valid_until: not known}
"""  # noqa: E501 - one line an entry: so it is written, and so it is read
"""A start of an apparatus file."""

PROCEDURE: Final = """\
# One demonstration with one vessel and one charge. 'runbook check' says what is not yet right.
# Sentences stand on lines of their own: inside {{ }} a comma would end them.
format: procedure 1
name: my demonstration
issue: {{number: 1, date: 2031-01-02, written_by: my name, checked_by: somebody else, review_by: 2032-01-02}}
apparatus: {apparatus}
fluid: carbon dioxide
charge: {{mass: 117 g ± 2 g, loaded_as: dry ice}}    # or: charge: already loaded
room: {{hottest: 30 degC, coldest: 18 degC, volume: 180 m3, air_changes: 2 per h, height: 120 m}}
roles: [performer, second]
bring: [face shields, cryogenic gloves]
at_start: {{V1: open, V2: open, V3: open, H1: unplugged}}

parts:
  - name: Load and prove
    steps:
      - do: Look through the outlets of RD1 and RV2 with a lamp
        who: performer
        see:
          words: Light comes through both.
        if_not: Stop here. Clear the outlet.
      - do: Press the test button of GD1
        who: performer
        see:
          words: The alarm is heard at the door.
        if_not: Stop here.
      - do: Check that PG2 stands at zero, V2 open
        who: performer
        read:
          - {{what: pressure, with: PG2, accept: -0.1 bar(g) to 0.1 bar(g), if_not: Use the spare gauge.}}
      - do: Load dry ice until the scale shows 140 g
        who: performer
        path: {{load: 140 g ± 10 g}}
        warning:
          word: WARNING
          hazard: Dry ice at -79 degC
          could: burn the skin in seconds.
          avoid: Wear the cryogenic gloves.
      - do: Tighten V1 to 12 N·m
        who: performer
        valves: {{V1: shut}}
      - do: Shut V3
        who: performer
        valves: {{V3: shut}}
      - hold:
          signed_by: second
          because: once V2 is shut the room alone warms the charge
          read: {{what: mass, with: BS1, accept: 105 g to 150 g, if_not: Stop here.}}
      # Between closing and rest nobody types and nobody is waited for.
      - quick:
          - {{do: Shut V2 at 117 g on the way down, path: seal, valves: {{V2: shut}}, latest: 9 min, if_not: Stop.}}
          - {{do: Shut the shield and step back, latest: 2 min, if_not: Open V2.}}
        read_after:
          - {{what: mass, with: BS1, accept: 115 g to 119 g, if_not: Make safe.}}
        warning:
          word: WARNING
          hazard: Dry ice in a closed cell
          could: bring it to 74 bar(g) by the warmth of the room alone.
          avoid: Keep the shield between the cell and every face.
      - do: Let the cell warm to the room behind the shield
        who: performer
        path: {{warm_to: room temperature, by_means_of: room air}}
        see: {{show: [solid gone, liquid height]}}
        if_not: Wait.
  - name: Let down and prove empty
    steps:
      - do: Read TT1 and PG1 with the cell at rest
        who: performer
        read:
          - {{what: temperature, with: TT1}}
          - {{what: pressure, with: PG1}}
      - hold:
          signed_by: second
          because: letting down can bring the wall to -78 degC, and the gas goes where people breathe
      - do: Let the gas out through V2 until PG1 shows zero
        who: performer
        path: {{let_down_to: 0 bar(g), through: V2, pause_above: 20 bar(g), until: no liquid seen}}
        valves: {{V2: open}}
        warning:
          word: WARNING
          hazard: Gas and dry ice at -78 degC from V2
          could: burn and plug the outlet.
          avoid: Keep clear of the outlet. Leave V2 open at the end.
      - show_empty: {{low_gauge: PG2, isolator: V3, wall: TT1, vent: V2}}
      - do: Hang the tag EMPTY on V2
        who: performer
"""
"""A start of a procedure file; `apparatus` is filled in."""
