"""What a step asks to be read: with which instrument, how often, and what is accepted."""

from __future__ import annotations

from typing import Annotated, Any

from pydantic import Field, ValidationInfo, field_validator
from pydantic_core import PydanticCustomError

from runbook.apparatus.base import FileModel, Name, Text
from runbook.apparatus.dial import DIMENSION, Reads
from runbook.errors import QuantityError
from runbook.quantities import Dimension, LevelRange, Range, parse_level_range, parse_range
from runbook.quantities import fields as f


class ReadStep(FileModel):
    """One reading."""

    what: Reads
    """What is read. Example: pressure"""
    with_: Annotated[Name, Field(alias="with")]
    """Tag of the instrument. Example: PG1"""
    accept: Range | LevelRange | None = None
    """The range in which it is accepted; left out: any value, judged by the margins. Example: 48 bar(g) to 75 bar(g)"""
    every: f.TimeField | None = None
    """How often while the step lasts; left out: once, at its end. Example: 3 min"""
    fresh_for: f.TimeField | None = None
    """How old it may be when it is leaned on; left out: 10 min. Example: 2 min"""
    if_not: Text | None = None
    """What to do outside `accept`. Example: Make safe."""

    @field_validator("accept", mode="plain")
    @classmethod
    def _accept(cls, given: Any, info: ValidationInfo) -> Range | LevelRange | None:
        if given is None or isinstance(given, Range | LevelRange):
            return given
        what = info.data.get("what")
        try:
            if not isinstance(given, str):
                raise QuantityError(str(given), "has no unit", "write for example 105 g to 150 g")
            if what is None:
                # What is read was refused already: the unit of `accept` follows from it.
                raise PydanticCustomError("follows", "cannot be judged before 'what' is mended")
            if DIMENSION[what] is Dimension.PRESSURE:
                return parse_level_range(given)
            return parse_range(given, DIMENSION[what])
        except QuantityError as problem:
            raise PydanticCustomError("quantity", "{message}", {"message": str(problem)}) from None
