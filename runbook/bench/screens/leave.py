"""The question before the tool is left."""

from __future__ import annotations

from typing import TYPE_CHECKING

from runbook.bench.rows import Row, wrapped
from runbook.bench.screens.question import Question

if TYPE_CHECKING:
    from runbook.run.conductor import Conductor


class LeaveScreen(Question):
    """True: leave with the run unfinished."""

    def __init__(self, desk: Conductor) -> None:
        """Over the run of `desk`."""
        super().__init__("LEAVE THE TOOL?", self._words, ("L", "leave the tool"), "stay")
        self._desk = desk

    def _words(self, width: int) -> list[Row]:
        answer = self._desk.ledger.answer
        at_rest = answer is not None and answer.left_alone.at_rest
        vessel = (
            " Left alone the vessel stays within every limit."
            if at_rest
            else " THE VESSEL IS NOT KNOWN TO BE AT REST: make safe (F9) before you leave."
        )
        words = (
            " The run stays unfinished, the record says so, and a card with what to do is printed. "
            "It can be taken up again with runbook."
        )
        return [*wrapped(vessel, width - 1, "strong" if at_rest else "loud"), *wrapped(words, width - 1)]
