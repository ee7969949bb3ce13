"""A charge let down through a hole: what leaves, what stays, how cold it gets, and the solid left at the end.

Mass and energy are kept exactly; what leaves is drawn from the vapour by a port on top, from the liquid by one below
while there is liquid. The flow is homogeneous equilibrium. An outlet plugged by solid is not computed here.
"""

from __future__ import annotations

from dataclasses import dataclass, replace
from math import floor, pi, sqrt

from runbook.charge.nozzle import throat
from runbook.errors import OutsideValidity
from runbook.fluids.flash import Flash
from runbook.fluids.roots import bracketed_root
from runbook.fluids.state import Region, State
from runbook.fluids.substance import Substance

DISCHARGE = 0.84
"""Discharge coefficient of a sharp hole, common practice [1]."""
_LIQUID_DRAWN = 0.02
"""Share of the volume under which a low port draws the mixture [1]; without it the flow chatters between the two."""
_SEVERAL = (Region.LIQUID_VAPOUR, Region.SOLID_VAPOUR, Region.THREE_PHASE)
_NODE = 0.5
"""Temperatures between which the flux of two phases is interpolated [K]: within three parts in ten thousand."""
_TOO_NEAR = 3.0
"""Nearer to critical than this nothing is interpolated [K]."""
_LOOK_ANEW = 25
"""After so many fluxes found beside the last throat the whole range is searched again: it may have jumped."""
_MOST_A_STEP = 0.01
"""Share of the mass, and of the melting plateau, that one step may move [1]."""


@dataclass(frozen=True, slots=True)
class Hole:
    """A way out to lower pressure."""

    bore: float
    """[m]"""
    port: str
    """'top', 'bottom' or 'dip tube'."""
    discharge: float = DISCHARGE
    """[1]"""

    @property
    def area(self) -> float:
        """That counts [m2]."""
        return self.discharge * pi * self.bore**2 / 4.0


@dataclass(frozen=True, slots=True)
class Contents:
    """What is in the vessel."""

    mass: float
    """[kg]"""
    energy: float
    """Internal energy [J/kg]."""


@dataclass(frozen=True, slots=True)
class Leaving:
    """What passes a hole now."""

    flow: float
    """[kg/s]"""
    enthalpy: float
    """[J/kg]"""


class LetDown:
    """One substance in one volume. Not to be shared between threads."""

    def __init__(self, substance: Substance, volume: float) -> None:
        """volume [m3]."""
        self.substance, self.volume = substance, volume
        self._flash = Flash(substance)
        self._near: float | None = None
        self._fluxes: dict[tuple[Region, bool, float, float], float] = {}
        self._throats: dict[Region, tuple[float | None, int]] = {}

    def state(self, contents: Contents) -> State:
        """Everything at a mass and an energy; on the melting plateau with its fractions. Raises OutsideValidity."""
        fluid, density = self.substance, contents.mass / self.volume
        plateau = fluid.plateau(density)
        if plateau is not None and plateau[0] < contents.energy < plateau[1]:
            return fluid.plateau_state(density, contents.energy)
        low, high = fluid.min_temperature, min(fluid.max_temperature, 700.0)
        if plateau is not None:
            low, high = (
                (low, fluid.triple_temperature) if contents.energy <= plateau[0] else (fluid.triple_temperature, high)
            )
        temperature = self._temperature(density, contents.energy, low, high, plateau)
        self._near = temperature
        return fluid.state(temperature, density)

    def leaving(self, state: State, hole: Hole, behind: float) -> Leaving:
        """What passes a hole from a state to a pressure behind it [Pa]. Raises OutsideValidity."""
        flux = self._between(state, hole.port, behind)
        if flux is None:
            flux = self._flux(state, hole.port, behind)
        return Leaving(flux * hole.area, self._drawn(state, hole.port)[0])

    def _flux(self, state: State, port: str, behind: float) -> float:
        """[kg/m2/s]"""
        # Of two phases together the flux hangs on temperature alone, and 5 mK move it by a ten-thousandth.
        key = None
        if state.region in _SEVERAL:
            key = (state.region, self._draws_liquid(state, port), round(state.temperature, 2), behind)
            if key in self._fluxes:
                return self._fluxes[key]
        # The throat's share of the pressure moves little from one moment to the next.
        share, used = self._throats.get(state.region, (None, 0))
        near = None if share is None or used >= _LOOK_ANEW else share * state.pressure
        found = throat(self._flash, *self._drawn(state, port), state.pressure, behind, near)
        self._throats[state.region] = (found.pressure / state.pressure, 0 if near is None else used + 1)
        if key is not None:
            self._fluxes[key] = found.flux
        return found.flux

    def _between(self, state: State, port: str, behind: float) -> float | None:
        """The flux [kg/m2/s] from those at two temperatures around; None where that would not be near enough."""
        fluid, t = self.substance, state.temperature
        if state.region not in (Region.LIQUID_VAPOUR, Region.SOLID_VAPOUR):
            return None
        solid = state.region is Region.SOLID_VAPOUR
        low = _NODE * floor(t / _NODE)
        ends = low, low + _NODE
        inside = fluid.min_temperature, fluid.triple_temperature
        if not solid:
            inside = fluid.triple_temperature, fluid.critical_temperature - _TOO_NEAR
        mixed = not solid and port != "top" and not self._draws_liquid(state, port)
        if mixed or ends[0] < inside[0] or ends[1] > inside[1]:
            return None
        squares = []
        for end in ends:
            there = replace(state, temperature=end, pressure=self._over(end, solid))
            if there.pressure <= behind:
                return None
            squares.append(self._flux(there, port, behind) ** 2)
        # The square: near no pressure difference the flux begins like a root.
        return sqrt(squares[0] + (t - low) / _NODE * (squares[1] - squares[0]))

    def _over(self, temperature: float, solid: bool) -> float:
        """Pressure [Pa] over the solid, or the liquid, at a temperature [K]."""
        frozen = self.substance.solid
        if solid and frozen is not None:
            return frozen.sublimation_pressure(temperature)
        return self.substance.saturation(temperature).pressure

    def _draws_liquid(self, state: State, port: str) -> bool:
        return port != "top" and (state.liquid or 0.0) > _LIQUID_DRAWN

    def advance(self, contents: Contents, hole: Hole, behind: float, heat: float, dt: float) -> Contents:
        """What is left after dt [s] with heat [W] from the wall; until the pressure stands at that behind [Pa].

        Second order (midpoint); steps are as long as the flow allows.
        """
        left = dt
        while left > 1e-12:
            state = self.state(contents)
            if state.pressure <= behind * 1.0005:
                return contents
            out = self.leaving(state, hole, behind)
            step = min(left, self._longest(contents, state, out, heat))
            half = self._after(contents, out, heat, 0.5 * step)
            middle = self.state(half)
            if middle.pressure > behind:
                out = self.leaving(middle, hole, behind)
            contents = self._after(contents, out, heat, step)
            left -= step
        return contents

    def _after(self, contents: Contents, out: Leaving, heat: float, dt: float) -> Contents:
        gone = min(out.flow * dt, 0.5 * contents.mass)
        mass = contents.mass - gone
        return Contents(mass, (contents.mass * contents.energy + heat * dt - gone * out.enthalpy) / mass)

    def _longest(self, contents: Contents, state: State, out: Leaving, heat: float) -> float:
        """Step [s] that moves no more than a hundredth of what there is."""
        moved = out.flow / contents.mass
        if state.region is Region.THREE_PHASE:
            begin, end = self.substance.plateau(contents.mass / self.volume) or (0.0, 1.0)
            latent = abs(heat - out.flow * (out.enthalpy - contents.energy)) / (contents.mass * (end - begin))
            moved = max(moved, latent)
        return _MOST_A_STEP / moved if moved > 0.0 else 1e9

    def _drawn(self, state: State, port: str) -> tuple[float, float]:
        """Enthalpy [J/kg] and entropy [J/kg/K] of what a port draws."""
        fluid, t, p = self.substance, state.temperature, state.pressure
        if state.region is Region.LIQUID_VAPOUR:
            both = fluid.saturation(t)
            if port == "top":
                return both.vapour_energy + p / both.vapour_density, both.vapour_entropy
            if (state.liquid or 0.0) > _LIQUID_DRAWN:
                return both.liquid_energy + p / both.liquid_density, both.liquid_entropy
        if state.region in (Region.SOLID_VAPOUR, Region.THREE_PHASE):
            vapour = fluid.vapour_beside_solid(min(t, fluid.triple_temperature))
            if port == "top" or state.region is Region.SOLID_VAPOUR or (state.liquid or 0.0) <= _LIQUID_DRAWN:
                return vapour.gibbs + t * vapour.entropy, vapour.entropy
            both = fluid.saturation(fluid.triple_temperature)
            return both.liquid_energy + p / both.liquid_density, both.liquid_entropy
        if state.internal_energy is None or state.entropy is None:
            raise OutsideValidity(f"what leaves at {t:.6g} K is not fixed")
        return state.internal_energy + p / state.density, state.entropy

    def _temperature(
        self, density: float, energy: float, low: float, high: float, plateau: tuple[float, float] | None
    ) -> float:
        """Temperature [K] of an energy [J/kg] between two temperatures, looked for around the last one found."""
        fluid = self.substance

        def excess(t: float) -> float:
            found = fluid.state(t, density).internal_energy
            if found is not None:
                return found - energy
            # The plateau itself: below it from the cold side, above it from the warm one.
            return (plateau[0] if plateau and t >= high else plateau[1] if plateau else 0.0) - energy

        near = self._near
        if near is not None and low < near < high:
            for width in (0.05, 0.5, 5.0):
                a, b = max(low, near - width), min(high, near + width)
                at_a, at_b = excess(a), excess(b)
                if (at_a > 0.0) != (at_b > 0.0):
                    return bracketed_root(excess, a, b, 1e-8, at_a, at_b)
        try:
            return bracketed_root(excess, low, high, 1e-8)
        except ValueError as error:
            raise OutsideValidity(f"no state of {density:.6g} kg/m3 has {energy:.6g} J/kg") from error
