"""From the command line to the screens and back: terminals, exit codes, what is printed when the screen is gone."""

from __future__ import annotations

import contextlib
import errno
import os
import sys
from typing import TYPE_CHECKING

from runbook.bench.app import BenchApp
from runbook.errors import ExitCode, InputUnusable

if TYPE_CHECKING:
    from runbook.bench.journey import Session
    from runbook.run.conductor import Conductor


def check_terminal(command: str) -> None:
    """Screens need a terminal to read from and one to draw on. Raises InputUnusable, naming the other way."""
    # The toolkit draws on standard error, so that must be a terminal as well.
    if not (sys.stdin.isatty() and sys.stderr.isatty() and sys.stdout.isatty()):
        raise InputUnusable(
            f"'runbook {command}' needs a terminal for its screens; without one use 'runbook {command} --plain'"
        )


def run_screens(session: Session, ascii_only: bool = False) -> int:
    """Show the session; the exit code. A closed terminal ends it without a traceback.

    Raises RunbookError where the session could not go on; the screen is gone then.
    """
    app = BenchApp(session, ascii_only=ascii_only)
    gone = False
    try:
        app.run()
    except OSError as error:
        if error.errno not in (errno.EIO, errno.EPIPE, errno.ENXIO, errno.EBADF):
            raise
        gone = True
    if gone:
        _forget_terminal()
        return int(ExitCode.NOT_GOOD)
    if app.failed is not None:
        raise app.failed
    if app.return_code:
        return app.return_code
    if session.left is not None and session.left.ledger.outcome is None:
        _print_card(session.left)
    found = app.return_value
    return int(ExitCode.NOT_GOOD) if found is None else found


def _print_card(desk: Conductor) -> None:
    """What to do at the bench, on paper or in the scrollback, now that no screen says it."""
    from runbook.bench.card import card_lines

    with contextlib.suppress(OSError):
        print("\n".join(card_lines(desk)))


def _forget_terminal() -> None:
    """Nothing more can be written there: what the interpreter flushes at its end goes nowhere."""
    nowhere = os.open(os.devnull, os.O_WRONLY)
    for descriptor in (1, 2):
        with contextlib.suppress(OSError):
            os.dup2(nowhere, descriptor)
