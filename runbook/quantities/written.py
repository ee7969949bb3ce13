"""How a text becomes a quantity inside a file model.

One validator a field: a pydantic union would report every mistake once for each of its members. Holds no rule
about quantities; those are in `single` and `spans`.
"""

from __future__ import annotations

import datetime
import re
from collections.abc import Callable
from dataclasses import dataclass
from typing import Any

from pydantic import GetCoreSchemaHandler, GetJsonSchemaHandler
from pydantic.json_schema import JsonSchemaValue
from pydantic_core import PydanticCustomError, core_schema

from runbook.errors import QuantityError
from runbook.quantities.number import refuse, split, value
from runbook.quantities.values import NOT_KNOWN, NotKnown


@dataclass(frozen=True, slots=True)
class Written:
    """Annotation of a field that is a text in the file and a quantity in the model."""

    read: Callable[[str], object]
    """From the text; raises QuantityError."""
    example: str
    """A good text, for messages and editors."""
    makes: tuple[type, ...]
    """What `read` returns; such a value is taken as it is, so that models can be built in code."""
    unknown: bool = False
    """Whether the words `not known` are taken too."""

    def __call__(self, given: object) -> object:
        """Validate what the reader of the file, or code, gave."""
        if isinstance(given, NotKnown) and self.unknown:
            return given
        if type(given) in self.makes:  # exactly: a datetime is a date, True is an int
            return given
        try:
            return self._from(given)
        except QuantityError as problem:
            # One key only: the message is put in last and its own braces mean nothing.
            raise PydanticCustomError("quantity", "{message}", {"message": str(problem)}) from None

    def _from(self, given: object) -> object:
        if isinstance(given, str):
            if given.strip().casefold() == NOT_KNOWN.value:
                if self.unknown:
                    return NOT_KNOWN
                refuse(given, "is not enough here", f"write for example {self.example}")
            return self.read(given)
        if isinstance(given, bool):
            refuse("yes" if given else "no", "is no quantity", f"write for example {self.example}")
        if isinstance(given, (int, float)):
            refuse(repr(given), "has no unit", f"write for example {self.example}")
        if given is None:
            refuse("", "is empty", f"write for example {self.example}")
        refuse(str(type(given).__name__), "is no quantity", f"write for example {self.example}")

    def __get_pydantic_core_schema__(self, source: Any, handler: GetCoreSchemaHandler) -> core_schema.CoreSchema:
        return core_schema.no_info_plain_validator_function(self)

    def __get_pydantic_json_schema__(
        self, schema: core_schema.CoreSchema, handler: GetJsonSchemaHandler
    ) -> JsonSchemaValue:
        examples = [self.example, NOT_KNOWN.value] if self.unknown else [self.example]
        return {"type": "string", "examples": examples}


@dataclass(frozen=True, slots=True)
class Bare:
    """Annotation of a field that is a bare number in the file: a count, or an accuracy class."""

    read: Callable[[str], int | float]
    """From the number's text; raises QuantityError."""
    example: str
    """A good text, for messages and editors."""
    whole: bool
    """Whether only whole numbers are taken."""

    def __call__(self, given: object) -> int | float:
        """Validate what the reader of the file, or code, gave."""
        try:
            if isinstance(given, bool) or not isinstance(given, (int, float, str)):
                refuse(type(given).__name__, "is no number", f"write for example {self.example}")
            return self.read(given if isinstance(given, str) else repr(given))
        except QuantityError as problem:
            raise PydanticCustomError("quantity", "{message}", {"message": str(problem)}) from None

    def __get_pydantic_core_schema__(self, source: Any, handler: GetCoreSchemaHandler) -> core_schema.CoreSchema:
        return core_schema.no_info_plain_validator_function(self)

    def __get_pydantic_json_schema__(
        self, schema: core_schema.CoreSchema, handler: GetJsonSchemaHandler
    ) -> JsonSchemaValue:
        return {"type": "integer" if self.whole else "number", "examples": [self.read(self.example)]}


def read_date(text: str) -> datetime.date:
    """A day from an ISO text. Raises QuantityError."""
    if re.fullmatch(r"[0-9]{4}-[0-9]{2}-[0-9]{2}", text.strip()):
        try:
            return datetime.date.fromisoformat(text.strip())
        except ValueError:
            refuse(text, "is a day that does not exist", "check month and day")
    refuse(text, "is no date", "write year-month-day, for example 2031-02-14")


def read_count(text: str) -> int:
    """A count, zero or more. Raises QuantityError."""
    if not re.fullmatch(r"[0-9]{1,9}", text.strip()):
        refuse(text, "is no count", "write a whole number without a unit, for example 500")
    return int(text)


def read_number(text: str) -> float:
    """A bare number, zero or more. Raises QuantityError."""
    number, unit = split(text)
    if unit:
        refuse(text, "has a unit", f"write the bare number, for example {number}")
    result = value(number, text)
    if result < 0:
        refuse(text, "is negative", "write zero or more")
    return result
