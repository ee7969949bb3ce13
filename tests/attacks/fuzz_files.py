"""Thousands of damaged procedure files through `check`: exit 0, 1 or 2, a place with every 2, no traceback, no wait.

`python -m tests.attacks.fuzz_files COUNT [SEED]` is the long form; a test runs the short one.
"""

from __future__ import annotations

import io
import re
import sys
import tempfile
import time
from collections import Counter
from contextlib import redirect_stderr, redirect_stdout
from pathlib import Path
from random import Random

from runbook.__main__ import main

SHIPPED = Path(__file__).parents[2] / "procedures"
SLOWEST = 1.0
"""[s] in which each file is judged, the property library loaded."""
_PLACE = re.compile(r":[0-9]+:[0-9]+: ")
_WORDS = (
    "not known", "1e400", ".nan", "0x1F", "12:30", "-", "{", "}", "[", "]", ":", "#", "&a", "*a", "!!python/none",
    "~", "null", "yes", "0 g", "-5 degC", "1e9 g", "999 bar(g)", "0 bar(a)", "room temperature", "V9", "117", "±",
    "117 g ± 200 g", "500 degC", "-400 degC", "1e-9 mL", "seal", "up to 1 K", "\u202e", "\x1b[2J", "ü" * 500,
)  # fmt: skip


def damaged(text: str, random: Random) -> bytes:
    """The text with one to four things done to it, half of them to its structure, some to its bytes."""
    for _ in range(random.randint(1, 4)):
        text = random.choice(_DAMAGES)(text, random)
    data = text.encode("utf-8", "surrogatepass")
    if random.random() < 0.15:
        array = bytearray(data)
        for _ in range(random.randint(1, 6)):
            array[random.randrange(len(array))] = random.randrange(256)
        data = bytes(array[: random.randrange(len(array)) if random.random() < 0.2 else None])
    return data


def _scalar(text: str, random: Random) -> str:
    """One value becomes another value of the file, or something odd."""
    found = list(re.finditer(r"(?<=: )[^,{}\[\]#\n]+", text))
    if not found:
        return text
    one = random.choice(found)
    new = random.choice(_WORDS) if random.random() < 0.5 else random.choice(found)[0]
    return text[: one.start()] + new + text[one.end() :]


def _number(text: str, random: Random) -> str:
    """One number grows or shrinks."""
    found = list(re.finditer(r"(?<![A-Za-z0-9.])[0-9]+(\.[0-9]+)?", text))
    if not found:
        return text
    one = random.choice(found)
    value = float(one[0]) * random.choice((0.0, 0.1, 0.5, 1.5, 2.0, 10.0, 1000.0, -1.0))
    return text[: one.start()] + f"{value:g}" + text[one.end() :]


def _key(text: str, random: Random) -> str:
    """One key loses a letter, or becomes another key."""
    found = list(re.finditer(r"[a-z_]+(?=:)", text))
    if not found:
        return text
    one = random.choice(found)
    new = one[0][1:] if random.random() < 0.5 else random.choice(found)[0]
    return text[: one.start()] + new + text[one.end() :]


def _lines(text: str, random: Random) -> str:
    """Lines are dropped, doubled, moved or indented."""
    lines = text.split("\n")
    at = random.randrange(len(lines))
    match random.randrange(4):
        case 0:
            del lines[at : at + random.randint(1, 8)]
        case 1:
            lines[at:at] = lines[at : at + random.randint(1, 8)]
        case 2:
            lines.insert(random.randrange(len(lines)), lines.pop(at))
        case _:
            lines[at] = " " * random.randint(1, 3) + lines[at]
    return "\n".join(lines) or "\n"


def _steps(text: str, random: Random) -> str:
    """Two steps change places: things happen in an order nobody meant."""
    pieces = re.split(r"(?m)^(?=      - )", text)
    if len(pieces) < 4:
        return text
    a, b = random.sample(range(1, len(pieces)), 2)
    pieces[a], pieces[b] = pieces[b], pieces[a]
    return "".join(pieces)


_DAMAGES = (_scalar, _scalar, _number, _number, _key, _lines, _steps)


def fuzz(count: int, seed: int, folder: Path) -> tuple[Counter[int], list[str]]:
    """(how often each exit code, what went wrong) of so many damaged files."""
    random = Random(seed)
    files = sorted(SHIPPED.glob("*.yaml"))
    codes: Counter[int] = Counter()
    wrong: list[str] = []
    _checked(files[0])  # loads the property library, which no file is blamed for
    for number in range(count):
        source = random.choice(files)
        beside = random.random() < 0.3
        path = _written(folder, source, random, beside)
        began = time.perf_counter()
        code, said = _checked(path)
        took = time.perf_counter() - began
        codes[code] += 1
        if code not in (0, 1, 2) or (code == 2 and not _PLACE.search(said)) or "Traceback" in said or took > SLOWEST:
            kept = folder / f"wrong-{seed}-{number}"
            kept.mkdir()
            _copy(folder, kept)
            wrong.append(f"{kept}: exit {code}, {took:.2f} s: {said[-600:]}")
    return codes, wrong


def _written(folder: Path, source: Path, random: Random, beside: bool) -> Path:
    """The damaged procedure, or a good one beside a damaged vessel."""
    for vessel in (SHIPPED / "apparatus").glob("*.yaml"):
        (folder / "apparatus").mkdir(exist_ok=True)
        text = vessel.read_text("utf-8")
        (folder / "apparatus" / vessel.name).write_bytes(damaged(text, random) if beside else text.encode())
    path = folder / "p.yaml"
    text = source.read_text("utf-8")
    path.write_bytes(text.encode() if beside else damaged(text, random))
    return path


def _copy(folder: Path, kept: Path) -> None:
    (kept / "apparatus").mkdir()
    (kept / "p.yaml").write_bytes((folder / "p.yaml").read_bytes())
    for vessel in (folder / "apparatus").glob("*.yaml"):
        (kept / "apparatus" / vessel.name).write_bytes(vessel.read_bytes())


def _checked(path: Path) -> tuple[int, str]:
    out, err = io.StringIO(), io.StringIO()
    with redirect_stdout(out), redirect_stderr(err):
        try:
            code = main(["check", str(path), "--on", "2031-03-02"])
        except Exception as error:
            return 99, f"Traceback: {type(error).__name__}: {error}"
    return code, err.getvalue() + out.getvalue()


if __name__ == "__main__":
    COUNT = int(sys.argv[1]) if len(sys.argv) > 1 else 1000
    SEED = int(sys.argv[2]) if len(sys.argv) > 2 else 1
    FOLDER = Path(tempfile.mkdtemp())
    CODES, WRONG = fuzz(COUNT, SEED, FOLDER)
    print(dict(CODES))
    print("\n".join(WRONG[:20]))
    sys.exit(1 if WRONG else 0)
