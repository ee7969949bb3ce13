"""Least, best and most charge for the sight one wants: it vanishes in the window, fills to the top, or dries out."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import replace

from runbook.answers import ChargeBounds
from runbook.apparatus.model import Apparatus
from runbook.assess.bounds import charge_bounds
from runbook.assess.boxes import viewed_shape
from runbook.assess.choice.standard import Wanted, standard_scene, tolerance
from runbook.assess.scene import Scene
from runbook.assess.sights.marks import window_of
from runbook.errors import OutsideValidity
from runbook.fluids.substance import Substance, substance

SIGHTS = ("vanishes", "fills", "dries")
"""The surface fades where it stands; liquid reaches the top; the last liquid goes."""
_MARGIN = 3.0
"""How far below the hottest one means to go the sight should fall [K]."""


class Choice:
    """One vessel, one fluid, one sight."""

    def __init__(self, apparatus: Apparatus, file: str, wanted: Wanted, sight: str) -> None:
        """Raises InputUnusable for an unknown fluid."""
        self.apparatus, self.file, self.wanted, self.sight = apparatus, file, wanted, sight
        self.fluid: Substance = substance(wanted.fluid)
        self.volume = apparatus.volume.free.value
        """Stated free volume [m3]."""
        self.half = tolerance(apparatus, self.fluid.critical_density * self.volume, wanted.tolerance)
        """How exactly the charge can be loaded, half-width [kg]."""

    def scene(self, mass: float) -> Scene:
        """The standard demonstration with that charge [kg]."""
        return standard_scene(self.apparatus, self.file, self.wanted, mass, self.half)

    def bounds(self) -> ChargeBounds:
        """What may be loaded, each bound with its reason; None where no charge does it."""
        impossible = self._impossible()
        vanishes = charge_bounds(self.scene(self.fluid.critical_density * self.volume))
        if impossible:
            return replace(vanishes, least_kg=None, best_kg=None, least_reason=impossible, best_reason=impossible)
        if self.sight == "vanishes":
            return vanishes
        if self.sight == "fills":
            return self._fills(vanishes)
        return self._dries(vanishes)

    def _impossible(self) -> str:
        """Why this sight cannot be had in this vessel at all; empty where it can."""
        critical, triple = self.fluid.critical_temperature, self.fluid.triple_temperature
        if self.apparatus.window is None:
            return "this vessel has no window: no charge shows anything"
        cold, hot = self.wanted.room_coldest, self.wanted.warm_to
        name = self.fluid.name
        if critical <= cold:
            return f"{name} is above its critical temperature, {_degC(critical)}, in the room: there is no surface"
        if triple >= hot:
            return f"{name} is solid up to {_degC(triple)}, hotter than this source may go"
        if self.sight == "vanishes" and critical + 1.0 > hot:
            return f"{name} fades at {_degC(critical)}, and this source may be set to {_degC(hot)} at most"
        return ""

    def _fills(self, vanishes: ChargeBounds) -> ChargeBounds:
        """Liquid reaches the top between the room and the hottest."""
        end = min(self.wanted.warm_to, self.fluid.critical_temperature - 0.5)
        least, best = self._liquid_full(end), self._liquid_full(end - _MARGIN)
        most = vanishes.most_kg
        reason = f"liquid reaches the top at {_degC(end - _MARGIN)}, {_MARGIN:.0f} K before the end"
        if most is not None and best > most:
            best, reason = most, "what would fill it earlier is more than the most"
        if most is not None and least + self.half > most:
            none = f"what fills it at {_degC(end)} is more than the most: this vessel does not bear being liquid-full"
            return replace(vanishes, least_kg=None, best_kg=None, least_reason=none, best_reason=none)
        return ChargeBounds(
            least + self.half, best, most, f"with less the liquid does not reach the top by {_degC(end)}", reason,
            vanishes.most_reason,
        )  # fmt: skip

    def _dries(self, vanishes: ChargeBounds) -> ChargeBounds:
        """The last liquid goes between the room and the hottest, and something is seen of it before."""
        end = min(self.wanted.warm_to, self.fluid.critical_temperature - 0.5)
        most, best = self._dry(end), self._dry(end - _MARGIN)
        most_reason = f"with more the last liquid has not gone by {_degC(end)}"
        if vanishes.most_kg is not None and vanishes.most_kg < most:
            most, most_reason = vanishes.most_kg, vanishes.most_reason
        seen = self._seen_cold()
        least, most = (None if seen is None else seen + self.half), most - self.half
        if least is None or least > most:
            none = "no charge both stands in the window in the coldest room and dries out in time"
            return replace(vanishes, least_kg=None, best_kg=None, least_reason=none, best_reason=none)
        reason = f"the last liquid goes at {_degC(end - _MARGIN)}, {_MARGIN:.0f} K before the end"
        if best < least:
            best, reason = least, "what dries earlier is less than the least"
        return ChargeBounds(
            least, min(best, most), most, "with less no liquid stands in the window in the coldest room", reason,
            most_reason,
        )  # fmt: skip

    def _liquid_full(self, temperature: float) -> float:
        return self.fluid.saturation(temperature).liquid_density * self.volume

    def _dry(self, temperature: float) -> float:
        return self.fluid.saturation(temperature).vapour_density * self.volume

    def _seen_cold(self) -> float | None:
        """Charge [kg] whose surface stands at the lower edge of the window in the coldest room."""
        scene = self.scene(self.fluid.critical_density * self.volume)
        share = viewed_shape(scene).volume_below(window_of(scene).low)
        try:
            both = self.fluid.saturation(self.wanted.room_coldest)
        except OutsideValidity:
            return None
        return self.volume * (both.vapour_density + share * (both.liquid_density - both.vapour_density))


def _degC(kelvin: float) -> str:
    return f"{kelvin - 273.15:.1f} degC"


def largest(low: float, high: float, good: Callable[[float], bool], step: float) -> float | None:
    """The largest value between low and high that is good, to within step; None where not even low is."""
    if not good(low):
        return None
    if good(high):
        return high
    while high - low > step:
        middle = 0.5 * (low + high)
        low, high = (middle, high) if good(middle) else (low, middle)
    return low
