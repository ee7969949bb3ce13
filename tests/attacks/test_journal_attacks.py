"""What disks, crashes and other people do to a journal while a run goes on.

Each of these was seen failing once without the handling that it is about, which is named beside it.
"""

from __future__ import annotations

import os
import signal
import subprocess
import sys
from pathlib import Path

import pytest

from runbook.errors import JournalBroken, JournalDamaged, JournalError, JournalLocked
from runbook.run import posix
from runbook.run.clock import FakeClock
from runbook.run.journal import Journal, read, verify
from runbook.run.journal_file import head_path

NOW = FakeClock().now()

posix_only = pytest.mark.skipif(sys.platform == "win32", reason="needs signals and limits of POSIX")


def begun(path: Path) -> Journal:
    """A journal with one record."""
    journal = Journal.create(path)
    journal.append("Opened", {"vessel": "C-7"}, NOW)
    return journal


def latched(journal: Journal, why: str) -> None:
    """The next append fails with `why`, and every later one fails the same way with nothing written."""
    with pytest.raises(JournalBroken, match=why):
        journal.append("Read", {"p": 6.2e6}, NOW)
    assert journal.broken is not None
    assert journal.head[0] == 1
    for _ in range(2):
        with pytest.raises(JournalBroken, match=why):
            journal.append("Read", {"p": 6.2e6}, NOW)
    journal.close()


def run(program: str, *arguments: str) -> subprocess.CompletedProcess[str]:
    """Run a program in a process of its own."""
    return subprocess.run(
        [sys.executable, "-c", program, *arguments], capture_output=True, text=True, timeout=60, check=False
    )


def test_a_journal_deleted_during_the_run_is_noticed(tmp_path: Path) -> None:
    """Writing into a deleted file succeeds for ever; it must not count. (Removed: `posix.still_there` of it.)"""
    journal = begun(tmp_path / "run.jsonl")
    (tmp_path / "run.jsonl").unlink()
    latched(journal, "deleted, replaced or changed")


def test_a_journal_replaced_during_the_run_is_noticed(tmp_path: Path) -> None:
    """An editor that saves puts another file there, even of the same bytes. (Removed: the inode compared.)"""
    path = tmp_path / "run.jsonl"
    journal = begun(path)
    # As long as ours will be after the next event, so that the length cannot tell.
    with begun(tmp_path / "copy") as other:
        other.append("Read", {"p": 6.2e6}, NOW)
    (tmp_path / "copy").replace(path)
    latched(journal, "deleted, replaced or changed")


@pytest.mark.parametrize("change", ["shorter", "longer"])
def test_a_journal_changed_by_another_writer_is_noticed(tmp_path: Path, change: str) -> None:
    """Nobody else may lengthen or shorten the file under us. (Removed: the size compared.)"""
    path = tmp_path / "run.jsonl"
    journal = begun(path)
    if change == "shorter":
        os.truncate(path, 10)
    else:
        with path.open("ab") as file:
            file.write(b"x\n")
    latched(journal, "deleted, replaced or changed")


def test_a_head_deleted_during_the_run_is_noticed(tmp_path: Path) -> None:
    """Without a head a cut end goes unnoticed, so losing it halts. (Removed: `still_there` of the head.)"""
    journal = begun(tmp_path / "run.jsonl")
    head_path(tmp_path / "run.jsonl").unlink()
    latched(journal, "head of the journal was deleted")


def test_a_short_write_latches(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    """A write that took only half of the line is a failure. (Removed: the comparison of lengths.)"""
    journal = begun(tmp_path / "run.jsonl")
    write = os.write
    monkeypatch.setattr(os, "write", lambda to, data: write(to, data[: len(data) // 2]))
    latched(journal, "only .* bytes were written")
    monkeypatch.undo()
    again, records = Journal.open(tmp_path / "run.jsonl")
    again.close()
    assert len(records) == 1
    assert again.torn > 0


def test_a_failed_sync_latches_and_is_never_asked_again(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    """After one failed sync the next would lie; nothing is written any more. (Removed: the latch.)"""
    path = tmp_path / "run.jsonl"
    journal = begun(path)
    asked: list[int] = []

    def fail_once(descriptor: int) -> None:
        asked.append(descriptor)
        if len(asked) == 1:
            raise OSError(5, "Input/output error")

    monkeypatch.setattr(posix, "sync", fail_once)
    latched(journal, "Input/output error")
    assert len(asked) == 1
    assert path.read_bytes().count(b"\n") == 2


@pytest.mark.parametrize("failing", ["the sync of the head", "the head in part"])
def test_a_head_that_cannot_be_written_latches(
    tmp_path: Path, monkeypatch: pytest.MonkeyPatch, failing: str
) -> None:
    """An event without its head is not acknowledged. (Removed: the head's sync, and its comparison of lengths.)"""
    journal = begun(tmp_path / "run.jsonl")
    sync, write = posix.sync, posix.write_at_start
    count = 0

    def second_fails(descriptor: int) -> None:
        nonlocal count
        count += 1
        if count == 2:
            raise OSError(28, "No space left on device")
        sync(descriptor)

    if failing == "the head in part":
        monkeypatch.setattr(posix, "write_at_start", lambda to, data: write(to, data[:20]))
        latched(journal, "in part only")
    else:
        monkeypatch.setattr(posix, "sync", second_fails)
        latched(journal, "No space left")


def test_an_interruption_in_the_middle_latches(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    """A key that interrupts between line and head leaves doubt. (Removed: the branch for interruptions.)"""
    journal = begun(tmp_path / "run.jsonl")

    def interrupt(descriptor: int) -> None:
        raise KeyboardInterrupt

    monkeypatch.setattr(posix, "sync", interrupt)
    with pytest.raises(KeyboardInterrupt):
        journal.append("Read", {}, NOW)
    monkeypatch.undo()
    with pytest.raises(JournalBroken, match="KeyboardInterrupt"):
        journal.append("Read", {}, NOW)
    journal.close()


FULL = """
import pathlib, resource, sys
from runbook.errors import JournalBroken
from runbook.run.clock import SystemClock
from runbook.run.journal import Journal
journal = Journal.create(pathlib.Path(sys.argv[1]))
resource.setrlimit(resource.RLIMIT_FSIZE, (int(sys.argv[2]), resource.RLIM_INFINITY))
said = set()
for i in range(100):
    try:
        journal.append("Noted", {"i": i}, SystemClock().now())
        print(i, flush=True)
    except JournalBroken as error:
        said.add(str(error))
print(len(said), *said)
"""


@posix_only
@pytest.mark.parametrize("limit", [1000, 2048, 3001])
def test_a_full_disk_latches_and_loses_nothing(tmp_path: Path, limit: int) -> None:
    """On a full disk all that was acknowledged is there, the rest is refused. (Removed: the latch.)"""
    path = tmp_path / "run.jsonl"
    done = run(FULL, str(path), str(limit))
    assert done.returncode == 0, done.stderr
    *acknowledged, said = done.stdout.splitlines()
    assert said.startswith("1 Record ")
    assert "the run is halted" in said
    assert 0 < len(acknowledged) < 20
    assert [record.data["i"] for record in read(path).records] == [int(each) for each in acknowledged]
    journal, records = Journal.open(path)
    with journal:
        assert journal.append("Noted", {}, NOW).n == len(records) + 1 == len(acknowledged) + 1


OPENER = """
import pathlib, sys
from runbook.errors import JournalLocked
from runbook.run.journal import Journal, read
path = pathlib.Path(sys.argv[1])
try:
    Journal.open(path)
except JournalLocked as error:
    print(len(read(path).records), error)
"""


def test_another_process_cannot_open_it(tmp_path: Path) -> None:
    """Two operators never write one run; the second may read. (Removed: the call of `posix.lock`.)"""
    path = tmp_path / "run.jsonl"
    with begun(path):
        done = run(OPENER, str(path))
        assert done.stdout.startswith("1 Somebody else"), done.stderr
    assert run(OPENER, str(path)).stdout == ""


def test_a_child_does_not_keep_the_lock(tmp_path: Path) -> None:
    """A child process that outlives us does not lock the run. (Made to fail: descriptors made inheritable.)"""
    path = tmp_path / "run.jsonl"
    journal = begun(path)
    program = "import sys; print(flush=True); sys.stdin.read()"
    with subprocess.Popen(
        [sys.executable, "-c", program], stdin=subprocess.PIPE, stdout=subprocess.PIPE, close_fds=False
    ) as child:
        # Waited for: the parent is let go a moment before the child's inherited descriptors are closed.
        assert child.stdout is not None
        child.stdout.readline()
        journal.close()
        Journal.open(path)[0].close()
        child.communicate(b"")


def test_a_lock_is_kept_though_the_file_is_read_and_closed(tmp_path: Path) -> None:
    """Reading our own journal does not let go of its lock. (Removed: flock, with lockf in its place.)"""
    path = tmp_path / "run.jsonl"
    with begun(path):
        read(path)
        assert run(OPENER, str(path)).stdout.startswith("1 Somebody else")
        with pytest.raises(JournalLocked):
            Journal.open(path)


WRITER = """
import pathlib, sys
from runbook.run.clock import SystemClock
from runbook.run.journal import Journal
path = pathlib.Path(sys.argv[1])
journal = Journal.open(path)[0] if path.exists() else Journal.create(path)
n = journal.head[0]
while True:
    n = journal.append("Noted", {"i": n, "text": "x" * (n * 37 % 5000)}, SystemClock().now()).n
    sys.stdout.write(f"{n}\\n")
    sys.stdout.flush()
"""


@posix_only
def test_kill_9_loses_no_acknowledged_event(tmp_path: Path) -> None:
    """Killed eight times while writing, a run goes on and nothing acknowledged is lost.

    (Made to fail: acknowledged before the write.)
    """
    path = tmp_path / "run.jsonl"
    acknowledged = 0
    for round_ in range(8):
        with subprocess.Popen([sys.executable, "-c", WRITER, str(path)], stdout=subprocess.PIPE) as child:
            assert child.stdout is not None
            for _ in range(20 + 13 * round_):
                acknowledged = int(child.stdout.readline())
            child.send_signal(signal.SIGKILL)
            # What it still acknowledged before it died counts too.
            whole = [line for line in child.stdout.read().splitlines(keepends=True) if line.endswith(b"\n")]
            acknowledged = int(whole[-1]) if whole else acknowledged
        reading = read(path)
        assert acknowledged <= len(reading.records) <= acknowledged + 1
        assert [record.data["i"] for record in reading.records] == list(range(len(reading.records)))
        assert reading.warnings == ()
    assert verify(path).good


@posix_only
def test_a_journal_can_be_read_while_it_is_written(tmp_path: Path) -> None:
    """A reader never takes a run in progress for a damaged one. (Made to fail: the head read last.)"""
    path = tmp_path / "run.jsonl"
    with subprocess.Popen([sys.executable, "-c", WRITER, str(path)], stdout=subprocess.PIPE) as child:
        assert child.stdout is not None
        acknowledged = 0
        for _ in range(60):
            acknowledged = int(child.stdout.readline())
            assert len(read(path).records) >= acknowledged
        child.kill()
        child.stdout.read()


def test_a_cut_tail_is_named(tmp_path: Path) -> None:
    """Lines removed cleanly from the end are missed. (Removed: the comparison with the head's count.)"""
    path = tmp_path / "run.jsonl"
    with begun(path) as journal:
        journal.append("Read", {}, NOW)
        journal.append("Noted", {}, NOW)
    path.write_bytes(b"".join(path.read_bytes().splitlines(keepends=True)[:1]))
    with pytest.raises(JournalDamaged, match="3 records were acknowledged, 1 are there"):
        read(path)
    with pytest.raises(JournalDamaged):
        Journal.open(path)


def test_a_flipped_bit_is_named_by_its_line(tmp_path: Path) -> None:
    """One flipped bit anywhere is damage of its line. (Removed: the comparison of marks.)"""
    path = tmp_path / "run.jsonl"
    with begun(path) as journal:
        journal.append("Read", {"p": 6_210_000.0}, NOW)
    data = bytearray(path.read_bytes())
    place = data.index(b"6210000")
    data[place + 1] ^= 1
    path.write_bytes(data)
    finding = verify(path)
    assert not finding.good
    assert f"{path}:2: its mark does not fit" in finding.said[0]


@posix_only
def test_a_device_in_place_of_a_journal_is_refused(tmp_path: Path) -> None:
    """A device is no journal, and one may never end. (Removed: the look at the kind in `posix.read_file`.)"""
    (tmp_path / "run.jsonl").symlink_to("/dev/null")
    for attempt in (read, verify, Journal.open):
        with pytest.raises(JournalError, match=r"run\.jsonl"):
            attempt(tmp_path / "run.jsonl")


@posix_only
def test_a_pipe_in_place_of_a_journal_does_not_hang(tmp_path: Path) -> None:
    """A pipe that nobody writes is refused at once. (Removed: opening without blocking in `posix.read_file`.)"""
    os.mkfifo(tmp_path / "run.jsonl")
    for attempt in ("read", "verify", "Journal.open"):
        done = run(
            "import pathlib, sys\nfrom runbook.errors import JournalError\n"
            "from runbook.run.journal import Journal, read, verify\n"
            f"try: {attempt}(pathlib.Path(sys.argv[1]))\n"
            "except JournalError as error: print(error)",
            str(tmp_path / "run.jsonl"),
        )
        assert "run.jsonl" in done.stdout, done.stderr
