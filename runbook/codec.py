"""Frozen dataclasses to JSON and back: one way for the pipe to the child and for the journal.

pydantic does the work; this module only keeps one adapter a class, since building one is slow.
"""

from __future__ import annotations

from typing import Any, TypeVar

from pydantic import TypeAdapter

T = TypeVar("T")

_ADAPTERS: dict[Any, TypeAdapter[Any]] = {}


def _adapter(kind: Any) -> TypeAdapter[Any]:
    if kind not in _ADAPTERS:
        _ADAPTERS[kind] = TypeAdapter(kind)
    return _ADAPTERS[kind]


def to_plain(value: object) -> Any:
    """JSON-ready plain data of a frozen dataclass."""
    return _adapter(type(value)).dump_python(value, mode="json")


def from_plain(kind: type[T], plain: object) -> T:
    """The dataclass again; raises pydantic.ValidationError where the data is not of that kind."""
    made: T = _adapter(kind).validate_python(plain)
    return made
