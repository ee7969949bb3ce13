"""The logbook: runs are found, listed and folded from their journals alone, and damage is never passed in silence."""

from __future__ import annotations

import os
import string
import sys
from pathlib import Path

import pytest
from hypothesis import given
from hypothesis import strategies as st

from runbook.errors import JournalError
from runbook.run import posix
from runbook.run.clock import FakeClock, Moment
from runbook.run.events import KINDS
from runbook.run.journal import Journal, Record
from runbook.run.journal_file import head_path
from runbook.run.logbook import CLOSING, LONGEST_VESSEL, Logbook, RunFile, logbook_folder

# 2031-03-02 14:32:07 UTC.
START = Moment(boot=1000.0, wall=1_930_228_327.0)

NOTHING: tuple[str, ...] = ()
BEGUN: tuple[str, ...] = ("start",)


def clock() -> FakeClock:
    """A clock at the start of the day of these runs."""
    return FakeClock(START.boot, START.wall)


def kept(logbook: Logbook, vessel: str, at: Moment, *kinds: str, rehearsal: bool = False) -> Path:
    """A run on `vessel` with these events, each of which names the vessel and its own number."""
    path = logbook.new_run_path(vessel, at, rehearsal)
    with Journal.create(path) as journal:
        for number, kind in enumerate(kinds):
            journal.append(kind, {"of": vessel, "number": number}, at)
    return path


def collect(so_far: tuple[str, ...], record: Record) -> tuple[str, ...]:
    """A fold that keeps every kind in order."""
    return (*so_far, record.kind)


def test_an_empty_logbook_lists_nothing(tmp_path: Path) -> None:
    """A folder that is not there yet is a logbook without runs, and looking does not make it."""
    logbook = Logbook(tmp_path / "not" / "yet")
    assert (logbook.runs(), logbook.rehearsals(), logbook.begun_after(START)) == ((), (), ())
    assert logbook.history("C-7", collect, NOTHING) == NOTHING
    assert not logbook.folder.exists()


def test_the_name_of_a_run(tmp_path: Path) -> None:
    """A run's file name tells when and which vessel; rehearsals lie apart."""
    logbook = Logbook(tmp_path / "log")
    path = logbook.new_run_path("C-7", START, rehearsal=False)
    assert path.parent == tmp_path / "log" / "runs"
    assert path.name.startswith("20310302T143207Z-C-7-")
    assert path.suffix == ".jsonl"
    assert set(path.stem[-4:]) <= set(string.hexdigits.lower())
    assert logbook.new_run_path("C-7", START, rehearsal=True).parent == tmp_path / "log" / "rehearsals"


def test_new_folders_are_on_the_disk(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    """Each folder made on the way is synced into the one above, or a power cut would lose all beneath it."""
    synced: list[Path] = []
    monkeypatch.setattr(posix, "sync_folder", synced.append)
    Logbook(tmp_path / "a" / "b").new_run_path("C-7", START, rehearsal=False)
    assert synced == [tmp_path, tmp_path / "a", tmp_path / "a" / "b"]


def test_a_new_name_is_never_one_that_exists(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    """Two runs begun in the same second on the same vessel get two names."""
    logbook = Logbook(tmp_path)
    drawn = iter(["00ff", "00ff", "00ff", "00aa"])
    monkeypatch.setattr("runbook.run.logbook.secrets.token_hex", lambda count: next(drawn))
    first = kept(logbook, "C-7", START, "RunOpened")
    second = logbook.new_run_path("C-7", START, rehearsal=False)
    assert first.stem.endswith("-00ff")
    assert second.stem.endswith("-00aa")


@pytest.mark.parametrize("vessel", ["C-7", "Küvette 3/4", "..", "a-00ff", "50 %", "a\nb", "-", "CON", "\udc80"])
def test_the_vessel_is_read_back_from_the_name(tmp_path: Path, vessel: str) -> None:
    """Whatever the tag, the file lies in the folder and the tag comes back exactly."""
    logbook = Logbook(tmp_path / "log")
    path = kept(logbook, vessel, START, "RunOpened")
    assert path.parent == tmp_path / "log" / "runs"
    assert [(run.vessel, run.damaged) for run in logbook.runs()] == [(vessel, "")]
    assert logbook.history(vessel, collect, NOTHING) == ("RunOpened",)


@given(st.text(min_size=1, max_size=12), st.text(min_size=1, max_size=12))
def test_two_vessels_never_share_a_name(
    tmp_path_factory: pytest.TempPathFactory, one: str, other: str
) -> None:
    """Different tags never give one name, or the history of one vessel would count for another."""
    logbook = Logbook(tmp_path_factory.getbasetemp() / "names")
    names = {logbook.new_run_path(vessel, START, rehearsal=False).name[:-11] for vessel in (one, other)}
    assert len(names) == len({one, other})


@pytest.mark.parametrize("vessel", ["", "x" * (LONGEST_VESSEL + 1), "€" * 18])
def test_a_tag_that_cannot_name_a_file_is_refused(tmp_path: Path, vessel: str) -> None:
    """An empty or endless tag is refused with a sentence."""
    with pytest.raises(JournalError, match="cannot name a file"):
        Logbook(tmp_path).new_run_path(vessel, START, rehearsal=False)


def test_runs_are_listed_with_what_their_records_say(tmp_path: Path) -> None:
    """Newest first; opened data, whether it was closed, count and time come from the records."""
    logbook, now = Logbook(tmp_path), clock()
    first = kept(logbook, "C-7", now.now(), "RunOpened", "Noted", CLOSING)
    now.advance(3600.0)
    second = kept(logbook, "B-1", now.now(), "RunOpened", "Noted")
    rehearsed = kept(logbook, "C-7", now.now(), "RunOpened", rehearsal=True)
    runs = logbook.runs()
    assert [run.path for run in runs] == [second, first]
    assert [(run.vessel, run.closed, run.count) for run in runs] == [("B-1", False, 2), ("C-7", True, 3)]
    assert runs[0].opened == {"of": "B-1", "number": 0}
    assert runs[0].begun == "2031-03-02T15:32:07.000Z"
    assert runs[0].last == now.now()
    assert [(run.damaged, run.warnings, run.rehearsal) for run in runs] == [("", (), False)] * 2
    assert [(run.path, run.rehearsal) for run in logbook.rehearsals()] == [(rehearsed, True)]


def test_the_closing_event_is_one_that_exists() -> None:
    """The one kind of event that the logbook knows by name is a kind of event."""
    assert CLOSING in KINDS


def test_runs_in_one_second_are_ordered_by_their_records(tmp_path: Path) -> None:
    """Where the names cannot tell which came first, the records do."""
    logbook, now = Logbook(tmp_path), clock()
    made = []
    for number in range(6):
        made.append(kept(logbook, "C-7", now.now(), f"Opened{number}"))
        now.advance(0.1)
    assert [run.path for run in logbook.runs()] == made[::-1]
    assert logbook.history("C-7", collect, NOTHING) == tuple(f"Opened{number}" for number in range(6))


def test_the_history_is_that_of_one_vessel_oldest_first_without_rehearsals(tmp_path: Path) -> None:
    """Only real runs of this very vessel count, in the order in which they happened."""
    logbook, now = Logbook(tmp_path), clock()
    kept(logbook, "C-7", now.now(), "RunOpened", "Loaded")
    now.advance(60.0)
    kept(logbook, "C-71", now.now(), "RunOpened", "Other")
    kept(logbook, "C-7", now.now(), "RunOpened", "Rehearsed", rehearsal=True)
    now.advance(60.0)
    kept(logbook, "C-7", now.now(), "RunOpened", "Emptied", CLOSING)
    assert logbook.history("C-7", collect, BEGUN) == (
        "start", "RunOpened", "Loaded", "RunOpened", "Emptied", CLOSING,
    )  # fmt: skip


def damage(path: Path) -> None:
    """Change one figure of the second record."""
    path.write_bytes(path.read_bytes().replace(b'"number":1', b'"number":7'))


def test_a_damaged_journal_is_listed_and_never_passed_in_silence(tmp_path: Path) -> None:
    """The list names the damage; a history either reports it or is refused."""
    logbook, now = Logbook(tmp_path), clock()
    broken = kept(logbook, "C-7", now.now(), "RunOpened", "Loaded")
    now.advance(60.0)
    good = kept(logbook, "C-7", now.now(), "RunOpened", "Noted")
    damage(broken)
    newest, oldest = logbook.runs()
    assert (newest.path, newest.damaged) == (good, "")
    assert oldest.path == broken
    assert f"{broken}:2: its mark does not fit" in oldest.damaged
    assert (oldest.vessel, oldest.begun, oldest.count) == ("C-7", "2031-03-02T14:32:07.000Z", 0)
    skipped: list[RunFile] = []
    assert logbook.history("C-7", collect, NOTHING, skipped) == ("RunOpened", "Noted")
    assert skipped == [oldest]
    with pytest.raises(JournalError, match=r"history of C-7 leans on .*does not fit"):
        logbook.history("C-7", collect, NOTHING)
    assert logbook.history("B-1", collect, NOTHING) == NOTHING


def test_a_cut_tail_is_damage_and_a_lost_head_a_warning(tmp_path: Path) -> None:
    """What the head says counts in the logbook too."""
    logbook = Logbook(tmp_path)
    path = kept(logbook, "C-7", START, "RunOpened", "Loaded")
    path.write_bytes(path.read_bytes().splitlines(keepends=True)[0])
    assert "2 records were acknowledged, 1 are there" in logbook.runs()[0].damaged
    head_path(path).unlink()
    assert logbook.runs()[0].damaged == ""
    assert "cut off" in logbook.runs()[0].warnings[0]


def test_a_copy_does_not_count_twice(tmp_path: Path) -> None:
    """A second copy of a run, as file managers make them, does not load the vessel twice."""
    logbook = Logbook(tmp_path)
    path = kept(logbook, "C-7", START, "RunOpened", "Loaded")
    other = "0000" if path.stem[-4:] != "0000" else "1111"
    path.with_stem(path.stem[:-4] + other).write_bytes(path.read_bytes())
    skipped: list[RunFile] = []
    assert logbook.history("C-7", collect, NOTHING, skipped) == ("RunOpened", "Loaded")
    assert len(skipped) == 1
    assert "is a copy of" in skipped[0].damaged
    with pytest.raises(JournalError, match="is a copy of"):
        logbook.history("C-7", collect, NOTHING)


@pytest.mark.parametrize("name", ["copy.jsonl", "20310302T143207Z-C-7-00ff (1).jsonl", "20310302T143207Z--00ff.jsonl"])
def test_a_file_of_another_name_is_listed_as_of_no_vessel(tmp_path: Path, name: str) -> None:
    """A renamed journal may be of any vessel, so every history reports it."""
    logbook = Logbook(tmp_path)
    path = kept(logbook, "C-7", START, "RunOpened", "Loaded")
    path.rename(path.with_name(name))
    run = logbook.runs()[0]
    assert (run.vessel, run.count) == ("", 2)
    assert "another name" in run.damaged
    for vessel in ("C-7", "B-1"):
        with pytest.raises(JournalError, match="another name"):
            logbook.history(vessel, collect, NOTHING)


def test_whatever_lies_in_the_folder_is_listed_without_a_stumble(tmp_path: Path) -> None:
    """Empty files, folders, dangling links, pipes and noise are listed with a reason and disturb nothing."""
    logbook = Logbook(tmp_path)
    good = kept(logbook, "C-7", START, "RunOpened")
    there = good.parent
    (there / "20310302T143207Z-B-1-0000.jsonl").write_bytes(b"")
    (there / "20310302T143207Z-B-1-0001.jsonl").mkdir()
    (there / "20310302T143207Z-B-1-0002.jsonl").symlink_to(there / "nowhere")
    (there / "20310302T143207Z-B-1-0003.jsonl").symlink_to(there / "20310302T143207Z-B-1-0003.jsonl")
    (there / "20310302T143207Z-B-1-0004.jsonl").write_bytes(bytes(range(256)))
    (there / "99999999T999999Z-B-1-0005.jsonl").write_bytes(b"")
    (there / "notes.txt").write_text("not a journal")
    if sys.platform != "win32":
        os.mkfifo(there / "20310302T143207Z-B-1-0006.jsonl")
    runs = logbook.runs()
    assert len(runs) == (8 if sys.platform != "win32" else 7)
    assert [run.path for run in runs if run.vessel == "C-7"] == [good]
    empty = {run.path.name for run in runs if not run.damaged and run.count == 0}
    assert empty == {"20310302T143207Z-B-1-0000.jsonl", "99999999T999999Z-B-1-0005.jsonl"}
    # A time that no calendar has is none: it must not count as the newest.
    assert (runs[-1].path.name, runs[-1].begun) == ("99999999T999999Z-B-1-0005.jsonl", "")
    assert logbook.history("C-7", collect, NOTHING) == ("RunOpened",)


def test_a_run_in_progress_is_listed(tmp_path: Path) -> None:
    """Listing takes no lock and sees what is written so far."""
    logbook = Logbook(tmp_path)
    with Journal.create(logbook.new_run_path("C-7", START, rehearsal=False)) as journal:
        journal.append("RunOpened", {}, START)
        assert logbook.runs()[0].count == 1
        journal.append("Noted", {}, START)
        assert logbook.runs()[0].count == 2


def test_a_clock_that_was_set_back_is_told(tmp_path: Path) -> None:
    """A run that claims to begin later than now puts the order of the history in doubt."""
    logbook = Logbook(tmp_path)
    path = kept(logbook, "C-7", START, "RunOpened")
    earlier = Moment(boot=5.0, wall=START.wall - 60.0)
    assert [run.path for run in logbook.begun_after(earlier)] == [path]
    assert logbook.begun_after(START) == ()


@pytest.mark.parametrize("place", ["log", "log/runs"])
def test_a_file_where_the_folder_should_be(tmp_path: Path, place: str) -> None:
    """A logbook that cannot be is told in a sentence that names the way out."""
    (tmp_path / place).parent.mkdir(exist_ok=True)
    (tmp_path / place).write_text("")
    logbook = Logbook(tmp_path / "log")
    with pytest.raises(JournalError, match=r"cannot be made.*--logbook"):
        logbook.new_run_path("C-7", START, rehearsal=False)
    for attempt in (logbook.runs, lambda: logbook.history("C-7", collect, NOTHING)):
        with pytest.raises(JournalError, match=r"cannot be read.*--logbook"):
            attempt()


def test_the_folder_asked_for_comes_first(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    """An explicit folder beats the environment, the environment beats the user's data folder."""
    monkeypatch.setenv("RUNBOOK_LOGBOOK", str(tmp_path / "env"))
    assert logbook_folder(tmp_path / "asked") == tmp_path / "asked"
    assert logbook_folder(None) == tmp_path / "env"
    monkeypatch.setenv("RUNBOOK_LOGBOOK", "~/log")
    assert logbook_folder() == Path.home() / "log"


@pytest.mark.parametrize(
    ("platform", "variable", "value", "under"),
    [
        ("linux", "XDG_DATA_HOME", "/data", "/data/runbook"),
        ("linux", "XDG_DATA_HOME", "relative", "~/.local/share/runbook"),
        ("linux", "XDG_DATA_HOME", "", "~/.local/share/runbook"),
        ("darwin", "XDG_DATA_HOME", "/data", "~/Library/Application Support/runbook"),
        ("win32", "LOCALAPPDATA", "/local", "/local/runbook"),
        ("win32", "LOCALAPPDATA", "", "~/AppData/Local/runbook"),
    ],
)
def test_the_users_data_folder(
    monkeypatch: pytest.MonkeyPatch, platform: str, variable: str, value: str, under: str
) -> None:
    """Each system's own place; a relative XDG_DATA_HOME is ignored (XDG Base Directory Specification 0.8)."""
    monkeypatch.delenv("RUNBOOK_LOGBOOK", raising=False)
    monkeypatch.setattr("runbook.run.logbook.sys.platform", platform)
    monkeypatch.setenv(variable, value)
    assert logbook_folder() == Path(under).expanduser()


def test_no_home_folder_is_told_in_a_sentence(monkeypatch: pytest.MonkeyPatch) -> None:
    """Where the home folder cannot be told, the sentence says what to name."""

    def lost() -> Path:
        raise RuntimeError("Could not determine home directory.")

    monkeypatch.delenv("RUNBOOK_LOGBOOK", raising=False)
    monkeypatch.delenv("XDG_DATA_HOME", raising=False)
    monkeypatch.delenv("LOCALAPPDATA", raising=False)
    monkeypatch.setattr(Path, "home", lost)
    with pytest.raises(JournalError, match="--logbook"):
        logbook_folder()
