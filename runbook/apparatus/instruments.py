"""How far an instrument may be off, and what that makes of a reading.

A reading has a permissible error from its class and half a printed division from the eye. Drift since its
certificate, and an instrument that is broken, are not in these numbers.
"""

from __future__ import annotations

import math
from typing import Final

from runbook.apparatus.parts import Instrument

ZERO_CELSIUS: Final = 273.15
"""[K]"""
_IEC_60751: Final = {"AA": (0.1, 0.0017), "A": (0.15, 0.002), "B": (0.3, 0.005), "C": (0.6, 0.01)}
"""Tolerance at 0 degC [K] and its growth with |t| [1]: IEC 60751."""
_REACH: Final = {"AA": (-50.0, 250.0), "A": (-100.0, 450.0), "B": (-196.0, 600.0), "C": (-196.0, 600.0)}
"""Where each class is defined for wire-wound resistors [degC]: IEC 60751:2008, from memory."""


def permissible_error(instrument: Instrument, value: float) -> float:
    """Permissible error at a value [SI], half-width [SI; of a pressure Pa, of a temperature K].

    EN 837-1 class: that percentage of the span at any point, so the value does not matter. IEC 60751 class:
    grows from 0 degC. Else the error the file states.
    """
    if instrument.error is not None:
        return instrument.error.value
    if isinstance(instrument.klass, str):
        return thermometer_tolerance(instrument.klass, value - ZERO_CELSIUS)
    if instrument.klass is None:  # the model refuses such an instrument
        raise ValueError(f"{instrument.tag} has neither a class nor an error")
    return gauge_error(instrument.klass, instrument.dial.span)


def gauge_error(klass: float, span: float) -> float:
    """Permissible error of a pressure gauge, half-width [as span], of an EN 837-1 class [% of span]."""
    return klass / 100.0 * span


def thermometer_tolerance(klass: str, celsius: float) -> float:
    """Tolerance of a platinum thermometer, half-width [K], of an IEC 60751 class at a temperature [degC].

    Raises KeyError for a class the standard does not have.
    """
    base, growth = _IEC_60751[klass]
    return base + growth * abs(celsius)


def class_reach(klass: str) -> tuple[float, float]:
    """Lowest and highest temperature [K] for which an IEC 60751 class is defined."""
    low, high = _REACH[klass]
    return low + ZERO_CELSIUS, high + ZERO_CELSIUS


def expanded_uncertainty(error: float, half_division: float) -> float:
    """U at k = 2 of a reading [as the arguments]: both half-widths rectangular, JCGM 100.

    error: permissible error, half-width. half_division: how far a careful reading may miss.
    """
    return 2.0 * math.sqrt(error**2 / 3.0 + half_division**2 / 3.0)
