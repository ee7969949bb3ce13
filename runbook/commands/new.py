"""`runbook new apparatus|procedure [FILE]`: a file from your answers, or a commented start of one.

On a terminal it asks; with --start, or without a terminal, it asks nothing. Never writes over anything.
"""

from __future__ import annotations

import os
import sys
from pathlib import Path

from runbook.commands.arguments import Arguments
from runbook.errors import ExitCode, InputUnusable

_NAMES = {"apparatus": "apparatus/my-vessel.yaml", "procedure": "my-demonstration.yaml"}
"""Where a start goes when no file is named: so that the two find each other."""


_OR = " or ".join(_NAMES.values())
_LEFT = "Not everything was answered: what stands there instead is nobody's figure."


def main(argv: list[str]) -> int:
    """Write the file and say what to do next; returns the exit code."""
    parser = Arguments(prog="runbook new", description=__doc__)
    parser.add_argument("--manual", action="store_true", help="print the manual for authors instead")
    parser.add_argument("--start", action="store_true", help="ask nothing: write the commented start")
    parser.add_argument("kind", nargs="?", choices=sorted(_NAMES), help="what to write")
    parser.add_argument("file", nargs="?", metavar="FILE", help=f"where (default: {_OR})")
    # FILE may stand after --start.
    asked = parser.parse_intermixed_args(argv)
    if asked.manual:
        return _manual()
    if asked.kind is None:
        raise InputUnusable(f"say what to write: {' or '.join(sorted(_NAMES))}")
    path = Path(asked.file or _NAMES[asked.kind])
    if path.exists():
        # Before anything is asked.
        raise InputUnusable(f"{path} exists already and is left as it is: name another file")
    text, answered = _text(asked.kind, path, asked.start)
    try:
        _write(path, text)
    except InputUnusable:
        if answered is not None:
            # Nothing that was typed is lost.
            print(text, end="")
        raise
    print(path)
    return _afterwards(asked.kind, path, answered)


def _afterwards(kind: str, path: Path, answered: bool | None) -> int:
    """What to do next; of a procedure that was asked for, what `check` says of it."""
    if answered and kind == "procedure":
        from runbook.commands import check

        return check.main([str(path)])
    then = "then run: runbook check" if kind == "procedure" else "then write: runbook new procedure"
    if answered:
        print(then.capitalize(), file=sys.stderr)
    else:
        left = "" if answered is None else f"{_LEFT} "
        print(f"{left}Replace every figure in {path} by yours, {then}", file=sys.stderr)
    return int(ExitCode.GOOD)


def _manual() -> int:
    from runbook.procedure.manual import manual_path

    page = manual_path()
    if page is None or not page.exists():
        raise InputUnusable("the manual is not installed with this program")
    print(page.read_text(encoding="utf-8"), end="")
    return int(ExitCode.GOOD)


def _text(kind: str, path: Path, start: bool) -> tuple[str, bool | None]:
    """(the file, whether all was answered); None: nothing was asked."""
    from runbook.commands import dialogue
    from runbook.procedure.dialogue.demonstration import commented_start
    from runbook.procedure.dialogue.vessel import vessel_form

    if dialogue.can_ask() and not start:
        return dialogue.vessel() if kind == "apparatus" else dialogue.demonstration(path)
    if kind == "apparatus":
        return vessel_form().text(), None
    beside = sorted((path.parent / "apparatus").glob("*.yaml"))
    # With one vessel beside it there is nothing to choose.
    name = beside[0].name if len(beside) == 1 else Path(_NAMES["apparatus"]).name
    return commented_start(f"apparatus/{name}"), None


def _write(path: Path, text: str) -> None:
    try:
        _folder(path.parent)
        with path.open("x", encoding="utf-8") as file:
            file.write(text)
            file.flush()
            os.fsync(file.fileno())
    except FileExistsError:
        raise InputUnusable(f"{path} exists already and is left as it is: name another file") from None
    except (OSError, ValueError) as error:
        why = getattr(error, "strerror", None) or "its name cannot be used"
        raise InputUnusable(f"{path} cannot be written: {why}") from None


def _folder(folder: Path) -> None:
    try:
        folder.mkdir(parents=True, exist_ok=True)
    except FileExistsError:
        raise NotADirectoryError(0, f"{folder} is a file") from None
