"""The simulated vessel lives in a process of its own: losing it loses nothing that was done."""

from __future__ import annotations

import asyncio
from dataclasses import replace
from datetime import date
from pathlib import Path

import pytest

from runbook.answers import BindRequest
from runbook.assess.bind import bind
from runbook.bench.simulated import Simulated
from runbook.errors import InputUnusable
from runbook.procedure.reader import read_procedure
from runbook.run.clock import FakeClock, ScaledClock
from runbook.run.opening import Participant
from runbook.run.state import Ledger, Stated

GOOD = Path(__file__).parents[1] / "procedure" / "good" / "refrigerant.yaml"


async def test_a_killed_process_comes_back_to_the_same_vessel() -> None:
    """Plugged in and warmed for twenty minutes, killed, looked at again: as warm as one that was never killed."""
    found = {}
    for kills in (False, True):
        base = FakeClock()
        clock = ScaledClock(base)
        plan = bind(read_procedure(GOOD), date(2031, 3, 1))
        bench = Simulated(clock, ())
        await bench.open(BindRequest(procedure_path=str(GOOD), on="2031-03-01"), plan, seed=4)
        await bench.looked()
        warming = next(i for i, line in enumerate(plan.lines) if "Warm" in line.text)
        stated = {tag: Stated(position, 0, 0) for tag, position in plan.valves}
        ledger = replace(Ledger.start(), line=warming, source="on", stated=stated)
        for _ in range(3):
            base.advance(600.0)
            bench.follow(ledger)
            await bench.looked()
        if kills:
            assert bench._process is not None
            bench._process.kill()
            await bench._process.wait()
            bench.follow(ledger)
            await bench.looked()
            assert bench.dial("TT1") is None
        base.advance(60.0)
        for _ in range(2):
            bench.follow(ledger)
            await bench.looked()
        found[kills] = float(bench.dial("TT1") or "nan")
        await bench.close()
    assert found[True] > 30.0
    assert abs(found[True] - found[False]) < 0.5


async def test_a_vessel_that_never_answers_is_not_begun_for_ever() -> None:
    """After three losses the dials stay dark, and nothing is started any more."""
    clock = ScaledClock(FakeClock())
    plan = bind(read_procedure(GOOD), date(2031, 3, 1))
    bench = Simulated(clock, ())
    await bench.open(BindRequest(procedure_path=str(GOOD.with_name("nowhere.yaml")), on="2031-03-01"), plan, seed=4)
    for _ in range(8):
        if bench._process is not None:
            bench._process.kill()
        bench.follow(replace(Ledger.start(), line=0, stated={}))
        await asyncio.wait_for(bench.looked(), 60.0)
    assert bench._losses == 3
    assert bench.dial("TT1") is None
    await bench.close()


async def test_faults_come_to_the_simulated_vessel_and_to_its_people() -> None:
    """One named at the start and one chosen later begin, are told once, and a person who has left signs nothing."""
    base = FakeClock()
    clock = ScaledClock(base)
    plan = bind(read_procedure(GOOD), date(2031, 3, 1))
    bench = Simulated(clock, (Participant("B. Second", ("second",), "222"),))
    await bench.open(BindRequest(procedure_path=str(GOOD), on="2031-03-01"), plan, 4, "second person leaves")
    await bench.looked()
    assert bench.played("B. Second") == "222"
    warming = next(i for i, line in enumerate(plan.lines) if "Warm" in line.text)
    stated = {tag: Stated(position, 0, 0) for tag, position in plan.valves}
    ledger = replace(Ledger.start(), line=warming, source="on", stated=stated)
    bench.trouble("heater left on")
    told: list[str] = []
    for _ in range(4):
        base.advance(5.0)
        bench.follow(ledger)
        await bench.looked()
        told += [name for name, _ in bench.news()]
    assert told == ["second person leaves", "heater left on"]
    assert bench.played("B. Second") is None
    assert bench.lost
    with pytest.raises(InputUnusable):
        bench.trouble("gauge stuk")
    before = clock.now().boot
    bench.trouble("operator away")
    for _ in range(2):
        base.advance(5.0)
        bench.follow(ledger)
        await bench.looked()
    assert clock.now().boot - before > 1800.0
    await bench.close()
