"""ALONE and CEILING beneath a screen that takes the place of the run screen: they never go."""

from __future__ import annotations

from textual.app import ComposeResult
from textual.containers import Vertical

from runbook.bench import bands
from runbook.bench.rows import row
from runbook.bench.view import RunView
from runbook.bench.widgets.band import Band
from runbook.bench.widgets.line import Line
from runbook.drawing import Glyphs


class Margins(Vertical):
    """Two bands with their rules."""

    DEFAULT_CSS = """
    Margins { height: 7; dock: bottom; margin: 0 0 1 0; }
    Margins #band-alone { height: 2; }
    Margins #band-ceiling { height: 3; }
    """

    def __init__(self, glyphs: Glyphs) -> None:
        """Nothing to show yet."""
        super().__init__()
        self._glyphs = glyphs
        self._view: RunView | None = None

    def compose(self) -> ComposeResult:
        """Rule and band, twice."""
        for name in ("alone", "ceiling"):
            yield Line(lambda width: row((self._glyphs.rule * width, "dim")))
            yield Band(name)

    def show(self, view: RunView) -> None:
        """Paint these from now on."""
        if self._view is not None and (view.alone, view.ceiling) == (self._view.alone, self._view.ceiling):
            return
        self._view = view
        for band, name in zip(self.query(Band), ("alone", "ceiling"), strict=True):
            band.show(self._fit(name, view))

    def _fit(self, name: str, view: RunView) -> bands.Fit:
        return lambda width, height, page: bands.band_rows(name, view, width, height, page, self._glyphs)
