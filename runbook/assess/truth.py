"""Whether what an author says will be seen is what will be seen, and whether anybody is told of what is crossed.

Words are judged only where they claim something that can be computed: that the surface fades in place, that liquid
reaches the top, that the last liquid goes, at a temperature. Everything else is the author's own business.
"""

from __future__ import annotations

import re
from collections.abc import Iterator, Sequence
from dataclasses import dataclass

from runbook.answers import Finding
from runbook.assess.boxes import viewed_shape
from runbook.assess.scene import Scene
from runbook.assess.sights import not_to_come
from runbook.assess.sights.lines import asked_for
from runbook.assess.sights.marks import is_seen, window_of
from runbook.assess.walk import Walked
from runbook.charge.meniscus import Ending, ending
from runbook.fluids.optics import haze_known
from runbook.procedure.document import Place
from runbook.procedure.model import DoStep, WarmTo

_CLAIMS = (
    ("in place", re.compile(r"\b(surface|meniscus)\b.*\b(fades?|vanish\w*|disappears?|is gone)\b", re.IGNORECASE)),
    ("top", re.compile(r"\bliquid\b.*\b(fills|reaches the top)\b|\b(surface|meniscus)\b.*\breaches the top\b", re.I)),
    ("bottom", re.compile(r"\b(last liquid|liquid)\b.*\b(goes|has gone|dries|is gone)\b", re.IGNORECASE)),
)
"""What an author may claim of the end of the surface, and how that is said."""
_DEGREES = re.compile(r"(-?[0-9]+(?:\.[0-9]+)?)\s*(?:degC|°C)")
_OUTSIDE = ("frost", "snow")
"""What an author may ask to be shown that is seen from outside."""
_CLOSE = 1.0
"""How far a temperature in words may be off [K]."""


@dataclass(frozen=True, slots=True)
class _Ends:
    """How the surface ends for the least and the most charge of the plan."""

    least: Ending
    most: Ending


def truth_findings(scene: Scene, lines: Sequence[Walked], places: Sequence[Place]) -> tuple[Finding, ...]:
    """Rules 'words and sight' and 'landmark unannounced'; places: line and column of each line of the procedure."""
    ends = _ends(scene)
    found: list[Finding] = []
    for line, at in zip(lines, places, strict=True):
        found += _asked(scene, line, at)
        if ends is None:
            continue
        if isinstance(line.verb, WarmTo) and line.during.closed:
            found += _said(ends, line, at)
            found += _crossed(ends, line, at)
    return tuple(found)


def _ends(scene: Scene) -> _Ends | None:
    low, high = scene.planned
    shape, window, volume = viewed_shape(scene), window_of(scene), scene.apparatus.volume.free.value
    if not low > 0.0 or not is_seen(scene):
        return None
    least, most = (ending(scene.substance, shape, window, m / volume) for m in (low, high))
    return None if least is None or most is None else _Ends(least, most)


def _said(ends: _Ends, line: Walked, at: Place) -> Iterator[Finding]:
    """What the author's words claim, against both ends of the tolerance."""
    step = line.step
    words = step.see.words if isinstance(step, DoStep) and step.see is not None else None
    if words is None:
        return
    claim = next((way for way, pattern in _CLAIMS if pattern.search(words)), None)
    if claim is None:
        return
    wrong = [(name, end) for name, end in (("least", ends.least), ("most", ends.most)) if end.way != claim]
    if wrong:
        which = "" if len(wrong) == 2 else f" with the {wrong[0][0]} charge"
        yield Finding(
            "words and sight", "warning", *at,
            f"step {line.number}: '{words}' is not what will be seen{which}: {_instead(wrong[-1][1])}",
        )  # fmt: skip
        return
    for number in _DEGREES.findall(words):
        kelvin = float(number) + 273.15
        if not ends.most.temperature - _CLOSE <= kelvin <= ends.least.temperature + _CLOSE and not (
            ends.least.temperature - _CLOSE <= kelvin <= ends.most.temperature + _CLOSE
        ):
            yield Finding(
                "words and sight", "warning", *at,
                f"step {line.number}: it says {number} degC; that falls at {ends.least.temperature - 273.15:.1f} degC",
            )  # fmt: skip


def _asked(scene: Scene, line: Walked, at: Place) -> Iterator[Finding]:
    """What the author asks the program to show, against what it computes along the step's path."""
    inside = [name for name in asked_for(line) if name not in _OUTSIDE]
    if inside and not is_seen(scene):
        yield Finding(
            "words and sight", "warning", *at,
            f"step {line.number}: '{inside[0]}' is not seen, this vessel has no 'window': say what is seen outside",
        )  # fmt: skip
        return
    if "haze" in inside and not haze_known(scene.substance):
        yield Finding(
            "words and sight", "advice", *at,
            f"step {line.number}: the haze of {scene.substance.name} is not computed, its amplitudes are not known: "
            "say it in 'words'",
        )  # fmt: skip
    missing, come = not_to_come(scene, line)
    for name in missing:
        yield Finding(
            "words and sight", "warning", *at,
            f"step {line.number}: '{name}' is not what will be seen; on this path there will be: {', '.join(come)}",
        )  # fmt: skip


def _crossed(ends: _Ends, line: Walked, at: Place) -> Iterator[Finding]:
    """The end of the surface passed in a step that tells nobody: no sight, no warning."""
    step = line.step
    if not isinstance(step, DoStep) or step.see is not None or step.warning is not None:
        return
    crossed = [e for e in (ends.least, ends.most) if line.before.cold < e.temperature <= line.during.hot]
    if crossed:
        yield Finding(
            "landmark unannounced", "warning", *at,
            f"step {line.number} passes {crossed[-1].temperature - 273.15:.1f} degC, where {_event(crossed[-1])}: "
            "say so in 'see', or warn of it",
        )  # fmt: skip


def _event(end: Ending) -> str:
    return {
        "in place": "the surface fades where it stands",
        "top": "liquid fills the vessel and the pressure climbs steeply",
        "bottom": "the last liquid goes",
    }[end.way]


def _instead(end: Ending) -> str:
    window = ""
    if end.way != "in place" and end.from_window is not None:
        window = f", out of the window from {end.from_window - 273.15:.1f} degC"
    return f"{_event(end)} at {end.temperature - 273.15:.1f} degC{window}"
