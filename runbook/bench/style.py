"""Keys and words that are the same on every screen."""

from __future__ import annotations

from typing import Final

MAKE_SAFE_KEY: Final = "f9"
"""F1 and F10 to F12 belong to terminals."""
MAKE_SAFE_WORD: Final = "safe"
"""Typed into any field with Enter, where function keys do not arrive."""
ARM_S: Final = 0.5
"""[s] a yes to a question that has just appeared was meant for something else."""
STALL_S: Final = 0.3
"""[s] keys that waited longer than this behind a stall are dropped."""
