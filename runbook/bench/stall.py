"""Keys that waited behind a stall are not meant for what stands on the screen now.

A stalled loop delivers every key of the meantime afterwards, all at once. Whoever pressed Enter twice because
nothing happened must not enter two steps. Pure: times come in, a judgement comes out.
"""

from __future__ import annotations

from dataclasses import dataclass

from runbook.bench.style import STALL_S


@dataclass
class StallGuard:
    """Watches the beat of the loop, in its own seconds."""

    beat: float
    """[s] when the loop was last seen alive."""
    drop_until: float = 0.0
    """[s] keys that come before it were queued."""
    dropped: int = 0
    """Keys dropped since it was last said."""

    def beats(self, now: float) -> None:
        """The loop is alive at `now` [s]."""
        if now - self.beat > STALL_S:
            # The queued keys come in the turns of the loop that follow at once.
            self.drop_until = now + STALL_S / 2.0
        self.beat = now

    def waited(self, pressed: float, now: float) -> bool:
        """Whether a key pressed at `pressed` [s], handled at `now` [s], waited behind a stall; counts it."""
        late = now - pressed > STALL_S or now - self.beat > STALL_S or now < self.drop_until
        self.dropped += late
        return late
