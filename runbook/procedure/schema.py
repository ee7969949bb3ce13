"""What an editor needs to help while a file is written: a JSON schema with every key, its words and its meaning.

It knows shapes and examples, not whether tags exist or limits hold: `runbook check` alone says that.
"""

from __future__ import annotations

import ast
import inspect
from datetime import date
from types import ModuleType
from typing import Any, Final

import yaml
from pydantic import BaseModel

from runbook.apparatus import model as apparatus_model
from runbook.apparatus import parts
from runbook.procedure import model as procedure_model
from runbook.procedure import path, reading, steps

KINDS: Final[dict[str, type[BaseModel]]] = {
    "procedure": procedure_model.Procedure,
    "apparatus": apparatus_model.Apparatus,
}
"""Kind of file -> its model."""
_MODULES: Final = (apparatus_model, parts, procedure_model, path, reading, steps)
_EXAMPLE: Final = " Example: "
"""Stands in a field's docstring between what it means and how one would write it."""
_DRAFT: Final = "http://json-schema.org/draft-07/schema#"
"""The newest draft that the YAML language server documents."""


def editor_schema(kind: str) -> dict[str, Any]:
    """The schema of one kind of file: 'procedure' or 'apparatus'. Raises KeyError for another."""
    schema = KINDS[kind].model_json_schema()
    meanings = {name: text for module in _MODULES for name, text in _meanings(module).items()}
    definitions = schema.pop("$defs")
    for name, one in definitions.items():
        _describe(one, name, meanings)
    for name, word in (("Seal", "seal"), ("Move", "move"), ("Park", "park")):
        if name in definitions:
            definitions[name] = {"const": word, "description": definitions[name].get("description", "")}
    if "OpenContainment" in definitions:
        both = [{"const": "open_containment"}, definitions["OpenContainment"]]
        definitions["OpenContainment"] = {"anyOf": both}
    _describe(schema, KINDS[kind].__name__, meanings)
    tidy = _tidy({"$schema": _DRAFT, **schema, "$defs": definitions})
    assert isinstance(tidy, dict)
    return tidy


def _describe(schema: dict[str, Any], name: str, meanings: dict[tuple[str, str], str]) -> None:
    for key, field in schema.get("properties", {}).items():
        meaning = meanings.get((name, key)) or meanings.get((name, f"{key}_")) or meanings.get((name, f"k{key[1:]}"))
        if meaning:
            said, _, example = meaning.partition(_EXAMPLE)
            field["description"] = said
            if example:
                field["examples"] = [example_value(example)]


def example_value(text: str) -> Any:
    """An example as a file would hold it: a mapping, a list, a number, a truth value or a text."""
    return _plain(yaml.safe_load(text))


def _plain(value: Any) -> Any:
    if isinstance(value, dict):
        return {key: _plain(one) for key, one in value.items()}
    if isinstance(value, list):
        return [_plain(one) for one in value]
    return value.isoformat() if isinstance(value, date) else value


def _meanings(module: ModuleType) -> dict[tuple[str, str], str]:
    """The docstring under each field of each class of a module, by (class, field)."""
    found: dict[tuple[str, str], str] = {}
    for node in ast.parse(inspect.getsource(module)).body:
        if not isinstance(node, ast.ClassDef):
            continue
        for field, after in zip(node.body, node.body[1:], strict=False):
            named = isinstance(field, ast.AnnAssign) and isinstance(field.target, ast.Name)
            if named and isinstance(after, ast.Expr) and isinstance(after.value, ast.Constant):
                assert isinstance(field, ast.AnnAssign)
                assert isinstance(field.target, ast.Name)
                found[node.name, field.target.id] = " ".join(str(after.value.value).split())
    return found


def _tidy(node: Any, inside_properties: bool = False) -> Any:
    """Without titles made from names, and without null, which no file may hold."""
    if isinstance(node, list):
        return [_tidy(one) for one in node]
    if not isinstance(node, dict):
        return node
    kept = {
        key: _tidy(value, key in ("properties", "$defs"))
        for key, value in node.items()
        if inside_properties or not (key == "title" or (key == "default" and value is None))
    }
    options = kept.get("anyOf")
    if isinstance(options, list):
        real = [one for one in options if one != {"type": "null"}]
        if len(real) == 1:
            del kept["anyOf"]
            kept = {**real[0], **kept}
        else:
            kept["anyOf"] = real
    return kept
