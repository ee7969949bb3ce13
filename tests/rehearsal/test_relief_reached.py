"""Whatever lot of the tolerances is there and whatever goes wrong: the relief is never reached unannounced."""

from __future__ import annotations

import asyncio
from dataclasses import dataclass, replace
from functools import partial
from pathlib import Path
from random import Random

import pytest

from runbook.rehearsal.faults import FAULTS
from runbook.rehearsal.headless import FaultStory, Outcome, rehearse
from runbook.rehearsal.lots import lots

SHIPPED = Path(__file__).parents[2] / "procedures"
TRIALS = [("co2-critical-point", seed) for seed in range(4)] + [("co2-triple-point", seed) for seed in range(8)]
"""Of the suite; as a script it takes any number: python -m tests.rehearsal.test_relief_reached 1000."""
PUT_ENERGY_IN = {"source stuck on", "heater left on", "cooling lost"}
"""Faults that themselves bring, or keep in, the energy."""


@dataclass(frozen=True)
class Trial:
    """One lot with up to two faults, each at a moment within a quarter of an hour of its situation."""

    procedure: str
    seed: int

    @property
    def faults(self) -> list[tuple[int, float]]:
        """Index of each fault and its moment [s]."""
        random = Random(f"relief {self.procedure} {self.seed}")
        count = random.choice((0, 1, 1, 1, 2))
        return [(i, random.choice((0.0, random.uniform(0.0, 900.0)))) for i in random.sample(range(len(FAULTS)), count)]

    @property
    def names(self) -> list[str]:
        """Of the faults."""
        return [FAULTS[i].name for i, _ in self.faults]

    @property
    def brings_energy(self) -> bool:
        """One of its faults put the energy in."""
        return bool(PUT_ENERGY_IN & set(self.names))

    def run(self) -> Outcome:
        """The rehearsal."""
        chosen = [(FAULTS[i], after) for i, after in self.faults]
        return asyncio.run(
            rehearse(
                SHIPPED / f"{self.procedure}.yaml",
                self.seed,
                faults=chosen,
                draw=lambda scene, plan: lots(scene, plan, self.seed, 1)[1],
            )
        )

    def wrong(self, found: Outcome) -> str:
        """What should not have been; empty is good."""
        if not self.faults:
            ends = found.relief_s is not None
            return "the relief was reached though nothing had gone wrong" if ends else ""
        if found.relief_s is None or self.brings_energy:
            return ""
        story = found.fault
        assert story is not None, "something went wrong"
        before = story.noticed_s is not None and story.noticed_s <= found.relief_s
        safe = story.acted_s is not None and story.acted_s <= found.relief_s
        return "" if before or safe else f"the relief was reached unannounced, with {' and '.join(self.names)}"


@pytest.mark.parametrize(("procedure", "seed"), TRIALS)
def test_the_relief_is_not_reached_unannounced(procedure: str, seed: int) -> None:
    """Only after the run had blocked or somebody had made safe, or where the fault itself brought the energy."""
    trial = Trial(procedure, seed)
    assert trial.wrong(trial.run()) == ""


def test_the_judge_sees_what_it_looks_for() -> None:
    """Reached before anything was noticed is wrong, after it is not; with nothing gone wrong it always is."""
    story = FaultStory("over-loaded", 0.0, 200.0, "height", None, 9e6, ())
    outcome = Outcome("completed", None, 1, 1.0, 9e6, None, 1, story, relief_s=100.0)
    with_fault = next(t for t in map(partial(Trial, "p"), range(99)) if len(t.faults) == 1 and not t.brings_energy)
    without = next(t for t in map(partial(Trial, "p"), range(99)) if not t.faults)
    assert "unannounced" in with_fault.wrong(outcome)
    assert with_fault.wrong(replace(outcome, relief_s=300.0)) == ""
    assert without.wrong(replace(outcome, fault=None)) != ""
    assert without.wrong(replace(outcome, fault=None, relief_s=None)) == ""


if __name__ == "__main__":
    import sys

    reached = 0
    for number in range(int(sys.argv[1])):
        one = Trial(("co2-critical-point", "co2-triple-point")[number % 2], number)
        outcome = one.run()
        reached += outcome.relief_s is not None
        if said := one.wrong(outcome):
            print(one, [(FAULTS[i].name, after) for i, after in one.faults], outcome.outcome, said, flush=True)
    print(f"{sys.argv[1]} rehearsals, the relief was reached in {reached}")
