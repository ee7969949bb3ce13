"""Signing a hold point: who, their own blind reading where it measures, their own number.

A whole screen and not a panel: what others read and what is computed must not be seen before the signer's own
reading is in, because expected values beside an empty field are copied.
"""

from __future__ import annotations

from collections.abc import Iterable
from typing import TYPE_CHECKING, ClassVar

from textual import on
from textual.binding import Binding, BindingType
from textual.containers import Horizontal
from textual.widget import Widget
from textual.widgets import Input

from runbook.answers import Hold, Instrument
from runbook.bench.acting import do
from runbook.bench.people import next_name, roles_of
from runbook.bench.place import Keys, Place
from runbook.bench.rows import EMPTY, Row, row, wrapped
from runbook.bench.widgets.field import Field
from runbook.bench.widgets.lines import Lines
from runbook.run.acts import Act, Read, Sign
from runbook.run.state import Ledger, Taken
from runbook.run.typed import Understood, understand

if TYPE_CHECKING:
    from runbook.run.conductor import Conductor


def own_reading(ledger: Ledger, hold: Hold, signer: str) -> Taken | None:
    """The signer's last blind reading in this entry."""
    if hold.read is None:
        return None
    own = [t for t in ledger.in_entry(hold.read.tag) if t.event.by == signer and t.event.blind]
    return own[-1] if own else None


class HoldScreen(Place[bool]):
    """True when the hold point was signed."""

    DEFAULT_CSS = """
    HoldScreen #entry { height: 1; padding: 0 1; }
    HoldScreen #field { width: 40; }
    """
    HEADING = "SIGN THE HOLD POINT"
    KEYS: ClassVar[Keys] = (("Enter", "take it"), ("F4", "who"), ("Esc", "back"))
    BINDINGS: ClassVar[list[BindingType]] = [
        Binding("escape", "back", show=False, priority=True),
        Binding("f4", "who", show=False, priority=True),
    ]

    def __init__(self, desk: Conductor, hold: Hold) -> None:
        """The hold point in which the run of `desk` stands."""
        super().__init__()
        self._desk = desk
        self._hold = hold
        people = [p.name for p in desk.ledger.people if hold.signed_by in p.roles]
        self._who = people[0] if people else next_name(desk.ledger, "")
        self._echoed: Understood | None = None
        self._said = ""

    def body(self) -> Iterable[Widget]:
        """Why, who, field, and after the reading what it is compared with."""
        yield Lines(self._above)
        yield Horizontal(Field("", id="field"), id="entry")
        yield Lines(self._below)

    def on_mount(self) -> None:
        """Straight into the field."""
        self._begin()

    @property
    def reading_in(self) -> bool:
        """The signer's own reading has been taken, or none is asked for."""
        return self._hold.read is None or own_reading(self._desk.ledger, self._hold, self._who) is not None

    @property
    def _instrument(self) -> Instrument | None:
        need = self._hold.read
        return None if need is None else next(i for i in self._desk.plan.instruments if i.tag == need.tag)

    def _begin(self) -> None:
        """An empty field for what is asked now, masked where it is the number."""
        field = self.query_one(Field)
        with self.prevent(Input.Changed):
            field.value = ""
        field.password = self.reading_in
        field.focus()
        self._echoed = None
        self._paint()

    def _paint(self) -> None:
        for lines in self.query(Lines):
            lines.refresh(layout=True)

    # -- showing ----------------------------------------------------------------------------------------

    def _above(self, width: int) -> list[Row]:
        rows = [EMPTY, *wrapped(f" {self._hold.because}", width - 1, "strong"), EMPTY]
        signed_by = f" signed by: {self._hold.signed_by}, never by who performed the step"
        rows += [*wrapped(signed_by, width - 1), EMPTY]
        rows.append(row(" signer   ", (self._who, "strong"), f" ({roles_of(self._desk.ledger, self._who)})"))
        one = self._instrument
        if self.reading_in:
            rows += [EMPTY, *self._expected(width), row((" your own number, set at the briefing:", "strong"))]
        elif one is not None:
            words = f" your own reading of {one.tag}, {one.reads} in {one.unit}, before you see any other:"
            rows += [EMPTY, *wrapped(words, width - 1, "strong"), *wrapped(self._together(), width - 1)]
        if (played := self._played()) is not None:
            rows.append(row((f" {self._who} is played in this rehearsal. Enter types for them: {played}", "rehearsal")))
        return rows

    def _together(self) -> str:
        """Two people who read a moving value one after the other never agree."""
        stops = "" if self.bench.pace is None else " Esc, then p stops the clock of the rehearsal."
        return f" Where it moves, both read at the same moment.{stops}"

    def _played(self) -> str | None:
        """What a played person types now; None: a real person, who types themselves."""
        pace, one = self.bench.pace, self._instrument
        number = None if pace is None else pace.played(self._who)
        if pace is None or number is None or self.reading_in or one is None:
            return number
        return pace.dial(one.tag)

    def _expected(self, width: int) -> list[Row]:
        """What others read and what this was read: only after the signer's own."""
        need = self._hold.read
        if need is None:
            return []
        ledger = self._desk.ledger
        rows = []
        for taken in (*ledger.before, *ledger.here):
            if taken.event.tag == need.tag:
                kind = "blind" if taken.event.blind else "before"
                rows += wrapped(f" {taken.event.echo}, read by {taken.event.by} ({kind})", width - 1)
        return [*rows, EMPTY] if rows else []

    def _below(self, width: int) -> list[Row]:
        if self._echoed is not None:
            outside = ", OUTSIDE ITS DIAL" if self._echoed.outside else ""
            return wrapped(f" {self._echoed.echo}{outside}   Enter again records it.", width - 1, "strong")
        if self._said:
            return wrapped(f" {self._said}", width - 1, "blocked")
        return wrapped(" The signature is attested with that number. It is no proof of identity.", width - 1, "dim")

    # -- typing -----------------------------------------------------------------------------------------

    @on(Input.Changed, "#field")
    def _changed(self) -> None:
        self._echoed, self._said = None, ""
        self._paint()

    @on(Field.Typed)
    async def _typed(self, event: Field.Typed) -> None:
        event.stop()
        one = self._instrument
        # A played person needs no typing: Enter takes what stands there as theirs.
        text = event.text.strip() or self._played() or ""
        if self.reading_in or one is None:
            if await self._act(Sign(self._who, text)):
                self.dismiss(True)
            return
        if self._echoed is None:
            understood = understand(text, one, self._desk.plan)
            if isinstance(understood, str):
                self._said = understood
            else:
                self._echoed = understood
            self._paint()
            return
        read = Read(one.tag, self._echoed.value, text, self._echoed.echo, self._who, blind=True)
        if await self._act(read):
            self._begin()

    async def _act(self, act: Act) -> bool:
        """Whether it happened; why not is shown, and a wrong number is taken out of the field."""
        said = await do(self._desk, act)
        if said:
            if isinstance(act, Sign):
                self._begin()
            self._echoed, self._said = None, said
            self._paint()
        return not said

    # -- keys -------------------------------------------------------------------------------------------

    def action_who(self) -> None:
        """Somebody else signs."""
        self._who = next_name(self._desk.ledger, self._who)
        self._said = ""
        self._begin()

    def action_back(self) -> None:
        """Back to the run, unsigned."""
        self.dismiss(False)
