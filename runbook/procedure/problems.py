"""What a model refused, in our own sentences and at its place in the file.

One home for these sentences. Every error type that the models of files can raise stands in the table; a test
goes through the models and finds one that does not.
"""

from __future__ import annotations

import difflib
from collections.abc import Callable, Sequence
from functools import cache
from typing import Any, Final

from pydantic import BaseModel, ValidationError
from pydantic_core import ErrorDetails

from runbook.errors import Problem
from runbook.procedure.document import UNREADABLE, Document, Place, Route
from runbook.procedure.path import VERBS, WORDS
from runbook.procedure.steps import KINDS

MOST: Final = 200
"""Problems told of one file: whoever made more mends these first."""


def model_problems(error: ValidationError, document: Document, model: type[BaseModel]) -> list[Problem]:
    """Every error of a validation, located; those that follow from what was refused before are left out."""
    told = {(p.line, p.column) for p in document.problems}
    found: list[Problem] = []
    errors = error.errors(include_url=False)
    extra = [e for e in errors if e["type"] == "extra_forbidden"]
    misspelt = {(e["loc"][:-1], _meant(e, model)) for e in extra[:MOST]}
    for one in errors:
        if one["type"] == "follows" or one["input"] is UNREADABLE:
            continue
        if one["type"] == "missing" and (one["loc"][:-1], str(one["loc"][-1])) in misspelt:
            continue
        route = node_route(one["loc"], document)
        at = _place(one, route, document)
        if at in told:
            continue
        found.append(document.problem(at, _sentence(one, route, model)))
        if len(found) >= MOST:
            break
    return _without_duplicates(found)


def node_route(loc: Sequence[str | int], document: Document) -> Route:
    """The route of a pydantic location: union tags and words that name no node are left out.

    A key that is missing ends at the mapping it is missing from.
    """
    route: Route = ()
    for part in loc:
        if (*route, part) in document.values or (*route, part) in document.keys:
            route = (*route, part)
    return route


def place_of(route: Route, document: Document) -> Place:
    """Where the value at a route begins, or the nearest one around it that has a place."""
    for end in range(len(route), -1, -1):
        if route[:end] in document.values:
            return document.values[route[:end]]
    return (1, 1)


def nearest(word: str, known: Sequence[str]) -> str:
    """' (did you mean 'x'?)' where one of the known words is near, else nothing."""
    folded = {k.casefold(): k for k in known}
    for name, kept in folded.items():
        # Two letters in the wrong order make a short word look like no other.
        if sorted(name) == sorted(word.casefold()):
            return f" (did you mean '{kept}'?)"
    close = difflib.get_close_matches(word[:60].casefold(), folded, n=1, cutoff=0.6)
    return f" (did you mean '{folded[close[0]]}'?)" if close else ""


def _place(one: ErrorDetails, route: Route, document: Document) -> Place:
    if one["type"] in ("extra_forbidden", "missing", "kind") and route in document.keys:
        return document.keys[route]
    return place_of(route, document)


def _without_duplicates(problems: list[Problem]) -> list[Problem]:
    seen: set[tuple[int, int, str]] = set()
    kept = []
    for one in problems:
        key = (one.line, one.column, one.message)
        if key not in seen:
            seen.add(key)
            kept.append(one)
    return kept


def _sentence(one: ErrorDetails, route: Route, model: type[BaseModel]) -> str:
    say = SENTENCES.get(one["type"])
    if say is None:
        # Never reached from a file as far as is known: the sentence of the library is better than none.
        return f"{one['msg']} ({'.'.join(str(p) for p in route)})"
    if one["type"] == "extra_forbidden":
        return _unknown_key(one, model)
    return say(one)


def _unknown_key(one: ErrorDetails, model: type[BaseModel]) -> str:
    key = str(one["loc"][-1])
    known = _keys_at(model, one["loc"][:-1])
    near = nearest(key, known)
    also = "" if near or not known else f": the keys here are {_list(known)}"
    return f"'{key}' is not a key here{near}{also}"


def _meant(one: ErrorDetails, model: type[BaseModel]) -> str:
    """The key that an unknown one was probably meant to be; empty where none is near."""
    near = nearest(str(one["loc"][-1]), _keys_at(model, one["loc"][:-1]))
    return near.split("'")[1] if near else ""


@cache
def _schema(model: type[BaseModel]) -> dict[str, Any]:
    """Its JSON schema; slow to make, and asked for once a misspelt key."""
    return model.model_json_schema()


def _keys_at(model: type[BaseModel], loc: Sequence[str | int]) -> list[str]:
    """The keys of the mapping at a location, from the schema; none where it cannot be found."""
    schema = _schema(model)
    definitions = schema.get("$defs", {})
    here: Any = schema
    for part in loc:
        here = _step_into(here, part, definitions)
        if here is None:
            return []
    here = _resolved(here, definitions)
    return list(here.get("properties", {}))


def _step_into(here: Any, part: str | int, definitions: Any) -> Any:
    here = _resolved(here, definitions)
    if isinstance(part, int):
        return here.get("items")
    if part.startswith("("):
        return _branch(here, part[1:-1], definitions)
    for option in here.get("anyOf", [here]):
        option = _resolved(option, definitions)
        if part in option.get("properties", {}):
            return option["properties"][part]
        if option.get("type") == "array" or "oneOf" in option:
            return option
    return None


def _branch(here: Any, key: str, definitions: Any) -> Any:
    """The member of a union that has a key, or the one that is a mapping."""
    options = here.get("oneOf") or here.get("anyOf") or [here]
    for option in options:
        inner = _branch(option, key, definitions) if "oneOf" in option else None
        if inner is not None:
            return inner
        option = _resolved(option, definitions)
        if key in option.get("properties", {}) or (key == "mapping" and "properties" in option):
            return option
    return None


def _resolved(here: Any, definitions: Any) -> Any:
    while isinstance(here, dict) and "$ref" in here:
        here = definitions[here["$ref"].rsplit("/", 1)[-1]]
    return here


def _missing(one: ErrorDetails) -> str:
    key = one["loc"][-1]
    if isinstance(key, int):
        return f"one more entry is wanted here: there are only {key}"
    if key == "source":
        return "a rating without a source is no rating: say in 'source' where it comes from"
    return f"'{key}' is missing"


def _not_one_of(one: ErrorDetails) -> str:
    given = one["input"]
    expected = str((one.get("ctx") or {}).get("expected", ""))
    words = [w for w in expected.split("'") if w not in ("", ", ", " or ")]
    near = nearest(given, words) if isinstance(given, str) else ""
    return f"{_shown(given)} is not one of {_list(words)}{near}"


def _no_kind(one: ErrorDetails) -> str:
    given = one["input"]
    if not isinstance(given, dict):
        return f"a step is a mapping with one of {_list(KINDS)}"
    several = [k for k in KINDS if k in given]
    if several:
        return f"a step is only one of {_list(several)}: make steps of their own"
    near = next((n for n in (nearest(k, KINDS) for k in given if isinstance(k, str)) if n), "")
    return f"a step has one of {_list(KINDS)}{near}"


def _no_verb(one: ErrorDetails) -> str:
    given = one["input"]
    if isinstance(given, str):
        bare = f": '{given}' needs its value, as in {{{given}: ...}}" if given in VERBS else nearest(given, VERBS)
        return f"a path is one of {_list(WORDS)}, or a mapping with one of {_list(VERBS)}{bare}"
    if not isinstance(given, dict):
        return f"a path is a word or a mapping with one of {_list(VERBS)}"
    several = [k for k in given if k in VERBS]
    if len(several) == 1:
        return f"'{several[0]}' needs nothing: write path: {several[0]}"
    if several:
        return f"a path does one thing: {_list(several)} are steps of their own"
    near = next((n for n in (nearest(k, VERBS) for k in given if isinstance(k, str)) if n), "")
    return f"a path has one of {_list(VERBS)}{near}"


def _text_wanted(one: ErrorDetails) -> str:
    given = one["input"]
    if isinstance(given, dict):
        return "text is wanted here, not a mapping: a colon and a blank make a key, so quote the text"
    if isinstance(given, tuple):
        return "one text is wanted here, not a list"
    return f'text is wanted here: quote it: "{given}"'


def _no_quantity(one: ErrorDetails) -> str:
    if isinstance(one["input"], dict | tuple):
        return f"one quantity is wanted here, not {_shown(one['input'])}"
    return one["msg"]


def _count(one: ErrorDetails, key: str) -> Any:
    return (one.get("ctx") or {}).get(key, "")


SENTENCES: Final[dict[str, Callable[[ErrorDetails], str]]] = {
    "quantity": _no_quantity,
    "own": lambda e: e["msg"],
    "kind": _no_kind,
    "verb": _no_verb,
    "missing": _missing,
    "extra_forbidden": lambda e: f"'{e['loc'][-1]}' is not a key here",
    "literal_error": _not_one_of,
    "string_type": _text_wanted,
    "string_too_short": lambda e: "the text is empty: write it, or take the line away",
    "string_too_long": lambda e: f"the text has more than {_count(e, 'max_length')} characters: shorten it",
    "bool_type": lambda e: f"{_shown(e['input'])} is not one of true, false",
    "int_type": lambda e: f"{_shown(e['input'])} is no whole number",
    "greater_than_equal": lambda e: f"{_shown(e['input'])} is less than {_count(e, 'ge')}",
    "less_than_equal": lambda e: f"{_shown(e['input'])} is more than {_count(e, 'le')}",
    "model_type": lambda e: f"a mapping of keys and values is wanted here, not {_shown(e['input'])}",
    "model_attributes_type": lambda e: f"a mapping of keys and values is wanted here, not {_shown(e['input'])}",
    "dict_type": lambda e: f"a mapping of keys and values is wanted here, not {_shown(e['input'])}",
    "tuple_type": lambda e: f"a list is wanted here, not {_shown(e['input'])}: write [ ] around it or - before it",
    "too_short": lambda e: "at least one entry is wanted here",
    "too_long": lambda e: f"at most {_count(e, 'max_length')} entries are wanted here",
    "is_instance_of": lambda e: f"{_shown(e['input'])} is neither 'not known' nor a mapping",
    "enum": lambda e: f"{_shown(e['input'])} is neither 'not known' nor a mapping of keys and values",
}  # fmt: skip
"""Error type -> its sentence."""


def _shown(given: Any) -> str:
    if isinstance(given, dict):
        return "a mapping"
    if isinstance(given, tuple):
        return "a list"
    if isinstance(given, bool):
        return "true" if given else "false"
    text = str(given)
    return f"'{text if len(text) <= 60 else text[:60] + '…'}'"


def _list(words: Sequence[str]) -> str:
    return ", ".join(words)
