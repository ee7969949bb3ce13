"""What stands before a run: who may take part, and what the journals say is in the vessel."""

from __future__ import annotations

from dataclasses import replace
from pathlib import Path

import pytest

from runbook.answers import ChargeBox
from runbook.errors import InputUnusable
from runbook.run import acts
from runbook.run.events import Proved, RunClosed, event_to_plain
from runbook.run.journal import Journal, JournalWriter
from runbook.run.logbook import Logbook, RunFile
from runbook.run.opening import ChargeRecord, Participant, charge_record, people, unfinished
from runbook.run.signing import number_sha256
from tests.run.plans import Run, begun, empty, line, plan

LOADING = plan(
    line(1),
    line(2, "Shut V2", seals=True, valves=(("V2", "shut"),)),
    line(3),
    valves=(("V1", "shut"), ("V2", "open"), ("V3", "shut")),
)
BOX = ChargeBox(0.115, 0.119, True, ("weighing", "height"))


def loaded() -> Run:
    """A run that closes a charge in and ends."""
    run = begun(LOADING)
    for _ in LOADING.lines:
        run.answered(charge=BOX)
        run.must(acts.GoOn())
    run.answered(charge=BOX)
    run.must(acts.Finish())
    return run


def written(logbook: Logbook, run: Run, rehearsal: bool = False) -> Path:
    """The journal of a run."""
    path = logbook.new_run_path("C7", run.pairs[0][1], rehearsal)
    with JournalWriter(Journal.create(path)) as writer:
        for event, at in run.pairs:
            writer.append_now(*event_to_plain(event), at)
    return path


def record(logbook: Logbook) -> ChargeRecord | None:
    """What C7 holds, no journal being passed over."""
    skipped: list[RunFile] = []
    found = charge_record(logbook, "C7", skipped)
    assert skipped == []
    return found


def test_a_charge_outlives_its_run(tmp_path: Path) -> None:
    """What was closed in is still there when the next run is opened; another vessel knows nothing of it."""
    logbook = Logbook(tmp_path)
    assert record(logbook) is None
    written(logbook, loaded())
    found = record(logbook)
    assert found is not None
    assert (found.box, found.fluid, found.procedure) == (BOX, "carbon dioxide", LOADING.procedure)
    assert charge_record(logbook, "C8", []) is None


def test_a_rehearsal_loads_nothing(tmp_path: Path) -> None:
    """Nothing that was simulated is in a vessel."""
    logbook = Logbook(tmp_path)
    written(logbook, loaded(), rehearsal=True)
    assert record(logbook) is None


def test_a_run_that_closes_nothing_in_loads_nothing(tmp_path: Path) -> None:
    """An open vessel holds no charge for the next run, whatever was weighed."""
    logbook = Logbook(tmp_path)
    run = begun(plan(line(1)))
    run.answered(charge=BOX)
    written(logbook, run)
    assert record(logbook) is None


def emptied(proofs: int) -> Run:
    """A later run that lets down and makes so many of the four proofs."""
    made = plan(line(1), empty(), charge=BOX, valves=LOADING.valves)
    run = Run(made)
    run.clock.advance(86_400.0)
    first = begun(made)
    run.put(first.pairs[0][0])
    run.must(acts.GoOn())
    run.must(acts.SetValve("V2", "open"))
    run.must(acts.GoOn())
    for proof in ("vent", "wall", "low gauge", "left open")[:proofs]:
        run.put(Proved(1, proof))
    run.put(RunClosed("completed"))
    return run


@pytest.mark.parametrize(("proofs", "gone"), [(0, False), (3, False), (4, True)])
def test_only_four_proofs_empty_a_vessel(tmp_path: Path, proofs: int, gone: bool) -> None:
    """A vent that was opened proves nothing; all four proofs do."""
    logbook = Logbook(tmp_path)
    written(logbook, loaded())
    written(logbook, emptied(proofs))
    assert (record(logbook) is None) is gone


def test_a_damaged_journal_is_named(tmp_path: Path) -> None:
    """Whoever leans on the record is told what could not be read."""
    logbook = Logbook(tmp_path)
    path = written(logbook, loaded())
    path.write_bytes(path.read_bytes().replace(b'"position"', b'"Position"').replace(b"RunClosed", b"RunCl0sed"))
    skipped: list[RunFile] = []
    assert charge_record(logbook, "C7", skipped) is None
    assert [run.path for run in skipped] == [path]


def test_unfinished_runs_are_found(tmp_path: Path) -> None:
    """A run without its last event can be taken up again; a closed one cannot."""
    logbook = Logbook(tmp_path)
    written(logbook, loaded())
    left = written(logbook, begun(LOADING))
    assert [run.path for run in unfinished(logbook.runs())] == [left]


ADA = Participant("Ada", ("performer",), "111")
BO = Participant("Bo", ("second",), "222")


def test_people_are_kept_without_their_numbers() -> None:
    """Only the digest of a signing number leaves the briefing."""
    found = people((ADA, BO), ("performer", "second"))
    assert [p.name for p in found] == ["Ada", "Bo"]
    assert found[0].number_sha256 == number_sha256("Ada", "111")
    assert "111" not in repr(found)


@pytest.mark.parametrize(
    ("given", "said"),
    [
        ((ADA,), "nobody is second"),
        ((ADA, replace(BO, name=" ")), "needs a name"),
        ((ADA, replace(BO, name="Ada")), "no two the same"),
        ((ADA, replace(BO, number="12")), "at least three digits"),
        ((ADA, replace(BO, number="abc")), "at least three digits"),
        ((ADA, BO, replace(BO, name="Cy")), "cannot both be second"),
    ],
)
def test_people_that_cannot_be_used_are_named(given: tuple[Participant, ...], said: str) -> None:
    """Each role one person, each person a name and a number."""
    with pytest.raises(InputUnusable, match=said):
        people(given, ("performer", "second"))
