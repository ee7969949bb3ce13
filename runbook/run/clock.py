"""Time is a parameter: everything that asks for the time is handed a clock.

A moment carries two readings because neither is enough alone. The wall clock can be set, also while a vessel
is warm; the monotonic clock of many systems stops while the machine sleeps. So elapsed time comes from a clock
that goes on during sleep where there is one, and the wall clock serves the record and as a second witness.
The module refuses to guess: where the two disagree, an age is infinite, and whatever leaned on it is stale.
"""

from __future__ import annotations

import math
import sys
import time
from dataclasses import dataclass
from datetime import UTC, datetime, timedelta
from typing import Final, Protocol

JUMP: Final = 5.0
"""[s] how far the two clocks may part between two moments before the wall clock counts as having jumped.
Generous against a clock that is corrected by slewing (0.5 ms per second at most), tight against one that is set."""

SLOWEST: Final = 1.0
"""[1] a rehearsal never runs slower than the bench."""
FASTEST: Final = 600.0
"""[1] ten minutes a second: beyond it nobody could follow."""

_EPOCH: Final = datetime(1970, 1, 1, tzinfo=UTC)


@dataclass(frozen=True, slots=True)
class Moment:
    """One instant, as both clocks give it."""

    boot: float
    """[s] elapsed since an arbitrary start; never goes back while the machine is up, and goes on during sleep
    where the system has such a clock."""
    wall: float
    """[s] since 1970-01-01 UTC; may jump either way."""

    def age(self, earlier: Moment) -> float:
        """How old something taken at `earlier` is now [s], never too young.

        The larger of both differences; where the wall clock went back a little, the elapsed one stands.
        Infinite where the machine was restarted in between (its elapsed time is smaller than it was), and where
        the clocks part by more than `JUMP` in either direction: then the wall clock was set, or the machine was
        restarted and has been up for longer than before, or the elapsed clock stood still, and from here these
        cannot be told apart. For how long something has lasted at least, ask `lasted`.
        """
        boot, wall = self.boot - earlier.boot, self.wall - earlier.wall
        # Written so that a NaN in either clock also ends here.
        if not (boot >= 0.0 and abs(wall - boot) <= JUMP):
            return math.inf
        return max(boot, wall)

    def lasted(self, earlier: Moment) -> float:
        """How long it has been since `earlier` [s], never too long; for waits that must have passed.

        By the elapsed clock alone, which nobody can set; zero where that is smaller than it was, because the
        machine was restarted in between.
        """
        boot = self.boot - earlier.boot
        return boot if boot > 0.0 else 0.0


class Clock(Protocol):
    """Whatever can say what time it is."""

    def now(self) -> Moment:
        """The present moment."""
        ...


class SystemClock:
    """The clocks of this machine."""

    def now(self) -> Moment:
        """Both clocks, read one directly after the other."""
        return Moment(boot=_elapsed(), wall=time.time())


def _elapsed() -> float:
    """Elapsed time [s] from the clock of this system that goes on during sleep."""
    if sys.platform == "linux":
        return time.clock_gettime(time.CLOCK_BOOTTIME)
    if sys.platform == "darwin":
        # There CLOCK_MONOTONIC goes on during sleep, and time.monotonic() is another clock, which does not.
        return time.clock_gettime(time.CLOCK_MONOTONIC)
    return time.monotonic()


class FakeClock:
    """A clock that moves only when told to, and can be made to jump."""

    def __init__(self, boot: float = 1000.0, wall: float = 1_930_000_000.0) -> None:
        """Start at these readings: `boot` [s] elapsed, `wall` [s] since 1970 UTC."""
        self._boot = boot
        self._wall = wall

    def now(self) -> Moment:
        """Where the clock stands."""
        return Moment(self._boot, self._wall)

    def advance(self, seconds: float) -> None:
        """Let time pass [s]; never back."""
        if not (math.isfinite(seconds) and seconds >= 0.0):
            raise ValueError(f"time passes by a finite number of seconds from zero up, not by {seconds}")
        self._boot += seconds
        self._wall += seconds

    def sleep(self, seconds: float) -> None:
        """The machine sleeps [s]; both clocks have gone on when it wakes."""
        self.advance(seconds)

    def jump_wall(self, seconds: float) -> None:
        """Somebody sets the wall clock, by this much [s], either way."""
        self._wall += seconds

    def restart(self, down: float = 60.0, up: float = 20.0) -> None:
        """The machine is off for `down` [s] and has then been up for `up` [s]."""
        self._wall += down + up
        self._boot = up


class ScaledClock:
    """A clock for rehearsals: time runs `factor` times as fast as on its base, can be stopped and skipped.

    Starts at the moment of its base. Its own wall clock never jumps: a rehearsal is not about the clock of
    the machine it runs on, so only the elapsed time of the base is used.
    """

    def __init__(self, base: Clock, factor: float = 1.0) -> None:
        """Run on `base`, `factor` [1] times as fast, from SLOWEST to FASTEST."""
        self._base = base
        self._from = base.now().boot
        self._shown = base.now()
        self._factor = _speed(factor)
        self._paused = False

    @property
    def speed(self) -> float:
        """[1] seconds here for a second of the base while not paused."""
        return self._factor

    @property
    def paused(self) -> bool:
        """Whether time stands still here."""
        return self._paused

    def now(self) -> Moment:
        """The present moment of the rehearsal."""
        passed = 0.0 if self._paused else max(0.0, self._base.now().boot - self._from) * self._factor
        return Moment(self._shown.boot + passed, self._shown.wall + passed)

    def set_speed(self, factor: float) -> None:
        """Go on from here `factor` [1] times as fast as the base; refused outside SLOWEST to FASTEST."""
        wanted = _speed(factor)
        self._settle()
        self._factor = wanted

    def pause(self) -> None:
        """Stop here until `go_on`."""
        self._settle()
        self._paused = True

    def go_on(self) -> None:
        """Run again after `pause`, from where it stopped."""
        self._settle()
        self._paused = False

    def skip(self, seconds: float) -> None:
        """Be `seconds` [s] of the rehearsal later at once, also while paused; never back."""
        if not (math.isfinite(seconds) and seconds >= 0.0):
            raise ValueError(f"time is skipped by a finite number of seconds from zero up, not by {seconds}")
        self._settle()
        self._shown = Moment(self._shown.boot + seconds, self._shown.wall + seconds)

    def _settle(self) -> None:
        """Count what has passed so far, so that a change acts from here on only."""
        self._shown = self.now()
        self._from = self._base.now().boot


def _speed(factor: float) -> float:
    if not SLOWEST <= factor <= FASTEST:
        raise ValueError(f"a rehearsal runs {SLOWEST:g} to {FASTEST:g} times as fast, not {factor}")
    return factor


def utc_text(wall: float) -> str:
    """A wall time [s since 1970 UTC] as '2031-03-02T14:32:07.123Z', rounded to 1 ms.

    Raises ValueError where it is not finite or lies outside the years 1 to 9999.
    """
    if not math.isfinite(wall):
        raise ValueError(f"the wall clock gives {wall}, which is no time")
    try:
        moment = _EPOCH + timedelta(milliseconds=round(wall * 1000.0))
    except OverflowError:
        raise ValueError(f"the wall clock gives {wall} s since 1970, outside the years 1 to 9999") from None
    return moment.isoformat(timespec="milliseconds").replace("+00:00", "Z")


def utc_wall(text: str) -> float:
    """The wall time [s since 1970 UTC] of a text as `utc_text` writes it; ValueError for any other."""
    moment = datetime.fromisoformat(text)
    wall = (moment - _EPOCH) / timedelta(seconds=1) if moment.tzinfo is UTC else math.nan
    if math.isnan(wall) or utc_text(wall) != text:
        raise ValueError(f"'{text}' is not a time as it is written here: 2031-03-02T14:32:07.123Z")
    return wall
