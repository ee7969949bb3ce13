"""The run screen: six bands in fixed places, and the keys that lead from it."""

from __future__ import annotations

from collections.abc import Iterable
from typing import TYPE_CHECKING, ClassVar

from textual import events
from textual.app import ComposeResult
from textual.binding import Binding, BindingType
from textual.containers import Horizontal, Vertical
from textual.widget import Widget

from runbook.bench import bands
from runbook.bench.acting import do
from runbook.bench.layout import PICTURE, Layout, layout
from runbook.bench.place import Keys, keys_row
from runbook.bench.rows import Row, row
from runbook.bench.run_place import RunPlace
from runbook.bench.screens.gap import GapScreen
from runbook.bench.screens.quick import QuickScreen
from runbook.bench.screens.safe import SafeScreen
from runbook.bench.view import RunView
from runbook.bench.viewing import may_finish, may_go_on, run_view
from runbook.bench.widgets.band import Band
from runbook.bench.widgets.line import Line
from runbook.bench.widgets.pictures import Pictures
from runbook.bench.widgets.small import TooSmall
from runbook.run.acts import Finish, GoOn

if TYPE_CHECKING:
    from runbook.run.conductor import Conductor

ORDER = ("do", "ask", "alone", "ceiling", "see", "agree")
RUN_KEYS: Keys = (
    ("F3", "read"),
    ("F4", "sign hold"),
    ("F5", "note"),
    ("F6", "pictures"),
    ("F2", "keys"),
)
"""The last row of the run screen; it never changes."""


class RunScreen(RunPlace):
    """Where a run is stood in from the first step to the last."""

    DEFAULT_CSS = """
    RunScreen { layers: base small; layout: vertical; overflow: hidden; }
    RunScreen .rule { color: $text-muted; }
    RunScreen #words { width: 1fr; }
    """
    KEYS: ClassVar[Keys] = RUN_KEYS
    BINDINGS: ClassVar[list[BindingType]] = [
        Binding("enter", "go_on", show=False),
        Binding("pagedown", "turn(1)", show=False),
        Binding("pageup", "turn(-1)", show=False),
    ]

    def __init__(self, desk: Conductor) -> None:
        """The run of `desk`."""
        super().__init__(desk)
        self.shown: RunView | None = None
        """What stands on the screen."""

    def compose(self) -> ComposeResult:
        """Header, bands with their rules, keys; pictures beside the lower bands."""
        yield Line(self._header, id="header")
        with Vertical(id="upper"):
            yield from self._bands("do", "ask", "alone")
        with Horizontal(id="lower"):
            with Vertical(id="words"):
                yield from self._bands("ceiling", "see", "agree")
            yield Pictures(self.bench.glyphs, id="pictures")
        yield Line(self._rule, id="rule-keys")
        yield Line(lambda width: keys_row(self.KEYS, width), id="keys")
        yield TooSmall()

    def _bands(self, *names: str) -> Iterable[Widget]:
        for name in names:
            yield Line(self._rule, id=f"rule-{name}")
            yield Band(name)

    def _rule(self, width: int) -> Row:
        return row((self.bench.glyphs.rule * width, "dim"))

    def _header(self, width: int) -> Row:
        return row() if self.shown is None else bands.header(self.shown.header, width)

    # -- showing ----------------------------------------------------------------------------------------

    def on_mount(self) -> None:
        """The first picture."""
        self.bench.paint_screen(self)

    def on_resize(self, event: events.Resize) -> None:
        """Rows for the new size."""
        self.query_one(TooSmall).fit(event.size.width, event.size.height)
        found = layout(event.size.width, event.size.height)
        if found is not None:
            self._place(found)

    def _place(self, found: Layout) -> None:
        for name in (*ORDER, "keys"):
            self.query_one(f"#rule-{name}").display = name in found.rules
        for name in ORDER:
            self.query_one(f"#band-{name}").styles.height = getattr(found, name)
        pictures = self.query_one(Pictures)
        pictures.display = found.pictures
        pictures.styles.width = PICTURE
        for block, names in (("#upper", ORDER[:3]), ("#lower", ORDER[3:])):
            bands_and_rules = sum(getattr(found, name) for name in names) + len(found.rules & set(names))
            self.query_one(block).styles.height = bands_and_rules

    def update_run(self) -> None:
        """Paint what has changed since the last time."""
        view = self.make_view()
        before, self.shown = self.shown, view
        if before is None or before.header != view.header:
            self.query_one("#header", Line).refresh()
        for name in ORDER:
            part = getattr(view, name)
            if before is None or getattr(before, name) != part:
                self._show(name, view, fresh=before is None or before.do != view.do)
        self.query_one(Pictures).show(view.pictures)
        self._lead_on()

    def _lead_on(self) -> None:
        """The screens a state of the run asks for: the four questions, a quick sequence."""
        ledger = self.desk.ledger
        up = [type(screen) for screen in self.app.screen_stack]
        if SafeScreen in up or ledger.safe is not None or ledger.outcome is not None:
            return
        line = ledger.present
        if ledger.gap_open:
            if GapScreen not in up:
                self.app.push_screen(GapScreen(self.desk))
            return
        items_left = line is not None and len(ledger.entry.quick) < len(line.quick)
        if items_left and QuickScreen not in up:
            self.app.push_screen(QuickScreen(self.desk))

    def make_view(self) -> RunView:
        """What the run has to show now."""
        return run_view(self.desk, self.bench.rehearsal_mark)

    def _show(self, name: str, view: RunView, fresh: bool) -> None:
        band = self.query_one(f"#band-{name}", Band)
        if fresh:
            band.first_page()
        glyphs = self.bench.glyphs
        band.show(lambda width, height, page: bands.band_rows(name, view, width, height, page, glyphs))

    # -- keys -------------------------------------------------------------------------------------------

    async def action_go_on(self) -> None:
        """Enter: there only where ON? says yes."""
        if not may_go_on(self.desk):
            return
        said = await do(self.desk, Finish() if may_finish(self.desk) else GoOn())
        if said:
            self.bench.say(said, loud=True)

    def action_turn(self, pages: int) -> None:
        """The next page of every band that has more than it can show."""
        for band in self.query(Band):
            band.turn(pages)
