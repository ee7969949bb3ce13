"""Where the command line begins: one word picks a command, whose module is imported only then."""

from __future__ import annotations

import contextlib
import importlib
import io
import os
import sys
import tempfile
import traceback
from collections.abc import Callable

from runbook import __version__
from runbook.errors import ExitCode, RunbookError

COMMANDS = {
    "bench": "walk through a run at the vessel",
    "rehearse": "the same run on a simulated vessel",
    "check": "prove procedures within their vessels' limits",
    "state": "the state of a charge at a temperature",
    "charge": "how much to load into a vessel, and how to prove it",
    "new": "write a file from your answers, or a commented start",
    "schema": "what an editor needs to help while a file is written",
    "print": "write a procedure on paper, with the cards for the bench",
    "logbook": "list, show and verify what was recorded",
    "about": "versions and a self-check",
}
"""Command -> what it does. Each is a module of runbook.commands with main(arguments) -> exit code."""


def usage() -> str:
    """The page that --help prints."""
    rows = "\n".join(f"  runbook {name:<9} {does}" for name, does in COMMANDS.items())
    return (
        "usage: runbook [COMMAND] [--help]\n\n"
        "Guides a live demonstration with a sealed, weighed charge through boiling and its critical point.\n"
        "Without a command: the list of procedures, loaded vessels and open runs.\n\n"
        f"{rows}\n\n"
        "A green check is arithmetic on your own figures. It certifies no vessel and replaces neither relief\n"
        "device, risk assessment, local codes nor licensed practice."
    )


def main(arguments: list[str] | None = None) -> int:
    """Run one command and return its exit code; no traceback reaches a user."""
    given = sys.argv[1:] if arguments is None else arguments
    try:
        return _dispatch(given)
    except RunbookError as error:
        print(f"runbook: {error}", file=sys.stderr)
        return int(error.exit_code)
    except BrokenPipeError:
        # The reader of our output has gone; nothing more can be said to it.
        os.dup2(os.open(os.devnull, os.O_WRONLY), 1)
        return int(ExitCode.GOOD)
    except KeyboardInterrupt:
        return int(ExitCode.NOT_GOOD)
    except OSError as error:
        print(f"runbook: {error}", file=sys.stderr)
        return int(ExitCode.FAILED)
    except Exception as error:
        return _own_fault(error)


def _own_fault(error: Exception) -> int:
    """What nobody foresaw: one sentence for the user, the details in a file for whoever mends it."""
    where = ""
    with contextlib.suppress(OSError):
        with tempfile.NamedTemporaryFile("w", prefix="runbook-", suffix=".txt", delete=False, encoding="utf-8") as file:
            traceback.print_exception(error, file=file)
        where = f" The details are in {file.name}."
    words = " ".join(f"{type(error).__name__}: {error}".split())
    print(f"runbook: a fault of this program, not of your files: {words}.{where}", file=sys.stderr)
    return int(ExitCode.FAILED)


def _dispatch(given: list[str]) -> int:
    if not given:
        return _command("listing")(given)
    if given[0] in ("-h", "--help"):
        print(usage())
        return int(ExitCode.GOOD)
    if given[0] == "--version":
        print(__version__)
        return int(ExitCode.GOOD)
    if given[0] not in COMMANDS:
        print(f"runbook: there is no command '{given[0]}'\n\n{usage()}", file=sys.stderr)
        return int(ExitCode.UNUSABLE)
    return _command(given[0])(given[1:])


def _command(name: str) -> Callable[[list[str]], int]:
    found: Callable[[list[str]], int] = importlib.import_module(f"runbook.commands.{name}").main
    return found


def run() -> None:
    """Entry point of the installed script."""
    for stream in (sys.stdout, sys.stderr):
        # A terminal that cannot show a degree sign gets a question mark, not an error.
        if isinstance(stream, io.TextIOWrapper):
            stream.reconfigure(errors="replace")
    sys.exit(main())


if __name__ == "__main__":
    run()
