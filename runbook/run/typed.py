"""What a typed reading becomes: echoed in full, in the unit of its dial, before it counts; and back again. Pure."""

from __future__ import annotations

import math
from dataclasses import dataclass

from runbook.answers import Instrument, Plan
from runbook.apparatus.dial import DIMENSION
from runbook.errors import QuantityError
from runbook.quantities import Level, pressure_to_unit, reading_from_typed, to_unit, unit


@dataclass(frozen=True, slots=True)
class Understood:
    """A typed text, as it would be recorded."""

    value: float
    """[SI; pressures absolute]"""
    echo: str
    """Instrument, number and unit in full."""
    outside: bool
    """Outside its dial."""


def understand(text: str, instrument: Instrument, plan: Plan) -> Understood | str:
    """The reading, or a sentence that says what to type instead."""
    try:
        typed = reading_from_typed(text, instrument.unit, DIMENSION[instrument.reads])
    except QuantityError as error:
        return str(error)
    value = typed.value.absolute(plan.barometer) if isinstance(typed.value, Level) else typed.value
    # A reading on the end of the dial is on it, whatever the barometer's last digit.
    slack = 1e-9 * max(abs(instrument.low), abs(instrument.high))
    outside = not instrument.low - slack <= value <= instrument.high + slack
    return Understood(value, f"{instrument.tag} {typed.echo}", outside)


def typed_value(value: float, one: Instrument, plan: Plan) -> str:
    """A value [SI] as a person types it from that dial, to its resolution."""
    pressure = one.reads == "pressure"
    shown = pressure_to_unit(value, one.unit, plan.barometer) if pressure else to_unit(value, one.unit)
    step = one.half_division / unit(one.unit).factor
    decimals = max(0, math.ceil(-math.log10(step) - 1e-9)) if step > 0.0 else 1
    text = f"{shown:.{min(decimals, 6)}f}"
    return text.lstrip("-") if float(text) == 0.0 else text
