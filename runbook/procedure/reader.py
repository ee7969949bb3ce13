"""A procedure file and the apparatus file it names, read as one, with the place of everything in them.

All problems of both files at once. Never follows a path out of the folder of the file that names it, except
to the shipped apparatus; never reads anything but a plain file of limited size.
"""

from __future__ import annotations

import hashlib
from dataclasses import dataclass
from pathlib import Path
from typing import TypeVar

from pydantic import BaseModel, ValidationError

from runbook.apparatus.consistency import inconsistencies
from runbook.apparatus.model import Apparatus
from runbook.errors import FileProblems, Problem
from runbook.procedure import shelf
from runbook.procedure.document import UNREADABLE, Document, Place, Route
from runbook.procedure.model import Procedure
from runbook.procedure.problems import model_problems, place_of
from runbook.procedure.yaml_text import LARGEST, read_document

M = TypeVar("M", bound=BaseModel)


@dataclass(frozen=True, slots=True)
class Loaded:
    """Two files that read well."""

    procedure: Procedure
    apparatus: Apparatus
    positions: dict[Route, Place]
    """Of every value of the procedure file."""
    keys: dict[Route, Place]
    """Of every key of the procedure file."""
    apparatus_positions: dict[Route, Place]
    """Of every value of the apparatus file."""
    procedure_file: str
    """As the user gave it."""
    apparatus_file: str
    procedure_text: str
    apparatus_text: str
    procedure_sha256: str
    """Of the file's bytes."""
    apparatus_sha256: str
    one_of_several: bool = False
    """As one vessel of several sees the files, which have been judged as a whole."""


def read_procedure(path: Path) -> Loaded:
    """The procedure at a path with its apparatus. Raises FileProblems with all problems of both."""
    data = _bytes_of(path, str(path))
    document = read_document(data, str(path))
    procedure, problems = _model(document, Procedure)
    named = document.plain.get("apparatus") if isinstance(document.plain, dict) else None
    if not isinstance(named, str):
        raise FileProblems(_sorted(problems))
    try:
        vessel = _apparatus_path(path, named)
        vessel_data = _bytes_of(vessel, str(vessel))
    except _NotThere as why:
        at = place_of(("apparatus",), document)
        raise FileProblems(_sorted([*problems, document.problem(at, str(why))])) from None
    except FileProblems as why:
        raise FileProblems((*_sorted(problems), *why.problems)) from None
    vessel_document = read_document(vessel_data, str(vessel))
    apparatus, vessel_problems = _apparatus(vessel_document)
    if procedure is None or apparatus is None or problems or vessel_problems:
        raise FileProblems((*_sorted(problems), *_sorted(vessel_problems)))
    return Loaded(
        procedure=procedure,
        apparatus=apparatus,
        positions=document.values,
        keys=document.keys,
        apparatus_positions=vessel_document.values,
        procedure_file=str(path),
        apparatus_file=str(vessel),
        procedure_text=data.decode("utf-8-sig"),
        apparatus_text=vessel_data.decode("utf-8-sig"),
        procedure_sha256=hashlib.sha256(data).hexdigest(),
        apparatus_sha256=hashlib.sha256(vessel_data).hexdigest(),
    )


def read_apparatus(path: Path) -> Apparatus:
    """The apparatus at a path. Raises FileProblems with all its problems."""
    apparatus, problems = _apparatus(read_document(_bytes_of(path, str(path)), str(path)))
    if apparatus is None or problems:
        raise FileProblems(_sorted(problems))
    return apparatus


def apparatus_problems(text: str, file: str) -> tuple[Problem, ...]:
    """What is wrong with the text of an apparatus file, in the order of its lines; file: what it is called there."""
    return _sorted(_apparatus(read_document(text.encode(), file))[1])


def procedure_problems(text: str, file: str) -> tuple[Problem, ...]:
    """The same of a procedure file, read without the apparatus that it names."""
    return _sorted(_model(read_document(text.encode(), file), Procedure)[1])


class _NotThere(Exception):
    """The apparatus file that a procedure names cannot be had; the text says why."""


def _apparatus(document: Document) -> tuple[Apparatus | None, list[Problem]]:
    apparatus, problems = _model(document, Apparatus)
    if apparatus is not None:
        problems += [
            document.problem(place_of(route, document), message, "apparatus")
            for route, message in inconsistencies(apparatus)
        ]
    return apparatus, problems


def _model(document: Document, model: type[M]) -> tuple[M | None, list[Problem]]:
    """The model of a document, None where it could not be made, and every problem."""
    problems = list(document.problems)
    if document.plain is UNREADABLE:
        return None, problems
    try:
        return model.model_validate(document.plain), problems
    except ValidationError as error:
        return None, problems + model_problems(error, document, model)


def _sorted(problems: list[Problem]) -> tuple[Problem, ...]:
    return tuple(sorted(problems, key=lambda p: (p.line, p.column)))


def _bytes_of(path: Path, shown: str) -> bytes:
    """At most one byte more than the largest file. Raises FileProblems."""
    try:
        if not path.exists():
            raise FileProblems((Problem(shown, 0, 0, "there is no such file"),))
        if not path.is_file():
            # A pipe or a device would be read for ever.
            raise FileProblems((Problem(shown, 0, 0, "this is no plain file"),))
        with path.open("rb") as file:
            return file.read(LARGEST + 1)
    except (OSError, ValueError) as error:
        why = getattr(error, "strerror", None) or "its name cannot be used"
        raise FileProblems((Problem(shown, 0, 0, f"it cannot be read: {why}"),)) from None


def _apparatus_path(procedure: Path, named: str) -> Path:
    """Where the apparatus is: beside the procedure, or shipped. Raises _NotThere."""
    written = Path(named)
    if written.is_absolute() or ".." in written.parts or "\\" in named:
        raise _NotThere(
            f"'{named}' leads out of this file's folder: name a file in it or beneath it, "
            "for example apparatus/view-cell-250.yaml"
        )
    folders = [procedure.parent]
    shipped = shelf.shipped_folder()
    if shipped is not None:
        folders.append(shipped)
    for folder in folders:
        try:
            real = (folder / written).resolve()
            if not (folder / written).exists():
                continue
        except (OSError, ValueError, RuntimeError):
            raise _NotThere(f"'{named}' cannot be the name of a file") from None
        if not real.is_relative_to(folder.resolve()):
            raise _NotThere(f"'{named}' is a link that leads out of this file's folder: put the file itself there")
        return folder / written
    raise _NotThere(f"there is no file '{named}' beside this file, and none of that name is shipped")
