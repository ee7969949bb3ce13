"""The editor's help: every key says what it means and how one would write it, and the example would be taken."""

from __future__ import annotations

from collections.abc import Iterator
from datetime import date
from typing import Annotated, Any

import pytest
from pydantic import BaseModel, TypeAdapter, ValidationError
from pydantic.fields import FieldInfo

from runbook.apparatus import model as apparatus_model
from runbook.apparatus import parts
from runbook.apparatus.base import FileModel
from runbook.procedure import model as procedure_model
from runbook.procedure import path, reading, steps
from runbook.procedure.schema import KINDS, editor_schema

_BY_ITS_NEIGHBOURS = {"dial", "error", "division", "class", "accept"}
"""Keys whose dimension follows from what is read: judged by the shipped files."""


def described() -> Iterator[tuple[str, str, dict[str, Any]]]:
    """(model, key, schema) of every key of both files."""
    for kind, model in KINDS.items():
        schema = editor_schema(kind)
        for name, one in {**schema["$defs"], model.__name__: schema}.items():
            for key, field in one.get("properties", {}).items():
                yield name, key, field


def models() -> dict[str, type[FileModel]]:
    """Every model of the two files, by name."""
    modules = (apparatus_model, parts, procedure_model, path, reading, steps)
    found = [v for m in modules for v in vars(m).values() if isinstance(v, type) and issubclass(v, BaseModel)]
    return {v.__name__: v for v in found if issubclass(v, FileModel)}


def field_of(model: type[FileModel], key: str) -> FieldInfo:
    """The field that a key of a file fills."""
    return next(f for name, f in model.model_fields.items() if key in (name, f.alias))


@pytest.mark.parametrize("kind", KINDS)
def test_every_key_says_what_it_means_and_how_it_is_written(kind: str) -> None:
    """An editor shows both; a key without them is a riddle."""
    bare = [(n, k) for n, k, field in described() if not field.get("description") or not field.get("examples")]
    assert bare == []


def test_every_example_would_be_taken() -> None:
    """An example that the reader refuses teaches a mistake."""
    refused = []
    known = models()
    for name, key, schema in described():
        if key in _BY_ITS_NEIGHBOURS:
            continue
        field = field_of(known[name], key)
        kind: Any = Annotated[field.annotation, *field.metadata] if field.metadata else field.annotation
        for example in schema["examples"]:
            try:
                TypeAdapter(kind).validate_python(_tuples(example))
            except ValidationError as error:
                refused.append((name, key, example, str(error).splitlines()[2:3]))
    assert refused == []


def _tuples(value: Any) -> Any:
    """As the YAML reader hands it over: tuples, and dates as dates."""
    if isinstance(value, list):
        return tuple(_tuples(one) for one in value)
    if isinstance(value, dict):
        return {key: _tuples(one) for key, one in value.items()}
    if isinstance(value, str) and len(value) == 10 and value[4] == "-" == value[7]:
        return date.fromisoformat(value)
    return value
