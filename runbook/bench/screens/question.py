"""A question with one key for yes, and Esc for everything else.

There is no default answer, the key is never the one that opened the question, and a yes does not count before
the question has been seen.
"""

from __future__ import annotations

import time
from collections.abc import Callable, Iterable

from textual import events
from textual.widget import Widget

from runbook.bench.place import Keys, Panel
from runbook.bench.rows import Row
from runbook.bench.style import ARM_S
from runbook.bench.widgets.lines import Lines


class Question(Panel[bool]):
    """True: yes."""

    def __init__(self, heading: str, rows: Callable[[int], list[Row]], yes: tuple[str, str], no: str = "back") -> None:
        """`rows(width)` says what is asked; `yes` is (letter, what it does)."""
        super().__init__()
        self._heading = heading
        self._rows = rows
        self._yes = yes
        self._no = no
        self._since = time.monotonic()

    def body(self) -> Iterable[Widget]:
        """What is asked."""
        yield Lines(self._rows)

    def keys(self) -> Keys:
        """Yes and no."""
        return ((self._yes[0], self._yes[1]), ("Esc", self._no))

    def heading(self) -> str:
        """What it is about."""
        return self._heading

    def on_key(self, event: events.Key) -> None:
        """The letter, once armed; Esc."""
        pressed = event.character or ""
        if pressed.lower() == self._yes[0].lower() and time.monotonic() - self._since >= ARM_S:
            event.stop()
            self.dismiss(True)
        elif event.key == "escape":
            event.stop()
            self.dismiss(False)
