"""What every screen shares: a header that says REHEARSAL in one, a last row of keys, and a window too small.

A screen is a place one stands in, or a panel over the lower rows of one, so that instruction, left alone and
ceiling stay in view while something is typed.
"""

from __future__ import annotations

from collections.abc import Iterable
from typing import TYPE_CHECKING, ClassVar, Generic, TypeVar

from textual import events
from textual.app import ComposeResult
from textual.containers import Vertical
from textual.screen import ModalScreen, Screen
from textual.widget import Widget

from runbook.bench.rows import Row, cut, row
from runbook.bench.widgets.line import Line
from runbook.bench.widgets.small import TooSmall

if TYPE_CHECKING:
    from runbook.bench.app import BenchApp

R = TypeVar("R")
Keys = tuple[tuple[str, str], ...]
"""(key, what it does)."""


def keys_row(keys: Keys, width: int) -> Row:
    """Make safe first and apart from all others; where they do not fit, the last stays and those before it go."""
    for gap in (3, 2, 1):
        found = _keys_row(keys, gap)
        if found.width <= width:
            return found
    return keys_row((*keys[:-2], keys[-1]), width) if len(keys) > 1 else found


def _keys_row(keys: Keys, gap: int) -> Row:
    spans: list[tuple[str, str]] = [(" ", "plain"), ("F9 MAKE SAFE", "make safe"), (" ┃ ", "dim")]
    for i, (key, does) in enumerate(keys):
        spans += [(" " * gap if i else "", "plain"), (key, "key"), (f" {does}", "plain")]
    return row(*spans)


class _Shared:
    """Typed access to the app, for both kinds of screen."""

    @property
    def bench(self) -> BenchApp:
        """The app these screens belong to."""
        app = self.app  # type: ignore[attr-defined] # mixed into screens only
        return app  # type: ignore[no-any-return] # no other app shows these screens


class Place(_Shared, Screen[R], Generic[R]):
    """A whole screen."""

    DEFAULT_CSS = """
    Place { layers: base small; layout: vertical; overflow: hidden; }
    Place > #body { height: 1fr; }
    Place VerticalScroll { scrollbar-size-vertical: 1; }
    """
    KEYS: ClassVar[Keys] = ()
    """Shown in the last row after make safe."""
    HEADING: ClassVar[str] = "runbook"

    def compose(self) -> ComposeResult:
        """Header, body, keys."""
        yield Line(self.header_row, id="header")
        yield Vertical(*self.body(), id="body")
        yield Line(lambda width: keys_row(self.keys(), width), id="keys")
        yield TooSmall()

    def body(self) -> Iterable[Widget]:
        """What stands between header and keys."""
        return ()

    def heading(self) -> str:
        """The words of the first row."""
        return self.HEADING

    def keys(self) -> Keys:
        """The keys of this screen as it stands."""
        return self.KEYS

    def header_row(self, width: int) -> Row:
        """The first row; of a rehearsal it begins with that word."""
        mark = self.bench.rehearsal_mark
        lead = f" {mark} " if mark else ""
        return row((lead, "rehearsal"), f" {cut(self.heading(), max(0, width - len(lead) - 1))}")

    def refresh_lines(self) -> None:
        """Header and keys anew."""
        for line in self.query(Line):
            line.refresh()

    def on_resize(self, event: events.Resize) -> None:
        """Cover what does not fit."""
        self.query_one(TooSmall).fit(event.size.width, event.size.height)


class Panel(_Shared, ModalScreen[R], Generic[R]):
    """A panel over the lowest rows of the screen before it."""

    DEFAULT_CSS = """
    Panel { layers: base small; background: transparent; align: left bottom; overflow: hidden; }
    Panel > #panel { width: 100%; height: auto; max-height: 100%; background: $background; border-top: heavy $accent; }
    """
    KEYS: ClassVar[Keys] = ()
    HEADING: ClassVar[str] = ""

    def compose(self) -> ComposeResult:
        """Heading, body, keys."""
        with Vertical(id="panel"):
            yield Line(self.header_row, id="header")
            yield from self.body()
            yield Line(lambda width: keys_row(self.keys(), width), id="keys")
        yield TooSmall()

    def body(self) -> Iterable[Widget]:
        """What stands between heading and keys."""
        return ()

    def heading(self) -> str:
        """What it is about."""
        return self.HEADING

    def keys(self) -> Keys:
        """The keys of this panel as it stands."""
        return self.KEYS

    def header_row(self, width: int) -> Row:
        """The heading; of a rehearsal it begins with that word."""
        mark = self.bench.rehearsal_mark
        lead = f" {mark} " if mark else ""
        return row((lead, "rehearsal"), (f" {cut(self.heading(), max(0, width - len(lead) - 1))}", "strong"))

    def refresh_lines(self) -> None:
        """Heading and keys anew."""
        for line in self.query(Line):
            line.refresh()

    def on_resize(self, event: events.Resize) -> None:
        """Cover what does not fit."""
        self.query_one(TooSmall).fit(event.size.width, event.size.height)
