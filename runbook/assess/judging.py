"""When a margin is clear, narrow or blocked: one rule for every limit."""

from __future__ import annotations

from runbook.answers import Judgement

NARROW_SHARE = 0.05
"""Of the limit (of full scale for a dial, of the span for a temperature rating) under which it is narrow [1]."""
NARROW_SECONDS = 180.0
"""A margin that lasts no longer than this at the worst credible rate is narrow [s]."""


def judge(margin: float | None, threshold: float, lasts_s: float | None = None) -> Judgement:
    """Clear, narrow or blocked; threshold in the margin's unit, lasts_s [s] or None for ever."""
    if margin is None or not margin > 0.0:
        return Judgement.BLOCKED
    if margin < threshold or (lasts_s is not None and lasts_s < NARROW_SECONDS):
        return Judgement.NARROW
    return Judgement.CLEAR
