"""Files that are wrong by mistake or on purpose: exit 2 with a place, never a traceback, never a wait."""

from __future__ import annotations

import os
import re
from collections.abc import Callable
from pathlib import Path

import pytest
from hypothesis import HealthCheck, given, settings
from hypothesis import strategies as st

from runbook.__main__ import main
from runbook.errors import FileProblems
from runbook.procedure.problems import MOST
from runbook.procedure.reader import read_procedure
from runbook.procedure.yaml_text import LARGEST, MOST_NODES, read_document
from tests.procedure.files import PROCEDURE, SHIPPED, VESSEL, only, read, refused, word_at, written


def bytes_at(folder: Path, data: bytes) -> Path:
    """A procedure file of these bytes beside the shipped vessel."""
    path = written(folder)
    path.write_bytes(data)
    return path


@pytest.mark.parametrize(
    ("data", "place", "says"),
    [
        (b"", (1, 1), "empty"),
        (b"# only a comment\n", (1, 1), "empty"),
        (b"- one\n- two\n", (1, 1), "mapping"),
        (b"just words\n", (1, 1), "mapping"),
        (b"a: b: c\n", (1, 5), "colon"),
        (b"a: 'unclosed\n", (2, 1), "YAML"),
        (b"a: [1, 2\nb: 3\n", (2, 2), "YAML"),
        (b"a:\n\t- b\n", (2, 1), "tab"),
        (b"a: b\n c: d\n", (2, 3), "colon"),
        (b"a: @b\n", (1, 4), "quote"),
        (b"a: \xff\n", (1, 4), "UTF-8"),
        ("ü: \x00".encode(), (1, 4), "U+0000"),
        (b"a: 1\n---\nb: 2\n", (2, 1), "second document"),
        (b"%FOO bar\n--- x\n", (2, 5), "mapping"),
        (b"\x89PNG\r\n\x1a\n", (1, 1), "UTF-8"),
        ("name: Zelle".encode("utf-16"), (1, 1), "UTF-8"),
    ],
)
def test_what_is_no_yaml_is_told_with_its_place(tmp_path: Path, data: bytes, place: tuple[int, int], says: str) -> None:
    """Anything that is not one mapping in UTF-8 is refused where it goes wrong."""
    problem = refused(bytes_at(tmp_path, data))[0]
    assert says in problem.message
    assert (problem.line, problem.column) == place, str(problem)


def test_a_file_of_ten_megabytes_is_not_read(tmp_path: Path) -> None:
    """Above the size limit nothing is parsed."""
    problem = only(bytes_at(tmp_path, b"a: b\n" * 2_000_000))
    assert "larger than" in problem.message
    assert read_document(b"#" * LARGEST, "x").problems[0].message.startswith("the file is empty")


@pytest.mark.parametrize("pair", [("[", "]"), ("{a: ", "}")])
def test_three_thousand_levels_are_refused_at_the_limit(tmp_path: Path, pair: tuple[str, str]) -> None:
    """Depth is counted before anything is built: no recursion error."""
    text = "a: " + pair[0] * 3000 + pair[1] * 3000
    problem = only(bytes_at(tmp_path, text.encode()))
    assert "deep" in problem.message


def test_thirty_thousand_entries_are_refused(tmp_path: Path) -> None:
    """The count of entries has a limit."""
    text = "\n".join(f"k{i}: 1" for i in range(MOST_NODES))
    assert "entries" in only(bytes_at(tmp_path, text.encode())).message


def test_thousands_of_mistakes_are_told_as_far_as_anybody_reads(tmp_path: Path) -> None:
    """A file of unknown keys ends soon, with the first of them."""
    text = "\n".join(f"k{i}: 1" for i in range(9_000))
    problems = refused(bytes_at(tmp_path, text.encode()))
    assert len(problems) == MOST


def test_a_bomb_of_aliases_is_refused_where_it_begins(tmp_path: Path) -> None:
    """Nested aliases that would grow to millions are named one by one and never followed."""
    text = "a: &a [x, x]\n" + "".join(f"{k}: &{k} [*{p}, *{p}]\n" for p, k in zip("abcdefgh", "bcdefghi", strict=True))
    problems = refused(bytes_at(tmp_path, text.encode()))
    assert any("&a" in p.message and (p.line, p.column) == (1, 4) for p in problems)
    assert any("*a" in p.message and (p.line, p.column) == (2, 8) for p in problems)


@pytest.mark.parametrize(
    ("old", "new", "says"),
    [
        ("name: Carbon", "name: !!python/object:os.system Carbon", "tag"),
        ("name: Carbon", "name: !mine Carbon", "tag"),
        ("fluid: carbon dioxide", "fluid: carbon dioxide\nfluid: water", "second time"),
        ("fluid: carbon dioxide", "fluid: carbon dioxide\n<<: {a: b}", "merges"),
        ("fluid: carbon dioxide", "fluid: carbon dioxide\n? [a, b]\n: c", "plain word"),
        ("H1: unplugged}", "H1: off}", '"off"'),
        ("who: performer", "who: no", '"no"'),
        ("who: performer", "who: 12:30", '"12:30"'),
        ("number: 3", "number: 0x3", "decimal"),
        ("number: 3", "number: 03", "03"),
        ("number: 3", "number: 1_000", "1_000"),
        ("number: 3", "number: .inf", "number"),
        ("number: 3", "number: .nan", "number"),
        ("number: 3", "number: 1e999", "too large"),
        ("number: 3", "number: 3 g", "3 g"),
        ("number: 3", "number: -3", "-3"),
        ("who: performer", "who: ~", "no value"),
        ("who: performer", "who: null", "no value"),
        ("who: performer", "who:", "no value"),
        ("who: performer", "who: 7", "text is wanted"),
        ("who: performer", 'who: ""', "empty"),
        ("who: performer", 'who: "a\\u001b[2Jb"', "control character"),
        ("who: performer", 'who: "a\\u202eb"', "control character"),
        ("who: performer", "who: |\n          performer\n          second", "line break"),
        ("who: performer", "who: " + "x" * 41, "40"),
        ("who: performer", "who: [performer]", "not a list"),
        ("who: performer", "who: {a: performer}", "quote"),
        ("do: Press tare", "do: Open valve #2", "comment"),
        ("do: Press tare", "do: Press tare # twice", "comment"),
        ("do: Press tare", "do: Press: tare", "colon"),
        ("do: Press tare", "od: Press tare", "did you mean 'do'"),
        ("mass: 117 g ± 2 g", "mass: 117 ± 2 g", "unit"),
        ("mass: 117 g ± 2 g", "mass: 117 bar ± 2 g", "117 bar"),
        ("mass: 117 g ± 2 g", "mass: 117 gr ± 2 g", "did you mean"),
        ("mass: 117 g ± 2 g", "mass: 117", "unit"),
        ("mass: 117 g ± 2 g", "masss: 117 g ± 2 g", "did you mean 'mass'"),
        ("let_down_to: 0 bar(g)", "let_down_to: 0 bar", "gauge or absolute"),
        ("overshoot: 1.5 K", "overshoot: 2 degC", "in K"),
        ("hottest: 30 degC, ", "", "'hottest' is missing"),
        ("fluid: carbon dioxide", "", "'fluid' is missing"),
        ("repeatable: true", "repeatable: 1", "true"),
        ("repeatable: true", "repeatable: yes", "yes"),
        ("loaded_as: dry ice", "loaded_as: dry-ice", "did you mean 'dry ice'"),
        ("format: procedure 1", "format: procedure 2", "procedure 1"),
        ("[solid gone, liquid height]", "[solid gone, liquid hight]", "did you mean 'liquid height'"),
        ("path: {load: 145 g ± 5 g}", "path: {lode: 140 g ± 10 g}", "did you mean 'load'"),
        ("path: {load: 145 g ± 5 g}", "path: load", "needs its value"),
        ("path: {load: 145 g ± 5 g}", "path: {load: 140 g, seal: true}", "one thing"),
        ("path: seal", "path: {seal: true}", "needs nothing"),
        ("latest: 2 min, ", "", "'latest' is missing"),
        ("word: WARNING", "word: ACHTUNG", "WARNING"),
        ("checked_by: T. Okoro", "checked_by: T. Okoro, jun.", "comma"),
        ("issue: {number: 3, date: 2031-03-02", "issue: {number: 3, date: 2031-02-30", "2031-02-30"),
        ("date: 2031-03-02", "date: 2031-03-02 10:00:00", "moment"),
    ],
)
def test_one_mistake_gives_one_problem_at_its_place(tmp_path: Path, old: str, new: str, says: str) -> None:
    """Each mistake in an otherwise good file is named once, in the line where it was made."""
    path = written(tmp_path, {old: new})
    problem = only(path)
    assert says in problem.message, str(problem)
    text = path.read_text("utf-8")
    first = text[: text.index(new) if new else _removed(old)].count("\n") + 1
    assert first - 1 <= problem.line <= first + new.count("\n") or "missing" in problem.message, str(problem)
    line = path.read_text("utf-8").splitlines()[problem.line - 1]
    assert problem.source.removesuffix("…") == line[:110]


def _removed(old: str) -> int:
    return (SHIPPED / PROCEDURE).read_text("utf-8").index(old)


@pytest.mark.parametrize(
    ("old", "new", "says"),
    [
        ("rating: 160 bar(g)", "rating: 160 bar", "gauge or absolute"),
        ("rating: 160 bar(g)", "rating: 160", "unit"),
        (", source: drawing VC-2 sheet 3}", "}", "without a source"),
        ("difference: up to 110 K, source: maker's sheet", "difference: up to 110 K", "without a source"),
        ("class: 0.6", "class: 0.7", "0.6"),
        ("class: A", "class: D", "AA, A, B, C"),
        ("class: A", "class: 0.6", "AA, A, B, C"),
        ("error: 0.5 g", "class: 1.0", "error instead"),
        ("error: 0.5 g, ", "", "either a class or an error"),
        ("dial: 0 g to 6000 g", "dial: 6000 g", "range"),
        ("dial: 0 g to 6000 g", "dial: up to 6000 g", "both ends"),
        ("dial: 0 g to 6000 g", "dial: 0 bar(g) to 6 bar(g)", "mass is wanted"),
        ("reads: mass", "reads: weight", "mass"),
        ("bursts_at: 130 bar(g)", "opens_at: 130 bar(g)", "bursts_at"),
        ("bursts_at: 130 bar(g)", "bursts_at: 130 bar(a)", "gauge"),
        ("run_below: 80 %", "run_below: 180 %", "share"),
        ("joins: [cell, outside]", "joins: [cell, outside, line]", "at most 2 entries"),
        ("joins: [cell, outside]", "joins: [cell]", "one more entry"),
        ("joins: [cell, outside]", "joins: [cell, outsde]", "outsde"),
        ("tag: W1", "tag: V2", "used twice"),
        ("free: 250 mL ± 2 mL", "free: 2 mL ± 2 mL", "zero"),
        ("unheated: 4 mL", "unheated: 400 mL", "smaller"),
        ("window: 6 mm to 54 mm", "window: 6 mm to 64 mm", "inside top"),
        ("let_go: stays", "let_go: stay", "did you mean 'stays'"),
        ("what: body, space: cell", "what: body, space: cel", "'cel'"),
        ("of: cell, dial", "of: wall, dial", "space"),
        ("class: A", "class: AA", "defined from"),
        ("valid_until: 2033-02-11", "valid_until: 2030-02-11", "before"),
        ("pressure: up to 200 bar(g)", "pressure: at least 200 bar(g)", "upper end"),
        ("taken_away_in_one_motion: true", "taken_away_in_one_motion: maybe", "true"),
        ("cycles: {allowed: 500, before_this_log: 36}", "cycles: 500", "not known"),
    ],
)
def test_a_mistake_in_the_apparatus_file_is_told_of_that_file(tmp_path: Path, old: str, new: str, says: str) -> None:
    """The problem names the apparatus file and stands there."""
    problems = refused(written(tmp_path, None, {old: new}))
    assert all(p.file.endswith(VESSEL) for p in problems)
    assert any(says in p.message for p in problems), [str(p) for p in problems]
    assert len(problems) == 1, [str(p) for p in problems]


def test_all_problems_of_both_files_at_once_in_order(tmp_path: Path) -> None:
    """Four mistakes in two files: four problems, the procedure's first, each file from top to bottom."""
    path = written(
        tmp_path,
        {"mass: 117 g ± 2 g": "mass: 117 bar", "word: WARNING": "word: LOUD"},
        {"rating: 160 bar(g)": "rating: 160 bar", "class: 0.6": "class: 0.7"},
    )
    problems = refused(path)
    assert [Path(p.file).name for p in problems] == [PROCEDURE] * 2 + [VESSEL] * 2
    assert [p.line for p in problems[:2]] == sorted(p.line for p in problems[:2])
    assert [p.line for p in problems[2:]] == sorted(p.line for p in problems[2:])


@pytest.mark.parametrize(
    "named",
    [
        "../../etc/passwd",
        "/etc/passwd",
        "apparatus/../../secret.yaml",
        "..\\\\secret.yaml",
        "apparatus/link.yaml",
        "no-such-file.yaml",
        "apparatus",
        "x" * 300,
        "[apparatus/view-cell-250.yaml]",
        "~/secret.yaml",
    ],
)
def test_an_apparatus_outside_the_folder_is_never_read(tmp_path: Path, named: str) -> None:
    """No path, link or name leads out of the folder of the file that names it."""
    inner = tmp_path / "inner"
    inner.mkdir()
    (tmp_path / "secret.yaml").write_text("password: very-secret\n", "utf-8")
    path = written(inner, {"apparatus: apparatus/view-cell-250.yaml": f"apparatus: {named}"})
    (inner / "apparatus" / "link.yaml").symlink_to(tmp_path / "secret.yaml")
    with pytest.raises(FileProblems) as caught:
        read_procedure(path)
    (problem,) = caught.value.problems
    if ".." in named or named[0] == "/" or "link" in named:
        assert "out of this file's folder" in problem.message
    assert "very-secret" not in str(caught.value)


def test_a_pipe_is_not_waited_for(tmp_path: Path) -> None:
    """A file that never ends, or never begins, is refused before it is opened."""
    pipe = tmp_path / "pipe.yaml"
    os.mkfifo(pipe)
    with pytest.raises(FileProblems, match="no plain file"):
        read_procedure(pipe)
    with pytest.raises(FileProblems, match="no plain file"):
        read_procedure(Path("/dev/zero"))
    with pytest.raises(FileProblems, match="no such file"):
        read_procedure(tmp_path / "none.yaml")


def test_text_of_a_file_is_never_markup(tmp_path: Path) -> None:
    """Brackets, tags of screens and escapes of terminals in a text stay what they are."""
    for odd in ("[V-3]", "[bold red]x[/]", "{0}", "%s", "\\n", "<b>", "[/]"):
        loaded = read(tmp_path, {"do: Press tare": f"do: 'Press {odd} now'"})
        steps = [s for part in loaded.procedure.parts for s in part.steps]
        assert any(getattr(s, "do", "") == f"Press {odd} now" for s in steps)
    path = written(tmp_path, {"mass: 117 g ± 2 g": "mass: '[V-3] {x} %s'"})
    assert "[V-3] {x} %s" in only(path).message


def test_the_command_says_it_with_file_line_and_column(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    """`runbook check` of a bad file: exit 2, file:line:column on standard error, no traceback."""
    path = written(tmp_path, {"mass: 117 g ± 2 g": "mass: 117 bar"})
    assert main(["check", str(path)]) == 2
    told = capsys.readouterr()
    assert re.match(rf"{re.escape(str(path))}:\d+:\d+: ", told.err)
    assert "Traceback" not in told.err + told.out
    problem = only(path)
    assert word_at(path, problem).startswith("117 bar")


BAD = "\x00\x07\x1b\x85\u2028\u202e\ufeff:#&*!|>%@`'\"{}[],?-~\t\n \\"


@st.composite
def damaged(draw: st.DrawFn) -> bytes:
    """The shipped procedure with a few pieces cut, doubled, or replaced by something odd."""
    data = (SHIPPED / PROCEDURE).read_bytes()
    for _ in range(draw(st.integers(1, 4))):
        at = draw(st.integers(0, len(data)))
        long = draw(st.integers(0, 60))
        kind = draw(st.integers(0, 3))
        piece = data[at : at + long]
        odd = draw(st.text(st.sampled_from(BAD) | st.characters(codec="utf-8"), max_size=8)).encode()
        new = (b"", piece + piece, odd, bytes(draw(st.binary(max_size=4))))[kind]
        data = data[:at] + new + data[at + long :]
    return data


@settings(max_examples=250, deadline=None, suppress_health_check=[HealthCheck.function_scoped_fixture])
@given(data=damaged())
def test_no_damage_ends_in_anything_but_problems(tmp_path: Path, data: bytes) -> None:
    """Whatever is cut or put in, the file reads well or every problem has a place."""
    path = bytes_at(tmp_path, data)
    try:
        read_procedure(path)
    except FileProblems as caught:
        for one in caught.problems:
            assert one.line >= 1
            assert one.column >= 1
            assert all(c.isprintable() for c in one.source)


@settings(max_examples=250, deadline=None)
@given(data=st.binary(max_size=200) | st.text(st.sampled_from(BAD + "ab1.:"), max_size=60).map(str.encode))
def test_no_bytes_end_in_anything_but_problems(data: bytes) -> None:
    """Bytes of any kind become a document; what is wrong in them stands inside the file."""
    document = read_document(data, "x.yaml")
    for one in document.problems:
        assert 1 <= one.line <= max(1, len(document.lines))
        assert one.column >= 1
        assert "\n" not in one.message


def test_every_kind_of_problem_is_ours() -> None:
    """The sentences say nothing in the language of programs."""
    foreign = re.compile(r"Input should|validation|pydantic|NoneType|dict\b|tuple|str\b|\bint\b", re.IGNORECASE)
    makers: list[Callable[[], bytes]] = [
        lambda: b"format: 1\nname: [a]\nissue: 3\nparts: {}\nroles: []\nroom: x\ncharge: 3\nat_start: [a]\n",
        lambda: b"format: procedure 1\nparts: [{name: x, steps: [1, {}, {do: x, hold: y}, {do: [a], read: {}}]}]\n",
        lambda: b"parts: [{name: x, repeatable: 3, parked: 4, steps: {a: b}, lead: [x]}, 7]\n",
    ]
    from runbook.procedure.model import Procedure
    from runbook.procedure.reader import _model

    for make in makers:
        _, problems = _model(read_document(make(), "x.yaml"), Procedure)
        assert problems
        for one in problems:
            assert not foreign.search(one.message), one.message
