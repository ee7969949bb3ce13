"""The simulated vessel: advance(vessel, controls, dt) is pure; nothing here knows of procedures or screens.

Closed, open or empty, heat moves by the one step that left alone uses too; what leaves is equilibrium flow through the
holes that are open. Mass and energy are kept, and what came and went is counted. Times show the trend. Raises
OutsideValidity where the models end.
"""

from __future__ import annotations

import contextlib
from dataclasses import replace
from math import inf

from runbook.charge.filling import air_pressure
from runbook.charge.heat import advance as advance_lumps
from runbook.charge.isochore import Isochore
from runbook.charge.letdown import Contents, Hole, LetDown
from runbook.charge.lumps import HeatPath, Lumps, driven_to, exchanged, stored
from runbook.errors import OutsideValidity
from runbook.fluids.state import State
from runbook.fluids.substance import Substance
from runbook.rehearsal.contents import Controls, Relieving, Tally, Vessel, after_leaving, let_out, warmed
from runbook.rehearsal.lying import InTheOpen, Lying

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


__all__ = ["Controls", "Relieving", "Simulation", "Tally", "Vessel"]


class Simulation:
    """The physics of one vessel; holds no state but caches."""

    def __init__(self, substance: Substance, volume: float, path: HeatPath, relief: Relieving | None = None) -> None:
        """volume [m3]."""
        self.substance, self.volume, self.path, self.relief = substance, volume, path, relief
        self._letdown = LetDown(substance, volume)
        self._open = InTheOpen(substance, volume)
        self._isochore: tuple[float, Isochore] | None = None
        self._state: tuple[tuple[float, float], State] | None = None

    # -- hands ----------------------------------------------------------------------------------------

    def loaded(self, vessel: Vessel, mass: float, barometer: float) -> Vessel:
        """Solid (or liquid) of a mass [kg] laid into the open vessel, at its temperature in the open."""
        lying = self._open.lying(barometer)
        if self._stays(vessel.body_K, barometer):
            return self.closed_in(vessel, mass, vessel.body_K)
        # What is too little to fill the vessel with its own vapour comes all the same as what lies there.
        density = max(mass / self.volume, 2.0 * lying.vapour_density)
        energy = self.substance.state(lying.temperature, density).internal_energy or 0.0
        return self._put(replace(vessel, in_the_open=True), mass, energy)

    def _put(self, vessel: Vessel, mass: float, energy: float) -> Vessel:
        """The vessel with another charge [kg] of an energy [J/kg] in place of what was in."""
        tally = vessel.tally
        tally = replace(
            tally,
            mass_in=tally.mass_in + mass - vessel.mass,
            energy_in=tally.energy_in + mass * energy - vessel.mass * vessel.energy,
        )
        return replace(vessel, mass=mass, energy=energy, tally=tally)

    def closed_in(self, vessel: Vessel, mass: float, kelvin: float) -> Vessel:
        """The vessel with so much [kg] closed in, in place of what was, at a temperature [K]."""
        state = self.substance.state(kelvin, mass / self.volume)
        return self._put(vessel, mass, vessel.energy if state.internal_energy is None else state.internal_energy)

    def source_filled(self, vessel: Vessel, kelvin: float) -> Vessel:
        """Fresh water at a temperature [K] in place of what was in the source."""
        brought = self.path.source_heat_capacity * (kelvin - vessel.source_K)
        tally = replace(vessel.tally, energy_in=vessel.tally.energy_in + brought)
        return replace(vessel, source_K=kelvin, tally=tally)

    def stood(self, vessel: Vessel, body_K: float, source_K: float) -> Vessel:
        """The body has come to one temperature and the source to another [K], by the room."""
        after = replace(vessel, body_K=body_K, source_K=source_K, far_K=None)
        given = self.stored(after) - self.stored(vessel)
        return replace(after, tally=replace(after.tally, from_room=after.tally.from_room + given))

    # -- looking --------------------------------------------------------------------------------------

    def stored(self, vessel: Vessel) -> float:
        """All the heat in charge, body and source [J], but for a constant."""
        return stored(self._lumps(vessel), vessel.mass, self.path)

    def in_the_open_at(self, barometer: float) -> float:
        """Temperature of what lies in the open [K]."""
        return self._open.lying(barometer).temperature

    def _stays(self, kelvin: float, barometer: float) -> bool:
        """In the open it is a liquid that does not boil, at a temperature [K] and a pressure of the room [Pa]."""
        return self.substance.triple_temperature < kelvin < self.in_the_open_at(barometer)

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
        if not controls.vent_open and self._stays(controls.room_K, controls.barometer):
            # Cold steam draws a vacuum.
            return state.pressure + air
        return max(state.pressure + air, controls.barometer)

    def temperature(self, vessel: Vessel) -> float:
        """Of the closed charge; of the body where there is none [K]."""
        state = self.state(vessel)
        return vessel.body_K if state is None else state.temperature

    # -- moving ---------------------------------------------------------------------------------------

    def advance(self, vessel: Vessel, controls: Controls, dt: float) -> Vessel:
        """The vessel after dt [s]."""
        left = dt
        while left > 1e-9:
            vessel = self._relieved(vessel, controls)
            if vessel.mass <= _GONE:
                vessel, step = self._empty(vessel, controls, left)
                left -= step
                continue
            if vessel.in_the_open and controls.vent_open and controls.bore > 0.0:
                vessel, step = self._lying(vessel, controls, left)
                left -= step
                continue
            vessel = replace(vessel, in_the_open=False)
            holes = self._holes(vessel, controls)
            quiet = not controls.vent_open or self._stays(controls.room_K, controls.barometer)
            if holes and quiet and self.pressure(vessel, controls) <= controls.barometer * 1.001:
                # Nothing leaves through a leak that nothing drives, and it makes no open vessel; nor does what lies
                # there as a liquid leave before it boils.
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

    def _empty(self, vessel: Vessel, controls: Controls, longest: float) -> tuple[Vessel, float]:
        """One step [s] of a vessel with nothing in it; a breath that was left has gone out."""
        step = min(longest, _LEAK_STEP)
        return self._warmed(let_out(vessel), controls, step, 0.0, 0.0, 0.0), step

    def _lying(self, vessel: Vessel, controls: Controls, longest: float) -> tuple[Vessel, float]:
        """One step [s] of what lies in the open: it leaves by what the body gives it."""
        lying = self._open.lying(controls.barometer)
        step = min(longest, _LEAK_STEP)
        after = self._given_in_the_open(vessel, controls, lying, step)
        wanted = lying.wants(vessel.mass, vessel.energy)
        given = after.mass * after.energy - vessel.mass * vessel.energy
        if given > wanted > 0.0:
            # The last of it goes within the step: what comes after finds the vessel empty.
            step *= max(wanted / given, 1e-3)
            after = self._given_in_the_open(vessel, controls, lying, step)
        gone = lying.leaving(after.mass, after.energy)
        if after.mass - gone <= lying.vapour_mass:
            return let_out(after), step
        return after_leaving(after, gone, gone * lying.enthalpy), step

    def _given_in_the_open(self, vessel: Vessel, controls: Controls, lying: Lying, step: float) -> Vessel:
        after = self._warmed(vessel, controls, step, lying.temperature, inf, _OPEN_CONTACT)
        if after.energy < vessel.energy:
            # A body colder than what lies in it is not warmed by it: the vapour between them stands still.
            return self._warmed(vessel, controls, step, lying.temperature, inf, 0.0)
        return after

    def _lumps(self, vessel: Vessel) -> Lumps:
        tally = vessel.tally
        return Lumps(vessel.energy, vessel.body_K, vessel.source_K, vessel.far_K, tally.from_room, tally.from_source)

    def _path(self, controls: Controls) -> HeatPath:
        if controls.loss == 1.0:
            return self.path
        return replace(self.path, loss_to_room=controls.loss * self.path.loss_to_room)

    def _warmed(
        self, vessel: Vessel, controls: Controls, dt: float, fluid_K: float, takes_up: float, contact: float
    ) -> Vessel:
        """After dt [s] in one step, what leaves left out; the charge by its temperature and what it takes up [J/K]."""
        path = self._path(controls)
        limit = driven_to(path, controls.heating)
        return warmed(vessel, exchanged(
            self._lumps(vessel), vessel.mass, fluid_K, takes_up, path, controls.room_K, limit, dt, contact
        ))  # fmt: skip

    def _closed(self, vessel: Vessel, controls: Controls, dt: float) -> Vessel:
        isochore = self._isochore_of(vessel.mass / self.volume)
        missing = vessel.mass * (isochore.energies[0] - vessel.energy)
        if missing > 0.0:
            # Colder than what is modelled the body gives at once what it would give soon.
            colder = missing / self.path.body_heat_capacity
            far_K = None if vessel.far_K is None else vessel.far_K - colder
            vessel = replace(vessel, energy=isochore.energies[0], body_K=vessel.body_K - colder, far_K=far_K)
        after = advance_lumps(
            self._lumps(vessel), vessel.mass, isochore, self._path(controls), controls.room_K, controls.heating, dt
        )
        return warmed(vessel, after)

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
            return (replace(vessel, in_the_open=True) if lies else let_out(vessel)), 0.0
        out = [self._letdown.leaving(state, hole, controls.barometer) for hole in holes]
        flow = sum(one.flow for one in out)
        seeps = flow < _SEEPS * vessel.mass
        step = min(longest, _LEAK_STEP if seeps else _STEP, 0.01 * vessel.mass / flow if flow > 0.0 else longest)
        # Implicit in the charge's own warming: a little gas in a warm body must not overshoot it.
        after = self._warmed(vessel, controls, step, state.temperature, vessel.mass * _GAS_CAPACITY, 1.0)
        gone = min(flow * step, 0.5 * vessel.mass)
        carried = sum(one.flow * one.enthalpy for one in out) / flow * gone if flow > 0.0 else 0.0
        return after_leaving(after, gone, carried), step

    def _isochore_of(self, density: float) -> Isochore:
        if self._isochore is None or self._isochore[0] != density:
            self._isochore = (density, Isochore(self.substance, density))
        return self._isochore[1]
