"""The manual for authors: its page is written by hand, its table of keys by this, from the models themselves."""

from __future__ import annotations

from pathlib import Path
from typing import Any, Final

import yaml

from runbook.procedure.schema import KINDS, editor_schema
from runbook.procedure.shelf import shipped_folder

BEGIN: Final = "<!-- the table of keys: written by the program -->"
"""Everything after this line of the manual is written by `key_table`."""
_ORDER: Final = {
    "procedure": (
        "Procedure", "Issue", "Charge", "Room", "Part", "Parked", "DoStep", "StepWarning", "ReadStep", "See",
        "HoldStep", "Hold", "WitnessStep", "Witness", "QuickStep", "QuickItem", "EmptyStep", "Empty",
        "Load", "Seal", "WarmTo", "CoolTo", "KeepAt", "LetDownTo", "LetRiseTo", "Purge", "OpenContainment",
        "Move", "Park", "Also",
    ),
    "apparatus": (
        "Apparatus", "Approved", "Volume", "Body", "Mawp", "ProofTest", "Cycles", "Valve", "Opening", "Component",
        "Relief", "HeatSource", "Instrument",
    ),
}  # fmt: skip
"""In which order a file brings them; models that are not named here follow by name."""


def manual_path() -> Path | None:
    """The manual beside the shipped procedures; None where they are not installed."""
    folder = shipped_folder()
    return None if folder is None else folder / "MANUAL.md"


def key_table() -> str:
    """Every key of both files once: what it means and how it is written."""
    rows = []
    for kind, title in (("procedure", "The procedure file"), ("apparatus", "The apparatus file")):
        rows.append(f"### {title}\n")
        schema = editor_schema(kind)
        known: dict[str, Any] = {**schema["$defs"], KINDS[kind].__name__: schema}
        first = [name for name in _ORDER[kind] if name in known]
        for name in (*first, *sorted(set(known) - set(first))):
            rows += _model(known[name])
    return "\n".join(rows)


def _model(schema: dict[str, Any]) -> list[str]:
    keys = schema.get("properties", {})
    said = " ".join(str(schema.get("description", "")).split())
    if "anyOf" in schema:
        schema = next(one for one in schema["anyOf"] if "properties" in one)
        keys, said = schema["properties"], " ".join(str(schema.get("description", said)).split())
    if not keys:
        return [f"**`{schema['const']}`** {said}\n"] if "const" in schema else []
    must = set(schema.get("required", ()))
    rows = [f"**{said}**\n", "| key | what it means | how it is written |", "|---|---|---|"]
    for key, field in keys.items():
        optional = "" if key in must else " *(may be left out)*"
        said = _cell(field.get("description", "")) + _words(field)
        rows.append(f"| `{key}` | {said}{optional} | `{_written(field)}` |")
    return [*rows, ""]


def _words(field: dict[str, Any]) -> str:
    """' One of `a`, `b`.' where only some words may be written; empty elsewhere."""
    places = [field, *field.get("anyOf", ()), field.get("items", {})]
    words = [word for place in places for word in place.get("enum", ()) if isinstance(word, str)]
    return f" One of {', '.join(f'`{word}`' for word in words)}." if len(words) > 1 else ""


def _written(field: dict[str, Any]) -> str:
    example = field.get("examples", [""])[0]
    text = yaml.safe_dump(example, default_flow_style=True, allow_unicode=True, sort_keys=False, width=10_000)
    return _cell(text.removesuffix("...\n").strip().replace("'", "")) if not isinstance(example, str) else example


def _cell(text: str) -> str:
    return text.replace("|", "\\|")
