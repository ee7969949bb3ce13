"""Keys that waited behind a stall do not count."""

from __future__ import annotations

from runbook.bench.stall import StallGuard


def test_keys_in_time_count() -> None:
    """While the loop beats, keys are handled."""
    guard = StallGuard(10.0)
    guard.beats(10.1)

    assert not guard.waited(pressed=10.15, now=10.16)
    assert guard.dropped == 0


def test_a_key_that_waited_is_dropped() -> None:
    """A key older than the limit was meant for another screen."""
    guard = StallGuard(10.0)
    guard.beats(10.9)
    guard.beats(11.2)

    assert guard.waited(pressed=10.85, now=11.2)
    assert guard.dropped == 1


def test_keys_stamped_late_are_dropped_too() -> None:
    """A stall that holds the interpreter stamps its keys only afterwards: those that come at once are dropped."""
    guard = StallGuard(10.0)

    assert guard.waited(pressed=12.0, now=12.0)
    guard.beats(12.0)
    assert guard.waited(pressed=12.01, now=12.02)
    guard.beats(12.1)
    guard.beats(12.2)
    assert not guard.waited(pressed=12.3, now=12.3)
    assert guard.dropped == 2
