"""The dial of a gauge as a drawing, in black: its own unit, the ceiling, and where the pointer will stand."""

from __future__ import annotations

from dataclasses import dataclass
from math import cos, log10, pi, sin
from xml.etree.ElementTree import Element

from runbook.answers import GaugeCard
from runbook.paper.markup import tag
from runbook.quantities import pressure_to_unit, unit

_CENTRE, _RADIUS = 150.0, 118.0
_FIRST, _SWEEP = 225.0, 270.0
"""[deg] where the scale begins, counted from the right upwards, and how far it goes round."""


@dataclass(frozen=True, slots=True)
class Face:
    """A scale from low to high in the dial's own unit."""

    low: float
    high: float

    def point(self, value: float, radius: float) -> tuple[float, float]:
        """Where a value stands at a distance from the centre."""
        share = min(1.0, max(0.0, (value - self.low) / (self.high - self.low)))
        angle = (_FIRST - _SWEEP * share) * pi / 180.0
        return _CENTRE + radius * cos(angle), _CENTRE - radius * sin(angle)


def face(card: GaugeCard, barometer: float) -> Element:
    """The dial of a card; barometer [Pa]."""

    def shown(pascal: float) -> float:
        return pressure_to_unit(pascal, card.unit, barometer)

    scale = Face(shown(card.low), shown(card.high))
    step = _numbers(scale)
    drawing = tag("svg", viewBox="0 0 300 300", class_="dial", role="img", aria_label=f"dial of {card.tag}")
    drawing.append(tag("circle", cx=_CENTRE, cy=_CENTRE, r=140, class_="rim"))
    drawing.append(_arc(scale, scale.low, scale.high, _RADIUS, "scale"))
    if card.ceiling is not None:
        top = shown(card.ceiling)
        drawing.append(_arc(scale, top, scale.high, _RADIUS - 7.0, "never"))
        drawing.append(_tick(scale, top, _RADIUS - 16.0, _RADIUS + 10.0, "ceiling"))
    value = scale.low
    while value <= scale.high + 1e-9 * abs(step):
        drawing.append(_tick(scale, value, _RADIUS - 12.0, _RADIUS, "tick"))
        x, y = scale.point(value, _RADIUS - 26.0)
        drawing.append(tag("text", f"{value:g}", x=x, y=y + 4.0, class_="number"))
        if value + 0.5 * step < scale.high:
            drawing.append(_tick(scale, value + 0.5 * step, _RADIUS - 7.0, _RADIUS, "tick"))
        value += step
    for row in (card.rows[0], card.rows[-1]) if len(card.rows) > 1 else card.rows:
        if row.expected is not None:
            at = shown(row.expected)
            drawing.append(_tick(scale, at, _RADIUS, _RADIUS + 8.0, "mark"))
            x, y = scale.point(at, _RADIUS + 15.0)
            drawing.append(tag("text", f"{row.temperature - 273.15:.0f}°", x=x, y=y + 3.0, class_="small"))
    drawing.append(tag("text", card.tag, x=_CENTRE, y=_CENTRE - 18.0, class_="name"))
    drawing.append(tag("text", unit(card.unit).shown, x=_CENTRE, y=_CENTRE + 12.0, class_="name"))
    return drawing


def _numbers(scale: Face) -> float:
    """Distance of the printed numbers: 1, 2 or 5 of a power of ten, at most eleven of them."""
    span = scale.high - scale.low
    power = 10.0 ** int(log10(span) // 1)
    return next(s * power for s in (0.1, 0.2, 0.5, 1.0) if span / (s * power) <= 10.0 + 1e-9)


def _tick(scale: Face, value: float, inner: float, outer: float, class_: str) -> Element:
    x1, y1 = scale.point(value, inner)
    x2, y2 = scale.point(value, outer)
    return tag("line", x1=x1, y1=y1, x2=x2, y2=y2, class_=class_)


def _arc(scale: Face, first: float, last: float, radius: float, class_: str) -> Element:
    points = (scale.point(first + (last - first) * k / 60.0, radius) for k in range(61))
    return tag("polyline", points=" ".join(f"{x:.2f},{y:.2f}" for x, y in points), class_=class_)
