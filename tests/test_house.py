"""The house: what each room must not load, in a fresh process, and what the wheel holds."""

from __future__ import annotations

import pkgutil
import subprocess
import sys
import zipfile
from pathlib import Path

import pytest

ROOT = Path(__file__).parents[1]
HEAVY = ("CoolProp", "numpy", "textual")


def modules_of(package: str) -> list[str]:
    """Every module of a package, by name."""
    folder = ROOT / "runbook" / package
    return [f"runbook.{package}"] + [f"runbook.{package}.{m.name}" for m in pkgutil.iter_modules([str(folder)])]


def loaded_after(statement: str) -> set[str]:
    """Which of HEAVY a fresh process has loaded after a statement."""
    code = f"import sys\n{statement}\nprint(*[m for m in {HEAVY!r} if m in sys.modules])"
    done = subprocess.run([sys.executable, "-c", code], capture_output=True, text=True, cwd=ROOT, check=True)
    return set(done.stdout.split())


@pytest.mark.parametrize("package", ["quantities", "apparatus", "procedure", "answers", "run"])
def test_the_pure_core_loads_neither_physics_nor_screen(package: str) -> None:
    """Importing every module of it loads no CoolProp, no numpy and no textual."""
    assert loaded_after("import " + ", ".join(modules_of(package))) == set()


def test_a_file_that_cannot_be_read_is_told_without_the_property_library() -> None:
    """`check` of a bad file costs no two seconds of loading."""
    statement = "from runbook.__main__ import main\nmain(['check', 'no-such-file.yaml'])"
    code = f"import sys, io\nsys.stderr = io.StringIO()\nout, sys.stdout = sys.stdout, io.StringIO()\n{statement}\n"
    code += f"print(*[m for m in {HEAVY!r} if m in sys.modules], file=out)"
    done = subprocess.run([sys.executable, "-c", code], capture_output=True, text=True, cwd=ROOT, check=True)
    assert done.stdout.split() == []


def test_the_wheel_holds_the_procedures_and_no_tests(tmp_path: Path) -> None:
    """Every shipped YAML file is package data, and so is every data file of the packages; nothing of tests/ is."""
    command = [sys.executable, "-m", "pip", "wheel", "--quiet", "--no-deps", "--no-build-isolation"]
    subprocess.run([*command, "--wheel-dir", str(tmp_path), str(ROOT)], check=True, capture_output=True)
    (wheel,) = tmp_path.glob("*.whl")
    names = zipfile.ZipFile(wheel).namelist()
    for file in sorted((ROOT / "procedures").rglob("*.yaml")):
        assert f"runbook/procedures/{file.relative_to(ROOT / 'procedures').as_posix()}" in names
    for file in sorted((ROOT / "runbook").rglob("*.toml")):
        assert file.relative_to(ROOT).as_posix() in names
    assert not [n for n in names if n.startswith("tests/")]


def test_an_unknown_command_is_a_sentence() -> None:
    """Exit 2, the usage on standard error, no traceback."""
    done = subprocess.run(
        [sys.executable, "-m", "runbook", "fly"], capture_output=True, text=True, cwd=ROOT, check=False
    )
    assert done.returncode == 2
    assert "no command 'fly'" in done.stderr
    assert "Traceback" not in done.stderr
    assert done.stdout == ""
