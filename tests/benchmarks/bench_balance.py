"""How far mass and energy of the simulated vessel are from being kept, over every rehearsal of every shipped procedure.

Run by hand: `python tests/benchmarks/bench_balance.py`. Wanted: 1e-6 of what moved, with every fault there is. It ends
with an error where that is not held.
"""

from __future__ import annotations

import asyncio
from pathlib import Path
from typing import Any
from unittest.mock import patch

from runbook.rehearsal import bath, headless
from runbook.rehearsal.faults import FAULTS
from runbook.rehearsal.vessel import Vessel
from runbook.rehearsal.world import World

PROCEDURES = Path(__file__).parents[2] / "procedures"
WANTED = 1e-6


def main() -> None:
    """Measure and print."""
    made: list[tuple[World, Vessel]] = []

    class Watched(World):
        def __init__(self, *given: Any) -> None:
            super().__init__(*given)
            made.append((self, self.vessel))

    with patch.object(bath, "World", Watched):
        _measure(made)


def _measure(made: list[tuple[World, Vessel]]) -> None:
    for path in sorted(PROCEDURES.glob("*.yaml")):
        worst_mass, worst_energy = (0.0, ""), (0.0, "")
        for fault in (None, *FAULTS):
            asyncio.run(headless.rehearse(path, 1, faults=[] if fault is None else [(fault, 0.0)]))
            world, first = made.pop()
            name = "no fault" if fault is None else fault.name
            mass, energy = _astray(world, first)
            worst_mass, worst_energy = max(worst_mass, (mass, name)), max(worst_energy, (energy, name))
        print(
            f"{path.stem}: {len(FAULTS) + 1} rehearsals, mass within {worst_mass[0]:.1e} ({worst_mass[1]}), "
            f"energy within {worst_energy[0]:.1e} ({worst_energy[1]}) of what moved, wanted {WANTED:.0e}"
        )
        assert max(worst_mass[0], worst_energy[0]) <= WANTED, "mass or energy is not kept"


def _astray(world: World, first: Vessel) -> tuple[float, float]:
    """Mass and energy that nobody counted, as shares of what moved [1]."""
    last, tally = world.vessel, world.vessel.tally
    mass = last.mass - first.mass - tally.mass_in + tally.mass_out
    energy = world.simulation.stored(last) - world.simulation.stored(first) - tally.energy
    moved = max(abs(tally.energy_in), abs(tally.energy_out), abs(tally.from_room), 1.0)
    return abs(mass) / max(tally.mass_in, first.mass, 1e-3), abs(energy) / moved


if __name__ == "__main__":
    main()
