"""`runbook about`: versions, where things live, and a self-check against published values."""

from __future__ import annotations

import platform
import sys
from collections.abc import Callable

from runbook import __version__
from runbook.commands.arguments import Arguments
from runbook.errors import ExitCode, RunbookError


def main(argv: list[str]) -> int:
    """Print versions and folders, then check what can be checked here; FAILED where a check fails."""
    Arguments(prog="runbook about", description=__doc__).parse_args(argv)
    print(f"runbook {__version__}, Python {platform.python_version()}, {sys.platform}")
    good = True
    for name, check in CHECKS.items():
        try:
            said, passed = check()
        except RunbookError as error:
            said, passed = str(error), False
        good = good and passed
        print(f"{'good  ' if passed else 'FAILED'}  {name}: {said}")
    print("A self-check is no proof of a vessel: limits are what your own files say.")
    return int(ExitCode.GOOD if good else ExitCode.FAILED)


def _library() -> tuple[str, bool]:
    from runbook.fluids.substance import substance

    fluid = substance("carbon dioxide")
    # Span and Wagner 1996, J. Phys. Chem. Ref. Data 25, 1509, Table 34: 300 K, 6.7131 MPa, 679.24 kg/m3.
    both = fluid.saturation(300.0)
    said = f"carbon dioxide at 300 K: {both.pressure / 1e6:.4f} MPa, liquid {both.liquid_density:.2f} kg/m3"
    return said, abs(both.pressure - 6.7131e6) < 50.0 and abs(both.liquid_density - 679.24) < 0.005


def _sublimation() -> tuple[str, bool]:
    from runbook.fluids.substance import substance

    # Span and Wagner 1996: sublimation at 101 325 Pa at 194.6855 K.
    pressure = substance("carbon dioxide").pressure(194.6855, 500.0)
    return f"dry ice at 194.6855 K: {pressure / 100:.1f} hPa (1013.25)", abs(pressure - 101325.0) < 250.0


def _shelf() -> tuple[str, bool]:
    from runbook.procedure.shelf import list_procedures

    found = list_procedures()
    return f"{len(found)} shipped", bool(found)


def _logbook() -> tuple[str, bool]:
    from runbook.run.logbook import logbook_folder

    return str(logbook_folder(None)), True


CHECKS: dict[str, Callable[[], tuple[str, bool]]] = {
    "property library": _library,
    "dry ice": _sublimation,
    "procedures": _shelf,
    "logbook": _logbook,
}
