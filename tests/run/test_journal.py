"""The journal on disk: durable before acknowledged, one writer, and nothing more after the first doubt."""

from __future__ import annotations

import asyncio
import os
import subprocess
import sys
import threading
from pathlib import Path

import pytest

from runbook.errors import JournalBroken, JournalDamaged, JournalError, JournalLocked
from runbook.run import posix
from runbook.run.clock import FakeClock, Moment
from runbook.run.journal import Journal, JournalWriter, read, verify
from runbook.run.journal_file import LEAST_FREE, head_path
from runbook.run.journal_lines import Head, head_line, parse_head

NOW = FakeClock().now()


def three(path: Path) -> bytes:
    """Write a journal of three records, put it away, and give its bytes."""
    with Journal.create(path) as journal:
        for kind in ("Opened", "Read", "Noted"):
            journal.append(kind, {"of": kind}, NOW)
    return path.read_bytes()


def test_a_journal_reads_back_and_goes_on(tmp_path: Path) -> None:
    """What append returned is what is read, and opening it again goes on where it ended."""
    path = tmp_path / "run.jsonl"
    with Journal.create(path) as journal:
        first = journal.append("Opened", {"vessel": "C-7"}, NOW)
        assert journal.head == (1, first.mark)
        assert read(path).records == (first,)
    journal, records = Journal.open(path)
    with journal:
        assert records == (first,)
        second = journal.append("Noted", {}, NOW, version=3)
        assert (second.n, second.v) == (2, 3)
    reading = read(path)
    assert reading.records == (first, second)
    assert (reading.torn_bytes, reading.warnings) == (0, ())


def test_the_record_is_on_disk_before_it_is_acknowledged(
    tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    """The order is: the whole line, sync, the head, sync; only then does append return."""
    path = tmp_path / "run.jsonl"
    done: list[str] = []
    with Journal.create(path) as journal:
        sync = posix.sync

        def watched(descriptor: int) -> None:
            sync(descriptor)
            head = parse_head(head_path(path).read_bytes())
            done.append(f"{path.read_bytes().count(b'}' + bytes([10]))} lines, head {head.count if head else None}")

        monkeypatch.setattr(posix, "sync", watched)
        journal.append("Opened", {}, NOW)
    assert done == ["1 lines, head 0", "1 lines, head 1"]


def test_the_folder_is_synced_when_a_journal_is_made(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    """A new file's name is on the disk too, or a power cut would lose the file as a whole."""
    synced: list[Path] = []
    monkeypatch.setattr(posix, "sync_folder", synced.append)
    Journal.create(tmp_path / "run.jsonl").close()
    assert synced == [tmp_path]


def test_one_write_an_event(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    """A line reaches the file in one piece, so that a reader never sees half of an event followed by another."""
    with Journal.create(tmp_path / "run.jsonl") as journal:
        written: list[bytes] = []
        write = os.write

        def watched(descriptor: int, data: bytes) -> int:
            written.append(data)
            return write(descriptor, data)

        monkeypatch.setattr(os, "write", watched)
        journal.append("Opened", {"text": "x" * 100_000}, NOW)
    assert [len(each) > 100_000 and each.endswith(b"\n") for each in written] == [True]


def test_a_journal_is_never_begun_twice(tmp_path: Path) -> None:
    """An existing file is not touched by beginning a journal of that name."""
    data = three(tmp_path / "run.jsonl")
    with pytest.raises(JournalError, match="exists already"):
        Journal.create(tmp_path / "run.jsonl")
    assert (tmp_path / "run.jsonl").read_bytes() == data


def test_a_head_without_its_journal_is_not_written_over(tmp_path: Path) -> None:
    """A head that lies there alone tells of a journal that was removed, and stays."""
    three(tmp_path / "run.jsonl")
    (tmp_path / "run.jsonl").unlink()
    with pytest.raises(JournalError, match="without its journal"):
        Journal.create(tmp_path / "run.jsonl")
    assert parse_head((tmp_path / "run.jsonl.head").read_bytes()) is not None


def test_no_journal_is_begun_on_a_full_disk(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    """With under 5 MB free a run is not begun; nothing is left behind."""
    monkeypatch.setattr(posix, "free_bytes", lambda folder: LEAST_FREE - 1)
    with pytest.raises(JournalError, match="make room"):
        Journal.create(tmp_path / "run.jsonl")
    assert list(tmp_path.iterdir()) == []


def test_a_journal_that_could_not_be_begun_leaves_nothing(
    tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    """When the head cannot be written, no empty journal stays behind, and no descriptor stays open."""

    def refuse(descriptor: int, data: bytes) -> int:
        raise OSError(28, "No space left on device")

    monkeypatch.setattr(posix, "write_at_start", refuse)
    before = open_descriptors()
    with pytest.raises(JournalError, match="No space left"):
        Journal.create(tmp_path / "run.jsonl")
    assert list(tmp_path.iterdir()) == []
    assert open_descriptors() == before


def open_descriptors() -> int:
    """How many files this process has open; 0 where the system does not list them."""
    return len(list(Path("/proc/self/fd").iterdir())) if sys.platform == "linux" else 0


@pytest.mark.parametrize("make", ["file", "folder", "nothing"])
def test_places_where_no_journal_can_be(tmp_path: Path, make: str) -> None:
    """A file where the folder should be, a folder where the journal should be, nothing at all: a sentence."""
    place = tmp_path / "there" / "run.jsonl"
    if make == "file":
        (tmp_path / "there").write_text("")
    elif make == "folder":
        place.mkdir(parents=True)
    for attempt in (Journal.create, Journal.open, read, verify):
        with pytest.raises(JournalError, match=r"run\.jsonl"):
            attempt(place)


def test_the_second_opener_is_refused(tmp_path: Path) -> None:
    """One run has one writer; the other may read; with the first gone the second may go on."""
    path = tmp_path / "run.jsonl"
    journal = Journal.create(path)
    journal.append("Opened", {}, NOW)
    with pytest.raises(JournalLocked, match="Somebody else"):
        Journal.open(path)
    assert len(read(path).records) == 1
    journal.append("Noted", {}, NOW)
    journal.close()
    again, records = Journal.open(path)
    again.close()
    assert len(records) == 2


def test_a_torn_last_line_is_cut_off_and_told(tmp_path: Path) -> None:
    """A line that was being written when the machine stopped is dropped, told, and gone from the file."""
    path = tmp_path / "run.jsonl"
    whole = three(path)
    path.write_bytes(whole + b'{"n":4,"v":1,"event":"Rea')
    assert read(path).torn_bytes == 25
    assert "25 bytes of an unfinished line" in verify(path).said[1]
    journal, records = Journal.open(path)
    with journal:
        assert (journal.torn, len(records)) == (25, 3)
        assert path.read_bytes() == whole
        journal.append("Noted", {}, NOW)
    assert (len(read(path).records), read(path).torn_bytes) == (4, 0)


def test_a_record_that_the_head_does_not_know_yet_is_kept(tmp_path: Path) -> None:
    """Stopped between line and head, the event stays, and the head is brought up to it."""
    path = tmp_path / "run.jsonl"
    three(path)
    second = read(path).records[1]
    head_path(path).write_bytes(head_line(Head(2, second.mark)))
    assert read(path).warnings == ()
    journal, records = Journal.open(path)
    journal.close()
    assert len(records) == 3
    assert parse_head(head_path(path).read_bytes()) == Head(3, records[2].mark)


@pytest.mark.parametrize("left", [None, b"", b"nonsense", b"x" * 4000])
def test_a_lost_head_is_a_warning_and_made_anew(tmp_path: Path, left: bytes | None) -> None:
    """Without a head the records are still proved; the run goes on, and says what can no longer be told."""
    path = tmp_path / "run.jsonl"
    three(path)
    head_path(path).unlink() if left is None else head_path(path).write_bytes(left)
    assert "cut off" in read(path).warnings[0]
    finding = verify(path)
    assert finding.good
    assert "cut off" in finding.said[-1]
    journal, records = Journal.open(path)
    with journal:
        assert journal.warnings == read_warnings(path, left)
        journal.append("Noted", {}, NOW)
    assert read(path).warnings == ()
    assert len(records) == 3


def read_warnings(path: Path, left: bytes | None) -> tuple[str, ...]:
    """The sentence about a head that is missing or damaged."""
    what = "missing" if left is None else "damaged"
    return (f"{head_path(path)} is {what}: nobody can tell whether the end of the journal was cut off.",)


def test_a_damaged_journal_is_not_opened_and_not_touched(tmp_path: Path) -> None:
    """Damage is named by file and line; the journal stays as it is, down to its torn end."""
    path = tmp_path / "run.jsonl"
    data = three(path).replace(b'"of":"Read"', b'"of":"Reed"') + b'{"n":4'
    path.write_bytes(data)
    for attempt in (Journal.open, read):
        with pytest.raises(JournalDamaged, match=r"run\.jsonl:2: its mark does not fit") as caught:
            attempt(path)
        assert (caught.value.line, caught.value.file) == (2, str(path))
    assert path.read_bytes() == data
    finding = verify(path)
    assert not finding.good
    assert len(finding.records) == 1
    assert "1 record before" in finding.said[1]


def test_the_lock_is_let_go_of_when_opening_fails(tmp_path: Path) -> None:
    """A journal that was refused as damaged can be opened once it is whole again."""
    path = tmp_path / "run.jsonl"
    data = three(path)
    path.write_bytes(data[:-1])
    with pytest.raises(JournalDamaged):
        Journal.open(path)
    path.write_bytes(data)
    Journal.open(path)[0].close()


def test_an_event_that_cannot_be_written_down_does_not_latch(tmp_path: Path) -> None:
    """A number that is not finite is refused with nothing written; the next event goes through."""
    with Journal.create(tmp_path / "run.jsonl") as journal:
        with pytest.raises(JournalError, match="Nothing was written"):
            journal.append("Read", {"p": float("nan")}, NOW)
        assert journal.broken is None
        assert journal.append("Noted", {}, NOW).n == 1


def test_a_closed_journal_refuses(tmp_path: Path) -> None:
    """After closing nothing is written, also not into whatever file has the descriptor then."""
    journal = Journal.create(tmp_path / "run.jsonl")
    journal.close()
    journal.close()
    with pytest.raises(JournalBroken, match="put away"):
        journal.append("Noted", {}, NOW)


async def test_the_writer_keeps_the_order_and_the_loop_free(tmp_path: Path) -> None:
    """Events are written in the order in which they were handed over, by another thread than the loop's."""
    with JournalWriter(Journal.create(tmp_path / "run.jsonl")) as writer:
        assert writer.path == tmp_path / "run.jsonl"
        records = await asyncio.gather(*(writer.append("Noted", {"i": i}, NOW) for i in range(20)))
        assert [record.data["i"] for record in records] == list(range(20))
        assert [record.n for record in records] == list(range(1, 21))
        assert writer.append_now("Closed", {}, NOW).n == 21
        assert writer.head[0] == 21
        assert any(thread.name.startswith("journal") and not thread.daemon for thread in threading.enumerate())
    assert not any(thread.name.startswith("journal") for thread in threading.enumerate())
    assert read(tmp_path / "run.jsonl").records[:20] == tuple(records)


async def test_an_event_is_written_though_nobody_waits(tmp_path: Path) -> None:
    """Cancelling whoever waits does not take back an event that was handed over."""
    path = tmp_path / "run.jsonl"
    with JournalWriter(Journal.create(path)) as writer:
        waiting = [asyncio.create_task(writer.append("Noted", {"i": i}, NOW)) for i in range(5)]
        await asyncio.sleep(0)
        for task in waiting:
            task.cancel()
        done = await asyncio.gather(*waiting, return_exceptions=True)
        assert any(isinstance(each, asyncio.CancelledError) for each in done)
    assert [record.data["i"] for record in read(path).records] == [0, 1, 2, 3, 4]


async def test_after_the_latch_everything_waiting_fails(
    tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    """Once a sync has failed, every event still waiting fails too and none of them is written."""
    path = tmp_path / "run.jsonl"
    with JournalWriter(Journal.create(path)) as writer:
        writer.append_now("Opened", {}, NOW)
        gate = threading.Event()

        def fail(descriptor: int) -> None:
            gate.wait(10.0)
            raise OSError(5, "Input/output error")

        monkeypatch.setattr(posix, "sync", fail)
        waiting = [writer.submit("Noted", {"i": i}, NOW) for i in range(5)]
        assert writer.broken is None
        gate.set()
        failed = [await asyncio.to_thread(each.exception, 10.0) for each in waiting]
        assert all(isinstance(each, JournalBroken) for each in failed)
        assert writer.broken is not None
        assert "Input/output error" in writer.broken
        monkeypatch.undo()
        with pytest.raises(JournalBroken, match="the run is halted"):
            await writer.append("Noted", {}, NOW)
    # The first of them reached the file before the sync failed; that was in doubt, and is told as in doubt.
    assert path.read_bytes().count(b"\n") == 2


def test_a_closed_writer_refuses(tmp_path: Path) -> None:
    """After closing, a writer refuses with a sentence; closing twice is no error."""
    writer = JournalWriter(Journal.create(tmp_path / "run.jsonl"))
    writer.close()
    writer.close()
    with pytest.raises(JournalError, match="put away"):
        writer.append_now("Noted", {}, NOW)


def test_the_process_ends_with_everything_written(tmp_path: Path) -> None:
    """A process that ends without closing its writer first writes what is waiting, and does end."""
    program = (
        "import pathlib, sys\n"
        "from runbook.run.clock import SystemClock\n"
        "from runbook.run.journal import Journal, JournalWriter\n"
        "writer = JournalWriter(Journal.create(pathlib.Path(sys.argv[1])))\n"
        "for i in range(50): writer.submit('Noted', {'i': i}, SystemClock().now())\n"
    )
    path = tmp_path / "run.jsonl"
    subprocess.run([sys.executable, "-c", program, str(path)], check=True, timeout=60)
    assert len(read(path).records) == 50


def test_live_and_replayed_moments_are_equal(tmp_path: Path) -> None:
    """The moment of a record is the same when it is written and when it is read, so a fold is too."""
    with Journal.create(tmp_path / "run.jsonl") as journal:
        live = journal.append("Read", {}, Moment(boot=12.3456789, wall=1_930_000_000.98765))
    assert read(tmp_path / "run.jsonl").records[0].moment == live.moment
    assert live.moment.boot == 12.3456789
    assert live.moment.wall == pytest.approx(1_930_000_000.988, abs=1e-6)
