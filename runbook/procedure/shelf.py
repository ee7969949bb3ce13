"""Where procedures are: those shipped with the program, and those in the folder one stands in.

Shipped files are package data of an installed program, and stand beside the package in a checkout.
"""

from __future__ import annotations

from importlib import resources
from pathlib import Path

from runbook.errors import InputUnusable

FOLDER = "procedures"


def shipped_folder() -> Path | None:
    """The folder of the shipped procedures; None where this installation has none."""
    inside = resources.files("runbook") / FOLDER
    if isinstance(inside, Path) and inside.is_dir():
        return inside
    package = resources.files("runbook")
    beside = package.parent / FOLDER if isinstance(package, Path) else None
    return beside if beside is not None and beside.is_dir() else None


def list_procedures(here: Path | None = None) -> tuple[Path, ...]:
    """Every procedure file: those of a folder (the current one, where none is given), then the shipped ones.

    Files of other kinds are passed over. Raises InputUnusable where there is none at all.
    """
    own = here if here is not None else Path()
    shipped = shipped_folder()
    found: list[Path] = []
    for folder in (own, own / FOLDER, shipped):
        if folder is None or not folder.is_dir():
            continue
        for path in sorted((*folder.glob("*.yaml"), *folder.glob("*.yml"))):
            if _is_procedure(path) and not any(_same(path, other) for other in found):
                found.append(path)
    if not found:
        raise InputUnusable(
            "no procedure is here and none is shipped with this installation: "
            "name a file, or write one with 'runbook new procedure'"
        )
    return tuple(found)


def find_procedure(name: str) -> Path:
    """The file of that path, or the shipped one of that name, with or without its ending.

    Raises InputUnusable, naming what there is.
    """
    given = Path(name)
    if given.exists():
        return given
    shipped = shipped_folder()
    for path in () if shipped is None else sorted(shipped.glob("*.yaml")):
        if name in (path.name, path.stem):
            return path
    known = "" if shipped is None else ", ".join(sorted(p.stem for p in shipped.glob("*.yaml")))
    raise InputUnusable(f"there is no file '{name}'" + (f"; shipped are: {known}" if known else ""))


def find_apparatus(name: str) -> Path:
    """The apparatus file of that path, or the shipped one of that name, with or without its ending.

    Raises InputUnusable, naming what there is.
    """
    given = Path(name)
    if given.exists():
        return given
    shipped = shipped_folder()
    files = () if shipped is None else sorted((shipped / "apparatus").glob("*.yaml"))
    for path in files:
        if name in (path.name, path.stem):
            return path
    known = ", ".join(path.stem for path in files)
    raise InputUnusable(f"there is no file '{name}'" + (f"; shipped vessels are: {known}" if known else ""))


def _same(path: Path, other: Path) -> bool:
    """One file, or its copy under the same name: a checkout stands beside the program installed from it."""
    return path.samefile(other) or (path.name == other.name and path.read_bytes() == other.read_bytes())


def _is_procedure(path: Path) -> bool:
    """Whether a file says that it is a procedure, near its top. Unreadable ones are not listed."""
    try:
        with path.open("rb") as file:
            top = file.read(4096)
    except OSError:
        return False
    return any(line.startswith(b"format: procedure") for line in top.splitlines())
