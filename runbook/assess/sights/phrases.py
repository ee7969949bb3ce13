"""The sentences of the computed sights and how far each is to be trusted: one home for each.

Plain words for somebody at arm's length: one sentence each, no symbol, at most one figure beside a temperature.
"""

from __future__ import annotations

from typing import Final

from runbook.quantities import say

NEAR_CRITICAL_TRUST: Final = (
    "Within 0.1 K of critical one density for the whole cell means nothing: gravity and the last tenths of a kelvin "
    "between top and bottom decide."
)
HEIGHT_TRUST: Final = "As good as the charge is known, and 1 % beyond 0.2 K from critical."
FLATTENS: Final = (
    " This fluid's equation closes the dome too early within 0.5 K of critical: in nature the surface lasts longer."
)
END_TRUST: Final = "The temperature is good to 0.1 K; a cell not stirred shows it later, and times are a trend."
HAZE_TRUST: Final = "How much light is scattered is good to about a quarter; what the eye sees of it hangs on the lamp."
CONTRAST_TRUST: Final = "The step of the index is good to 2 %; haze and uneven warmth hide a surface before it does."
MELT_TRUST: Final = "The temperature stands to 0.05 K as long as solid is left; how long that lasts is a trend only."
SOLID_TRUST: Final = "How much is left is good to 1 % at the charge's own temperature; the wall may be far ahead of it."
RAIN_TRUST: Final = "That it comes is sure; how thick it is hangs on how fast the cell cools."
BOIL_TRUST: Final = "Where the first bubbles rise hangs on the wall; a cell warmed slowly may show none."
FROST_TRUST: Final = "If the room is humid, which is not known here; nothing grows where air does not reach."
SNOW_TRUST: Final = "The most that can come, with no heat from valve and hose; a warm valve gives less, or none."
GAS_TRUST: Final = "As sure as the most that can be in it; a cold corner out of view may still hold liquid or solid."
UNKNOWN_TRUST: Final = "The charge is not known well enough; weigh it, or read the height at a known temperature."


def at(kelvin: float) -> str:
    """'31.0 °C'."""
    return say(kelvin, "degC", 1)


def percent(share: float) -> str:
    """'28 %'; under one per cent 'less than 1 %'."""
    return "less than 1 %" if share < 0.01 else f"{100.0 * share:.0f} %"


def haze_words(transmission: float) -> str:
    """One sentence for what comes through the cell of the light [1]."""
    if transmission < 0.02:
        return "White smoke: no light comes through the cell."
    if transmission < 0.5:
        return f"A thick haze: {percent(transmission)} of the light comes through the cell."
    if transmission < 0.9:
        return "A haze, bluish from the side and reddish against the lamp."
    return "A thin bluish haze, seen with a lamp from the side."


def height_trust(flattens: bool, near: bool) -> str:
    """How far to trust a height; near: within 0.5 K of critical."""
    return HEIGHT_TRUST + (FLATTENS if flattens and near else "")
