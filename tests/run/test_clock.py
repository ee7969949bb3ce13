"""Clocks: ages are never too young, waits never too long, whatever the wall clock does."""

from __future__ import annotations

import math
import sys
import time
from datetime import UTC, datetime, timedelta
from pathlib import Path

import pytest
from hypothesis import given
from hypothesis import strategies as st

from runbook.run.clock import JUMP, FakeClock, Moment, ScaledClock, SystemClock, utc_text, utc_wall

CLOSE = 1e-6
"""[s] floats of the size of a wall clock hold a quarter of a microsecond."""


def test_age_is_the_time_that_passed() -> None:
    """Where both clocks agree, an age is the time that passed."""
    clock = FakeClock()
    earlier = clock.now()
    clock.advance(600.0)
    assert clock.now().age(earlier) == pytest.approx(600.0, abs=CLOSE)


def test_age_counts_the_sleep_of_the_machine() -> None:
    """A reading grows older while the machine sleeps."""
    clock = FakeClock()
    earlier = clock.now()
    clock.sleep(3600.0)
    assert clock.now().age(earlier) == pytest.approx(3600.0, abs=CLOSE)


@pytest.mark.parametrize("jump", [-86400.0, -3600.0, -JUMP - 0.1, JUMP + 0.1, 3600.0])
def test_a_jump_of_the_wall_clock_makes_stale(jump: float) -> None:
    """A wall clock that jumped, either way, makes everything taken before infinitely old."""
    clock = FakeClock()
    earlier = clock.now()
    clock.advance(10.0)
    clock.jump_wall(jump)
    assert clock.now().age(earlier) == math.inf


@pytest.mark.parametrize(("jump", "age"), [(-4.0, 10.0), (4.0, 14.0)])
def test_a_small_correction_takes_the_larger(jump: float, age: float) -> None:
    """A small correction of the wall clock never makes a reading younger than the elapsed clock says."""
    clock = FakeClock()
    earlier = clock.now()
    clock.advance(10.0)
    clock.jump_wall(jump)
    assert clock.now().age(earlier) == pytest.approx(age, abs=CLOSE)


@pytest.mark.parametrize("up", [1.0, 999.0, 5000.0])
def test_a_restart_makes_stale(up: float) -> None:
    """After a restart all that was taken before is infinitely old, however long the machine has been up."""
    clock = FakeClock(boot=1000.0)
    earlier = clock.now()
    clock.restart(down=60.0, up=up)
    assert clock.now().age(earlier) == math.inf


def test_a_restart_with_a_wall_clock_that_began_anew_makes_stale() -> None:
    """A machine without a clock of its own restarts both: the smaller elapsed time alone must tell."""
    assert Moment(boot=100.0, wall=100.0).age(Moment(boot=500.0, wall=500.0)) == math.inf


@pytest.mark.parametrize("bad", [math.nan, math.inf])
def test_an_age_from_no_number_is_infinite(bad: float) -> None:
    """A clock that gives no number makes stale, never fresh."""
    good = Moment(10.0, 10.0)
    assert Moment(bad, 10.0).age(good) == math.inf
    assert Moment(10.0, bad).age(good) == math.inf
    assert good.age(Moment(math.nan, 10.0)) == math.inf


@given(boot=st.floats(-1e6, 1e6), wall=st.floats(-1e6, 1e6))
def test_an_age_is_never_under_either_clock(boot: float, wall: float) -> None:
    """An age is never below what either clock says, and a wait never above the elapsed clock."""
    start = Moment(0.0, 0.0)
    now = Moment(boot, wall)
    assert now.age(start) >= max(boot, wall)
    assert 0.0 <= now.lasted(start) <= max(boot, 0.0)


def test_a_wait_is_not_shortened_by_the_wall_clock() -> None:
    """Setting the wall clock forward does not make a wait pass, and a restart begins it anew."""
    clock = FakeClock(boot=1000.0)
    earlier = clock.now()
    clock.advance(5.0)
    clock.jump_wall(3600.0)
    assert clock.now().lasted(earlier) == pytest.approx(5.0, abs=CLOSE)
    clock.restart(down=60.0, up=20.0)
    assert clock.now().lasted(earlier) == 0.0


def test_fake_time_never_goes_back() -> None:
    """Elapsed time cannot be turned back, not even in a test."""
    for clock in (FakeClock(), ScaledClock(FakeClock())):
        turn = clock.advance if isinstance(clock, FakeClock) else clock.skip
        for bad in (-1.0, math.nan, math.inf):
            with pytest.raises(ValueError, match="seconds from zero up"):
                turn(bad)


def test_the_system_clock_gives_elapsed_and_wall_time() -> None:
    """The real clock never goes back, and its wall time is that of the machine."""
    clock = SystemClock()
    first, wall, second = clock.now(), time.time(), clock.now()
    assert first.boot <= second.boot
    assert wall == pytest.approx(first.wall, abs=5.0)
    assert second.age(first) < 5.0


@pytest.mark.skipif(sys.platform != "linux", reason="the file is Linux's own")
def test_the_system_clock_counts_from_the_start_of_the_machine() -> None:
    """On Linux elapsed time is the time since the start, sleep included, as the kernel tells in /proc/uptime."""
    uptime = float(Path("/proc/uptime").read_text(encoding="ascii").split()[0])
    assert SystemClock().now().boot == pytest.approx(uptime, abs=5.0)


def test_scaled_time_runs_faster_from_where_it_was_told() -> None:
    """A change of speed acts from then on and never on what has passed."""
    base = FakeClock()
    clock = ScaledClock(base, 60.0)
    start = clock.now()
    assert start == base.now()
    base.advance(2.0)
    assert clock.now().age(start) == pytest.approx(120.0, abs=CLOSE)
    clock.set_speed(1.0)
    assert clock.speed == 1.0
    base.advance(3.0)
    assert clock.now().age(start) == pytest.approx(123.0, abs=CLOSE)


def test_scaled_time_stops_and_goes_on() -> None:
    """While paused no time passes, and none is made up for afterwards; a speed set meanwhile waits."""
    base = FakeClock()
    clock = ScaledClock(base, 10.0)
    start = clock.now()
    clock.pause()
    assert clock.paused
    base.advance(100.0)
    clock.set_speed(600.0)
    base.advance(100.0)
    assert clock.now() == start
    clock.skip(30.0)
    base.advance(100.0)
    clock.go_on()
    assert not clock.paused
    base.advance(1.0)
    assert clock.now().age(start) == pytest.approx(630.0, abs=CLOSE)


def test_scaled_time_ignores_the_wall_clock_of_its_base() -> None:
    """Setting the machine's clock changes nothing in a rehearsal."""
    base = FakeClock()
    clock = ScaledClock(base, 1.0)
    start = clock.now()
    base.jump_wall(9000.0)
    base.advance(1.0)
    assert clock.now().age(start) == pytest.approx(1.0, abs=CLOSE)


@pytest.mark.parametrize("factor", [0.0, 0.99, 600.1, -1.0, math.nan, math.inf])
def test_speeds_outside_their_range_are_refused(factor: float) -> None:
    """A rehearsal runs 1 to 600 times as fast and refuses anything else, leaving the speed as it was."""
    clock = ScaledClock(FakeClock(), 5.0)
    with pytest.raises(ValueError, match="1 to 600"):
        clock.set_speed(factor)
    assert clock.speed == 5.0
    with pytest.raises(ValueError, match="1 to 600"):
        ScaledClock(FakeClock(), factor)


def test_utc_text_of_known_moments() -> None:
    """Texts of moments that POSIX and the calendar fix."""
    assert utc_text(0.0) == "1970-01-01T00:00:00.000Z"
    # 2^31 - 1, the last second of a signed 32-bit clock.
    assert utc_text(2147483647.0) == "2038-01-19T03:14:07.000Z"
    assert utc_text(951782400.5) == "2000-02-29T00:00:00.500Z"
    assert utc_text(-0.001) == "1969-12-31T23:59:59.999Z"
    assert utc_text(0.9996) == "1970-01-01T00:00:01.000Z"


@given(st.floats(-6e10, 2.5e11))
def test_utc_text_reads_back(wall: float) -> None:
    """A text reads back to the same moment within 0.5 ms, and agrees with the calendar of the standard library."""
    text = utc_text(wall)
    # Half a millisecond, and what a float of this size cannot hold.
    assert utc_wall(text) == pytest.approx(wall, abs=0.0005 + 4e-5)
    assert utc_text(utc_wall(text)) == text
    there = datetime.fromisoformat(text) - datetime(1970, 1, 1, tzinfo=UTC)
    assert abs(there - timedelta(seconds=wall)) <= timedelta(milliseconds=0.6)


@pytest.mark.parametrize("wall", [math.nan, math.inf, 1e300, -1e12, 1e12])
def test_no_text_for_no_time(wall: float) -> None:
    """What lies outside the calendar has no text."""
    with pytest.raises(ValueError, match="wall clock gives"):
        utc_text(wall)


@pytest.mark.parametrize(
    "text",
    ["", "now", "2031-03-02", "2031-03-02T14:32:07Z", "2031-03-02T14:32:07.123", "2031-03-02T14:32:07.123+00:00",
     "2031-03-02T14:32:07.123+01:00", "2031-02-30T14:32:07.123Z", "2031-03-02 14:32:07.123Z"],
)
def test_other_spellings_of_a_time_are_refused(text: str) -> None:
    """A time has one spelling in the record."""
    with pytest.raises(ValueError, match=r"time|isoformat|day"):
        utc_wall(text)
