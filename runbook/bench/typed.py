"""What a typed reading becomes: echoed in full, in the unit of its dial, before it counts. Pure."""

from __future__ import annotations

from dataclasses import dataclass

from runbook.answers import Instrument, Plan
from runbook.apparatus.dial import DIMENSION
from runbook.errors import QuantityError
from runbook.quantities import Level, reading_from_typed


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
