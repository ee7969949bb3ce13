"""The one tree of errors.

    RunbookError                     nothing else is shown to a user
    ├── InputUnusable                exit 2: a file or an argument cannot be used
    │   ├── QuantityError            a text is no quantity of the kind asked for
    │   └── FileProblems             one or more located problems in files
    ├── OutsideValidity              the models do not reach this state
    ├── EngineLost                   the child process is dead, late or talks nonsense
    └── JournalError                 exit 3: the record is in doubt
        ├── JournalBroken            a write failed; latched, the run is halted
        ├── JournalDamaged           what is on disk is not what was written
        └── JournalLocked            somebody else has this run open

Each says what was wrong, where, and what to do; fields are structured, the message is built from them.
"""

from __future__ import annotations

from dataclasses import dataclass
from enum import IntEnum


class ExitCode(IntEnum):
    """What the process returns; of several the first of FAILED, UNUSABLE, NOT_GOOD, GOOD."""

    GOOD = 0
    NOT_GOOD = 1
    """Not within limits, not proved, not completed, or left unfinished."""
    UNUSABLE = 2
    """The input cannot be used; the diagnosis names file:line:column."""
    FAILED = 3
    """Something failed here: disk, child process, terminal."""


class RunbookError(Exception):
    """Base of every error that a user may see."""

    exit_code = ExitCode.FAILED


class InputUnusable(RunbookError):
    """A file or an argument cannot be used as it stands."""

    exit_code = ExitCode.UNUSABLE


class QuantityError(InputUnusable):
    """A text is not a quantity of the kind asked for."""

    def __init__(self, text: str, wrong: str, mend: str) -> None:
        self.text = text
        """What was written, verbatim."""
        self.wrong = wrong
        """What is wrong with it, as a clause."""
        self.mend = mend
        """What to write instead, as a clause; empty where nothing can be suggested."""
        super().__init__(f"'{text}' {wrong}" + (f": {mend}" if mend else ""))


@dataclass(frozen=True, slots=True)
class Problem:
    """One located problem in a file."""

    file: str
    """Path as the user gave it."""
    line: int
    """From 1; 0 where the problem is of the file as a whole."""
    column: int
    """From 1, in characters."""
    message: str
    """What is wrong and what to do, one sentence each; plain text, never markup."""
    rule: str = "reading"
    """Readable name of the rule that found it."""
    severity: str = "error"
    """error | warning | advice."""
    source: str = ""
    """The offending line of the file, clipped; empty where there is none."""

    def __str__(self) -> str:
        place = f"{self.file}:{self.line}:{self.column}" if self.line else self.file
        lines = [f"{place}: {self.message}"]
        if self.source:
            lines += [f"    {self.source}", "    " + " " * (self.column - 1) + "^"]
        return "\n".join(lines)


class FileProblems(InputUnusable):
    """One or more located problems; all that were found, in file order."""

    def __init__(self, problems: tuple[Problem, ...]) -> None:
        self.problems = problems
        super().__init__("\n".join(str(p) for p in problems))


class OutsideValidity(RunbookError):
    """The models do not reach this state; the answer is unknown, never a guess."""

    exit_code = ExitCode.NOT_GOOD


class EngineLost(RunbookError):
    """The child process that computes is dead, late or talks nonsense: every answer is unknown."""


class JournalError(RunbookError):
    """The record is in doubt."""


class JournalBroken(JournalError):
    """A write or a sync failed; latched: nothing is written again through this journal."""


class JournalDamaged(JournalError):
    """What is on disk is not what was written; it can be read up to there, not continued."""

    def __init__(self, line: int, why: str, file: str = "") -> None:
        self.line = line
        """From 1; the first line that is not as it was written, or is missing."""
        self.why = why
        """What is wrong, as a clause."""
        self.file = file
        """The journal; empty where only its bytes are known."""
        super().__init__(
            f"{file or 'journal'}:{line}: {why}. Nothing was changed. What stands before can be read, "
            "but the run cannot be continued in this journal."
        )


class JournalLocked(JournalError):
    """Somebody else has this run open."""
