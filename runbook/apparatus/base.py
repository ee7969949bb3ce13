"""What every model of a file shares: nothing unnamed, nothing guessed, nothing changed afterwards."""

from __future__ import annotations

from typing import Annotated, Any, Final

from pydantic import AfterValidator, BaseModel, BeforeValidator, ConfigDict, StringConstraints
from pydantic_core import PydanticCustomError

from runbook.quantities import NOT_KNOWN, Bounded

LONGEST_TEXT: Final = 400
"""Characters of one text in a file: more does not fit the place where it is read."""


class FileModel(BaseModel):
    """One mapping of a file. Sequences are tuples; a key the model does not name is a mistake."""

    model_config = ConfigDict(extra="forbid", strict=True, frozen=True, allow_inf_nan=False)


Text = Annotated[str, StringConstraints(min_length=1, max_length=LONGEST_TEXT)]
"""Words for people, verbatim: never markup, never empty."""
Name = Annotated[str, StringConstraints(min_length=1, max_length=40)]
"""A tag, a role, a space: short enough for the place where it is shown."""


def mapping_or_words(given: object) -> str:
    """Which of two shapes was written, as the tag of a union. The form is one that no key can have."""
    return "(mapping)" if isinstance(given, dict | BaseModel) else "(words)"


def _not_known(given: Any) -> Any:
    known = isinstance(given, str) and given.strip().casefold() == NOT_KNOWN.value
    return NOT_KNOWN if known else given


UnknownWords = BeforeValidator(_not_known)
"""Reads the words `not known`."""


def _positive(box: Bounded) -> Bounded:
    if box.low <= 0.0:
        raise PydanticCustomError("own", "this reaches zero, with which nothing can be computed")
    return box


Positive = AfterValidator(_positive)
"""A box that does not reach zero."""
