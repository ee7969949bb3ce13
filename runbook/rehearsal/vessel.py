"""The simulated vessel: advance(vessel, controls, dt) is pure; nothing here knows of procedures or screens.

One temperature of the charge, one of the body, one of the source. Closed, the heat balance is the one that left alone
uses; open, what leaves is equilibrium flow through the holes that are open, and energy and mass are kept. Times show
the trend. Raises OutsideValidity where the models end.
"""

from __future__ import annotations

import contextlib
from dataclasses import dataclass, replace

from runbook.charge.filling import air_pressure
from runbook.charge.heat import HeatPath, Lumps
from runbook.charge.heat import advance as advance_lumps
from runbook.charge.isochore import Isochore
from runbook.charge.letdown import Contents, Hole, LetDown
from runbook.errors import OutsideValidity
from runbook.fluids.state import State
from runbook.fluids.substance import Substance

_OPEN_CONTACT = 0.1
"""Share of the coupling that lumps of solid, or liquid, in the open have, an estimate [1]."""
_GONE = 1e-6
"""[kg] below which a vessel counts as empty."""
_GAS_CAPACITY = 700.0
"""Heat capacity of a gas at fixed volume, about; only holds the step of a little gas in a warm body [J/kg/K]."""
_STEP, _LEAK_STEP = 1.0, 30.0
"""Longest step while gas leaves, and while it only seeps [s]."""
_SEEPS = 2e-5
"""Share of the charge a second under which it only seeps [1/s]."""
RELIEF_BORE = 4.0e-3
"""Bore of a relief device, which no apparatus file states: wide enough for what this vessel holds [m]."""
_PASSED = 1.01
"""Share of its opening pressure that a step may pass before the device is looked at [1]."""
_RESEATS = 0.9
"""Share of its opening pressure at which a relief valve shuts again, common practice [1]."""


@dataclass(frozen=True, slots=True)
class Relieving:
    """The relief device of the simulated vessel."""

    opens_at: float
    """Absolute [Pa]; infinite where it does not open at all."""
    reseats: bool
    """A valve shuts again; a disc does not."""


@dataclass(frozen=True, slots=True)
class Controls:
    """What hands, and faults, have set."""

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
    port: str = "top"
    """Where that way out takes from."""
    leak: float = 0.0
    """Bore of a leak [m]; 0: tight."""
    loss: float = 1.0
    """Share of the body's loss to the room that is left [1]."""

    @property
    def holes(self) -> tuple[Hole, ...]:
        """Every way out but the relief."""
        ways = [Hole(self.bore, self.port)] if self.vent_open and self.bore > 0.0 else []
        return (*ways, Hole(self.leak, "top")) if self.leak > 0.0 else tuple(ways)


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
    """Solid or liquid lies in the open vessel at the room's pressure."""
    released: float = 0.0
    """Gas given to the room so far [kg]."""
    air: float = 0.0
    """Closed in with the charge [mol]."""
    relief_open: bool = False
    """A relief device stands open."""


class Simulation:
    """The physics of one vessel; holds no state but caches."""

    def __init__(self, substance: Substance, volume: float, path: HeatPath, relief: Relieving | None = None) -> None:
        """volume [m3]."""
        self.substance, self.volume, self.path, self.relief = substance, volume, path, relief
        self._letdown = LetDown(substance, volume)
        self._isochore: tuple[float, Isochore] | None = None
        self._state: tuple[tuple[float, float], State] | None = None

    # -- looking --------------------------------------------------------------------------------------

    def loaded(self, vessel: Vessel, mass: float, barometer: float) -> Vessel:
        """Solid (or liquid) of a mass [kg] laid into the open vessel, at its temperature in the open."""
        temperature = self.in_the_open_at(barometer)
        density = max(mass / self.volume, 20.0)
        energy = self.substance.state(temperature, density).internal_energy or 0.0
        return replace(vessel, mass=mass, energy=energy, in_the_open=True)

    def in_the_open_at(self, barometer: float) -> float:
        """Temperature of what lies in the open [K]."""
        return self.substance.boiling_temperature(barometer)

    def state(self, vessel: Vessel) -> State | None:
        """Of the closed charge; None when empty or in the open."""
        if vessel.mass <= _GONE or vessel.in_the_open:
            return None
        key = (vessel.mass, vessel.energy)
        if self._state is None or self._state[0] != key:
            self._state = key, self._letdown.state(Contents(*key))
        return self._state[1]

    def pressure(self, vessel: Vessel, controls: Controls) -> float:
        """Absolute [Pa], trapped air included."""
        state = self.state(vessel)
        if state is None:
            return controls.barometer
        air = 0.0
        if vessel.air > 0.0:
            # Where the vessel is full of liquid the air is in it, and adds what nobody can say.
            with contextlib.suppress(OutsideValidity):
                air = air_pressure(self.substance, state.temperature, state.density, vessel.air, self.volume)
        return max(state.pressure + air, controls.barometer)

    def wall(self, vessel: Vessel, controls: Controls) -> float:
        """Temperature of the wetted wall [K]: the charge's where there is one."""
        state = self.state(vessel)
        return vessel.body_K if state is None else state.temperature

    # -- moving ---------------------------------------------------------------------------------------

    def advance(self, vessel: Vessel, controls: Controls, dt: float) -> Vessel:
        """The vessel after dt [s]."""
        left = dt
        while left > 1e-9:
            vessel = self._relieved(vessel, controls)
            if vessel.mass <= _GONE:
                return self._empty(vessel, controls, left)
            if vessel.in_the_open and controls.vent_open and controls.bore > 0.0:
                return self._open(vessel, controls, left)
            vessel = replace(vessel, in_the_open=False)
            holes = self._holes(vessel, controls)
            if holes and not controls.vent_open and self.pressure(vessel, controls) <= controls.barometer * 1.001:
                # Nothing leaves through a leak that nothing drives, and it makes no open vessel.
                holes = ()
            if not holes:
                vessel, step = self._shut(vessel, controls, left)
            else:
                vessel, step = self._flowing(vessel, controls, holes, left)
            left -= step
        return self._relieved(vessel, controls)

    def _relieved(self, vessel: Vessel, controls: Controls) -> Vessel:
        """A relief device opens at its pressure; a valve shuts again well below it."""
        if self.relief is None or vessel.in_the_open or vessel.mass <= _GONE:
            return vessel
        pressure = self.pressure(vessel, controls)
        if not vessel.relief_open:
            return replace(vessel, relief_open=True) if pressure >= self.relief.opens_at else vessel
        shut = self.relief.reseats and pressure < _RESEATS * self.relief.opens_at
        return replace(vessel, relief_open=False) if shut else vessel

    def _holes(self, vessel: Vessel, controls: Controls) -> tuple[Hole, ...]:
        return (*controls.holes, Hole(RELIEF_BORE, "top")) if vessel.relief_open else controls.holes

    def _empty(self, vessel: Vessel, controls: Controls, dt: float) -> Vessel:
        body = self.path.body_heat_capacity
        share = min(1.0, dt * self.path.loss_to_room / body) if body > 0 else 1.0
        warmed = vessel.body_K + share * (controls.room_K - vessel.body_K)
        return replace(vessel, mass=0.0, in_the_open=False, air=0.0, body_K=warmed)

    def _open(self, vessel: Vessel, controls: Controls, dt: float) -> Vessel:
        """What lies in the open leaves by what the body gives it."""
        cold = self.in_the_open_at(controls.barometer)
        watt = _OPEN_CONTACT * self.path.from_fluid * max(0.0, vessel.body_K - cold)
        gone = min(vessel.mass, watt * dt / self._latent(cold))
        warmed = self.path.loss_to_room * (controls.room_K - vessel.body_K)
        body = vessel.body_K + (warmed - watt) * dt / self.path.body_heat_capacity
        return replace(vessel, mass=vessel.mass - gone, body_K=body, released=vessel.released + gone)

    def _latent(self, temperature: float) -> float:
        """Heat [J/kg] from what lies in the open to its vapour at a temperature [K]."""
        fluid = self.substance
        if fluid.solid is not None and temperature < fluid.triple_temperature:
            return fluid.solid.heat_of_sublimation(temperature)
        both = fluid.saturation(temperature)
        return temperature * (both.vapour_entropy - both.liquid_entropy)

    def _closed(self, vessel: Vessel, controls: Controls, dt: float) -> Vessel:
        isochore = self._isochore_of(vessel.mass / self.volume)
        energy = max(vessel.energy, isochore.energies[0])
        path = replace(self.path, loss_to_room=controls.loss * self.path.loss_to_room)
        lumps = Lumps(energy, vessel.body_K, vessel.source_K)
        after = advance_lumps(lumps, vessel.mass, isochore, path, controls.room_K, controls.heating, dt)
        return replace(vessel, energy=after.fluid_energy, body_K=after.body_K, source_K=after.source_K)

    def _shut(self, vessel: Vessel, controls: Controls, longest: float) -> tuple[Vessel, float]:
        """One step [s] of the closed charge; none that passes the opening of a relief device by more than a little."""
        if self.relief is None:
            return self._closed(vessel, controls, longest), longest
        step = min(longest, _LEAK_STEP)
        after = self._closed(vessel, controls, step)
        while step > _STEP and self.pressure(after, controls) > _PASSED * self.relief.opens_at:
            step = max(_STEP, 0.25 * step)
            after = self._closed(vessel, controls, step)
        return after, step

    def _flowing(
        self, vessel: Vessel, controls: Controls, holes: tuple[Hole, ...], longest: float
    ) -> tuple[Vessel, float]:
        """One step [s] of what leaves; what stays is cooled by it, and warmed by the body."""
        state = self.state(vessel)
        assert state is not None, "something closed is in it"
        if state.pressure <= controls.barometer * 1.001:
            lies = (state.solid or 0.0) > 0.0 or (0.0 < (state.liquid or 0.0) < 1.0)
            return replace(vessel, in_the_open=lies, mass=vessel.mass if lies else 0.0), 0.0
        out = [self._letdown.leaving(state, hole, controls.barometer) for hole in holes]
        flow = sum(one.flow for one in out)
        seeps = flow < _SEEPS * vessel.mass
        step = min(longest, _LEAK_STEP if seeps else _STEP, 0.01 * vessel.mass / flow if flow > 0.0 else longest)
        # Implicit in the charge's own warming: a little gas in a warm body must not overshoot it.
        coupling = self.path.from_fluid * step
        gap = vessel.body_K - state.temperature
        heat = coupling * gap / (1.0 + coupling / (vessel.mass * _GAS_CAPACITY))
        gone = min(flow * step, 0.5 * vessel.mass)
        carried = sum(one.flow * one.enthalpy for one in out) / flow * gone if flow > 0.0 else 0.0
        left = vessel.mass - gone
        body, source = self._warmed(vessel, controls, heat, step)
        return replace(
            vessel,
            mass=left,
            energy=(vessel.mass * vessel.energy + heat - carried) / left,
            body_K=body,
            source_K=source,
            released=vessel.released + gone,
            # Air leaves with the vapour it is in.
            air=vessel.air * (left / vessel.mass),
        ), step

    def _warmed(self, vessel: Vessel, controls: Controls, given: float, dt: float) -> tuple[float, float]:
        """Body and source [K] after dt [s] in which the body gave the charge so much [J]."""
        path = self.path
        room = controls.loss * path.loss_to_room * (controls.room_K - vessel.body_K) * dt
        if path.source_heat_capacity <= 0.0:
            return vessel.body_K + (room - given) / path.body_heat_capacity, vessel.source_K
        across = path.source_coupling * (vessel.source_K - vessel.body_K) * dt
        limit = controls.heating if isinstance(controls.heating, float) else path.source_limit_K
        on = controls.heating is not False and (limit is None or vessel.source_K < limit)
        power = path.source_power * dt if on else 0.0
        body = vessel.body_K + (room + across - given) / path.body_heat_capacity
        return body, vessel.source_K + (power - across) / path.source_heat_capacity

    def _isochore_of(self, density: float) -> Isochore:
        if self._isochore is None or self._isochore[0] != density:
            self._isochore = (density, Isochore(self.substance, density))
        return self._isochore[1]
