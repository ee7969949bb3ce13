"""The panel for what hands have done: valves, the heat source, proofs, taking a step up again.

One key each, no typing. What is stated is a fact, so nothing here asks whether it is allowed.
"""

from __future__ import annotations

from collections.abc import Iterable
from typing import TYPE_CHECKING, ClassVar

from textual import events
from textual.widget import Widget

from runbook.answers import LineKind
from runbook.bench.acting import do
from runbook.bench.asking import PROOFS
from runbook.bench.place import Keys, Panel
from runbook.bench.rows import Row, row, wrapped
from runbook.bench.widgets.lines import Lines
from runbook.run.acts import Act, Prove, SetSource, SetValve, TakeUp

if TYPE_CHECKING:
    from runbook.run.conductor import Conductor

_SIGNS = "123456789abcdefghijkmnopqrstuvwxyz"
"""Keys in the order in which they are given out; l would be taken for 1."""


class StatePanel(Panel[None]):
    """What has been done or found, one key each."""

    HEADING = "STATE WHAT IS SO"
    KEYS: ClassVar[Keys] = (("the key beside it", "states it"), ("Esc", "back"))

    def __init__(self, desk: Conductor) -> None:
        """Of the run of `desk`."""
        super().__init__()
        self._desk = desk
        self._said = ""

    def body(self) -> Iterable[Widget]:
        """One row a valve."""
        yield Lines(self._rows)

    def choices(self) -> list[tuple[str, str, Act]]:
        """(what, as what, act) of everything that can be stated now."""
        plan, ledger = self._desk.plan, self._desk.ledger
        found: list[tuple[str, str, Act]] = []
        line = ledger.present
        if ledger.entry.turned_back is not None and ledger.safe is None:
            found.append(("this step", "take it up again", TakeUp()))
        if line is not None and line.kind is LineKind.EMPTY and ledger.safe is None:
            done = {name for name, _ in ledger.entry.proofs}
            for name, words in PROOFS.items():
                if name not in done:
                    found.append(("proof", words, Prove(name)))
                    break
        for tag, _ in plan.valves:
            for position in ("open", "shut", "do not know"):
                if ledger.position(tag) != position or tag in ledger.entry.unconfirmed:
                    found.append((tag, position, SetValve(tag, position)))
        if plan.source_tag is not None:
            for state in ("off", "unplugged", "on", "do not know"):
                if ledger.source != state:
                    found.append((plan.source_tag, state, SetSource(state)))
        return found[: len(_SIGNS)]

    def _rows(self, width: int) -> list[Row]:
        rows: list[Row] = []
        spans: list[tuple[str, str]] = []
        before = ""
        for sign, (what, as_what, _) in zip(_SIGNS, self.choices(), strict=False):
            if what != before or what == "proof":
                if spans:
                    rows.append(row(*spans))
                spans = [(f" {what} {self._stands(what)}".ljust(26), "strong")]
                before = what
            spans += [(sign, "key"), (f" {as_what}   ", "plain")]
        if spans:
            rows.append(row(*spans))
        return rows + wrapped(f" {self._said}" if self._said else "", width - 1, "blocked")

    def _stands(self, what: str) -> str:
        ledger = self._desk.ledger
        if what == self._desk.plan.source_tag:
            return f"is {ledger.source}"
        if what in dict(self._desk.plan.valves):
            position = "do not know" if what in ledger.entry.unconfirmed else ledger.position(what)
            return "is not known" if position == "do not know" else f"is {position}"
        return ""

    async def on_key(self, event: events.Key) -> None:
        """Esc goes back; a key that stands beside something states it."""
        if event.key == "escape":
            event.stop()
            self.dismiss(None)
            return
        choices = self.choices()
        at = _SIGNS.find(event.character) if event.character else -1
        if not 0 <= at < len(choices):
            return
        event.stop()
        await self._state(choices[at][2])

    async def _state(self, act: Act) -> None:
        self._said = await do(self._desk, act)
        if self._said:
            self.query_one(Lines).refresh(layout=True)
            return
        self.dismiss(None)
