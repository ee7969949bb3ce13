"""What is seen along a path, each at its temperature and in order: what a class is told it will see.

Of a sealed charge that is warmed or cooled at rest with itself: times and unevenness are left out, and said so in
how far each sight is to be trusted.
"""

from __future__ import annotations

from dataclasses import replace

from runbook.answers import Sight
from runbook.assess.scene import Scene
from runbook.assess.sights import phrases as say
from runbook.assess.sights.beads import bead_path
from runbook.assess.sights.frozen import ICE_POINT, melting_sight, melts
from runbook.assess.sights.looking import NEAR_CRITICAL, Look, computed
from runbook.assess.sights.marks import Marks, is_seen, marks
from runbook.assess.sights.surface import back_sight, contrast_numbers, end_sight
from runbook.errors import RunbookError

_FIRST = ("solid", "meniscus", "no liquid")
"""What is said of the two ends of a path; the rest of it is said where it begins."""
Found = list[tuple[float, Sight]]


def path_sights(scene: Scene, from_K: float, to_K: float, mass: float) -> tuple[tuple[float, Sight], ...]:
    """(temperature [K], sight) from one temperature [K] to another of a charge [kg], in the order of the path.

    Begins with what is seen at the start and ends with what is seen at the end. Landmarks lie between. Raises
    nothing: what the models do not reach is left out.
    """
    warming = to_K >= from_K
    charge = marks(scene, mass)
    between: Found = []
    inside_too = (_melting, _surface, _haze, _contrast, _beads) if is_seen(scene) else ()
    for part in (*inside_too, _frost):
        try:
            between += part(scene, charge, warming)
        except RunbookError:
            continue
    low, high = min(from_K, to_K), max(from_K, to_K)
    inside = sorted((one for one in between if low < one[0] <= high), key=lambda one: one[0], reverse=not warming)
    ordered = [*_end(scene, mass, from_K, warming), *inside, *_end(scene, mass, to_K, warming)]
    return tuple((at, replace(sight, at_K=at)) for at, sight in ordered)


def _end(scene: Scene, mass: float, temperature: float, warming: bool) -> Found:
    found = computed(scene, Look(mass, mass, temperature, warming))
    return [(temperature, one) for one in found if one.of in _FIRST][:1]


def _melting(scene: Scene, charge: Marks, warming: bool) -> Found:
    if not melts(scene, charge.density):
        return []
    triple = scene.substance.triple_temperature
    if not warming:
        return [(triple, Sight(f"At {say.at(triple)} what is liquid freezes.", True, of="solid",
                               numbers=(("triple point", triple, "K"),), trust=say.MELT_TRUST))]  # fmt: skip
    begin = melting_sight(scene, charge.density)
    gone = Sight("The last solid is gone; gauge and thermometer rise again.", True, of="solid gone",
                 numbers=begin.numbers, trust=say.MELT_TRUST)  # fmt: skip
    return [(triple, begin), (triple, gone)]


def _surface(scene: Scene, charge: Marks, warming: bool) -> Found:
    end = charge.end
    if end is None:
        return []
    found: Found = []
    for passed in charge.passed:
        if end.way == "in place" and end.temperature - passed.temperature <= NEAR_CRITICAL:
            continue
        seen = passed if warming else replace(passed, into=not passed.into)
        found.append((passed.temperature, end_sight(scene, charge, seen)))
    found.append((end.temperature, end_sight(scene, charge, None) if warming else back_sight(scene, charge)))
    return found


def _haze(scene: Scene, charge: Marks, warming: bool) -> Found:
    comes, goes = (charge.haze_from, charge.haze_until) if warming else (charge.haze_until, charge.haze_from)
    found: Found = []
    if comes is not None:
        found.append((comes, _haze_at(f"From about {say.at(comes)} a haze, seen with a lamp from the side.", comes)))
    if goes is not None:
        found.append((goes, _haze_at(f"At about {say.at(goes)} the haze has cleared.", goes)))
    return found


def _haze_at(words: str, at: float) -> Sight:
    return Sight(words, True, of="haze", numbers=(("temperature", at, "K"),), trust=say.HAZE_TRUST)


def _contrast(scene: Scene, charge: Marks, warming: bool) -> Found:
    at = charge.faint_from
    if at is None:
        return []
    words = "the surface grows faint" if warming else "the surface is plain again"
    return [(at, Sight(f"From about {say.at(at)} {words}.", True, of="contrast",
                       numbers=contrast_numbers(scene, at), trust=say.CONTRAST_TRUST))]  # fmt: skip


def _beads(scene: Scene, charge: Marks, warming: bool) -> Found:
    return [one for bead in charge.beads for one in bead_path(bead, warming)]


def _frost(scene: Scene, charge: Marks, warming: bool) -> Found:
    if scene.room_hottest < ICE_POINT:
        return []
    there = say.at(ICE_POINT)
    words = f"Above {there} the frost on the body melts." if warming else f"Below {there} frost grows on the body."
    numbers = (("ice point", ICE_POINT, "K"),)
    return [(ICE_POINT, Sight(words, True, of="frost", numbers=numbers, trust=say.FROST_TRUST))]
