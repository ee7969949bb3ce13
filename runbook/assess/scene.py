"""Everything physics needs of one procedure in one room on one day, read once from the two files.

Refuses nothing by itself: what is not known stays None and blocks where it is leaned on.
"""

from __future__ import annotations

from dataclasses import dataclass, field
from functools import cached_property
from typing import TYPE_CHECKING, Literal

from runbook.answers import ChargeBox, Explanation, Margin
from runbook.apparatus.model import Apparatus
from runbook.apparatus.model import Instrument as InstrumentFile
from runbook.assess.assumptions import ALL, Assumptions
from runbook.charge.blowdown import coldest_of_gas
from runbook.charge.filling import air_pressure
from runbook.errors import FileProblems, InputUnusable
from runbook.fluids.substance import Substance, substance
from runbook.procedure.document import located, split_lines
from runbook.procedure.model import Procedure
from runbook.procedure.reader import Loaded
from runbook.procedure.writing import findings as writing_findings
from runbook.quantities import Barometer, barometer

if TYPE_CHECKING:
    # The marks are worked out of a scene, which only keeps them.
    from runbook.assess.sights.marks import Marks

GAS_CONSTANT = 8.314462618
"""[J/mol/K], CODATA 2018 (exact)."""
AIR_OVER_ICE = 1.1
"""Air left at closing over dry ice, worst case, as a multiple of the vessel full of air at the coldest room:
computed for dry ice closed at once, 7 to 11 mmol where a full 250 mL holds 10 [1]."""

TAMPED = 0.712
"""Share of its volume that tamped solid fills: 1.1 kg/L of dry ice, common practice [1]."""

Position = Literal["open", "shut", "do not know"]


@dataclass
class Scene:
    """A procedure, its vessel and its room, in numbers. All SI, pressures absolute."""

    loaded: Loaded
    barometer: Barometer
    charge: ChargeBox | None
    """From the vessel's charge record; None: the cell is empty at the start."""
    assume: Assumptions = ALL
    hottest_K: float | None = None
    """Hottest the room may become today [K]; None: as the procedure says."""
    cell_closed: bool = False
    """Somebody says that the vessel is closed already, whatever the procedure begins with."""
    substance: Substance = field(init=False)
    looked: dict[tuple[int, float | None, tuple[tuple[str, str], ...]], tuple[Margin, ...]] = field(
        init=False, default_factory=dict
    )
    """Look-aheads by line, most charge [kg] and valve positions."""
    reached: dict[tuple[float, float], float | None] = field(init=False, default_factory=dict)
    """Temperature [K] at which most charge [kg] reaches a pressure [Pa] at the worst corner."""
    risen: dict[tuple[float, float, float, float], float | str] = field(init=False, default_factory=dict)
    """Pressure [Pa] that a held charge rises to, or why that cannot be said, by most charge [kg], level [Pa], hottest
    body [K] and seconds."""
    weighed_by_height: dict[tuple[float, float], tuple[float, float] | None] = field(init=False, default_factory=dict)
    """Least and most charge [kg] that a height [m] at a temperature [K] means."""
    estimated_by_height: dict[tuple[float, float], tuple[float, float] | None] = field(init=False, default_factory=dict)
    """Charge and its U [kg] that a height [m] at a temperature [K] means."""
    explained: dict[tuple[object, ...], tuple[Explanation, ...]] = field(init=False, default_factory=dict)
    """Explanations by the readings they explain."""
    let_downs: dict[tuple[float, float, float], float] = field(init=False, default_factory=dict)
    """Coldest wall [K] of a let-down, by most charge [kg], coldest and hottest wall it begins with [K]."""
    seen: dict[float, Marks] = field(init=False, default_factory=dict)
    """What changes to the eye on the path of a charge [kg]."""
    _pressures: dict[tuple[float, float], tuple[float, float]] = field(init=False, default_factory=dict)

    def __post_init__(self) -> None:
        self.substance = substance(self.procedure.fluid)

    @property
    def procedure(self) -> Procedure:
        return self.loaded.procedure

    @property
    def apparatus(self) -> Apparatus:
        return self.loaded.apparatus

    @property
    def volume(self) -> tuple[float, float]:
        """Least and most free volume [m3]."""
        free = self.apparatus.volume.free
        return (free.low, free.high) if self.assume.volume_corner else (free.value, free.value)

    @property
    def room_hottest(self) -> float:
        """[K]"""
        room = self.procedure.room
        if self.hottest_K is not None:
            return self.hottest_K
        return room.hottest.high if self.assume.hottest_room else room.coldest.low

    @property
    def room_coldest(self) -> float:
        """[K]"""
        return self.procedure.room.coldest.low

    @property
    def charge_space(self) -> str:
        """The space that holds the charge: the first one of the file."""
        return self.apparatus.spaces[0]

    @property
    def planned(self) -> tuple[float, float]:
        """Least and most that the procedure means to seal in [kg]; what the record says if it is loaded."""
        charge = self.procedure.charge
        mass = None if isinstance(charge, str) else charge.mass
        if mass is not None:
            return mass.low, mass.high
        if self.charge is not None:
            return self.charge.low_kg, self.charge.high_kg
        return 0.0, self.brim_full

    @property
    def starts_loaded(self) -> bool:
        """The vessel is loaded when it begins: the procedure says so, or somebody does."""
        charge = self.procedure.charge
        return self.cell_closed or isinstance(charge, str) or charge.loaded_as == "already loaded"

    @property
    def brim_full(self) -> float:
        """Charge of a vessel filled to the brim, the most that can be in [kg].

        With tamped solid where that lies in the open, 1.1 kg/L of dry ice (common practice), else with its liquid at
        the coldest: whichever is more of what its fluid allows.
        """
        fluid = self.substance
        if fluid.triple_pressure > self.barometer.high_Pa:
            density = TAMPED / fluid.solid.beside_vapour(fluid.triple_temperature).volume if fluid.solid else 0.0
        else:
            density = fluid.saturation(fluid.triple_temperature).liquid_density
        return density * self.apparatus.volume.free.high

    @property
    def moles_of_air(self) -> float:
        """Most air that can have been closed in, no purge counted [mol]."""
        if not self.assume.air:
            return 0.0
        full = self.barometer.high_Pa * self.volume[1] / (GAS_CONSTANT * self.room_coldest)
        if self.stays_liquid and self.planned[0] > 0.0:
            # The liquid has driven out the air whose place it took.
            liquid = self.planned[0] / self.substance.saturation(self.room_coldest).liquid_density
            return full * max(0.0, 1.0 - liquid / self.volume[1])
        return AIR_OVER_ICE * full

    @cached_property
    def coldest_in_the_open(self) -> float:
        """Temperature of liquid or solid in the open at the lowest barometer, or of the coldest room [K].

        The coldest wall that loading, or a let-down to the room, can give.
        """
        return min(self.room_coldest, self.substance.boiling_temperature(self.barometer.low_Pa))

    @cached_property
    def stays_liquid(self) -> bool:
        """In the open it stays a liquid, however hot the room: it boils above that."""
        return self.room_hottest < self.substance.boiling_temperature(self.barometer.low_Pa) and (
            self.substance.triple_temperature < self.room_coldest
        )

    @property
    def comes_as_gas(self) -> bool:
        """It is filled with gas at the temperature of the room, under the pressure of the charge."""
        charge = self.procedure.charge
        return not isinstance(charge, str) and charge.loaded_as == "gas"

    def coldest_let_down(self, high_kg: float, cold: float, hot: float) -> float:
        """Coldest wall [K] of a let-down of at most high_kg [kg] to the room, begun between cold and hot [K].

        That of its liquid or solid in the open, unless it is gas all the way.
        """
        key = (high_kg, cold, hot)
        if key not in self.let_downs:
            body = self.apparatus.body.heat_capacity.low
            ends = [
                coldest_of_gas(self.substance, high_kg, self.volume[0], start, self.barometer.low_Pa, body)
                for start in (cold, hot)
            ]
            known = [one for one in ends if one is not None]
            open_air = min(cold, self.coldest_in_the_open)
            self.let_downs[key] = max(open_air, min(cold, *known)) if len(known) == len(ends) else open_air
        return self.let_downs[key]

    @cached_property
    def gas_volume(self) -> float | None:
        """Of what gets into the room, at 20 degC and 1 atm [m3/kg]; None where it condenses there."""
        return self.substance.gas_volume(293.15, 101325.0)

    def pressures(self, temperature: float, density: float) -> tuple[float, float]:
        """Pressure with trapped air [Pa] and the equation's uncertainty [Pa], kept per scene.

        temperature [K], density [kg/m3]. Raises OutsideValidity.
        """
        key = (temperature, density)
        if key not in self._pressures:
            pressure = self.substance.pressure(temperature, density)
            off = self.substance.pressure_uncertainty(temperature, density)
            air = 0.0
            if self.moles_of_air > 0.0:
                air = air_pressure(self.substance, temperature, density, self.moles_of_air, self.volume[0])
            if len(self._pressures) > 4096:
                self._pressures.clear()
            self._pressures[key] = pressure + air, off if self.assume.equation_uncertainty else 0.0
        return self._pressures[key]

    def instrument(self, tag: str) -> InstrumentFile:
        """The instrument of that tag; KeyError where the apparatus has none (check finds it first)."""
        for one in self.apparatus.instruments:
            if one.tag == tag:
                return one
        raise KeyError(tag)

    def wall_probe(self) -> InstrumentFile | None:
        """The thermometer on the wall, in the charge or in the bath; None where there is none."""
        return next((i for i in self.apparatus.instruments if i.reads == "temperature" and i.of != "room air"), None)


def _stated(loaded: Loaded) -> ChargeBox | None:
    """What the file says is in a vessel that comes loaded: it counts until readings say more, and proves nothing."""
    charge = loaded.procedure.charge
    if isinstance(charge, str) or charge.loaded_as != "already loaded":
        return None
    return ChargeBox(charge.mass.low, charge.mass.high, False, ("procedure",))


def open_scene(
    loaded: Loaded,
    reading_Pa: float | None,
    charge: ChargeBox | None,
    assume: Assumptions = ALL,
    height_m: float | None = None,
    hottest_K: float | None = None,
    cell_closed: bool = False,
) -> Scene:
    """A scene at the barometer read [Pa], else at the room's height, else anywhere.

    height_m: above sea level [m]; hottest_K: hottest room [K]; None: as the procedure says. cell_closed: it is
    closed already, with what the record says or, without one, with as much as it can hold; a vessel that comes loaded
    without a record holds what the file states. Raises
    OutsideValidity for an impossible barometer, FileProblems for a fluid that is not known and where a step names
    what the apparatus does not have: no margin can be computed for that.
    """
    if not loaded.one_of_several:
        refuse_unbound(loaded)
    if charge is None and not cell_closed:
        charge = _stated(loaded)
    stated = loaded.procedure.room.height
    height = height_m if height_m is not None else None if stated is None else stated.value
    air = barometer(reading_Pa, height)
    try:
        return Scene(loaded, air, charge, assume, hottest_K, cell_closed)
    except InputUnusable as unknown:
        at = loaded.positions.get(("fluid",))
        if at is None:
            raise
        lines = split_lines(loaded.procedure_text)
        raise FileProblems((located(loaded.procedure_file, lines, at, str(unknown), "fluid"),)) from None


UNBOUND = ("unknown tag", "wrong instrument", "position")
"""Rules whose errors leave a step without the thing it is about."""


def refuse_unbound(loaded: Loaded) -> None:
    """Raises FileProblems where a step names what the apparatus does not have."""
    errors = tuple(p for p in writing_findings(loaded) if p.severity == "error")
    if any(p.rule in UNBOUND for p in errors):
        raise FileProblems(errors)
