"""The smallest change that would bring a procedure within its vessel's limits: one figure at a time.

Each figure is moved only towards less hazard, found by halving, rounded to what one would write and judged again.
What no single figure mends is left to the author; what is not known is not a figure to be moved.
"""

from __future__ import annotations

from collections.abc import Callable, Iterator
from dataclasses import dataclass, replace
from math import ceil, floor
from typing import Any

from runbook.apparatus.base import FileModel
from runbook.assess.ahead import look
from runbook.assess.bounds import charge_bounds
from runbook.assess.scene import Scene
from runbook.assess.walk import by_source, walk
from runbook.procedure.document import Place, Route
from runbook.procedure.lines import acts_of, lines_of
from runbook.procedure.model import Charge, WarmTo
from runbook.procedure.reader import Loaded
from runbook.quantities import Bounded, NotKnown, say

_HALVINGS = 14
_ZERO_C = 273.15


@dataclass(frozen=True, slots=True)
class Edit:
    """One value written anew."""

    in_apparatus: bool
    """In the apparatus file; else in the procedure file."""
    at: Place
    write: str
    """As it would stand in the file."""


@dataclass(frozen=True, slots=True)
class Mend:
    """A change after which no margin is outside, everything else as it is."""

    words: str
    """What to change, for a person: 'a plan of at most 128 g ± 2 g'."""
    edits: tuple[Edit, ...]
    """Never empty; applied together."""


@dataclass(frozen=True, slots=True)
class _Figure:
    """One figure that may be moved."""

    now: float
    """[SI]"""
    far: float
    """As far as it may go towards less hazard [SI]."""
    step: float
    """To which it is rounded, towards less hazard [SI]."""
    put: Callable[[float], Loaded]
    """Both files with the figure at a value [SI]."""
    mend: Callable[[float], Mend]


def mends(scene: Scene) -> tuple[Mend, ...]:
    """Every single change that mends a scene with a margin outside; empty where nothing is, or none does."""
    if _within(scene):
        return ()
    found = (_smallest(scene, figure) for figure in _figures(scene))
    return tuple(mend for mend in found if mend is not None)


def _within(scene: Scene) -> bool:
    lines = walk(scene)
    return all(
        m.margin is not None and m.margin > 0.0
        for i in range(len(lines))
        for m in look(scene, lines, i, with_times=False).margins
    )


def _smallest(scene: Scene, figure: _Figure) -> Mend | None:
    def good(value: float) -> bool:
        return _within(_scene_of(scene, figure.put(value)))

    near, far = figure.now, figure.far
    if not good(far):
        return None
    for _ in range(_HALVINGS):
        middle = 0.5 * (near + far)
        near, far = (near, middle) if good(middle) else (middle, far)
    less = figure.far < figure.now
    rounding = floor if less else ceil
    zero = _ZERO_C if figure.now > 150.0 and figure.step >= 0.1 else 0.0
    tidy = zero + figure.step * rounding((far - zero) / figure.step + (1e-9 if less else -1e-9))
    value = tidy if good(tidy) else far
    return figure.mend(value)


def _scene_of(scene: Scene, loaded: Loaded) -> Scene:
    return Scene(loaded, scene.barometer, scene.charge, scene.assume, scene.hottest_K, scene.cell_closed)


def _figures(scene: Scene) -> Iterator[_Figure]:
    for figure in (_charge(scene), _target(scene), _cut_out(scene), _room_hottest(scene), _room_volume(scene)):
        if figure is not None:
            yield figure


# -- the figures ------------------------------------------------------------------------------------------


def _charge(scene: Scene) -> _Figure | None:
    loaded = scene.loaded
    charge = loaded.procedure.charge
    if not isinstance(charge, Charge) or scene.starts_loaded:
        return None
    box = charge.mass

    def put(value: float) -> Loaded:
        return _procedure(loaded, ("charge", "mass"), Bounded(value, box.plus_minus))

    def mend(value: float) -> Mend:
        written = f"{say(value, 'g')} ± {say(box.plus_minus, 'g')}"
        least = charge_bounds(_scene_of(scene, put(value))).least_kg
        words = f"a plan of at most {written}"
        if least is not None and value < least:
            words += f" (the sight wants at least {say(least, 'g', 0)})"
        return Mend(words, (Edit(False, loaded.positions[("charge", "mass")], written),))

    return _Figure(box.value, 1.5 * box.plus_minus + 1e-3, 1e-3, put, mend)


def _target(scene: Scene) -> _Figure | None:
    """The highest temperature that any step warms to by the source, and the set point with it."""
    loaded = scene.loaded
    routes = [
        ((*route, "path", key), getattr(path, key))
        for line in lines_of(loaded.procedure)
        for route, _, path, _ in acts_of(line)
        if isinstance(path, WarmTo) and by_source(scene, path)
        for key in ("warm_to", "set_to")
        if isinstance(getattr(path, key), Bounded)
    ]
    if not routes:
        return None

    def put(value: float) -> Loaded:
        changed = loaded
        for route, box in routes:
            if box.value > value:
                changed = _procedure(changed, route, Bounded(value, box.plus_minus))
        return changed

    def mend(value: float) -> Mend:
        edits = tuple(
            Edit(False, loaded.positions[route], _celsius(value, box)) for route, box in routes if box.value > value
        )
        return Mend(f"stop at {say(value, 'degC')}", edits)

    top = max(box.value for _, box in routes)
    return _Figure(top, scene.room_coldest, 0.5, put, mend)


def _cut_out(scene: Scene) -> _Figure | None:
    loaded = scene.loaded
    source = loaded.apparatus.heat_source
    if source is None or source.cut_out is None or isinstance(source.cut_out, NotKnown):
        return None
    box = source.cut_out

    def put(value: float) -> Loaded:
        changed = _with(loaded.apparatus, ("heat_source", "cut_out"), Bounded(value, box.plus_minus))
        return replace(loaded, apparatus=changed)

    def mend(value: float) -> Mend:
        written = _celsius(value, box)
        at = loaded.apparatus_positions[("heat_source", "cut_out")]
        return Mend(
            f"a cut-out of {source.tag} at {written}, set and tripped on the device", (Edit(True, at, written),)
        )

    return _Figure(box.value, scene.room_coldest, 0.5, put, mend)


def _room_hottest(scene: Scene) -> _Figure | None:
    loaded = scene.loaded
    box = loaded.procedure.room.hottest

    def put(value: float) -> Loaded:
        return _procedure(loaded, ("room", "hottest"), Bounded(value, box.plus_minus))

    def mend(value: float) -> Mend:
        written = _celsius(value, box)
        return Mend(f"a room never above {written}", (Edit(False, loaded.positions[("room", "hottest")], written),))

    return _Figure(box.value, loaded.procedure.room.coldest.high, 0.5, put, mend)


def _room_volume(scene: Scene) -> _Figure | None:
    loaded = scene.loaded
    box = loaded.procedure.room.volume

    def put(value: float) -> Loaded:
        return _procedure(loaded, ("room", "volume"), Bounded(value, box.plus_minus))

    def mend(value: float) -> Mend:
        written = say(value, "m3")
        return Mend(f"a room of at least {written}", (Edit(False, loaded.positions[("room", "volume")], written),))

    return _Figure(box.value, max(2000.0, 10.0 * box.value), 5.0, put, mend)


def _celsius(value: float, box: Bounded) -> str:
    off = f" ± {box.plus_minus:g} K" if box.plus_minus else ""
    return f"{say(value, 'degC')}{off}".replace("°C", "degC")


def _procedure(loaded: Loaded, route: Route, value: object) -> Loaded:
    return replace(loaded, procedure=_with(loaded.procedure, route, value))


def _with(model: Any, route: Route, value: object) -> Any:
    """The same frozen model with one value deep inside it another."""
    if not route:
        return value
    head, rest = route[0], route[1:]
    if isinstance(model, tuple) and isinstance(head, int):
        return (*model[:head], _with(model[head], rest, value), *model[head + 1 :])
    assert isinstance(model, FileModel)
    return model.model_copy(update={str(head): _with(getattr(model, str(head)), rest, value)})
