"""Pictures made of characters: the cell, its path in pressure and temperature, the way to the ceiling.

Apart from the screens, because line mode, `check` and the record draw them too, and so that each can be tested
as text. Nothing here knows physics, units or colours: whoever draws hands over numbers in the unit that is
shown, and every material and every line has a character of its own, so that nothing leans on colour.
"""

from runbook.drawing.braille import BrailleGrid
from runbook.drawing.cell import Cell, Filling, cell_legend, cell_picture
from runbook.drawing.chart import Chart, Mark, chart_picture
from runbook.drawing.glyphs import ASCII, UNICODE, Glyphs
from runbook.drawing.ruler import Ruler, ruler_picture

__all__ = [
    "ASCII",
    "UNICODE",
    "BrailleGrid",
    "Cell",
    "Chart",
    "Filling",
    "Glyphs",
    "Mark",
    "Ruler",
    "cell_legend",
    "cell_picture",
    "chart_picture",
    "ruler_picture",
]
