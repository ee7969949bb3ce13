"""The form of a journal: what was written reads back, and what was changed is noticed."""

from __future__ import annotations

import hashlib
import json
import math

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from runbook.errors import JournalDamaged, JournalError
from runbook.run.clock import Moment
from runbook.run.journal_lines import (
    NO_MARK,
    Head,
    Record,
    draft,
    head_line,
    line_of,
    parse_as_far_as_good,
    parse_bytes,
    parse_head,
    seal,
)

NOW = Moment(boot=812.25, wall=1_930_228_327.123)

plain = st.recursive(
    st.none() | st.booleans() | st.integers() | st.floats(allow_nan=False, allow_infinity=False) | st.text(),
    lambda inner: st.lists(inner, max_size=3) | st.dictionaries(st.text(), inner, max_size=3),
    max_leaves=8,
)
events = st.lists(
    st.tuples(st.text(min_size=1, max_size=12), st.dictionaries(st.text(), plain, max_size=3)), max_size=5
)


def journal(written: list[tuple[str, dict[str, object]]]) -> tuple[list[Record], bytes, Head]:
    """A journal of these events, its bytes and its head."""
    head, data, records = Head(), b"", []
    for kind, content in written:
        record, line = line_of(draft(kind, content, NOW), head)
        head, data = Head(record.n, record.mark), data + line
        records.append(record)
    return records, data, head


THREE = journal([("Opened", {"vessel": "C-7"}), ("Read", {"p": 6.21e6}), ("Noted", {"text": "ruhig °C\n"})])


@given(events)
def test_what_was_written_reads_back(written: list[tuple[str, dict[str, object]]]) -> None:
    """Records read back equal to those that writing returned, data equal to what was handed over."""
    records, data, head = journal(written)
    reading = parse_bytes(data, head)
    assert list(reading.records) == records
    assert [(each.kind, each.data) for each in records] == written
    assert (reading.torn_bytes, reading.head, reading.warnings) == (0, head, ())


def test_marks_follow_the_rule_that_is_written_down() -> None:
    """Anybody can check the marks with SHA-256 alone, from the published rule and none of our code."""
    _, data, head = THREE
    before = "0" * 64
    for line in data.splitlines(keepends=True):
        body = line[:-76]
        assert line[len(body) :] == f',"mark":"{json.loads(line)["mark"]}"}}\n'.encode()
        before = hashlib.sha256(before.encode() + body).hexdigest()
        assert json.loads(line)["mark"] == before
    assert head.mark == before


def test_a_line_looks_as_written_down() -> None:
    """The form of a line is held stable: an old journal must stay readable for ever."""
    _, data, _ = THREE
    assert data.splitlines()[2].decode() == (
        '{"n":3,"v":1,"event":"Noted","at":"2031-03-02T14:32:07.123Z","boot":812.25,'
        '"data":{"text":"ruhig °C\\n"},'
        '"mark":"dd4b242698617c6746a82b2f8158ca2d023e7b167b1178311ecc8775559c101c"}'
    )


@given(written=events, data=st.data())
def test_every_truncation_is_a_prefix_or_a_named_cut(
    written: list[tuple[str, dict[str, object]]], data: st.DataObject
) -> None:
    """Cut anywhere, a journal reads as a prefix without its head; with it the cut is named."""
    records, whole, head = journal(written)
    cut = data.draw(st.integers(0, len(whole)))
    reading = parse_bytes(whole[:cut])
    assert list(reading.records) == records[: len(reading.records)]
    assert reading.torn_bytes == cut - (whole[:cut].rfind(b"\n") + 1)
    if cut < len(whole):
        with pytest.raises(JournalDamaged, match="the end was cut off") as caught:
            parse_bytes(whole[:cut], head)
        assert caught.value.line == len(reading.records) + 1


def test_an_unacknowledged_torn_line_is_no_damage() -> None:
    """A torn last line beyond what the head names was never acknowledged: it is told, not held against it."""
    records, data, _ = THREE
    reading = parse_bytes(data[:-1], Head(2, records[1].mark))
    assert len(reading.records) == 2
    assert reading.torn_bytes > 0


@settings(max_examples=300)
@given(place=st.integers(0, len(THREE[1]) - 1), value=st.integers(0, 255))
def test_any_changed_byte_is_noticed(place: int, value: int) -> None:
    """No byte can be changed unnoticed, the last line end excepted while there is no head."""
    records, whole, head = THREE
    changed = whole[:place] + bytes([value]) + whole[place + 1 :]
    if changed == whole:
        assert parse_bytes(changed, head).records == tuple(records)
        return
    with pytest.raises(JournalDamaged):
        parse_bytes(changed, head)
    if place == len(whole) - 1:
        assert parse_bytes(changed).records == tuple(records[:2])
    else:
        reading, damage = parse_as_far_as_good(changed)
        assert damage is not None or reading.torn_bytes
        assert list(reading.records) == records[: whole[:place].count(b"\n")]


@pytest.mark.parametrize("order", ["132", "213", "13", "23", "1223", "1 23", "", "12", "1"])
def test_lines_that_are_moved_missing_or_added_are_noticed(order: str) -> None:
    """Reordering, deletion, repetition and an empty line are damage."""
    lines = THREE[1].splitlines(keepends=True)
    data = b"".join(b"\n" if each == " " else lines[int(each) - 1] for each in order)
    with pytest.raises(JournalDamaged):
        parse_bytes(data, THREE[2])


def test_a_journal_written_anew_disagrees_with_its_head() -> None:
    """Whoever computes all marks anew still has the head against him."""
    _, forged, _ = journal([("Opened", {"vessel": "C-7"}), ("Read", {"p": 6.2e6}), ("Noted", {"text": ""})])
    parse_bytes(forged)
    with pytest.raises(JournalDamaged, match="written anew") as caught:
        parse_bytes(forged, THREE[2])
    assert caught.value.line == 3


def test_a_head_may_lag_by_one_without_a_word_and_by_more_with_one() -> None:
    """A crash leaves the head one behind; further behind it is an older one, which is said."""
    records, data, _ = THREE
    assert parse_bytes(data, Head(2, records[1].mark)).warnings == ()
    assert "an older one" in parse_bytes(data, Head(1, records[0].mark)).warnings[0]
    assert "an older one" in parse_bytes(data, Head()).warnings[0]


@given(count=st.integers(0, 10**9), mark=st.text("0123456789abcdef", min_size=64, max_size=64))
def test_heads_read_back_and_have_one_length(count: int, mark: str) -> None:
    """A head reads back, and its length never changes, so that it can be rewritten in place."""
    head = Head(count, mark)
    assert parse_head(head_line(head)) == head
    assert len(head_line(head)) == len(head_line(Head()))


@given(place=st.integers(0, len(head_line(THREE[2])) - 1), value=st.integers(0, 255))
def test_any_changed_byte_of_a_head_is_noticed(place: int, value: int) -> None:
    """A damaged head is known as damaged, so that it is never taken for damage of the journal."""
    line = head_line(THREE[2])
    changed = line[:place] + bytes([value]) + line[place + 1 :]
    assert parse_head(changed) == (THREE[2] if changed == line else None)


@pytest.mark.parametrize(
    "data", [b"", b"{}", b"[]", b"3", b"\xff", b'{"count":Infinity,"last":""}', b"[" * 100_000]
)
def test_what_is_no_head_is_none(data: bytes) -> None:
    """Anything may lie in the head file; it is then no head."""
    assert parse_head(data) is None


@pytest.mark.parametrize(
    "data",
    [{"p": math.nan}, {"p": math.inf}, {"p": {1, 2}}, {"p": b"x"}, {1: 0, "1": 0}, {10: 0, 9: 0}, {"n": 10**5000}],
)
def test_what_json_cannot_hold_is_refused_before_anything_is_written(data: dict[str, object]) -> None:
    """An event that would not read back the same never reaches the file."""
    with pytest.raises(JournalError, match=r"'Read'.* written"):
        line_of(draft("Read", data, NOW), Head())


def test_an_event_nested_without_end_is_refused() -> None:
    """Data that contains itself or is nested too deeply is refused with a sentence."""
    deep: dict[str, object] = {}
    for _ in range(100_000):
        deep = {"d": deep}
    ring: dict[str, object] = {}
    ring["ring"] = ring
    for data in (deep, ring):
        with pytest.raises(JournalError, match="cannot be written down"):
            draft("Read", data, NOW)
    while deep:  # Taken apart by hand: the interpreter would take it apart by recursion.
        deep = deep.pop("d")  # type: ignore[assignment]  # nested dictionaries all the way down


@pytest.mark.parametrize("now", [Moment(math.nan, 0.0), Moment(0.0, math.nan), Moment(0.0, 1e15)])
def test_an_event_at_no_time_is_refused(now: Moment) -> None:
    """An event needs a time."""
    with pytest.raises(JournalError, match="cannot be written down"):
        draft("Read", {}, now)


def test_an_event_needs_kind_and_version() -> None:
    """Without a kind, or with a version below 1, nothing is written."""
    for kind, version in (("", 1), ("Read", 0)):
        with pytest.raises(JournalError, match="needs a kind"):
            draft(kind, {}, NOW, version)


@given(st.text(st.characters(categories=["Cs", "Ll"]), max_size=6))
def test_bytes_that_are_no_text_survive(text: str) -> None:
    """What a terminal delivers for bytes that are no UTF-8 is kept and reads back as the record says."""
    record, line = line_of(draft("Noted", {"text": text}, NOW), Head())
    assert parse_bytes(line).records == (record,)
    written = str(record.data["text"])
    assert written.encode("utf-16", "surrogatepass") == text.encode("utf-16", "surrogatepass")


def test_data_is_fixed_when_it_is_handed_over() -> None:
    """Changing the data after handing it over changes nothing in the record."""
    values: list[object] = [1]
    event = draft("Read", {"values": values}, NOW)
    values.append(2)
    assert line_of(event, Head())[0].data == {"values": [1]}


def sealed(body: str) -> bytes:
    """A line whose mark is right, whatever it says."""
    return seal(NO_MARK, body.encode())


GOOD = '{"n":1,"v":1,"event":"A","at":"2031-03-02T14:32:07.123Z","boot":1.0,"data":{}'


def test_a_line_made_by_hand_to_the_rule_is_read() -> None:
    """The line that the refused ones below depart from is good."""
    assert parse_bytes(sealed(GOOD)).records[0].moment == Moment(1.0, 1_930_228_327.123)


@pytest.mark.parametrize(
    ("old", "new"),
    [
        ('"n":1', '"n":2'), ('"n":1', '"n":true'), ('"n":1', '"n":1.0'), ('"n":1', '"n":"1"'), ('"v":1', '"v":0'),
        ('"event":"A"', '"event":""'), ('"event":"A"', '"event":7'), ('"event":"A"', '"event":"\\u0041"'),
        ("07.123Z", "07.1Z"), ('"2031-03-02T14:32:07.123Z"', "5"), ('"boot":1.0', '"boot":1'),
        ('"boot":1.0', '"boot":NaN'), ('"boot":1.0', '"boot":1e999'), ('"data":{}', '"data":[]'),
        ('"data":{}', '"data":{"a":1,"a":2}'), ('"data":{}', '"data":{"b":1,"a":2}'),
        ('"data":{}', '"data":{"a": 1}'), ('"data":{}', '"data":{"a":NaN}'), ('"data":{}', '"data":{},"more":1'),
        ('"data":{}', '"data":' + "[" * 50_000), ('"data":{}', '"data":{"a":' + "9" * 5000 + "}"),
        ('"n":1,"v":1', '"v":1,"n":1'), ('{"n"', ' {"n"'), (GOOD, "["), (GOOD, '{"n":1'), (GOOD, "{"), (GOOD, ""),
    ],
)  # fmt: skip
def test_lines_with_right_marks_but_wrong_words_are_damage(old: str, new: str) -> None:
    """A right mark does not make a record of what this program would not have written."""
    assert old in GOOD
    with pytest.raises(JournalDamaged) as caught:
        parse_bytes(sealed(GOOD.replace(old, new, 1)))
    assert caught.value.line == 1


@given(st.binary(max_size=300))
def test_any_bytes_at_all_are_read_or_named(data: bytes) -> None:
    """Whatever lies in a file, reading it ends in records or in damage, never in another error."""
    reading, damage = parse_as_far_as_good(data)
    assert reading.records == ()
    assert (damage is not None) == (b"\n" in data)
