"""What the pictures show of a standing: levels where they are known, question marks where not."""

from __future__ import annotations

from typing import Final

from runbook.answers import Answer, Plan
from runbook.bench.view import PictureView
from runbook.drawing import Chart, Filling
from runbook.quantities import pressure_to_unit, to_unit
from runbook.run.amounts import pressure, temperature
from runbook.run.conductor import Conductor
from runbook.run.sight_words import height_kept_back
from runbook.run.standing import Standing
from runbook.run.state import Ledger, Taken

_UNKNOWN: Final = Filling(None, "unknown")
_SOLID: Final = 0.3
"""[1] how high solid is drawn: that it is there is computed, how high it lies is not."""
_BELOW: Final = {"liquid": "liquid", "vapour": "vapour", "gas": "vapour", "supercritical": "dense"}
_AROUND_K: Final = 8.0
"""[K] of the chart on both sides of where the charge has been."""
_BEYOND: Final = 1.25
"""[1] the chart goes as far beyond the ceiling as the ruler does."""


def picture_of(desk: Conductor, standing: Standing) -> PictureView:
    """Cell, chart and words; nothing of it while a signer's own reading is outstanding."""
    plan, ledger = desk.plan, desk.ledger
    lying = True
    if standing.hidden:
        return PictureView(_UNKNOWN, lying, None, "Kept back until the signer's own reading is in.")
    filling = _UNKNOWN if height_kept_back(standing) else _filling(plan, ledger.answer)
    return PictureView(filling, lying, _chart(plan, ledger, standing), _words(plan, ledger))


def _filling(plan: Plan, answer: Answer | None) -> Filling:
    if answer is None or answer.region is None:
        return Filling(None, "vapour") if answer is not None and answer.charge is None else _UNKNOWN
    haze = any(sight.of == "haze" or "haze" in sight.words.lower() for sight in answer.sights)
    solid = _SOLID if "solid" in answer.region else 0.0
    inside = _inside(plan)
    if answer.liquid_height is not None and inside is not None:
        return Filling(min(1.0, max(0.0, answer.liquid_height / inside)), "liquid", solid, haze)
    if answer.region in ("solid+vapour", "solid+liquid+vapour"):
        return Filling(None, "vapour", _SOLID)
    if answer.region == "solid+liquid":
        return Filling(None, "liquid", _SOLID)
    return Filling(None, _BELOW.get(answer.region, "unknown"), 0.0, haze)


def _inside(plan: Plan) -> float | None:
    """Height of the inside [m]: a scale on the window reaches over it."""
    return next((one.high for one in plan.instruments if one.reads == "liquid height" and one.high > 0.0), None)


def _words(plan: Plan, ledger: Ledger) -> str:
    answer = ledger.answer
    if answer is None:
        return "Nothing is computed for the vessel as it stands."
    warm = _latest(ledger, "temperature")
    parts = [temperature(warm.event.value) if warm is not None else "", pressure(plan, answer.pressure)]
    region = (answer.region or "not known").replace("+", " and ")
    return ", ".join(filter(None, (*parts, region))) + ("; solid not to scale" if "solid" in region else "")


def _latest(ledger: Ledger, what: str) -> Taken | None:
    found = [taken for taken in ledger.latest.values() if taken.event.what == what]
    return max(found, key=lambda taken: taken.seq, default=None)


def _chart(plan: Plan, ledger: Ledger, standing: Standing) -> Chart | None:
    ceiling, warm = standing.ceiling, _latest(ledger, "temperature")
    if ceiling.ceiling is None or warm is None:
        return None

    def up(absolute: float) -> float:
        return pressure_to_unit(absolute, plan.pressure_unit, plan.barometer)

    trail = tuple((to_unit(T, "degC"), up(p)) for T, p in _trail(ledger))
    now = None if ceiling.now is None else (to_unit(warm.event.value, "degC"), up(ceiling.now))
    across = [point[0] for point in (*trail, *([now] if now is not None else []))]
    if not across:
        return None
    span = (min(across) - _AROUND_K, max(across) + _AROUND_K)
    limit = up(ceiling.ceiling)
    return Chart(span, (0.0, _BEYOND * limit), (), trail, now, limit, None, (), "°C", plan.pressure_unit)


def _trail(ledger: Ledger) -> list[tuple[float, float]]:
    """(temperature [K], pressure [Pa]) of each pressure read in this line and the one before, with the last
    temperature read before it."""
    warm: float | None = None
    found = []
    for taken in (*ledger.before, *ledger.here):
        if taken.event.what == "temperature":
            warm = taken.event.value
        elif taken.event.what == "pressure" and warm is not None:
            found.append((warm, taken.event.value))
    return found
