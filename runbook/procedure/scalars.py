"""What one plain word of YAML is: YAML 1.2 core types, decimal numbers and ISO dates, and nothing by guess.

A word that a YAML 1.1 reader would take for something else (`on`, `012`, `12:30`, `1_000`) is refused rather
than read one way: two readers of one file must agree on it.
"""

from __future__ import annotations

import datetime
import math
import re
from typing import Final

import yaml

_INTEGER: Final = re.compile(r"[-+]?(0|[1-9][0-9]*)")
_DECIMAL: Final = re.compile(r"[-+]?(\.[0-9]+|[0-9]+(\.[0-9]*)?)([eE][-+]?[0-9]+)?")
_DATE: Final = re.compile(r"[0-9]{4}-[0-9]{2}-[0-9]{2}")
_OTHER_BASE: Final = re.compile(r"[-+]?0[xXoObB][0-9A-Fa-f_]+")
_NOTHING: Final = ("", "~", "null", "Null", "NULL")
_TRUTH: Final = {"true": True, "True": True, "TRUE": True, "false": False, "False": False, "FALSE": False}
_TEXT_TAG: Final = "tag:yaml.org,2002:str"
_LONGEST_NUMBER: Final = 40
"""Characters of the longest number that anybody means."""

Plain = str | int | float | bool | datetime.date
"""What a plain word can be."""


class Refused(Exception):
    """The word cannot be taken; the text says why and what to write instead."""


class Nothing(Exception):
    """There is no value."""


def resolve(word: str) -> Plain:
    """The value of a plain (unquoted) scalar. Raises Refused, or Nothing where it is empty."""
    if word in _NOTHING:
        raise Nothing
    if word in _TRUTH:
        return _TRUTH[word]
    if _DATE.fullmatch(word):
        return _date(word)
    if len(word) <= _LONGEST_NUMBER:
        if _INTEGER.fullmatch(word):
            return int(word)
        if _DECIMAL.fullmatch(word) and not re.match(r"[-+]?0[0-9]", word):
            return _decimal(word)
    if _OTHER_BASE.fullmatch(word):
        raise Refused(f"'{word}' is a number to other bases: write it with decimal digits, or quote it")
    other = _yaml_1_1(word)
    if other != "text":
        shown = word if len(word) <= _LONGEST_NUMBER else word[:_LONGEST_NUMBER] + "…"
        raise Refused(f'{shown} is read as {other} by some programs: if text is meant, quote it: "{shown}"')
    return word


def _date(word: str) -> Plain:
    try:
        return datetime.date.fromisoformat(word)
    except ValueError:
        # A day that does not exist: the field that wants a date says so, with this text.
        return word


def _decimal(word: str) -> float:
    number = float(word)
    if not math.isfinite(number):
        raise Refused(f"{word} is too large to compute with: check the exponent")
    return number


def _yaml_1_1(word: str) -> str:
    """What a YAML 1.1 reader takes a plain word for."""
    resolvers = yaml.SafeLoader.yaml_implicit_resolvers
    candidates = resolvers.get(word[:1], []) + resolvers.get(None, [])
    tag = next((tag for tag, pattern in candidates if pattern.match(word)), _TEXT_TAG)
    names = {"bool": "yes or no", "int": "a number", "float": "a number", "timestamp": "a moment",
             "merge": "a merge of mappings", "value": "a default value", "str": "text"}  # fmt: skip
    return names.get(tag.rsplit(":", 1)[-1], "something else")
