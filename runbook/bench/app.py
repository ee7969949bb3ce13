"""The application: keys that work everywhere, endings, and the one path by which it is left.

It holds no rules of a run. What is shown comes from the conductor's standing, what is done goes to it as an act.
The screens follow each other in `journey`; this module only keeps what must hold whatever screen is up: make safe
first, nothing typed is lost, no key that waited behind a stall, no exit without a question.

What a run needs is imported when one is opened: the first screen is painted without it.
"""

from __future__ import annotations

import asyncio
import contextlib
import gc
import signal
import time
from collections.abc import Awaitable, Callable
from typing import TYPE_CHECKING, Any, ClassVar

from textual import events
from textual._styles_cache import StylesCache
from textual.app import App
from textual.binding import Binding, BindingType
from textual.css.query import NoMatches
from textual.screen import Screen

from runbook.bench.place import Place
from runbook.bench.stall import StallGuard
from runbook.bench.style import MAKE_SAFE_KEY, STALL_S
from runbook.errors import ExitCode, RunbookError

if TYPE_CHECKING:
    from runbook.bench.pace import Pace
    from runbook.bench.screens.run import RunScreen
    from runbook.drawing import Glyphs
    from runbook.run.conductor import Conductor

Journey = Callable[["BenchApp"], Awaitable[int]]
"""Shows one screen after the other; its result is the exit code."""
REFRESH_S = 0.5
"""[s] between two looks at the clock; ages and times are shown in whole seconds."""
PAINT_S = 0.05
"""[s] three frames: layout and painting go in steps, and whatever is loaded between them holds them up."""
TYPING_S = 0.1
"""[s] after a key; the next one is likely."""
TIDY_S = 1.0
"""[s] between two collections: each screen leaves a thousand objects, a hundred at once hold up a key by 0.1 s."""
LEAVING_S = 1.0
"""[s] the last event may take to reach the disk when the terminal is closed."""


class BenchApp(App[int]):
    """One session at the bench."""

    TITLE = "runbook"
    ENABLE_COMMAND_PALETTE = False
    AUTO_FOCUS = None
    BINDINGS: ClassVar[list[BindingType]] = [
        # Priority: they reach through every panel and every half-typed field.
        Binding(MAKE_SAFE_KEY, "make_safe", "make safe", show=False, priority=True),
        Binding("ctrl+q", "quit", "leave", show=False, priority=True),
        Binding("ctrl+c", "quit", "leave", show=False, priority=True),
    ]

    def __init__(self, journey: Journey, *, ascii_only: bool = False, drop_stalled: bool = True) -> None:
        """Show `journey`; without `drop_stalled` every key counts, however late."""
        super().__init__()
        self._journey = journey
        self._ascii_only = ascii_only
        self.desk: Conductor | None = None
        """The open run; None before one is opened."""
        self.pace: Pace | None = None
        """The clock of a rehearsal; None at the vessel."""
        self.rehearsal_mark = ""
        """REHEARSAL and its speed; empty at the vessel."""
        self.drafts: dict[str, str] = {}
        """What was typed and neither finished nor thrown away."""
        self.painted = asyncio.Event()
        """The first screen stands; what comes now may take its time."""
        self.failed: RunbookError | None = None
        """Why the session could not go on; said when the screen is gone."""
        self.ended = asyncio.Event()
        """The run is over: closed, or left."""
        self.leaving = False
        self._heard: int | None = None
        """Number of the entry whose bell was heard."""
        self._keyed = 0.0
        """[s] when the last key came."""
        self._guard = StallGuard(time.monotonic()) if drop_stalled else None

    # -- beginning --------------------------------------------------------------------------------------

    def on_mount(self) -> None:
        """Endings first: from here on a closed terminal is noticed."""
        loop = asyncio.get_running_loop()
        for name in ("SIGHUP", "SIGTERM"):
            if (number := getattr(signal, name, None)) is not None:
                # Windows and threads without signals do without; the journal leans on none of it.
                with contextlib.suppress(NotImplementedError, RuntimeError, ValueError):
                    loop.add_signal_handler(number, self._hung_up)
        if self._guard is not None:
            self._guard.beats(time.monotonic())
            self.set_interval(STALL_S / 3.0, self._beat)
            self.set_interval(TIDY_S, _tidy)
        self.set_interval(REFRESH_S, self.look)
        self.run_worker(self._begin(), name="journey", exit_on_error=True)

    async def _begin(self) -> None:
        try:
            self.exit(await self._journey(self))
        except RunbookError as error:
            self.failed = error
            self.exit(int(error.exit_code))

    @property
    def glyphs(self) -> Glyphs:
        """What pictures are drawn with."""
        from runbook.drawing import ASCII, UNICODE

        return ASCII if self._ascii_only else UNICODE

    def stands(self) -> None:
        """Said by a first screen when it is mounted; it is on the terminal a few frames of the toolkit later."""
        self.set_timer(PAINT_S, self.painted.set)

    # -- the run ----------------------------------------------------------------------------------------

    def take(self, desk: Conductor, pace: Pace | None = None) -> None:
        """The run that the screens show from now on."""
        self.desk, self.pace = desk, pace
        if self._guard is not None:
            # The plan stays to the end: walking through it again and again holds up keys.
            gc.freeze()
        desk.changed = self.changed
        self._mark()

    def changed(self) -> None:
        """Something that is shown has changed; painted in the next turn of the loop."""
        self.call_later(self.paint)

    def paint(self) -> None:
        """Every screen that shows the run anew, also beneath a panel."""
        self._mark()
        for screen in self.screen_stack:
            if screen.is_mounted:
                self.paint_screen(screen)
        if not isinstance(self.screen, Place):
            # What lies beneath a panel is painted with it.
            self.screen.refresh()
        if self.desk is not None and self.desk.ledger.outcome is not None:
            self.ended.set()

    def paint_screen(self, screen: Screen[Any]) -> None:
        """One screen anew, if it shows the run; one that is still being filled once more a little later."""
        update = getattr(screen, "update_run", None)
        if update is None:
            return
        try:
            update()
        except NoMatches:
            self.set_timer(PAINT_S, self.paint)

    async def look(self) -> None:
        """The clock looks."""
        if self.desk is None or self.ended.is_set():
            return
        if self.pace is not None:
            self.pace.follow(self.desk.ledger)
            for name, words in self.pace.news():
                await self.desk.fault_began(name, words)
        await self.desk.tick()
        self.paint()
        self._ring()

    def _mark(self) -> None:
        if self.pace is not None:
            self.rehearsal_mark = f"REHEARSAL {self.pace.words}".strip()
        elif self.desk is not None and self.desk.ledger.rehearsal:
            # Taken up again at the bench: its record still says what it was.
            self.rehearsal_mark = "REHEARSAL"

    def _ring(self) -> None:
        """The bell once for every look while the way back stands and nobody has said that it was heard."""
        ledger = None if self.desk is None else self.desk.ledger
        turned = ledger is not None and ledger.entry.turned_back is not None and ledger.safe is None
        if turned and ledger is not None and self._heard != ledger.entry.seq:
            self.bell()

    def bell_heard(self) -> None:
        """Stop the bell for this time."""
        if self.desk is not None:
            self._heard = self.desk.ledger.entry.seq

    # -- keys -------------------------------------------------------------------------------------------

    def typing(self) -> bool:
        """Whether a key came just now, so that whatever can wait should."""
        return time.monotonic() - self._keyed < TYPING_S

    async def on_event(self, event: events.Event) -> None:
        """Keys that waited behind a stall are dropped, all but make safe."""
        if isinstance(event, events.Key):
            self._keyed = time.monotonic()
        if (
            self._guard is not None
            and isinstance(event, (events.Key, events.Paste))
            and not event.is_forwarded
            and not (isinstance(event, events.Key) and event.key == MAKE_SAFE_KEY)
            and self._guard.waited(event.time, time.monotonic())
        ):
            return
        await super().on_event(event)

    def _beat(self) -> None:
        if self._guard is None:
            return
        self._guard.beats(time.monotonic())
        if self._guard.dropped and time.monotonic() > self._guard.drop_until:
            count, self._guard.dropped = self._guard.dropped, 0
            keys = "1 key" if count == 1 else f"{count} keys"
            self.say(f"The screen was stuck; {keys} pressed meanwhile did not count. F9 would have.", loud=True)

    def say(self, words: str, *, loud: bool = False) -> None:
        """A sentence at the edge of the screen, never markup."""
        self.notify(words, severity="warning" if loud else "information", markup=False, timeout=8.0)

    async def action_make_safe(self) -> None:
        """From everywhere, over everything; with nothing open it says what can be said."""
        from runbook.bench.screens.safe import SafeScreen

        if self.desk is None or self.ended.is_set():
            self.say("No run is open here. Heat off, stay back; open the vessel's run to see its acts.", loud=True)
            return
        if isinstance(self.screen, SafeScreen):
            return
        from runbook.run.acts import MakeSafe

        await self.desk.act(MakeSafe())
        if not any(isinstance(screen, SafeScreen) for screen in self.screen_stack):
            self.push_screen(SafeScreen(self.desk))
        else:
            # A panel over make safe: what was typed stays a draft, the acts come back into view.
            while not isinstance(self.screen, SafeScreen):
                self.pop_screen()

    # -- endings ----------------------------------------------------------------------------------------

    async def action_quit(self) -> None:
        """The one path by which the tool is left; it asks while a run is open."""
        from runbook.bench.screens.leave import LeaveScreen

        if self.desk is None or self.ended.is_set():
            self.exit(int(ExitCode.GOOD) if self.desk is None else None)
            return
        if not isinstance(self.screen, LeaveScreen):
            self.push_screen(LeaveScreen(self.desk), self._left)

    async def _left(self, leave: bool | None) -> None:
        if leave:
            await self.leave()

    async def leave(self) -> None:
        """Leave the tool with the run unfinished, which the record says."""
        if self.leaving:
            return
        self.leaving = True
        if self.desk is not None and not self.ended.is_set():
            from runbook.run.acts import LeaveTool

            await self.desk.act(LeaveTool())
            with contextlib.suppress(TimeoutError):
                await asyncio.wait_for(self.desk.settled(), LEAVING_S)
        self.exit(int(ExitCode.NOT_GOOD))

    def _hung_up(self) -> None:
        """The terminal is gone or the system ends us: nobody can be asked."""
        self.run_worker(self.leave(), name="leave", exit_on_error=False)

    @property
    def run_screen(self) -> RunScreen | None:
        """The run's own screen, where it is up."""
        from runbook.bench.screens.run import RunScreen

        return next((screen for screen in self.screen_stack if isinstance(screen, RunScreen)), None)


def _tidy() -> None:
    """Throw away what closed screens have left, before it is so much that a key has to wait for it."""
    # The toolkit keeps the painted rows of a thousand widgets that are gone, as keys of a memory of colours.
    forget = getattr(getattr(StylesCache, "get_inner_outer", None), "cache_clear", None)
    if forget is not None:
        forget()
    gc.collect()
