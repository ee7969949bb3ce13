"""Figures in words, as a person at the bench reads them: the dial's own unit, no more digits than help.

Refuses to print a number for something unknown, and to drop the reference of a pressure.
"""

from __future__ import annotations

import math
from typing import Final

from runbook.answers import Margin, Need, Plan
from runbook.quantities import UNKNOWN, pressure_to_unit, say, say_level, to_unit, unit

_FINE: Final = 1.0e4
"""[Pa] the step in which pressures are given."""


def pressure(plan: Plan, absolute: float | None, symbol: str = "") -> str:
    """'62.6 bar(g)' of an absolute pressure [Pa], in the plan's dial unit or the given one."""
    if absolute is None or not math.isfinite(absolute):
        return UNKNOWN
    shown = symbol or plan.pressure_unit
    return say_level(absolute, shown, plan.barometer, _digits(shown))


def pressure_number(plan: Plan, absolute: float | None) -> str:
    """'62.6' of an absolute pressure [Pa]; the unit stands nearby."""
    if absolute is None or not math.isfinite(absolute):
        return UNKNOWN
    return f"{pressure_to_unit(absolute, plan.pressure_unit, plan.barometer):.{_digits(plan.pressure_unit)}f}"


def pressure_difference(plan: Plan, difference: float | None) -> str:
    """'31.0 bar' of a difference of pressures [Pa]."""
    if difference is None or not math.isfinite(difference):
        return UNKNOWN
    return say(difference, _bare(plan.pressure_unit), _digits(plan.pressure_unit))


def pressure_difference_number(plan: Plan, difference: float | None) -> str:
    """'1.2' of a difference of pressures [Pa]; the unit stands nearby."""
    if difference is None or not math.isfinite(difference):
        return UNKNOWN
    return f"{abs(to_unit(difference, _bare(plan.pressure_unit))):.{_digits(plan.pressure_unit)}f}"


def temperature(kelvin: float | None) -> str:
    """'24.1 °C' of a temperature [K]."""
    return UNKNOWN if kelvin is None else say(kelvin, "degC", 1)


def kelvins(difference: float | None) -> str:
    """'19 K' of a temperature difference [K]; below 10 with one decimal."""
    if difference is None or not math.isfinite(difference):
        return UNKNOWN
    return f"{difference:.0f} K" if abs(difference) >= 10.0 else f"{difference:.1f} K"


def planned(plan: Plan) -> str:
    """'115.0 g to 119.0 g' of the charge that is planned; of several vessels each with its tag."""
    alone = f"{grams(plan.planned_kg[0])} to {grams(plan.planned_kg[1])}"
    if not plan.beside:
        return alone
    others = (f"{one.vessel} {grams(one.planned_kg[0])} to {grams(one.planned_kg[1])}" for one in plan.beside)
    return ", ".join((f"{plan.vessel} {alone}", *others))


def vessels(plan: Plan) -> str:
    """'VC-2, view cell' of the vessel; of several each with its tag."""
    return "; ".join((f"{plan.vessel}, {plan.apparatus}", *(f"{b.vessel}, {b.apparatus}" for b in plan.beside)))


def grams(kilograms: float | None) -> str:
    """'117.0 g' of a mass [kg]."""
    return UNKNOWN if kilograms is None else say(kilograms, "g", 1)


def duration(seconds: float | None) -> str:
    """'1 h 12 min', '1 min 50 s', '40 s' of a time [s]; no more than two units, never rounded up."""
    if seconds is None or math.isnan(seconds):
        return UNKNOWN
    if math.isinf(seconds):
        return "too long to tell"
    whole = int(abs(seconds))
    days, hours, minutes, rest = whole // 86400, whole // 3600 % 24, whole // 60 % 60, whole % 60
    parts = [(days, "d"), (hours, "h"), (minutes, "min"), (rest, "s")]
    while len(parts) > 1 and parts[0][0] == 0:
        parts.pop(0)
    # Seconds are of no use beside ten minutes and more.
    first, second = parts[0], (parts[1] if len(parts) > 1 else (0, ""))
    with_second = second[0] > 0 and not (first[1] == "min" and first[0] >= 10)
    return f"{first[0]} {first[1]}" + (f" {second[0]} {second[1]}" if with_second else "")


def reading(plan: Plan, tag: str, value: float | None, symbol: str = "") -> str:
    """A value [SI; pressures absolute] of an instrument in the unit printed on its dial."""
    dial = next((i for i in plan.instruments if i.tag == tag), None)
    shown = symbol or (dial.unit if dial is not None else "")
    if value is None or not shown or not math.isfinite(value):
        return UNKNOWN
    found = unit(shown)
    if found.reference is not None:
        return say_level(value, shown, plan.barometer, _digits(shown))
    text = say(value, shown, _decimals(dial.half_division if dial is not None else 0.0, found.factor))
    number, _, rest = text.partition(" ")
    # A whole number is no less exact on a dial whose half divisions are not whole.
    return f"{number.rstrip('0').rstrip('.') if '.' in number else number} {rest}"


def accepted(plan: Plan, need: Need) -> str:
    """'105 g to 150 g', 'at most 1.5 bar(g)': the range in which a reading is accepted."""
    low, high = (reading(plan, need.tag, v, need.unit) for v in (need.low, need.high))
    if need.low is None:
        return "anything on its dial" if need.high is None else f"at most {high}"
    return f"at least {low}" if need.high is None else f"{low} to {high}"


def uncertainty(plan: Plan, tag: str, U: float) -> str:
    """The U of a reading [SI] in its dial's unit, number alone."""
    dial = next((i for i in plan.instruments if i.tag == tag), None)
    factor = abs(unit(dial.unit).factor) if dial is not None else 1.0
    return f"{U / factor:.2g}"


def difference(plan: Plan, tag: str, value: float | None) -> str:
    """'0.12 bar' of a difference between two readings of an instrument [SI], in its dial's unit."""
    dial = next((i for i in plan.instruments if i.tag == tag), None)
    if dial is None or value is None or not math.isfinite(value):
        return UNKNOWN
    found = unit(dial.unit)
    shown = _bare(dial.unit) if found.reference is not None else ("K" if dial.reads == "temperature" else dial.unit)
    return f"{value / abs(unit(shown).factor):.2g} {unit(shown).shown}"


def level(plan: Plan, margin: Margin, value: float | None) -> str:
    """A value of the margin's own kind, worst or allowed [its unit]."""
    if value is None:
        return UNKNOWN
    match margin.unit:
        case "Pa":
            return pressure(plan, value)
        case "K":
            return kelvins(value) if margin.kind == "difference" else temperature(value)
        case "kg":
            return grams(value)
        case "m3/m3":
            return say(value, "%", 2)
        case "K/s":
            return say(value, "K/min", 2)
        case "Pa/s":
            return say(value, "bar/min", 1)
        case _:
            return f"{value:g} {margin.unit}"


def margin_left(plan: Plan, margin: Margin) -> str:
    """'31.0 bar': what is left of a margin, its unit without reference."""
    if margin.margin is None:
        return UNKNOWN
    match margin.unit:
        case "Pa":
            return pressure_difference(plan, margin.margin)
        case "K":
            return kelvins(margin.margin)
        case _:
            return level(plan, margin, margin.margin)


def _digits(symbol: str) -> int:
    return max(0, round(math.log10(abs(unit(symbol).factor) / _FINE)))


def _decimals(half_division: float, factor: float) -> int:
    """Enough that a printed half division still shows."""
    step = half_division / abs(factor)
    return 1 if step <= 0.0 else min(4, max(0, math.ceil(-math.log10(step) - 1e-9)))


def _bare(symbol: str) -> str:
    """The unit of a difference: bar of bar(g), psi of psig."""
    shown = unit(symbol).symbol
    return "psi" if shown.startswith("psi") else shown.split("(")[0].split(" ")[0]
