"""The bound over the box of tolerances is proved, and here searched: never exceeded, and hardly larger than needed.

RUNBOOK_SAMPLES=100000 for the long form; the short one runs with every change.
"""

from __future__ import annotations

import os
from collections.abc import Callable
from pathlib import Path
from random import Random

import pytest

from runbook.assess.corners import highest_pressure
from runbook.assess.scene import Scene, open_scene
from runbook.charge.filling import air_pressure
from runbook.procedure.reader import read_procedure
from tests.assess.scenes import changed_files

SAMPLES = int(os.environ.get("RUNBOOK_SAMPLES", "3000"))
Point = tuple[float, float, float, float]
"""Each from 0 to 1: charge, volume, temperature, air."""

BOXES = {
    "the lesson": ((0.115, 0.119), (291.15, 312.15)),
    "through liquid-full": ((0.176, 0.184), (288.15, 312.15)),
    "little in it": ((0.030, 0.036), (283.15, 312.15)),
    "at critical": ((0.114, 0.120), (303.9, 304.4)),
    "with solid": ((0.105, 0.150), (200.0, 230.0)),
}
"""Least and most charge [kg], coldest and hottest wall [K]."""


def truth(scene: Scene, mass: tuple[float, float], walls: tuple[float, float]) -> Callable[[Point], float]:
    """Pressure [Pa] at a point of the box, by the models alone: no U, no equation uncertainty."""

    def at(point: Point) -> float:
        a, b, c, d = point
        kg = mass[0] + a * (mass[1] - mass[0])
        volume = scene.volume[0] + b * (scene.volume[1] - scene.volume[0])
        kelvin = walls[0] + c * (walls[1] - walls[0])
        air = air_pressure(scene.substance, kelvin, kg / volume, d * scene.moles_of_air, volume)
        return scene.substance.pressure(kelvin, kg / volume) + air

    return at


def searched(at: Callable[[Point], float], count: int, seed: int) -> float:
    """The largest of count samples, half of them drawn to the corners, after climbing from the best ten."""
    random = Random(seed)
    found: list[tuple[float, Point]] = []
    for k in range(count):
        point = tuple(
            random.random() if k % 2 else random.choice((0.0, 1.0, random.betavariate(0.3, 0.3))) for _ in "abcd"
        )
        p: Point = (point[0], point[1], point[2], point[3])
        found.append((at(p), p))
    found.sort(reverse=True)
    return max(_climbed(at, value, point, random) for value, point in found[:10])


def _climbed(at: Callable[[Point], float], value: float, point: Point, random: Random) -> float:
    step = 0.2
    while step > 1e-3:
        moved = [min(1.0, max(0.0, x + random.uniform(-step, step))) for x in point]
        trial: Point = (moved[0], moved[1], moved[2], moved[3])
        new = at(trial)
        if new > value:
            value, point = new, trial
        else:
            step *= 0.85
    return value


@pytest.mark.parametrize("name", BOXES)
def test_the_bound_is_never_exceeded_and_hardly_too_large(name: str, tmp_path: Path) -> None:
    """Never below the largest found, and within 0.2 % of it, both before U and equation uncertainty."""
    mass, walls = BOXES[name]
    scene = open_scene(read_procedure(changed_files(tmp_path)), None, None)
    bound = highest_pressure(scene, mass[1], walls[1])
    assert bound.value is not None
    largest = searched(truth(scene, mass, walls), SAMPLES, 20310302)
    proved = bound.value - bound.uncertainty
    assert largest <= proved * (1.0 + 1e-12)
    assert largest >= proved * (1.0 - 0.002)
