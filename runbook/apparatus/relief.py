"""At what pressure a relief device may open, and how far below that a vessel is run.

Knows nothing of flow: whether the device is large enough is the business of whoever chose it.
"""

from __future__ import annotations

from typing import Final

from runbook.apparatus.parts import Relief
from runbook.quantities import Level

PSI: Final = 6894.757293168361
"""[Pa], NIST SP 811."""


def lowest_opening(relief: Relief) -> Level:
    """Lowest pressure at which it may open, gauge [Pa].

    A disc: rated bursting pressure, less the lower end of its manufacturing range, less its burst tolerance.
    A valve: its set pressure less its set tolerance.
    """
    rated = relief.bursts_at if relief.bursts_at is not None else relief.opens_at
    if rated is None:  # the model refuses such a device
        raise ValueError(f"{relief.tag} has neither bursts_at nor opens_at")
    lowest = 0.0
    if relief.manufacturing_range is not None and relief.manufacturing_range.low is not None:
        lowest = relief.manufacturing_range.low
    return Level(rated.pascal * (1.0 + lowest) * (1.0 - relief.tolerance), "gauge")


def highest_opening(relief: Relief) -> Level:
    """Highest pressure at which it opens, gauge [Pa]: as lowest_opening(), upwards."""
    rated = relief.bursts_at if relief.bursts_at is not None else relief.opens_at
    if rated is None:  # the model refuses such a device
        raise ValueError(f"{relief.tag} has neither bursts_at nor opens_at")
    highest = 0.0
    if relief.manufacturing_range is not None and relief.manufacturing_range.high is not None:
        highest = relief.manufacturing_range.high
    return Level(rated.pascal * (1.0 + highest) * (1.0 + relief.tolerance), "gauge")


def ceiling(relief: Relief) -> Level:
    """Highest pressure the vessel is run at below this device, gauge [Pa]: its share of the lowest opening."""
    return Level(lowest_opening(relief).pascal * relief.run_below, "gauge")


def valve_set_tolerance(set_pressure: float) -> float:
    """Set tolerance of a relief valve, half-width [Pa], at a set pressure, gauge [Pa].

    ASME BPVC VIII-1 UG-134(d): 2 psi up to 70 psi, 3 % above.
    """
    return 2.0 * PSI if set_pressure <= 70.0 * PSI else 0.03 * set_pressure


def disc_burst_tolerance(burst_pressure: float) -> float:
    """Burst tolerance of a disc, half-width [Pa], at a rated bursting pressure, gauge [Pa].

    ASME BPVC VIII-1 UG-127: 2 psi up to 40 psi, 5 % above.
    """
    return 2.0 * PSI if burst_pressure <= 40.0 * PSI else 0.05 * burst_pressure


def code_tolerance(relief: Relief) -> float:
    """What the code allows this device to be off, as a share of its rated pressure [1]."""
    if relief.bursts_at is not None:
        return disc_burst_tolerance(relief.bursts_at.pascal) / relief.bursts_at.pascal
    if relief.opens_at is not None:
        return valve_set_tolerance(relief.opens_at.pascal) / relief.opens_at.pascal
    raise ValueError(f"{relief.tag} has neither bursts_at nor opens_at")
