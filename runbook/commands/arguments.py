"""What all commands share in reading their arguments."""

from __future__ import annotations

import argparse
from datetime import date
from typing import NoReturn

from runbook.errors import InputUnusable


class Arguments(argparse.ArgumentParser):
    """Errors become one of ours: one sentence, no usage text before it."""

    def error(self, message: str) -> NoReturn:
        raise InputUnusable(f"{message}; see '{self.prog} --help'")


def iso_date(text: str | None) -> date:
    """An ISO date, today where none is given. Raises InputUnusable."""
    if text is None:
        return date.today()  # noqa: DTZ011 - certificates are judged by the date on the wall of this room, not by UTC
    try:
        return date.fromisoformat(text)
    except ValueError as error:
        raise InputUnusable(f"'{text}' is no date: write it as 2031-03-02") from error
