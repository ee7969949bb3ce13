"""Which test at the bench tells two causes apart, the quickest first.

All of these are made with nothing raised: at the dial, at the thermometer, by waiting at rest, at the window, on
the scale. Refuses to name a test that both causes would answer alike where there is one that they would not.
"""

from __future__ import annotations

from typing import Final

TESTS: Final[tuple[tuple[str, frozenset[str]], ...]] = (
    ("dial", frozenset({"gauge/absolute slip", "wrong unit"})),
    ("re-zero", frozenset({"gauge offset"})),
    ("second thermometer", frozenset({"thermometer place", "thermometer lag"})),
    ("wait", frozenset({"thermometer lag"})),
    ("height", frozenset({"over-filled", "under-filled", "leak"})),
    ("weigh", frozenset({"over-filled", "under-filled", "leak"})),
)
"""Each test with the causes it would show, the quickest first: look again at the dial and its unit; tap the gauge
and compare it at zero; a second thermometer beside the first; 10 min at rest; the height of the liquid; weighing the
closed vessel, twice an hour apart where a leak is in question. Common practice."""
_QUICKEST: Final = {cause: name for name, shown in reversed(TESTS) for cause in shown}


def deciding_test(cause: str, rival: str | None, height_read: bool) -> str:
    """The quickest test that would show one of the two and not the other.

    rival: None where nothing else is left. height_read: the height has been read already, so that weighing is
    what can add to it. Trapped air shows in none of them: it is what is left when its rivals have been tested.
    """
    pair = {cause} if rival is None else {cause, rival}
    for name, shown in TESTS:
        if len(pair & shown) == 1 and not (name == "height" and height_read):
            return name
    if pair <= {"none", "trapped air"}:
        return "re-zero" if "trapped air" in pair else ""
    # Both would answer every test alike, as a leak and too little at the start: only the scale, twice.
    both = [_QUICKEST[c] for c in (cause, rival) if c in _QUICKEST]
    return "weigh" if "height" in both else next(iter(both), "")
