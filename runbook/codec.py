"""Frozen dataclasses to JSON and back: one way for the pipe to the child and for the journal.

pydantic does the work; this module only keeps one adapter a class, since building one is slow.
"""

from __future__ import annotations

from collections.abc import Hashable
from functools import cache
from typing import Any, TypeVar

from pydantic import TypeAdapter

T = TypeVar("T")


@cache
def _adapter(kind: Hashable) -> TypeAdapter[Any]:
    return TypeAdapter(kind)


def to_plain(value: object, kind: Hashable | None = None) -> Any:
    """JSON-ready plain data of a frozen dataclass; infinities and NaN are the caller's fault and raise."""
    return _adapter(kind or type(value)).dump_python(value, mode="json")


def from_plain(kind: type[T], plain: object) -> T:
    """The dataclass again; raises pydantic.ValidationError where the data is not of that kind."""
    made: T = _adapter(kind).validate_python(plain)
    return made
