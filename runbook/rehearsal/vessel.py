"""The simulated vessel: advance(vessel, controls, dt) is pure; nothing here knows of procedures or screens.

Plain on purpose: one temperature of the charge, one of the body, one of the source; vapour leaves by a choked
hole; energies and masses are kept. Times show the trend. Raises OutsideValidity where the models end.
"""

from __future__ import annotations

from dataclasses import dataclass, replace
from math import pi, sqrt

from runbook.charge.heat import HeatPath, Lumps
from runbook.charge.heat import advance as advance_lumps
from runbook.charge.isochore import Isochore
from runbook.fluids.roots import bracketed_root
from runbook.fluids.state import Region, State
from runbook.fluids.substance import Substance

_GAS = 8.314462618
"""[J/mol/K]"""
_SOLID_CONTACT = 0.1
"""Share of the coupling that lumps of solid in the open have, an estimate [1]."""
_DISCHARGE = 0.84
"""Discharge coefficient of a sharp hole [1]; common practice."""
_GAMMA = 1.29
"""Heat capacity ratio of carbon dioxide gas [1]."""
_GAS_CAPACITY = 700.0
"""Heat capacity of carbon dioxide gas at fixed volume, about [J/kg/K]."""
_STEP = 1.0
"""Longest step while gas leaves [s]."""


@dataclass(frozen=True, slots=True)
class Controls:
    """What the operator has set."""

    vent_open: bool
    """Any way out to the room."""
    bore: float
    """Bore of the widest one open [m]."""
    heating: bool | float
    """False off; True on up to the cut-out; a number: set point of the source [K]."""
    room_K: float
    """[K]"""
    barometer: float
    """[Pa]"""


@dataclass(frozen=True, slots=True)
class Vessel:
    """What is in the simulated vessel now."""

    mass: float
    """Of the charge [kg]; 0 when empty."""
    energy: float
    """Internal energy of the charge [J/kg]."""
    body_K: float
    """[K]"""
    source_K: float
    """[K]"""
    in_the_open: bool
    """Solid lies in the open vessel at the room's pressure."""
    released: float = 0.0
    """Gas given to the room so far [kg]."""


class Simulation:
    """The physics of one vessel; holds no state but caches."""

    def __init__(self, substance: Substance, volume: float, path: HeatPath) -> None:
        """volume [m3]."""
        self.substance = substance
        self.volume = volume
        self.path = path
        self._isochore: tuple[float, Isochore] | None = None

    def loaded(self, vessel: Vessel, mass: float, barometer: float) -> Vessel:
        """Solid of a mass [kg] laid into the open vessel, at its temperature in the open."""
        temperature = self.sublimes_at(barometer)
        density = max(mass / self.volume, 20.0)
        energy = self.substance.state(temperature, density).internal_energy or 0.0
        return replace(vessel, mass=mass, energy=energy, in_the_open=True)

    def sublimes_at(self, pressure: float) -> float:
        """Temperature of the solid at a pressure [Pa] below the triple point's [K]."""
        fluid = self.substance
        return bracketed_root(
            lambda t: fluid.pressure(t, 500.0) - pressure, fluid.min_temperature, fluid.triple_temperature, 1e-4
        )

    def state(self, vessel: Vessel) -> State | None:
        """Of the closed charge; None when empty or in the open."""
        if vessel.mass <= 0.0 or vessel.in_the_open:
            return None
        return self.state_of(vessel.mass / self.volume, vessel.energy)

    def state_of(self, density: float, energy: float) -> State:
        """The state at a density [kg/m3] and internal energy [J/kg]."""
        fluid = self.substance
        plateau = fluid.plateau(density)
        if plateau is not None and plateau[0] <= energy <= plateau[1]:
            return fluid.state(fluid.triple_temperature, density)
        low, high = fluid.min_temperature + 5.0, 450.0
        if plateau is not None:
            low, high = (
                (low, fluid.triple_temperature - 1e-6)
                if energy < plateau[0]
                else (
                    fluid.triple_temperature + 1e-6,
                    high,
                )
            )

        def excess(temperature: float) -> float:
            return (fluid.state(temperature, density).internal_energy or 0.0) - energy

        if excess(low) >= 0.0:
            return fluid.state(low, density)
        return fluid.state(bracketed_root(excess, low, high, 1e-5), density)

    def pressure(self, vessel: Vessel, controls: Controls) -> float:
        """Absolute [Pa]."""
        state = self.state(vessel)
        return controls.barometer if state is None else max(state.pressure, controls.barometer)

    def wall(self, vessel: Vessel, controls: Controls) -> float:
        """Temperature of the wetted wall [K]: the charge's where there is one."""
        state = self.state(vessel)
        return vessel.body_K if state is None else state.temperature

    def advance(self, vessel: Vessel, controls: Controls, dt: float) -> Vessel:
        """The vessel after dt [s]."""
        if vessel.mass <= 1e-6:
            return self._empty(vessel, controls, dt)
        if vessel.in_the_open:
            if controls.vent_open:
                return self._open(vessel, controls, dt)
            vessel = replace(vessel, in_the_open=False)
        if not controls.vent_open:
            return self._closed(vessel, controls, dt)
        left = dt
        while left > 0.0 and vessel.mass > 1e-6 and not vessel.in_the_open:
            step = min(_STEP, left)
            vessel = self._venting(vessel, controls, step)
            left -= step
        return vessel if left <= 0.0 else self.advance(vessel, controls, left)

    def _empty(self, vessel: Vessel, controls: Controls, dt: float) -> Vessel:
        body = self.path.body_heat_capacity
        share = min(1.0, dt * self.path.loss_to_room / body) if body > 0 else 1.0
        return replace(
            vessel,
            mass=0.0,
            in_the_open=False,
            body_K=vessel.body_K + share * (controls.room_K - vessel.body_K),
        )

    def _open(self, vessel: Vessel, controls: Controls, dt: float) -> Vessel:
        """Solid sublimes in the open by what the body gives it."""
        cold = self.sublimes_at(controls.barometer)
        watt = _SOLID_CONTACT * self.path.from_fluid * max(0.0, vessel.body_K - cold)
        gone = min(vessel.mass, watt * dt / 571e3)
        warmed = self.path.loss_to_room * (controls.room_K - vessel.body_K)
        body = vessel.body_K + (warmed - watt) * dt / self.path.body_heat_capacity
        return replace(vessel, mass=vessel.mass - gone, body_K=body, released=vessel.released + gone)

    def _closed(self, vessel: Vessel, controls: Controls, dt: float) -> Vessel:
        isochore = self._isochore_of(vessel.mass / self.volume)
        energy = max(vessel.energy, isochore.energies[0])
        lumps = Lumps(energy, vessel.body_K, vessel.source_K)
        after = advance_lumps(lumps, vessel.mass, isochore, self.path, controls.room_K, controls.heating, dt)
        return replace(vessel, energy=after.fluid_energy, body_K=after.body_K, source_K=after.source_K)

    def _venting(self, vessel: Vessel, controls: Controls, dt: float) -> Vessel:
        """Vapour leaves by a choked hole; what stays is cooled by it."""
        density = vessel.mass / self.volume
        state = self.state_of(density, vessel.energy)
        if state.pressure <= controls.barometer * 1.001:
            solid = state.region is Region.SOLID_VAPOUR
            return replace(vessel, in_the_open=solid, mass=vessel.mass if solid else 0.0)
        gone = min(self.flow(state, controls) * dt, 0.2 * vessel.mass)
        # Implicit in the charge's own warming: a little gas in a warm body must not overshoot it.
        coupling = self.path.from_fluid * dt
        heat = coupling * (vessel.body_K - state.temperature) / (1.0 + coupling / (vessel.mass * _GAS_CAPACITY))
        left = vessel.mass - gone
        total = vessel.mass * vessel.energy + heat - gone * self._leaving(state)
        room = self.path.loss_to_room * (controls.room_K - vessel.body_K) * dt
        body = vessel.body_K + (room - heat) / self.path.body_heat_capacity
        return replace(vessel, mass=left, energy=total / left, body_K=body, released=vessel.released + gone)

    def flow(self, state: State, controls: Controls) -> float:
        """Mass flow of vapour [kg/s] through the bore, ideal gas: choked above 1.8 times the barometer."""
        fluid = self.substance
        area = pi * controls.bore**2 / 4.0
        ratio = controls.barometer / state.pressure
        specific = _GAS / fluid.molar_mass
        root = sqrt(_GAMMA / (specific * state.temperature))
        if ratio < (2.0 / (_GAMMA + 1.0)) ** (_GAMMA / (_GAMMA - 1.0)):
            factor: float = (2.0 / (_GAMMA + 1.0)) ** ((_GAMMA + 1.0) / (2.0 * (_GAMMA - 1.0)))
            return _DISCHARGE * area * state.pressure * root * factor
        a, b = ratio ** (2.0 / _GAMMA), ratio ** ((_GAMMA + 1.0) / _GAMMA)
        shape = sqrt(max(0.0, 2.0 / (_GAMMA - 1.0) * (a - b)))
        return _DISCHARGE * area * state.pressure * root * shape

    def _leaving(self, state: State) -> float:
        """Enthalpy of the vapour that leaves [J/kg]."""
        fluid = self.substance
        if state.region in (Region.LIQUID_VAPOUR,):
            both = fluid.saturation(state.temperature)
            return both.vapour_energy + both.pressure / both.vapour_density
        if state.region in (Region.SOLID_VAPOUR, Region.THREE_PHASE):
            # Vapour's enthalpy hardly changes over the few kelvin below the triple point.
            both = fluid.saturation(fluid.triple_temperature)
            return both.vapour_energy + both.pressure / both.vapour_density
        return (state.internal_energy or 0.0) + state.pressure / state.density

    def _isochore_of(self, density: float) -> Isochore:
        if self._isochore is None or self._isochore[0] != density:
            self._isochore = (density, Isochore(self.substance, density))
        return self._isochore[1]
