"""How a run begins: with a later part, or with a vessel that somebody closed already."""

from __future__ import annotations

import asyncio
from pathlib import Path

import pytest

from runbook.answers import BindRequest, ChargeBox
from runbook.assess.local import LocalEngine
from runbook.run.clock import FakeClock
from runbook.run.conductor import Conductor
from runbook.run.opening import people, played, run_opened
from tests.assess.scenes import changed_files


async def begun(path: Path, request: BindRequest) -> Conductor:
    """A run on this request, opened and answered."""
    engine = LocalEngine()
    bound = await engine.bind(request)
    desk = Conductor(None, FakeClock(), engine)
    await desk.open(run_opened(bound, people(played(bound.plan.roles), bound.plan.roles), request, rehearsal=False))
    await desk.settled()
    return desk


@pytest.mark.parametrize("grams", [180.0, 225.0, None])
def test_an_over_filled_vessel_already_closed_opens_on_make_safe(tmp_path: Path, grams: float | None) -> None:
    """180 g, 225 g, and nobody knows how much: the first screen is make safe with its acts."""
    path = changed_files(tmp_path)
    box = None if grams is None else ChargeBox(grams / 1000, grams / 1000, False, ("charge record",))
    desk = asyncio.run(begun(path, BindRequest(str(path), "2031-03-02", charge=box, cell_closed=True)))
    assert desk.ledger.safe is not None
    assert desk.ledger.safe.acts
    assert desk.ledger.safe.phase in ("B", "D")


def test_a_good_charge_already_closed_does_not(tmp_path: Path) -> None:
    """117 g is at rest: the run begins with its first line."""
    path = changed_files(tmp_path)
    box = ChargeBox(0.116, 0.118, True, ("charge record",))
    desk = asyncio.run(begun(path, BindRequest(str(path), "2031-03-02", charge=box, cell_closed=True, part=2)))
    assert desk.ledger.safe is None
    assert desk.ledger.line == desk.plan.parts[2].first - 1


def test_a_later_part_finds_the_valves_as_the_parts_before_leave_them(tmp_path: Path) -> None:
    """The lesson begins with the cell closed, its charge from the record and not proved in this run."""
    path = changed_files(tmp_path)
    box = ChargeBox(0.116, 0.118, True, ("charge record",))
    desk = asyncio.run(begun(path, BindRequest(str(path), "2031-03-02", charge=box, part=2)))
    assert dict(desk.plan.valves) == {"V1": "shut", "V2": "shut", "V3": "shut"}
    answer = desk.ledger.answer
    assert answer is not None
    assert answer.charge is not None
    assert answer.charge.by == ("charge record",)
    assert not answer.charge.proved
