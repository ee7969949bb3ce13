"""The process that owns the screen never loads numpy or the property library: it would stand still for two seconds."""

from __future__ import annotations

import subprocess
import sys
from pathlib import Path

import runbook

CODE = """
import pkgutil, importlib, sys
import runbook.bench
for module in pkgutil.walk_packages(runbook.bench.__path__, "runbook.bench."):
    importlib.import_module(module.name)
heavy = [name for name in sys.modules if name.split(".")[0] in ("numpy", "CoolProp")]
physics = [name for name in sys.modules if name.startswith(("runbook.fluids", "runbook.charge", "runbook.assess"))]
print(heavy + physics)
"""


def test_screens_load_no_physics() -> None:
    """Importing every module of the screens in a fresh process brings in neither numpy nor CoolProp nor our physics."""
    done = subprocess.run(
        [sys.executable, "-c", CODE],
        capture_output=True,
        text=True,
        check=False,
        cwd=Path(runbook.__file__).parents[1],
    )

    assert done.returncode == 0, done.stderr
    assert done.stdout.strip() == "[]"
