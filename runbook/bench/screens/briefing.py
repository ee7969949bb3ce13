"""The briefing: numbers of the plan, and the few things of the day that change them."""

from __future__ import annotations

import contextlib
from collections.abc import Awaitable, Callable, Iterable
from dataclasses import replace
from typing import ClassVar

from textual.binding import Binding, BindingType
from textual.containers import VerticalScroll
from textual.widget import Widget
from textual.worker import WorkerCancelled

from runbook.answers import BindRequest, ChargeBox
from runbook.bench.briefing_rows import briefing_rows
from runbook.bench.place import Keys, Place
from runbook.bench.rows import EMPTY, Row, wrapped
from runbook.bench.screens.ask import AskPanel
from runbook.bench.screens.faults import FaultScreen
from runbook.bench.widgets.lines import Lines
from runbook.errors import QuantityError, RunbookError
from runbook.quantities import Dimension, parse, parse_barometer
from runbook.rehearsal.faults import fault_words
from runbook.run.engine import Bound

Bind = Callable[[BindRequest], Awaitable[Bound]]


class BriefingScreen(Place[tuple[Bound, BindRequest] | None]):
    """What was agreed; None: back to the list."""

    HEADING = "BRIEFING"
    KEYS: ClassVar[Keys] = (("P C B", "change"), ("PgDn", "more"), ("Enter", "agreed, go on"), ("Esc", "back"))
    BINDINGS: ClassVar[list[BindingType]] = [
        Binding("escape", "back", show=False),
        Binding("enter", "agreed", show=False),
        Binding("p", "part", show=False),
        Binding("c", "cell", show=False),
        Binding("b", "barometer", show=False),
        Binding("f", "fault", show=False),
        Binding("pagedown", "scroll(1)", show=False),
        Binding("pageup", "scroll(-1)", show=False),
    ]

    def __init__(
        self,
        bind: Bind,
        request: BindRequest,
        recorded: ChargeBox | None,
        rehearsal: bool,
        warning: str = "",
        fault: str = "",
    ) -> None:
        """Begin with `request`; `recorded` is what the vessel's charge record says is in it.

        A simulated vessel that is closed holds what the procedure plans. `warning` stands above the numbers.
        """
        super().__init__()
        self._bind = bind
        self.request = request
        self._recorded = recorded
        self._rehearsal = rehearsal
        self._warning = warning
        self.fault = fault
        """What goes wrong on purpose in this rehearsal; empty: nothing."""
        self.bound: Bound | None = None
        self._said = ""

    def keys(self) -> Keys:
        """In a rehearsal what goes wrong can be chosen too."""
        return (("P C B F", "change"), *self.KEYS[1:]) if self._rehearsal else self.KEYS

    def body(self) -> Iterable[Widget]:
        """Numbers, as many rows as they take."""
        yield VerticalScroll(Lines(self._rows, id="numbers"), can_focus=False)

    def on_mount(self) -> None:
        """Ask for the numbers at once."""
        self._compute()

    def _compute(self) -> None:
        self.bound = None
        self._said = ""
        self._repaint()
        self.run_worker(self._computed(), exclusive=True, name="bind", exit_on_error=False)

    async def _computed(self) -> None:
        with contextlib.suppress(WorkerCancelled):
            try:
                self.bound = await self._bind(self.request)
            except RunbookError as error:
                # FileProblems come with file, line and column, all at once.
                self._said = str(error)
        self._repaint()

    def _repaint(self) -> None:
        self.query_one("#numbers", Lines).refresh(layout=True)
        self.refresh_lines()

    def _rows(self, width: int) -> list[Row]:
        if self.bound is not None:
            warning = [EMPTY, *wrapped(f" {self._warning}", width - 1, "blocked")] if self._warning else []
            wrong = fault_words(self.fault) if self._rehearsal else ""
            return [*warning, *briefing_rows(self.bound.plan, self.request, width, wrong)]
        if self._said:
            return [
                EMPTY,
                *wrapped(" This cannot be used as it stands:", width - 1, "strong"),
                EMPTY,
                *wrapped(self._said, width - 1),
                EMPTY,
                *wrapped(" Mend it, then Enter reads it again.", width - 1),
            ]
        return [EMPTY, *wrapped(" Computing the numbers; the first time takes about two seconds.", width - 1)]

    # -- keys -------------------------------------------------------------------------------------------

    def action_agreed(self) -> None:
        """On, once there are numbers; after an error: read the file again."""
        if self.bound is not None:
            self.dismiss((self.bound, self.request))
        elif self._said:
            self._compute()

    def action_back(self) -> None:
        """Back to the list."""
        self.dismiss(None)

    def action_part(self) -> None:
        """Another part of the day to begin with."""
        if self.bound is None:
            return
        part = (self.request.part + 1) % len(self.bound.plan.parts)
        self.request = replace(self.request, part=part)
        if self._rehearsal and (part > 0) != self.request.cell_closed:
            # Nobody rehearses a later part with an empty cell.
            self.action_cell()
            return
        self._compute()

    def action_cell(self) -> None:
        """The cell is open and empty, or already closed with what its record says."""
        if self.bound is None:
            return
        closed = not self.request.cell_closed
        held = self._recorded
        if self._rehearsal:
            held = ChargeBox(*self.bound.plan.planned_kg, True, ("plan",))
        self.request = replace(self.request, cell_closed=closed, charge=held if closed else None)
        if closed and held is None:
            self.bench.say("This vessel has no charge record here: a closed cell counts as brim-full.", loud=True)
        self._compute()

    def action_barometer(self) -> None:
        """The room's pressure as read, or its height above sea level."""
        words = "As read in the room, for example 1003 hPa; or the height above sea level, for example 120 m."
        self.app.push_screen(
            AskPanel("THE ROOM'S PRESSURE", words, "barometer", wrong_barometer), self._barometer_given
        )

    def _barometer_given(self, text: str | None) -> None:
        if text is None:
            return
        pressure, height = barometer_of(text)
        self.request = replace(self.request, barometer_Pa=pressure, height_m=height)
        self._compute()

    def action_fault(self) -> None:
        """Choose what goes wrong on purpose; at the vessel nothing does."""
        if self._rehearsal and self.bound is not None:
            self.app.push_screen(FaultScreen(self.fault), self._fault_chosen)

    def _fault_chosen(self, fault: str | None) -> None:
        if fault is not None:
            self.fault = fault
            self._repaint()

    def action_scroll(self, pages: int) -> None:
        """A page on or back."""
        scroll = self.query_one(VerticalScroll)
        scroll.scroll_relative(y=pages * max(1, scroll.size.height - 1), animate=False)


def barometer_of(text: str) -> tuple[float | None, float | None]:
    """(pressure [Pa], height [m]), one of them None. Raises QuantityError."""
    try:
        return parse_barometer(text), None
    except QuantityError as error:
        try:
            return None, parse(text, Dimension.LENGTH)
        except QuantityError:
            raise error from None


def wrong_barometer(text: str) -> str:
    """What is wrong with it; empty where nothing is."""
    try:
        barometer_of(text)
    except QuantityError as error:
        return str(error)
    return ""
