"""The field types of the file models: what each takes is its name, what it yields its static type.

`...OrUnknown` also takes the words `not known` and then yields NOT_KNOWN. A field of a physical amount
refuses a box that reaches below nothing; a temperature and a height above sea level have signs.
"""

from __future__ import annotations

import datetime
from typing import Annotated

from runbook.quantities.dimension import Dimension as D
from runbook.quantities.number import refuse
from runbook.quantities.single import parse, parse_barometer, parse_level
from runbook.quantities.spans import parse_bounded, parse_bounded_level, parse_level_range, parse_range
from runbook.quantities.values import Bounded, BoundedLevel, Level, LevelRange, NotKnown, Range
from runbook.quantities.written import Bare, Written, read_count, read_date, read_number


def _amount(dimension: D, example: str, unknown: bool = False) -> Written:
    """A field of a physical amount: its box does not reach below nothing."""

    def read(text: str) -> Bounded:
        box = parse_bounded(text, dimension)
        if box.low < 0:
            refuse(text, "reaches below zero", f"{dimension.named} is zero or more, for example {example}")
        return box

    return Written(read, example, (Bounded,), unknown)


def _signed(dimension: D, example: str, unknown: bool = False) -> Written:
    """A field of a quantity that may be negative."""
    return Written(lambda text: parse_bounded(text, dimension), example, (Bounded,), unknown)


def _range(dimension: D, example: str, unknown: bool = False) -> Written:
    """A field of a range."""
    return Written(lambda text: parse_range(text, dimension), example, (Range,), unknown)


def _fraction(text: str) -> float:
    fraction = parse(text, D.FRACTION)
    if fraction < 0:
        refuse(text, "is negative", "write zero or more, for example 5 %")
    return fraction


def _level(unknown: bool = False) -> Written:
    return Written(parse_level, "160 bar(g)", (Level,), unknown)


def _bounded_level(unknown: bool = False) -> Written:
    return Written(parse_bounded_level, "100 bar(g) ± 3 bar", (BoundedLevel,), unknown)


def _level_range(unknown: bool = False) -> Written:
    return Written(parse_level_range, "up to 200 bar(g)", (LevelRange,), unknown)


MassField = Annotated[Bounded, _amount(D.MASS, "117 g ± 2 g")]
MassOrUnknown = Annotated[Bounded | NotKnown, _amount(D.MASS, "117 g ± 2 g", unknown=True)]
VolumeField = Annotated[Bounded, _amount(D.VOLUME, "250 mL ± 2 mL")]
VolumeOrUnknown = Annotated[Bounded | NotKnown, _amount(D.VOLUME, "250 mL ± 2 mL", unknown=True)]
TemperatureDifferenceField = Annotated[Bounded, _amount(D.TEMPERATURE_DIFFERENCE, "2 K")]
TemperatureDifferenceOrUnknown = Annotated[Bounded | NotKnown, _amount(D.TEMPERATURE_DIFFERENCE, "2 K", unknown=True)]
PressureDifferenceField = Annotated[Bounded, _amount(D.PRESSURE_DIFFERENCE, "1 bar")]
PressureDifferenceOrUnknown = Annotated[Bounded | NotKnown, _amount(D.PRESSURE_DIFFERENCE, "1 bar", unknown=True)]
LengthField = Annotated[Bounded, _amount(D.LENGTH, "60 mm")]
LengthOrUnknown = Annotated[Bounded | NotKnown, _amount(D.LENGTH, "60 mm", unknown=True)]
TimeField = Annotated[Bounded, _amount(D.TIME, "10 min")]
TimeOrUnknown = Annotated[Bounded | NotKnown, _amount(D.TIME, "10 min", unknown=True)]
PowerField = Annotated[Bounded, _amount(D.POWER, "60 W")]
PowerOrUnknown = Annotated[Bounded | NotKnown, _amount(D.POWER, "60 W", unknown=True)]
HeatCapacityField = Annotated[Bounded, _amount(D.HEAT_CAPACITY, "1.2 kJ/K")]
HeatCapacityOrUnknown = Annotated[Bounded | NotKnown, _amount(D.HEAT_CAPACITY, "1.2 kJ/K", unknown=True)]
ConductanceField = Annotated[Bounded, _amount(D.CONDUCTANCE, "5 W/K")]
ConductanceOrUnknown = Annotated[Bounded | NotKnown, _amount(D.CONDUCTANCE, "5 W/K", unknown=True)]
DensityField = Annotated[Bounded, _amount(D.DENSITY, "468 kg/m3")]
DensityOrUnknown = Annotated[Bounded | NotKnown, _amount(D.DENSITY, "468 kg/m3", unknown=True)]
TemperatureRateField = Annotated[Bounded, _amount(D.TEMPERATURE_RATE, "1 K/min")]
TemperatureRateOrUnknown = Annotated[Bounded | NotKnown, _amount(D.TEMPERATURE_RATE, "1 K/min", unknown=True)]
PressureRateField = Annotated[Bounded, _amount(D.PRESSURE_RATE, "1 bar/min")]
PressureRateOrUnknown = Annotated[Bounded | NotKnown, _amount(D.PRESSURE_RATE, "1 bar/min", unknown=True)]
TorqueField = Annotated[Bounded, _amount(D.TORQUE, "12 N·m")]
TorqueOrUnknown = Annotated[Bounded | NotKnown, _amount(D.TORQUE, "12 N·m", unknown=True)]
AirChangesField = Annotated[Bounded, _amount(D.AIR_CHANGES, "2 per h")]
AirChangesOrUnknown = Annotated[Bounded | NotKnown, _amount(D.AIR_CHANGES, "2 per h", unknown=True)]
FlowField = Annotated[Bounded, _amount(D.FLOW, "10 L/min")]
FlowOrUnknown = Annotated[Bounded | NotKnown, _amount(D.FLOW, "10 L/min", unknown=True)]
MassFlowField = Annotated[Bounded, _amount(D.MASS_FLOW, "2 g/s")]
MassFlowOrUnknown = Annotated[Bounded | NotKnown, _amount(D.MASS_FLOW, "2 g/s", unknown=True)]
AreaField = Annotated[Bounded, _amount(D.AREA, "3 mm2")]
AreaOrUnknown = Annotated[Bounded | NotKnown, _amount(D.AREA, "3 mm2", unknown=True)]
VelocityField = Annotated[Bounded, _amount(D.VELOCITY, "1 m/s")]
VelocityOrUnknown = Annotated[Bounded | NotKnown, _amount(D.VELOCITY, "1 m/s", unknown=True)]
ConcentrationField = Annotated[Bounded, _amount(D.CONCENTRATION, "0.5 %")]
ConcentrationOrUnknown = Annotated[Bounded | NotKnown, _amount(D.CONCENTRATION, "0.5 %", unknown=True)]
TemperatureField = Annotated[Bounded, _signed(D.TEMPERATURE, "38 degC ± 1 K")]
TemperatureOrUnknown = Annotated[Bounded | NotKnown, _signed(D.TEMPERATURE, "38 degC ± 1 K", unknown=True)]
HeightField = Annotated[Bounded, _signed(D.LENGTH, "120 m")]
HeightOrUnknown = Annotated[Bounded | NotKnown, _signed(D.LENGTH, "120 m", unknown=True)]

MassRangeField = Annotated[Range, _range(D.MASS, "105 g to 150 g")]
MassRangeOrUnknown = Annotated[Range | NotKnown, _range(D.MASS, "105 g to 150 g", unknown=True)]
VolumeRangeField = Annotated[Range, _range(D.VOLUME, "200 mL to 250 mL")]
VolumeRangeOrUnknown = Annotated[Range | NotKnown, _range(D.VOLUME, "200 mL to 250 mL", unknown=True)]
LengthRangeField = Annotated[Range, _range(D.LENGTH, "6 mm to 54 mm")]
LengthRangeOrUnknown = Annotated[Range | NotKnown, _range(D.LENGTH, "6 mm to 54 mm", unknown=True)]
TimeRangeField = Annotated[Range, _range(D.TIME, "5 min to 20 min")]
TimeRangeOrUnknown = Annotated[Range | NotKnown, _range(D.TIME, "5 min to 20 min", unknown=True)]
TemperatureRangeField = Annotated[Range, _range(D.TEMPERATURE, "-80 degC to 80 degC")]
TemperatureRangeOrUnknown = Annotated[Range | NotKnown, _range(D.TEMPERATURE, "-80 degC to 80 degC", unknown=True)]
TemperatureDifferenceRangeField = Annotated[Range, _range(D.TEMPERATURE_DIFFERENCE, "up to 110 K")]
TemperatureDifferenceRangeOrUnknown = Annotated[
    Range | NotKnown, _range(D.TEMPERATURE_DIFFERENCE, "up to 110 K", unknown=True)
]
PressureDifferenceRangeField = Annotated[Range, _range(D.PRESSURE_DIFFERENCE, "up to 5 bar")]
PressureDifferenceRangeOrUnknown = Annotated[
    Range | NotKnown, _range(D.PRESSURE_DIFFERENCE, "up to 5 bar", unknown=True)
]
TemperatureRateRangeField = Annotated[Range, _range(D.TEMPERATURE_RATE, "up to 1 K/min")]
TemperatureRateRangeOrUnknown = Annotated[Range | NotKnown, _range(D.TEMPERATURE_RATE, "up to 1 K/min", unknown=True)]
PressureRateRangeField = Annotated[Range, _range(D.PRESSURE_RATE, "up to 1 bar/min")]
PressureRateRangeOrUnknown = Annotated[Range | NotKnown, _range(D.PRESSURE_RATE, "up to 1 bar/min", unknown=True)]
FractionRangeField = Annotated[Range, _range(D.FRACTION, "-4 % to 0 %")]
FractionRangeOrUnknown = Annotated[Range | NotKnown, _range(D.FRACTION, "-4 % to 0 %", unknown=True)]
ConcentrationRangeField = Annotated[Range, _range(D.CONCENTRATION, "0 % to 5 %")]
ConcentrationRangeOrUnknown = Annotated[Range | NotKnown, _range(D.CONCENTRATION, "0 % to 5 %", unknown=True)]
PowerRangeField = Annotated[Range, _range(D.POWER, "up to 60 W")]
PowerRangeOrUnknown = Annotated[Range | NotKnown, _range(D.POWER, "up to 60 W", unknown=True)]

LevelField = Annotated[Level, _level()]
LevelOrUnknown = Annotated[Level | NotKnown, _level(unknown=True)]
BoundedLevelField = Annotated[BoundedLevel, _bounded_level()]
BoundedLevelOrUnknown = Annotated[BoundedLevel | NotKnown, _bounded_level(unknown=True)]
LevelRangeField = Annotated[LevelRange, _level_range()]
LevelRangeOrUnknown = Annotated[LevelRange | NotKnown, _level_range(unknown=True)]
BarometerField = Annotated[float, Written(parse_barometer, "1013 hPa", ())]

FractionField = Annotated[float, Written(_fraction, "5 %", ())]
FractionOrUnknown = Annotated[float | NotKnown, Written(_fraction, "5 %", (), unknown=True)]
DateField = Annotated[datetime.date, Written(read_date, "2031-02-14", (datetime.date,))]
DateOrUnknown = Annotated[datetime.date | NotKnown, Written(read_date, "2031-02-14", (datetime.date,), unknown=True)]
BareCount = Annotated[int, Bare(read_count, "500", whole=True)]
BareNumber = Annotated[float, Bare(read_number, "0.6", whole=False)]
