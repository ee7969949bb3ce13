"""The characters that stand for things, once for good terminals and once for those with ASCII alone.

Only box, block, braille and geometric shapes: terminals disagree about the width of anything else. In each set
all characters of one picture differ, so that it can be read without colour.
"""

from __future__ import annotations

from dataclasses import dataclass
from typing import Final


@dataclass(frozen=True, slots=True)
class Glyphs:
    """One set of characters; each field is a single character one column wide, unless it says otherwise."""

    wall: str
    liquid: str
    solid: str
    haze: str
    dense: str
    """One phase that is neither liquid nor vapour."""
    vapour: str
    unknown: str
    surface: tuple[str, str, str]
    """The surface in the lower, middle and upper third of a row."""
    filled: str
    """The ruler up to the present value."""
    uncertain: str
    """The ruler over the uncertainty of the present value."""
    reach: str
    """The ruler from there to the worst of this step."""
    worst: str
    """Where the worst of this step stands."""
    free: str
    """The ruler between the worst and the wall."""
    ceiling: str
    forbidden: str
    """The side of a limit on which nothing may be."""
    point: str
    off: tuple[str, str, str, str]
    """The point where it lies outside the frame: above, below, left, right."""
    across: str
    upright: str
    corner: str
    braille: bool
    """Whether fine dots can be drawn."""
    yes: str
    not_yet: str
    blocked: str
    warning: str
    rule: str
    bar: str
    """Between make safe and the other keys."""


UNICODE: Final = Glyphs(
    wall="█",
    liquid="▒",
    solid="▓",
    haze="░",
    dense="·",
    vapour=" ",
    unknown="?",
    surface=("▁", "─", "▔"),
    filled="█",
    uncertain="▒",
    reach="░",
    worst="╎",
    free="·",
    ceiling="┃",
    forbidden="/",
    point="●",
    off=("▲", "▼", "◀", "▶"),
    across="─",
    upright="│",
    corner="└",
    braille=True,
    yes="●",
    not_yet="□",
    blocked="■",
    warning="▲",
    rule="─",
    bar="┃",
)
"""For every terminal with a font that has block and braille characters."""

ASCII: Final = Glyphs(
    wall="#",
    liquid="=",
    solid="%",
    haze=":",
    dense=".",
    vapour=" ",
    unknown="?",
    surface=("_", "-", "~"),
    filled="#",
    uncertain="=",
    reach="-",
    worst="!",
    free=".",
    ceiling="|",
    forbidden="/",
    point="@",
    off=("^", "v", "<", ">"),
    across="-",
    upright="|",
    corner="+",
    braille=False,
    yes="(+)",
    not_yet="[ ]",
    blocked="[X]",
    warning="/!\\",
    rule="-",
    bar="|",
)
"""For consoles without them (--ascii); the four signs before a word are three characters wide here."""


def to_ascii(text: str) -> str:
    """`text` with the characters of the trade spelt so that an ASCII console shows them; foreign ones as '?'."""
    for sign, spelt in _SPELT:
        text = text.replace(sign, spelt)
    return text.encode("ascii", "replace").decode("ascii")


_SPELT: Final = (
    ("±", "+-"),
    ("°", "deg"),
    ("·", "."),
    ("×", "x"),
    ("−", "-"),
    ("–", "-"),
    ("µ", "u"),
    ("³", "3"),
    ("²", "2"),
    ("…", "..."),
    ("■", "[X]"),
    ("□", "[ ]"),
    ("●", "(+)"),
    ("▲", "/!\\"),
    ("─", "-"),
    ("┃", "|"),
    ("█", "#"),
)
