"""From the bytes of a YAML file to plain data with the place of every part.

Refuses what makes a file say something else than it shows (anchors, tags, merge keys, duplicates, a second
document), what could be a bomb (size, depth, count), and what loses text in silence (a comment without
warning, a comma inside braces). Reports all of it at once, except where the text is no YAML at all.

Built from the parser's events in one pass, without recursion: nothing grows before it has been counted.
"""

from __future__ import annotations

import re
from collections.abc import Iterator
from dataclasses import dataclass, field
from typing import Any, Final

import yaml

from runbook.errors import Problem
from runbook.procedure.document import UNREADABLE, Document, Place, Route, located, split_lines
from runbook.procedure.scalars import Nothing, Refused, resolve
from runbook.procedure.yaml_words import bad_key, moves_cursor, short, yaml_message

LARGEST: Final = 1_000_000
"""Bytes of a file: a hundred times the longest procedure."""
DEEPEST: Final = 32
"""Levels of nesting."""
MOST_NODES: Final = 20_000
"""Entries of a file."""
_COMMENT: Final = re.compile(r"( +)#(.?)")


@dataclass
class _Frame:
    """A mapping or sequence that is being read."""

    route: Route
    place: Place
    flow: bool
    items: dict[str, Any] | list[Any]
    key: str | None = None
    """Of a mapping: the key whose value comes next."""
    dropped: bool = False
    """The next value belongs to a key that was refused."""


@dataclass
class _Reader:
    file: str
    text: str
    lines: tuple[str, ...]
    values: dict[Route, Place] = field(default_factory=dict)
    keys: dict[Route, Place] = field(default_factory=dict)
    problems: list[Problem] = field(default_factory=list)
    stack: list[_Frame] = field(default_factory=list)
    root: Any = UNREADABLE
    nodes: int = 0
    documents: int = 0

    def say(self, at: Place, message: str) -> None:
        """Note a problem."""
        self.problems.append(located(self.file, self.lines, at, message))

    def read(self) -> None:
        """All events; stops at what makes going on pointless."""
        try:
            for event in self._events():
                if not self._take(event):
                    self.root = UNREADABLE
                    return
        except yaml.reader.ReaderError as error:
            at = _place_of(self.text, error.position)
            self.say(at, f"the character U+{_code(error.character):04X} may not stand in a file: take it out")
        except yaml.MarkedYAMLError as error:
            self.say(*yaml_message(error, self.lines))
        if self.root is UNREADABLE and not self.problems:
            self.problems.append(Problem(self.file, 1, 1, "the file is empty: 'runbook new' writes a start"))

    def _events(self) -> Iterator[yaml.Event]:
        yield from yaml.parse(self.text, Loader=yaml.SafeLoader)

    def _take(self, event: yaml.Event) -> bool:
        """One event; False where reading ends."""
        at = _after(event.start_mark, 0)
        if isinstance(event, yaml.DocumentStartEvent):
            self.documents += 1
            if self.documents > 1:
                self.say(at, "a second document begins here: write one file each")
                return False
            return True
        if isinstance(event, yaml.AliasEvent):
            self.say(at, f"'*{event.anchor}' repeats something written elsewhere: write it out here")
            self._place(at, UNREADABLE, alias=True)
            return True
        if isinstance(event, yaml.MappingEndEvent | yaml.SequenceEndEvent):
            self._end()
            return True
        if not isinstance(event, yaml.NodeEvent):
            return True
        self.nodes += 1
        if self.nodes > MOST_NODES:
            self.say(at, f"the file has more than {MOST_NODES} entries: split it")
            return False
        if len(self.stack) >= DEEPEST and not isinstance(event, yaml.ScalarEvent):
            self.say(at, f"the file is nested more than {DEEPEST} deep: this is no procedure and no apparatus")
            return False
        self._marked(event, at)
        if isinstance(event, yaml.ScalarEvent):
            self._scalar(event, at)
        else:
            self._begin(event, at)
        return True

    def _marked(self, event: Any, at: Place) -> None:
        """Anchors and tags."""
        if event.anchor is not None:
            self.say(at, f"'&{event.anchor}' is an anchor: write the text without it (quote it if it is text)")
        if getattr(event, "tag", None) is not None:
            self.say(at, "a word that begins with ! is a tag, not text: quote it")

    def _begin(self, event: Any, at: Place) -> None:
        mapping = isinstance(event, yaml.MappingStartEvent)
        if self._wants_key():
            self.say(at, "a key is a plain word: quote it if it is text")
            self.stack.append(_Frame((), at, False, [], dropped=True))
            return
        route = self._route()
        self._note(route, at)
        self.stack.append(_Frame(route, at, bool(event.flow_style), {} if mapping else []))

    def _end(self) -> None:
        frame = self.stack.pop()
        if frame.route == () and frame.dropped and isinstance(frame.items, list) and self.stack:
            self._key(None)
            return
        whole = frame.items if isinstance(frame.items, dict) else tuple(frame.items)
        self._put(whole)

    def _scalar(self, event: yaml.ScalarEvent, at: Place) -> None:
        plain = event.style is None
        if plain and self._loses_tail(event):
            self.say(
                _after(event.end_mark, 1),
                "what follows ' #' is a comment and is not read: quote the whole text if it belongs to it, "
                "or write a comment with two blanks before # and one after",
            )
        if self._wants_key():
            self._key(event.value, at, plain)
            return
        self._place(at, self._value(event.value, at) if plain else self._quoted(event.value, at))

    def _quoted(self, text: str, at: Place) -> Any:
        if moves_cursor(text):
            self.say(at, "the text holds a line break or a control character: write it as one plain line")
            return UNREADABLE
        return text

    def _value(self, word: str, at: Place) -> Any:
        try:
            found = resolve(word)
        except Nothing:
            self._empty(at)
            return UNREADABLE
        except Refused as why:
            self.say(at, str(why))
            return UNREADABLE
        return self._quoted(found, at) if isinstance(found, str) else found

    def _empty(self, at: Place) -> None:
        frame = self.stack[-1] if self.stack else None
        if frame is None or not isinstance(frame.items, dict) or frame.key is None:
            self.say(at, "an entry without a value: write one, or take the line away")
            return
        key_at = self.keys.get((*frame.route, frame.key), at)
        if frame.flow:
            self.say(
                key_at,
                f"'{short(frame.key)}' has no value: a comma ended the sentence before it. "
                "Quote the sentence, or put it on its own line",
            )
        else:
            self.say(key_at, f"'{short(frame.key)}' has no value: write one, or take the line away")

    def _loses_tail(self, event: yaml.ScalarEvent) -> bool:
        """A comment follows on the same line that does not look like one: text may have been lost."""
        mark = event.end_mark
        if not event.value or mark is None or mark.line >= len(self.lines):
            return False
        found = _COMMENT.match(self.lines[mark.line], mark.column)
        return found is not None and (len(found.group(1)) < 2 or found.group(2) not in ("", " "))

    def _wants_key(self) -> bool:
        frame = self.stack[-1] if self.stack else None
        return frame is not None and isinstance(frame.items, dict) and frame.key is None and not frame.dropped

    def _key(self, word: str | None, at: Place = (0, 0), plain: bool = False) -> None:
        frame = self.stack[-1]
        assert isinstance(frame.items, dict)
        if word is None:
            frame.dropped = True
            return
        wrong = bad_key(word, plain)
        if not wrong and word in frame.items:
            first = self.keys[(*frame.route, word)]
            wrong = f"'{short(word)}' stands here a second time (first in line {first[0]}): keep one"
        if wrong:
            self.say(at, wrong)
            frame.dropped = True
            return
        frame.key = word
        self.keys[(*frame.route, word)] = at

    def _route(self) -> Route:
        if not self.stack:
            return ()
        frame = self.stack[-1]
        if isinstance(frame.items, list):
            return (*frame.route, len(frame.items))
        return (*frame.route, frame.key or "")

    def _note(self, route: Route, at: Place) -> None:
        if not any(f.dropped for f in self.stack):
            self.values[route] = at

    def _place(self, at: Place, value: Any, alias: bool = False) -> None:
        if alias and self._wants_key():
            self._key(None)
            return
        self._note(self._route(), at)
        self._put(value)

    def _put(self, value: Any) -> None:
        if not self.stack:
            self.root = value
            return
        frame = self.stack[-1]
        if isinstance(frame.items, list):
            frame.items.append(value)
            return
        if not frame.dropped and frame.key is not None:
            frame.items[frame.key] = value
        frame.key, frame.dropped = None, False


def read_document(data: bytes, file: str) -> Document:
    """The file's bytes as plain data with places; what was wrong stands in `problems`, in file order."""
    if len(data) > LARGEST:
        whole = Problem(file, 1, 1, f"the file is larger than {LARGEST // 1000} kB: this is no procedure")
        return Document(file, UNREADABLE, {}, {}, (), (whole,))
    try:
        text = data.decode("utf-8-sig")
    except UnicodeDecodeError as error:
        before = data[: error.start].decode("utf-8", "replace")
        at = _place_of(before, len(before))
        lines = split_lines(data.decode("utf-8", "replace"))
        message = f"the byte 0x{data[error.start]:02X} is not UTF-8: save the file as UTF-8 text"
        return Document(file, UNREADABLE, {}, {}, lines, (located(file, lines, at, message),))
    lines = split_lines(text)
    reader = _Reader(file, text, lines)
    reader.read()
    problems = tuple(sorted(reader.problems, key=lambda p: (p.line, p.column)))
    return Document(file, reader.root, reader.values, reader.keys, lines, problems)


def _after(mark: Any, columns: int) -> Place:
    """Place of a mark of the YAML library, which counts from 0, and some columns after it."""
    return (1, 1) if mark is None else (mark.line + 1, mark.column + 1 + columns)


def _place_of(text: str, index: int) -> Place:
    before = split_lines(text[:index])
    return len(before), len(before[-1]) + 1


def _code(character: Any) -> int:
    return character if isinstance(character, int) else ord(str(character)[:1] or "\0")
