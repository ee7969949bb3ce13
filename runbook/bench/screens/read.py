"""The reading panel: a number, echoed in full, recorded with a second Enter.

Number pad and Enter are enough, and what is typed stays when the panel is left.
"""

from __future__ import annotations

from collections.abc import Iterable
from typing import TYPE_CHECKING, ClassVar

from textual import on
from textual.binding import Binding, BindingType
from textual.containers import Horizontal
from textual.widget import Widget
from textual.widgets import Input

from runbook.answers import Instrument
from runbook.bench.acting import do
from runbook.bench.people import next_name, performer
from runbook.bench.place import Keys, Panel
from runbook.bench.rows import Row, beside, last_beside, row, wrapped
from runbook.bench.widgets.field import Field
from runbook.bench.widgets.lines import Lines
from runbook.run.acts import Read
from runbook.run.typed import Understood, understand

if TYPE_CHECKING:
    from runbook.run.conductor import Conductor


class ReadPanel(Panel[bool]):
    """True when at least one reading was recorded."""

    DEFAULT_CSS = """
    ReadPanel #entry { height: 1; padding: 0 1; }
    ReadPanel #field { width: 40; }
    """
    HEADING = "READ"
    KEYS: ClassVar[Keys] = (("Enter", "take it"), ("F3", "next dial"), ("F4", "who"), ("Esc", "back"))
    BINDINGS: ClassVar[list[BindingType]] = [
        Binding("escape", "back", show=False, priority=True),
        Binding("f3", "next", show=False, priority=True),
        Binding("f4", "who", show=False, priority=True),
    ]

    def __init__(self, desk: Conductor, tags: tuple[str, ...], asked: int, typed: str = "") -> None:
        """Readings of `tags`; the first `asked` are asked for, one after the other. Begins with `typed`."""
        super().__init__()
        self._asked = asked
        self._desk = desk
        self._tags = tags
        self._at = 0
        self._first = typed
        self._by = performer(desk.ledger)
        self._echoed: Understood | None = None
        self._said = ""
        self._recorded = False

    # -- showing ----------------------------------------------------------------------------------------

    def body(self) -> Iterable[Widget]:
        """Dial, field, echo."""
        yield Lines(self._dial_rows, id="dial")
        yield Horizontal(Field(self._first or self._draft(), id="field"), id="entry")
        yield Lines(self._echo_rows, id="echo")

    def on_mount(self) -> None:
        """Straight into the field, behind what is there."""
        field = self.query_one(Field)
        field.focus()
        field.cursor_position = len(field.value)

    @property
    def instrument(self) -> Instrument:
        """The one being read."""
        tag = self._tags[self._at % len(self._tags)]
        return next(one for one in self._desk.plan.instruments if one.tag == tag)

    def _dial_rows(self, width: int) -> list[Row]:
        one = self.instrument
        left = row((f" {one.tag}", "strong"), f"  {one.reads} in {one.unit}, read from: {one.read_from}")
        count = f"{self._at % len(self._tags) + 1} of {len(self._tags)} "
        rows = [beside(left, row((count, "dim")), width)]
        if (pace := self.bench.pace) is not None:
            shown = pace.dial(one.tag)
            rows.append(row((f" the simulated dial shows {shown or 'nothing that can be read'}", "rehearsal")))
        return rows

    def _echo_rows(self, width: int) -> list[Row]:
        who = row((f"read by {self._by} ", "dim"))
        if self._echoed is not None:
            words = f" {self._echoed.echo}" + (", OUTSIDE ITS DIAL" if self._echoed.outside else "")
            lines = wrapped(f"{words}   Enter again records it.", width - 1, "strong")
        else:
            lines = wrapped(f" {self._said}" if self._said else " Type what the dial shows.", width - 1)
        return last_beside(lines, who, width)

    def _refresh(self) -> None:
        for lines in self.query(Lines):
            lines.refresh(layout=True)

    # -- typing -----------------------------------------------------------------------------------------

    @on(Input.Changed, "#field")
    def _changed(self) -> None:
        """What was echoed no longer stands in the field."""
        self._echoed, self._said = None, ""
        self.bench.drafts[self._key] = self.query_one(Field).value
        self._refresh()

    @on(Field.Typed)
    async def _typed(self, event: Field.Typed) -> None:
        """First Enter echoes, second records."""
        event.stop()
        if self._echoed is None:
            understood = understand(event.text, self.instrument, self._desk.plan)
            if isinstance(understood, str):
                self._said = understood
            else:
                self._echoed = understood
            self._refresh()
            return
        await self._record(event.text, self._echoed)

    async def _record(self, text: str, reading: Understood) -> None:
        self._said = await do(self._desk, Read(self.instrument.tag, reading.value, text, reading.echo, self._by))
        if self._said:
            self._echoed = None
            self._refresh()
            return
        self._recorded = True
        self.bench.drafts.pop(self._key, None)
        self._at += 1
        if self._at >= self._asked:
            self.dismiss(True)
            return
        self._again()

    def _again(self) -> None:
        """Begin with another dial."""
        self._echoed, self._said = None, ""
        field = self.query_one(Field)
        with self.prevent(Input.Changed):
            field.value = self._draft()
        field.cursor_position = len(field.value)
        self._refresh()

    @property
    def _key(self) -> str:
        return f"read {self.instrument.tag}"

    def _draft(self) -> str:
        return self.bench.drafts.get(self._key, "")

    # -- keys -------------------------------------------------------------------------------------------

    def action_next(self) -> None:
        """Another dial; what was typed for this one is kept."""
        self._at += 1
        self._again()

    def action_who(self) -> None:
        """Somebody else reads."""
        self._by = next_name(self._desk.ledger, self._by)
        self._refresh()

    def action_back(self) -> None:
        """Back to the run; what was typed is kept."""
        if self.query_one(Field).value:
            self.bench.say("What you typed is kept.")
        self.dismiss(self._recorded)
