"""Keys that are the same wherever a run is stood in: reading, signing, notes, pictures, valves, speed."""

from __future__ import annotations

from typing import TYPE_CHECKING, ClassVar

from textual import events
from textual.binding import Binding, BindingType

from runbook.answers import LineKind
from runbook.bench.acting import do
from runbook.bench.pacing import PACE_KEYS, turn_clock
from runbook.bench.people import holder
from runbook.bench.place import Place
from runbook.bench.rows import Row, wrapped
from runbook.bench.screens.faults import FaultScreen
from runbook.bench.screens.hold import HoldScreen
from runbook.bench.screens.note import NotePanel
from runbook.bench.screens.pages import KeysScreen, PicturesScreen
from runbook.bench.screens.question import Question
from runbook.bench.screens.read import ReadPanel
from runbook.bench.screens.sights import SightsScreen
from runbook.bench.screens.state import StatePanel
from runbook.bench.screens.why import WhyScreen
from runbook.bench.viewing import picture_view, tags
from runbook.run.acts import Attend

if TYPE_CHECKING:
    from runbook.run.conductor import Conductor


class RunPlace(Place[None]):
    """A screen of an open run."""

    BINDINGS: ClassVar[list[BindingType]] = [
        Binding("f2", "keys", show=False),
        Binding("f3", "read", show=False),
        Binding("f4", "sign", show=False),
        Binding("f5", "note", show=False),
        Binding("f6", "pictures", show=False),
        Binding("f7", "why", show=False),
        Binding("s", "sights", show=False),
        Binding("f8", "state", show=False),
        Binding("escape", "app.quit", show=False),
        Binding("space", "quiet", show=False),
        Binding("f", "fault", show=False),
        *PACE_KEYS,
    ]

    def __init__(self, desk: Conductor) -> None:
        """The run of `desk`."""
        super().__init__()
        self.desk = desk

    async def on_key(self, event: events.Key) -> None:
        """A digit typed anywhere opens the reading field with that digit."""
        if event.character is not None and event.character in "0123456789":
            event.stop()
            self._read(event.character)

    def action_read(self) -> None:
        """Enter a reading."""
        self._read("")

    def _read(self, typed: str) -> None:
        found, asked = tags(self.desk)
        if found:
            self.app.push_screen(ReadPanel(self.desk, found, asked, typed))

    def action_sign(self) -> None:
        """Sign the hold point, or say that the witness is here."""
        line = self.desk.ledger.present
        if line is not None and line.kind is LineKind.HOLD and line.hold is not None:
            self.app.push_screen(HoldScreen(self.desk, line.hold))
        elif line is not None and line.kind is LineKind.WITNESS and line.witness is not None:
            self._witness(line.witness.called)
        else:
            self.bench.say("There is nothing to sign in this step.")

    def _witness(self, role: str) -> None:
        name = holder(self.desk.ledger, role)

        def rows(width: int) -> list[Row]:
            return wrapped(f" {name or 'Nobody'}, {role}, was called to see this step.", width - 1)

        async def answered(here: bool | None) -> None:
            if here and (said := await do(self.desk, Attend(name))):
                self.bench.say(said, loud=True)

        self.app.push_screen(Question("IS THE WITNESS HERE?", rows, ("Y", f"{name} is here")), answered)

    def action_note(self) -> None:
        """Write a note."""
        self.app.push_screen(NotePanel(self.desk))

    def action_pictures(self) -> None:
        """Cell and path at full size."""
        self.app.push_screen(PicturesScreen(lambda: picture_view(self.desk)))

    def action_why(self) -> None:
        """What the readings may mean."""
        self.app.push_screen(WhyScreen(self.desk))

    def action_sights(self) -> None:
        """The figures behind what should be seen."""
        self.app.push_screen(SightsScreen(self.desk))

    def action_keys(self) -> None:
        """What every key does."""
        self.app.push_screen(KeysScreen())

    def action_state(self) -> None:
        """State a valve, the heat source, a proof."""
        self.app.push_screen(StatePanel(self.desk))

    def action_pace(self, what: str) -> None:
        """The clock of a rehearsal."""
        if said := turn_clock(self.bench, self.desk, what):
            self.bench.say(said)

    def action_fault(self) -> None:
        """One more thing that goes wrong on purpose; at the vessel the key does nothing."""
        pace = self.bench.pace

        def chosen(fault: str | None) -> None:
            if pace is not None and fault:
                pace.trouble(fault)

        if pace is not None:
            self.app.push_screen(FaultScreen(), chosen)

    def action_quiet(self) -> None:
        """The bell has been heard."""
        self.bench.bell_heard()
