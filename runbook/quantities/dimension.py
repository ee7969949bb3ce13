"""What a quantity measures. A closed list: a file or a person cannot add to it."""

from __future__ import annotations

from enum import StrEnum


class Dimension(StrEnum):
    """The kind of a quantity; the value is the word people use for it."""

    MASS = "mass"
    VOLUME = "volume"
    TEMPERATURE = "temperature"
    TEMPERATURE_DIFFERENCE = "temperature difference"
    """In K only: 5 degC is a place on the scale, and the mistake would be 273 K."""
    PRESSURE = "pressure"
    """A level: its unit says gauge or absolute."""
    PRESSURE_DIFFERENCE = "pressure difference"
    """Its unit says neither."""
    LENGTH = "length"
    TIME = "time"
    POWER = "power"
    HEAT_CAPACITY = "heat capacity"
    CONDUCTANCE = "heat conductance"
    DENSITY = "density"
    FRACTION = "fraction"
    CONCENTRATION = "concentration"
    """Of a gas in air, by volume."""
    TEMPERATURE_RATE = "rate of temperature"
    PRESSURE_RATE = "rate of pressure"
    TORQUE = "torque"
    FLOW = "volume flow"
    MASS_FLOW = "mass flow"
    AIR_CHANGES = "number of air changes per time"
    AREA = "area"
    VELOCITY = "velocity"

    @property
    def named(self) -> str:
        """The word with its article, for sentences."""
        return ("an " if self.value[0] in "aeiou" else "a ") + self.value
