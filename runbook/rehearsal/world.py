"""The simulated bench of one rehearsal: what hands do to the vessel follows from what the run says was done.

An act of a step is done when its line is entered, a quick act when it is confirmed: the simulated operator does
what is asked, at once. What happens then, the simulated vessel decides. It knows no margins and no rules.
"""

from __future__ import annotations

import contextlib
from dataclasses import replace

from runbook.answers import Plan
from runbook.apparatus.relief import lowest_opening
from runbook.apparatus.spaces import springs_open
from runbook.assess.boxes import viewed_shape
from runbook.assess.scene import GAS_CONSTANT, Scene
from runbook.assess.walk import Walked
from runbook.errors import OutsideValidity
from runbook.fluids.state import Region
from runbook.procedure.model import CoolTo, Load
from runbook.rehearsal.faults import (
    CLOSED,
    CLOSED_HERE,
    GAUGE,
    HEATING,
    LETTING_DOWN,
    LOADING,
    RELIEF,
    WARMING,
    Troubles,
)
from runbook.rehearsal.hands import IN_WATER, WIDE, gauge_line_open, heating, positions_in, water_around, way_out
from runbook.rehearsal.instruments import Dials, Shown
from runbook.rehearsal.physics import relieving, simulation_of
from runbook.rehearsal.vessel import Controls, Simulation, Vessel
from runbook.run.clock import Moment
from runbook.run.ledger import Ledger

_IN_AIR = 420e-6
"""Carbon dioxide in clean air, volume fraction [1]; NOAA 2023."""
_OXYGEN = 0.209
"""Oxygen in clean air, volume fraction [1]."""
_SEEN = 0.01
"""Share of the volume that liquid has to fill before anybody sees it [1]."""
_DROPS = 0.3
"""How much colder than the vapour a window is before anybody sees what runs down it, an estimate [K]."""
_LONGEST = 5.0
"""Longest step between two looks at the instruments [s]."""


class World:
    """Vessel, instruments and room of a rehearsal, moved on with the clock."""

    def __init__(
        self,
        scene: Scene,
        lines: tuple[Walked, ...],
        plan: Plan,
        seed: int,
        now: Moment,
        part: int = 0,
        troubles: Troubles | None = None,
    ) -> None:
        """A world in which nothing has been done yet; part: the one the run begins with, from 0."""
        self.troubles = troubles if troubles is not None else Troubles()
        """What goes wrong in it."""
        room = 0.5 * (scene.room_hottest + scene.room_coldest)
        self._scene, self._lines, self._plan = scene, lines, plan
        volume = scene.apparatus.volume.free.value
        self._simulation = simulation_of(scene, self.troubles)
        sprung = springs_open(scene.apparatus)
        self._springs = max(
            (WIDE if v.bore is None else v.bore.value for v in scene.apparatus.valves if v.tag in sprung), default=0.0
        )
        self._set: Controls | None = None
        self._loss = 1.0
        self._connected = False
        self._full_of_air = plan.barometer * volume / (GAS_CONSTANT * room)
        self._high_gauge = next(
            (i.tag for i in scene.apparatus.instruments if i.reads == "pressure" and i.of == scene.charge_space), None
        )
        self.room_K = room
        """Temperature of the room [K]."""
        self.own_tags = {one.tag for one in scene.apparatus.instruments}
        """Instruments that read this vessel and what is around it."""
        self._instruments = tuple(one for one in plan.instruments if one.tag in self.own_tags)
        self._dials = Dials(self._instruments, seed)
        self._shown = Shown()
        self._at = now.boot
        self._line = plan.parts[part].first - 1 if part else -1
        self._low_joined = False
        self.vessel = Vessel(0.0, 0.0, room, room, False)
        self.controls = Controls(True, WIDE, False, room, plan.barometer)
        self.highest_pressure = plan.barometer
        """So far, the true one [Pa]."""
        device = next((r for r in scene.apparatus.relief if r.space == scene.charge_space), None)
        self._relief_Pa = float("inf") if device is None else plan.barometer + lowest_opening(device).pascal
        self.relief_reached: float | None = None
        """When the true pressure first came to where the relief device may open [s of the run's clock]."""
        if plan.charge is not None:
            self._already_loaded(0.5 * (plan.charge.low_kg + plan.charge.high_kg))

    @property
    def simulation(self) -> Simulation:
        """The physics of the vessel."""
        return self._simulation

    def follow(self, ledger: Ledger) -> None:
        """Do what the run says has been done."""
        line = self._lines[ledger.line] if 0 <= ledger.line < len(self._lines) else None
        if ledger.line > self._line:
            # Somebody quick may have passed several lines since the last look; what they did was done.
            for passed in self._lines[self._line + 1 : ledger.line + 1]:
                if isinstance(passed.verb, Load):
                    self._load(passed.verb.load.value)
                elif isinstance(passed.verb, CoolTo):
                    self._fresh_water(passed.verb)
        self._line = ledger.line
        positions = positions_in(ledger, line)
        self._low_joined = gauge_line_open(self._scene, positions)
        self._connected = ledger.source in ("on", "off", "do not know")
        vent_open, bore = way_out(self._scene, self._plan.outside_valves, positions, line)
        water = water_around(line)
        self._loss = 1.0 if water is None else IN_WATER
        self._set = replace(
            self.controls,
            vent_open=vent_open,
            bore=bore,
            heating=heating(ledger, line, self.room_K, False if self._set is None else self._set.heating),
            room_K=self.room_K if water is None else water,
        )
        self._trouble()

    def _load(self, mass: float) -> None:
        """Laid into the open vessel; or, of a charge that comes as gas, let in from its cylinder [kg]."""
        if self._scene.comes_as_gas:
            self._already_loaded(mass)
        else:
            self.vessel = self._simulation.loaded(self.vessel, mass, self.controls.barometer)

    def _trouble(self) -> None:
        """Faults whose situation stands begin, and what the hands have set becomes what it really is."""
        self.troubles.look(self._situations(), self._at)
        if self._set is not None:
            real = replace(self._set, leak=0.0, loss=self._loss)
            if self._springs > 0.0 and not real.vent_open and self.troubles.away(self._at):
                # No hand is on it any more.
                real = replace(real, vent_open=True, bore=self._springs)
            self.controls = self.troubles.controls(real, self._at, self._connected)
        if self._simulation.relief is not None:
            self._simulation.relief = relieving(self._scene, self.troubles)
        fills = self.troubles.air_fills
        if fills and self.vessel.mass > 0.0 and not self.vessel.in_the_open and self.vessel.air == 0.0:
            self.vessel = replace(self.vessel, air=fills * self._full_of_air)

    def _situations(self) -> set[str]:
        """In which situations the vessel is."""
        found = {LOADING} if self.vessel.mass > 0.0 else set()
        found |= {GAUGE} if self._high_gauge is not None else set()
        found |= {RELIEF} if self._scene.apparatus.relief else set()
        found |= set() if self._scene.starts_loaded else {CLOSED_HERE}
        closed = self.vessel.mass > 0.0 and self._set is not None and not self._set.vent_open
        if closed:
            found.add(CLOSED)
            heating = self._set is not None and self._set.heating is not False
            if heating:
                found.add(HEATING)
            if heating or not self._plan.source_tag:
                found.add(WARMING)
        elif self.vessel.mass > 0.0 and self.pressure() > 5.0e5:
            found.add(LETTING_DOWN)
        return found

    def move_to(self, now: Moment) -> None:
        """Let the time since the last look pass."""
        left = max(0.0, now.boot - self._at)
        self._at = now.boot - left
        while left > 0.0:
            self._trouble()
            # Far from anything that moves fast an hour need not be cut into seconds.
            moving = self.controls.holes or self.vessel.relief_open
            step = min(left, _LONGEST if moving and self.vessel.mass > 0.0 else 30.0)
            self.vessel = self._simulation.advance(self.vessel, self.controls, step)
            self._shown = self._dials.follow(self._shown, self.truth(), step)
            self.highest_pressure = max(self.highest_pressure, self.pressure())
            left -= step
            self._at += step
            if self.relief_reached is None and self.pressure() >= self._relief_Pa:
                self.relief_reached = self._at
        self._shown = self._dials.follow(self._shown, self.truth(), 0.0)

    def watch(self, seconds: float) -> float:
        """Let the vessel go on by itself [s], and say the highest true pressure of all [Pa]."""
        with contextlib.suppress(OutsideValidity):
            # Where the models end the last that they said stands.
            self.move_to(Moment(self._at + seconds, 0.0))
        return self.highest_pressure

    def stand(self, body_K: float, source_K: float, charge_kg: float) -> None:
        """Vessel and source have come to one temperature each [K]; with a charge closed in it is so much [kg]."""
        self.vessel = self._simulation.stood(self.vessel, body_K, source_K)
        if self.vessel.mass > 0.0 and not self.vessel.in_the_open:
            self.vessel = self._simulation.closed_in(self.vessel, charge_kg, body_K)

    def at_rest(self) -> bool:
        """Nothing of it moves any more: empty, in the open, or as warm as the room with every limit far."""
        if self.vessel.mass <= 1e-6 or self.vessel.in_the_open:
            return True
        before = self.pressure()
        self.watch(1800.0)
        return abs(self.pressure() - before) < 0.02 * before or self.pressure() < before

    def pressure(self) -> float:
        """In the vessel, true, absolute [Pa]."""
        return self._simulation.pressure(self.vessel, self.controls)

    def temperature(self) -> float:
        """Of the charge, true; of the body where none is closed in [K]."""
        return self._simulation.temperature(self.vessel)

    def wall(self) -> tuple[float, float]:
        """Coldest and hottest that the wetted wall is anywhere, true [K]: between the charge and the metal behind."""
        vessel = self.vessel
        there = (self.temperature(), vessel.body_K, vessel.body_K if vessel.far_K is None else vessel.far_K)
        return min(there), max(there)

    @property
    def ice_seen(self) -> bool:
        """Solid, or what lies in the open, is in view."""
        state = self._simulation.state(self.vessel)
        return self.vessel.mass > 1e-6 and (state is None or (state.solid or 0.0) > 0.0)

    @property
    def liquid_seen(self) -> bool:
        """Enough liquid to be told from ice and vapour."""
        state = self._simulation.state(self.vessel)
        return state is not None and (state.liquid or 0.0) > _SEEN

    @property
    def drops_seen(self) -> bool:
        """Vapour beside liquid condenses on the windows: they sit on the side that the source does not touch."""
        state, far = self._simulation.state(self.vessel), self.vessel.far_K
        if state is None or far is None or self._scene.apparatus.window is None:
            return False
        return state.region is Region.LIQUID_VAPOUR and far < state.temperature - _DROPS

    @property
    def seen(self) -> str:
        """What stands in the simulated vessel: 'solid 8.2 %, liquid 1.1 % of it'; empty: nothing."""
        if self.vessel.mass <= 1e-6:
            return ""
        state = self._simulation.state(self.vessel)
        if state is None:
            fluid = self._scene.substance
            cold = self._simulation.in_the_open_at(self.controls.barometer) < fluid.triple_temperature
            return "solid in the open" if cold else "liquid in the open"
        shares = (("solid", state.solid or 0.0), ("liquid", state.liquid or 0.0))
        there = [f"{name} {100.0 * share:.{0 if share > 0.1 else 1}f} %" for name, share in shares if share > 0.0]
        drops = ", drops on the windows" if self.drops_seen else ""
        return f"{', '.join(there)} of it{drops}" if there else "nothing but gas"

    def read(self, tag: str) -> float | None:
        """What an instrument shows now [SI; pressures absolute]; None where it shows nothing."""
        return self._dials.read(self._shown, tag)

    def truth(self) -> dict[str, float]:
        """What each instrument would show if it were perfect [SI; pressures absolute]."""
        found: dict[str, float] = {}
        for one in self._instruments:
            value = self._true(one.tag, one.reads)
            if value is not None:
                found[one.tag] = self.troubles.truth(one.tag, one.reads, value, self.room_K, self._high_gauge)
        return found

    def _true(self, tag: str, reads: str) -> float | None:
        if reads == "temperature":
            return self._temperature_of(self._scene.instrument(tag).of)
        if reads == "pressure":
            joined = self._scene.instrument(tag).of == self._scene.charge_space or self._low_joined
            return self.pressure() if joined else self.controls.barometer
        if reads == "mass":
            return self.vessel.mass
        if reads == "liquid height":
            return self._height()
        if reads == "oxygen":
            return _OXYGEN * max(0.0, 1.0 - self._share_of_room())
        if reads == "carbon dioxide":
            # Of another gas the meter sees nothing.
            return _IN_AIR + (self._share_of_room() if self._scene.substance.name == reads else 0.0)
        return None

    def _share_of_room(self) -> float:
        """What has been let out, as a share of the room's volume [1]: nothing of it is carried off."""
        return self.vessel.released * (self._scene.gas_volume or 0.0) / self._scene.procedure.room.volume.value

    def _temperature_of(self, place: str) -> float:
        """What a thermometer there has before it [K]: on the wall, the side that the source touches."""
        match place:
            case "room air":
                return self.room_K
            case "bath":
                return self._bath()
            case "fluid":
                return self.temperature()
            case _:
                return self.vessel.body_K

    def _bath(self) -> float:
        """Water poured by hand, else the source's; where there is none it stands as warm as the vessel in it [K]."""
        if self._loss != 1.0 and self._set is not None:
            return self._set.room_K
        return self.vessel.body_K if self._scene.apparatus.heat_source is None else self.vessel.source_K

    def _height(self) -> float | None:
        state = self._simulation.state(self.vessel)
        if state is None or state.liquid is None or state.vapour in (None, 0.0):
            return None
        return viewed_shape(self._scene).height(state.liquid)

    def _fresh_water(self, verb: CoolTo) -> None:
        """To cool by a jacket or bath of water is to fill it with water of the set temperature; no other source can."""
        source = self._scene.apparatus.heat_source
        by_it = source is not None and verb.by_means_of == source.tag and "water" in source.kind
        if by_it and verb.set_to is not None:
            self.vessel = self._simulation.source_filled(self.vessel, verb.set_to.value)

    def _already_loaded(self, mass: float) -> None:
        self.vessel = self._simulation.closed_in(self.vessel, mass, self.room_K)
        self.controls = replace(self.controls, vent_open=False, bore=0.0)
