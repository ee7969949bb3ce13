"""Looks into the shipped vessel, with beads in it or not."""

from __future__ import annotations

from dataclasses import replace
from pathlib import Path

from runbook.answers import Sight
from runbook.assess.scene import Scene
from runbook.assess.sights import Look, computed
from tests.assess.scenes import scene

KELVIN = 273.15
BEADS = {
    "instruments:\n": "beads:\n"
    "  - {tag: K1, density: 0.45 g/cm3 ± 0.005 g/cm3, colour: red}\n"
    "  - {tag: K2, density: 0.62 g/cm3, colour: blue}\n"
    "  - {tag: K3, density: 0.30 g/cm3, colour: green}\n"
    "  - {tag: K4, density: 0.468 g/cm3, colour: white}\n"
    "instruments:\n"
}


def there(folder: Path, beads: bool = False) -> Scene:
    """The shipped vessel, with beads in it or not."""
    return scene(folder, apparatus=BEADS if beads else None)


def seen(place: Scene, temperature: float, mass: float = 0.117, **changes: object) -> tuple[Sight, ...]:
    """What a charge [kg] shows at a temperature [K]."""
    return computed(place, replace(Look(mass, mass, temperature), **changes))  # type: ignore[arg-type]  # by field name


def of(sights: tuple[Sight, ...], what: str) -> Sight:
    """The one sight of that kind."""
    (found,) = [one for one in sights if one.of == what]
    return found


def number(sight: Sight, name: str) -> float:
    """The figure of that name behind it."""
    (found,) = [value for called, value, _ in sight.numbers if called == name]
    return found


def filled(place: Scene, share: float) -> float:
    """The charge [kg] of that share of critical density."""
    return share * place.substance.critical_density * place.apparatus.volume.free.value


def kinds(found: tuple[tuple[float, Sight], ...]) -> list[str]:
    """Kinds in order."""
    return [sight.of for _, sight in found]
