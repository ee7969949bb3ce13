"""Sights of the meniscus: where it stands, which way it goes, how it ends, and what comes with it."""

from __future__ import annotations

from math import degrees

from runbook.answers import Sight
from runbook.assess.boxes import viewed_shape
from runbook.assess.scene import Scene
from runbook.assess.sights import phrases as say
from runbook.assess.sights.marks import Marks, window_of
from runbook.charge.meniscus import Movement, Passage, Window, standing
from runbook.fluids.optics import SCALING_WITHIN, grazing_angle, index_of, reflectance

_UNSEEN = 2e-4
"""Movement under which nobody sees a surface move, at the kelvin a minute of a lesson [m/K]."""
_UNSEEN_NEAR = 2e-3
"""The same within 0.2 K of critical, where an equation's own error moves the surface [m/K]."""
_SURE = 4e-3
"""Bounds of the height further apart than this are said, not their middle [m]."""
_RAIN = 0.5
"""Below the return of the surface drops still fall through the cell for about this long [K]; common practice."""
_FLATTENED = 0.5
"""[K] from critical within which some equations close the dome too early."""


def surface_sight(
    scene: Scene, charge: Marks, temperature: float, box: tuple[float, float], warming: bool | None
) -> Sight | None:
    """The surface at a temperature [K]; box: least and most charge [kg]. Raises OutsideValidity."""
    fluid, shape = scene.substance, viewed_shape(scene)
    now = standing(fluid, shape, charge.density, temperature)
    if now is None:
        return None
    least, most = _bounds(scene, box, charge.density, now, shape.full_height)
    numbers = (
        ("height", now.height, "m"),
        ("least height", least, "m"),
        ("greatest height", most, "m"),
        ("movement on warming", now.per_kelvin, "m/K"),
    )
    away = fluid.critical_temperature - temperature
    near = away < _FLATTENED
    seen = _UNSEEN if away > SCALING_WITHIN else _UNSEEN_NEAR
    place = place_words(now.height, window_of(scene)) if most - least <= _SURE else range_words(least, most)
    words = place + _direction(now, warming, seen) + "."
    return Sight(words, True, of="meniscus", numbers=numbers, trust=say.height_trust(charge.flattens, near))


def boiling_sight(temperature: float) -> Sight:
    """Bubbles of a heated liquid beside its vapour, wall at a temperature [K]."""
    return Sight("Bubbles rise from the warm wall.", True, of="boiling", numbers=(("wall", temperature, "K"),),
                 trust=say.BOIL_TRUST)  # fmt: skip


def place_words(height: float, window: Window) -> str:
    """Where a surface of that height [m] stands, as the beginning of a sentence."""
    millimetres = f"{height * 1000:.0f} mm"
    if height < window.low:
        return f"The surface stands below the window, at {millimetres}"
    if height > window.high:
        return f"The surface stands above the window, at {millimetres}"
    return f"The surface stands at {millimetres} on the scale"


def range_words(least: float, most: float) -> str:
    """As place_words, where the charge leaves more than a few millimetres open; heights [m]."""
    return f"The surface stands between {least * 1000:.0f} and {most * 1000:.0f} mm, as far as the charge is known"


def near_critical(scene: Scene, charge: Marks, warming: bool | None) -> Sight | None:
    """The one sentence within 0.1 K of critical; None for a charge whose surface has long ended there."""
    end, critical = charge.end, scene.substance.critical_temperature
    numbers = (("critical", critical, "K"), ("density, of the critical", charge.density / _critical(scene), "1"))
    if end is None or critical - end.temperature > 0.1:
        return None
    words = "The surface is fading where it stands, in thick white haze."
    if warming is False:
        words = "White smoke, rain and streaks; the surface comes back where it vanished."
    if end.way != "in place":
        words = f"The surface is leaving at the {end.way}, in thick white haze."
    return Sight(words, True, of="meniscus", numbers=numbers, trust=say.NEAR_CRITICAL_TRUST)


def contrast_sight(scene: Scene, charge: Marks, temperature: float) -> Sight | None:
    """A surface that is getting faint at a temperature [K]; None as long as it is plain."""
    if charge.faint_from is None or temperature < charge.faint_from:
        return None
    numbers = contrast_numbers(scene, temperature)
    return Sight("The surface is faint: look for the line where straight things bend.", True, of="contrast",
                 numbers=numbers, trust=say.CONTRAST_TRUST)  # fmt: skip


def contrast_numbers(scene: Scene, temperature: float) -> tuple[tuple[str, float, str], ...]:
    """Index of both phases and what becomes of light at the surface, at a temperature [K]."""
    both = scene.substance.saturation(temperature)
    dense, thin = (index_of(scene.substance, d) for d in (both.liquid_density, both.vapour_density))
    if dense is None or thin is None:
        return ()
    return (
        ("index of the liquid", dense, "1"),
        ("index of the vapour", thin, "1"),
        ("step of the index", dense - thin, "1"),
        ("total reflection from below within", degrees(grazing_angle(dense, thin)), "deg"),
        ("thrown straight back", reflectance(dense, thin), "1"),
    )


def rain_sight(scene: Scene, charge: Marks, temperature: float) -> Sight | None:
    """Rain and streaks while the cell cools through the return of its surface; None later, at a temperature [K]."""
    end = charge.end
    if end is None or not end.temperature - _RAIN <= temperature <= end.temperature:
        return None
    words = {
        "in place": "Rain and streaks: drops fall through the haze and the surface comes back where it vanished.",
        "top": "Bubbles rise in streaks and the surface comes down from the top.",
        "bottom": "Dew runs down and rain gathers at the bottom.",
    }[end.way]
    return Sight(words, True, of="rain", numbers=(("surface comes back", end.temperature, "K"),), trust=say.RAIN_TRUST)


def end_sight(scene: Scene, charge: Marks, passed: Passage | None) -> Sight:
    """What happens to the surface on warming: at an edge of the window, or (passed None) how it ends."""
    critical = scene.substance.critical_temperature
    if passed is not None:
        way = "comes into" if passed.into else "leaves"
        place = f" at the {passed.edge}"
        words = f"At {say.at(passed.temperature)} the surface {way} the window{place}."
        when = passed.temperature
    else:
        assert charge.end is not None, "asked only of a charge with a surface"
        when = charge.end.temperature
        words = (
            f"At {say.at(when)} "
            + {
                "in place": "the surface fades and is gone where it stands.",
                "top": "liquid fills the cell; from here pressure climbs steeply.",
                "bottom": "the last liquid is gone.",
            }[charge.end.way]
        )
        if charge.end.way == "in place" and not charge.ends_in_view:
            words = f"At {say.at(when)} the surface is gone, out of sight of the window."
    numbers = (("temperature", when, "K"), ("below critical", critical - when, "K"))
    near = critical - when < _FLATTENED
    return Sight(words, True, of="meniscus", numbers=numbers, trust=say.END_TRUST + (say.FLATTENS if charge.flattens
                 and near else ""))  # fmt: skip


def back_sight(scene: Scene, charge: Marks) -> Sight:
    """The return of the surface on cooling, with what falls and rises."""
    assert charge.end is not None, "asked only of a charge with a surface"
    when = charge.end.temperature
    words = (
        f"At {say.at(when)} "
        + {
            "in place": "rain and streaks, and the surface comes back where it vanished.",
            "top": "bubbles rise in streaks and a surface comes down from the top.",
            "bottom": "dew runs down and the first liquid gathers at the bottom.",
        }[charge.end.way]
    )
    return Sight(words, True, of="rain", numbers=(("temperature", when, "K"),), trust=say.RAIN_TRUST)


def _direction(now: Movement, warming: bool | None, seen: float) -> str:
    if warming is None:
        return ""
    if abs(now.per_kelvin) < seen:
        return " and hardly moves"
    return " and rises" if (now.per_kelvin > 0.0) == warming else " and falls"


def _bounds(scene: Scene, box: tuple[float, float], density: float, now: Movement, full: float) -> tuple[float, float]:
    """Heights [m] of the least and the most charge [kg], to first order, in a vessel so high [m]."""
    free = scene.apparatus.volume.free.value
    heights = [now.height + now.per_density * (kg / free - density) for kg in box]
    return max(0.0, heights[0]), min(full, heights[1])


def _critical(scene: Scene) -> float:
    return scene.substance.critical_density
