"""What stands on the screen while the window is too small for a run."""

from __future__ import annotations

from textual.content import Content
from textual.widget import Widget

from runbook.bench.layout import SMALLEST


class TooSmall(Widget):
    """One sentence over everything; keys go on working beneath."""

    DEFAULT_CSS = """
    TooSmall { layer: small; width: 100%; height: 100%; background: $background; display: none; padding: 0 1; }
    """

    def fit(self, columns: int, rows: int) -> bool:
        """Cover the screen where it is too small; whether it is."""
        small = columns < SMALLEST[0] or rows < SMALLEST[1]
        self.display = small
        return small

    def render(self) -> Content:
        """The sentence."""
        return Content.assemble(
            ("F9 MAKE SAFE", "bold reverse"),
            f"\nMake the window larger: at least {SMALLEST[0]} columns and {SMALLEST[1]} rows. "
            "The run goes on, its record is kept, F9 works.",
        )
