"""The closed table of units, and every way a quantity is read or said.

SI inside, converted at the edge. A pressure level never travels without its reference, and nothing that can
be read two ways is read. Field types for file models are in `runbook.quantities.fields`, apart because they
need pydantic and a run does not.
"""

from runbook.quantities.atmosphere import Barometer, barometer, standard_atmosphere
from runbook.quantities.dimension import Dimension
from runbook.quantities.lookup import EXAMPLES, unit
from runbook.quantities.single import parse, parse_barometer, parse_level, unit_in
from runbook.quantities.spans import parse_bounded, parse_bounded_level, parse_level_range, parse_range
from runbook.quantities.table import UNITS, Unit, symbols
from runbook.quantities.typed import Typed, reading_from_typed
from runbook.quantities.values import (
    NOT_KNOWN,
    Bounded,
    BoundedLevel,
    Level,
    LevelRange,
    NotKnown,
    Range,
)
from runbook.quantities.wording import UNKNOWN, pressure_to_unit, say, say_level, to_unit

__all__ = [
    "EXAMPLES",
    "NOT_KNOWN",
    "UNITS",
    "UNKNOWN",
    "Barometer",
    "Bounded",
    "BoundedLevel",
    "Dimension",
    "Level",
    "LevelRange",
    "NotKnown",
    "Range",
    "Typed",
    "Unit",
    "barometer",
    "parse",
    "parse_barometer",
    "parse_bounded",
    "parse_bounded_level",
    "parse_level",
    "parse_level_range",
    "parse_range",
    "pressure_to_unit",
    "reading_from_typed",
    "say",
    "say_level",
    "standard_atmosphere",
    "symbols",
    "to_unit",
    "unit",
    "unit_in",
]
