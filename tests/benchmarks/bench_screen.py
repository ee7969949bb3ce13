"""How soon the screen is there and how soon a key is answered, in a real terminal, as ratios and milliseconds.

    python tests/benchmarks/bench_screen.py [KEYS]

First paint is compared with an empty Textual app started in the same way, in turns with it: whatever else this machine
does meets all alike. A named procedure and a run taken up again begin with a screen that says so; when the bands of
the run stand is measured too. Keys are timed from the write to the first byte of the answer on the screen: from
the first paint on, while the library loads in its process and the rest of the program is read; and on a run screen
whose values change five times a second. Run by hand; goals: 1.25 x the empty app, 99 % of keys within 50 ms.
"""

from __future__ import annotations

import fcntl
import os
import pty
import select
import signal
import statistics
import struct
import subprocess
import sys
import tempfile
import termios
import time
from collections.abc import Iterator
from contextlib import contextmanager
from pathlib import Path

ROOT = Path(__file__).resolve().parents[2]
ROUNDS = 9
PROCEDURE = "co2-critical-point"
LIST_MARK = b"TRY IT WITHOUT A VESSEL"
EMPTY = """
from textual.app import App
from textual.widgets import Static
class Empty(App):
    def compose(self):
        yield Static("READY")
Empty().run()
"""
MAIN = """
import sys
from runbook.__main__ import main
sys.exit(main(sys.argv[1:]))
"""
RUN = """
import runbook.bench.app as app_module
from runbook.bench.app import BenchApp
from runbook.bench.screens.run import RunScreen
from runbook.run.acts import GoOn
from tests.bench import scenes
app_module.REFRESH_S = 0.2
async def journey(app):
    desk, _, clock = await scenes.desk(scenes.plan(scenes.LINES[1:]))
    await desk.act(GoOn())
    app.take(desk)
    app.push_screen(RunScreen(desk))
    # Time on the screen goes on, so that ages and the clock are painted anew at every look.
    app.set_interval(0.2, lambda: clock.advance(1.0))
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


def shown(descriptor: int, marker: bytes, limit_s: float) -> float | None:
    """When `marker` has come on the screen [s]; None: not in time. What came before it is read and thrown away."""
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
    return None


def seen(descriptor: int, marker: bytes) -> float:
    """When `marker` has come on the screen [s]; the benchmark ends where it does not come."""
    at = shown(descriptor, marker, 15.0)
    if at is None:
        raise SystemExit(f"{marker!r} never came")
    return at


def until_seen(code: str, marker: bytes, *arguments: str) -> float:
    """Time from start to the marker [s]."""
    with terminal(code, *arguments) as (descriptor, began):
        return seen(descriptor, marker) - began


def answered(descriptor: int, key: bytes, marker: bytes) -> float:
    """Time from a key to its screen [s]; a key dropped behind a stall is pressed again and costs the whole time."""
    began = time.perf_counter()
    for _ in range(10):
        os.write(descriptor, key)
        if (at := shown(descriptor, marker, 1.0)) is not None:
            return at - began
    raise SystemExit(f"{key!r} is not answered")


def key_times(descriptor: int, back: bytes, count: int) -> list[float]:
    """Times from a key to its screen [s]: F2 opens the keys, Esc goes back to the screen that shows `back`."""
    times = []
    for i in range(count):
        key, marker = (b"\x1bOQ", b"never refused") if i % 2 == 0 else (b"\x1b[27u", back)
        times.append(answered(descriptor, key, marker))
        time.sleep(0.02)
    return times


def keys_from_first_paint(count: int) -> list[float]:
    """Keys on the list of a program just started, until three seconds are over; then another start."""
    times: list[float] = []
    while len(times) < count:
        with terminal(MAIN) as (descriptor, _):
            seen(descriptor, LIST_MARK)
            until = time.perf_counter() + 3.0
            while time.perf_counter() < until:
                times += key_times(descriptor, LIST_MARK, 2)
    return times


def keys_at_five_updates(count: int) -> list[float]:
    """Keys on a run screen that is painted anew five times a second."""
    with terminal(RUN) as (descriptor, _):
        seen(descriptor, b"F9 MAKE SAFE")
        time.sleep(1.0)
        return key_times(descriptor, b"CEILING", count)


def left_run(folder: str) -> str:
    """The record of a rehearsal that was left, copied so that it counts as a run."""
    subprocess.run(
        [sys.executable, "-m", "runbook", "rehearse", PROCEDURE, "--headless", "--logbook", folder],
        cwd=ROOT, check=True, capture_output=True,
    )  # fmt: skip
    whole = next(Path(folder, "rehearsals").glob("*.jsonl"))
    half = Path(folder, whole.name)
    lines = whole.read_bytes().splitlines(keepends=True)
    half.write_bytes(b"".join(lines[: len(lines) // 2]))
    return str(half)


def say(name: str, times: list[float]) -> None:
    """Median, 99th percentile and largest [ms]."""
    times = sorted(times)
    at = min(len(times) - 1, int(0.99 * len(times)))
    print(
        f"{name:<34} median {1e3 * statistics.median(times):5.1f} ms, 99 % within {1e3 * times[at]:5.1f} ms, "
        f"largest {1e3 * times[-1]:5.1f} ms ({len(times)} keys)"
    )


def main() -> None:
    """Print every number."""
    count = int(sys.argv[1]) if len(sys.argv) > 1 else 200
    with tempfile.TemporaryDirectory() as folder:
        os.environ["RUNBOOK_LOGBOOK"] = folder
        run = left_run(folder)
        cases: dict[str, tuple[str, bytes, tuple[str, ...]]] = {
            "empty Textual app": (EMPTY, b"READY", ()),
            "list": (MAIN, LIST_MARK, ()),
            "rehearsal: first screen": (MAIN, b"F9 MAKE SAFE", ("rehearse", PROCEDURE)),
            "rehearsal: briefing": (MAIN, b"agreed, go on", ("rehearse", PROCEDURE)),
            "run taken up: first screen": (MAIN, b"F9 MAKE SAFE", ("bench", "--resume", run)),
            "run taken up: its questions": (MAIN, b"AFTER A GAP", ("bench", "--resume", run)),
        }
        times: dict[str, list[float]] = {name: [] for name in cases}
        for _ in range(ROUNDS):
            for name, (code, marker, arguments) in cases.items():
                times[name].append(until_seen(code, marker, *arguments))
        empty = statistics.median(times["empty Textual app"])
        for name, found in times.items():
            middle = statistics.median(found)
            print(f"{name:<28} {1e3 * middle:6.0f} ms   {middle / empty:.2f} x   (least {1e3 * min(found):.0f} ms)")
        say("keys from the first paint on", keys_from_first_paint(count))
        say("keys at five updates a second", keys_at_five_updates(count))


if __name__ == "__main__":
    main()
