"""How soon the screen is there and how soon a key is answered, in a real terminal, as ratios and milliseconds.

    python tests/benchmarks/bench_screen.py

First paint is compared with an empty Textual app started in the same way. Keys are timed from the write to the
first byte of the answer on the screen: while the property library loads in its process, and while the values on the
screen change five times a second. Run by hand; goals: 1.25 x the empty app, 99 % of keys within 50 ms.
"""

from __future__ import annotations

import fcntl
import os
import pty
import select
import signal
import statistics
import struct
import sys
import termios
import time
from collections.abc import Iterator
from contextlib import contextmanager
from pathlib import Path

ROOT = Path(__file__).resolve().parents[2]
ROUNDS = 7
EMPTY = """
from textual.app import App
from textual.widgets import Static
class Empty(App):
    def compose(self):
        yield Static("READY")
Empty().run()
"""
LIST = """
import sys
from runbook.bench.journey import Session
from runbook.bench.launch import run_screens
from runbook.run.logbook import Logbook
from pathlib import Path
run_screens(Session(Logbook(Path(sys.argv[1])), "2031-03-02"))
"""
RUN = """
import asyncio, sys
from dataclasses import replace
import runbook.bench.app as app_module
from runbook.bench.app import BenchApp
from runbook.bench.screens.run import RunScreen
from runbook.run.acts import GoOn
from runbook.run.engine import ChildEngine
from tests.bench import scenes
app_module.REFRESH_S = 0.2
async def journey(app):
    desk, _, clock = await scenes.desk(scenes.plan(scenes.LINES[1:]))
    await desk.act(GoOn())
    app.take(desk)
    app.push_screen(RunScreen(desk))
    # Time on the screen goes on, so that ages and the clock are painted anew at every look.
    app.set_interval(0.2, lambda: clock.advance(1.0))
    engine = ChildEngine()
    if sys.argv[1] == "loads":
        while True:
            await engine.warm()
            await engine.close()
    await app.ended.wait()
    return 0
BenchApp(journey).run()
"""


@contextmanager
def terminal(code: str, *arguments: str) -> Iterator[tuple[int, float]]:
    """A program in a terminal of 80x24: (its descriptor, when it was started [s])."""
    began = time.perf_counter()
    child, descriptor = pty.fork()
    if child == 0:
        os.chdir(ROOT)
        os.environ.update(TERM="xterm-256color", PYTHONPATH=str(ROOT), TEXTUAL_ANIMATIONS="none")
        os.execv(sys.executable, [sys.executable, "-c", code, *arguments])
    fcntl.ioctl(descriptor, termios.TIOCSWINSZ, struct.pack("HHHH", 24, 80, 0, 0))
    try:
        yield descriptor, began
    finally:
        os.kill(child, signal.SIGKILL)
        os.waitpid(child, 0)
        os.close(descriptor)


def seen(descriptor: int, marker: bytes, limit_s: float = 15.0) -> float:
    """When `marker` has come on the screen [s]; what came before it is read and thrown away."""
    buffer = b""
    until = time.perf_counter() + limit_s
    while time.perf_counter() < until:
        if select.select([descriptor], [], [], 0.2)[0]:
            try:
                buffer += os.read(descriptor, 65536)
            except OSError:
                break
            if marker in buffer:
                return time.perf_counter()
    raise SystemExit(f"{marker!r} never came; last: {buffer[-600:]!r}")


def first_paint(code: str, marker: bytes, *arguments: str) -> float:
    """Median time from start to the marker [s]."""
    times = []
    for _ in range(ROUNDS):
        with terminal(code, *arguments) as (descriptor, began):
            times.append(seen(descriptor, marker) - began)
    return statistics.median(times)


def key_times(mode: str, count: int) -> list[float]:
    """Times from a key to its screen [s]: F2 opens the keys, Esc goes back."""
    times = []
    with terminal(RUN, mode) as (descriptor, _):
        seen(descriptor, b"F9 MAKE SAFE")
        time.sleep(1.0)
        for i in range(count):
            key, marker = (b"\x1bOQ", b"never refused") if i % 2 == 0 else (b"\x1b[27u", b"CEILING")
            began = time.perf_counter()
            os.write(descriptor, key)
            times.append(seen(descriptor, marker) - began)
            time.sleep(0.02)
    return sorted(times)


def say(name: str, times: list[float]) -> None:
    """Median, 99th percentile and largest [ms]."""
    at = min(len(times) - 1, int(0.99 * len(times)))
    print(
        f"{name:<34} median {1e3 * statistics.median(times):5.1f} ms, 99 % within {1e3 * times[at]:5.1f} ms, "
        f"largest {1e3 * times[-1]:5.1f} ms ({len(times)} keys)"
    )


def main() -> None:
    """Print every number."""
    count = int(sys.argv[1]) if len(sys.argv) > 1 else 200
    empty = first_paint(EMPTY, b"READY")
    listed = first_paint(LIST, b"TRY IT WITHOUT A VESSEL", str(ROOT / "no logbook here"))
    run = first_paint(RUN, b"F9 MAKE SAFE", "still")
    print(f"empty Textual app   {1e3 * empty:6.0f} ms")
    print(f"list                {1e3 * listed:6.0f} ms   {listed / empty:.2f} x")
    print(f"run screen          {1e3 * run:6.0f} ms   {run / empty:.2f} x")
    say("keys while the library loads", key_times("loads", count))
    say("keys at five updates a second", key_times("still", count))


if __name__ == "__main__":
    main()
