"""How high the liquid stands in a vessel of simple shape, and how much liquid a height means.

Heights are read on the inside, from the lowest point of the wall. Ends are flat: a domed end is for the
author to put into the volume's uncertainty. Refuses heights and fractions that the shape cannot have.
"""

from __future__ import annotations

from dataclasses import dataclass
from enum import StrEnum
from math import acos, isfinite, pi, sin

from runbook.errors import InputUnusable
from runbook.fluids.roots import bracketed_root

_SPHERE_TOLERANCE = 0.05
"""How far a sphere's stated volume may lie from that of its diameter, for necks and fittings [1]."""


class ShapeKind(StrEnum):
    """How the vessel lies or stands."""

    LYING_CYLINDER = "lying cylinder"
    UPRIGHT_CYLINDER = "upright cylinder"
    SPHERE = "sphere"


@dataclass(frozen=True, slots=True)
class Shape:
    """The inside of a vessel as seen through its window."""

    kind: ShapeKind
    """Which way gravity cuts it."""
    diameter: float
    """Inside [m]; positive."""
    volume: float
    """Of the part that holds the charge [m3]; positive; of a sphere within 5 % of what its diameter makes."""

    def __post_init__(self) -> None:
        if not (isfinite(self.diameter) and isfinite(self.volume) and min(self.diameter, self.volume) > 0.0):
            raise InputUnusable(
                f"a {self.kind} needs a diameter and a volume above zero, not {self.diameter:.6g} m "
                f"and {self.volume:.6g} m3"
            )
        ball = pi * self.diameter**3 / 6.0
        if self.kind is ShapeKind.SPHERE and abs(self.volume / ball - 1.0) > _SPHERE_TOLERANCE:
            raise InputUnusable(
                f"a sphere of {self.diameter * 1e3:.4g} mm holds {ball * 1e6:.4g} mL, "
                f"not {self.volume * 1e6:.4g} mL: check its diameter"
            )

    @property
    def full_height(self) -> float:
        """From the lowest to the highest point of the inside [m]."""
        if self.kind is ShapeKind.UPRIGHT_CYLINDER:
            return self.volume / (0.25 * pi * self.diameter**2)
        return self.diameter

    def volume_below(self, height: float) -> float:
        """Share of the volume [1] below a height [m]. Raises InputUnusable outside the vessel."""
        x = height / self.full_height
        if not -1e-9 <= x <= 1.0 + 1e-9:
            raise InputUnusable(
                f"a height of {height * 1e3:.4g} mm is outside the vessel, "
                f"which is {self.full_height * 1e3:.4g} mm high inside"
            )
        return _share_below(self.kind, min(1.0, max(0.0, x)))

    def height(self, liquid_fraction: float) -> float:
        """Height [m] to which liquid of that share of the volume [1] stands. Raises InputUnusable."""
        if not -1e-9 <= liquid_fraction <= 1.0 + 1e-9:
            raise InputUnusable(f"liquid cannot fill {liquid_fraction:.6g} of the vessel: a share is 0 to 1")
        wanted = min(1.0, max(0.0, liquid_fraction))
        if self.kind is ShapeKind.UPRIGHT_CYLINDER:
            return wanted * self.full_height
        share = bracketed_root(lambda x: _share_below(self.kind, x) - wanted, 0.0, 1.0, 1e-12)
        return share * self.full_height

    def height_of_volume(self, liquid_volume: float) -> float:
        """Height [m] to which a volume of liquid [m3] stands. Raises InputUnusable."""
        return self.height(liquid_volume / self.volume)


def _share_below(kind: ShapeKind, x: float) -> float:
    """Share of the volume [1] below a share x of the height [1]; rises from 0 to 1."""
    if kind is ShapeKind.UPRIGHT_CYLINDER:
        return x
    if kind is ShapeKind.SPHERE:
        return x * x * (3.0 - 2.0 * x)
    # Circular segment: twice the half angle at the axis.
    angle = 2.0 * acos(1.0 - 2.0 * x)
    return (angle - sin(angle)) / (2.0 * pi)
