"""Which causes would make the readings what they are, and in which order to believe them.

Each cause is weighed by how well it foretells the readings over all its sizes, not at its best one: a cause that
could have explained anything explains little. It is struck out only where no size of it is compatible with the
readings. Nothing here is ever a permission: a low share is no proof of absence.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from math import erfc, exp, inf, log, pi, sqrt
from typing import Final

from runbook.answers import Explanation
from runbook.assess.evidence.deciding import deciding_test
from runbook.assess.evidence.faults import Cause, Node, Track, causes, moles_per_pascal
from runbook.assess.evidence.forecast import NONE, Fault, forecast, observed
from runbook.assess.evidence.given import Given
from runbook.assess.evidence.looks import Look
from runbook.assess.evidence.spread import Spread, spread
from runbook.errors import RunbookError

NOTHING_WRONG: Final = 0.3
"""Belief before the readings that nothing is wrong [1]; the causes share the rest evenly. Whoever asks has been told
that readings and model do not agree well enough, so it is not the share of lessons that go well; common practice."""
STRUCK: Final = 3.31
"""How far into its tail a cause must lie to be struck out, one-sided normal deviate [1]: as rare as 3.5 sigma on
both sides."""
ONE: Final = 1.0
"""Causes whose forecasts differ by less, all readings together, are one [1]: one standard uncertainty, at which two
known values are taken for each other one time in three."""


@dataclass(frozen=True, slots=True)
class Fit:
    """How well one cause foretells the readings."""

    cause: Cause
    log_evidence: float
    """Logarithm of the marginal likelihood."""
    least: float
    """Smallest sum of squares over all sizes [1]."""
    best: Node
    """The computed size nearest to where that is."""
    size: float
    """Where that is."""
    foretold: tuple[float, ...]
    """The readings it foretells there."""


def explanations(given: Given, looks: Sequence[Look]) -> tuple[Explanation, ...]:
    """Every cause, the most believed first and those struck out last; nothing where nothing was read."""
    read = observed(looks)
    if not read:
        return ()
    air = moles_per_pascal(given, looks[0])
    try:
        common = spread(given, looks, NONE, air)
    except RunbookError:
        # The readings as they stand lie outside the models: nothing is said rather than something guessed.
        return ()
    fits = [f for f in (_fit(given, looks, read, cause, common, air) for cause in causes(given, looks, air)) if f]
    return ranked(fits, common, looks)


def ranked(fits: Sequence[Fit], common: Spread, looks: Sequence[Look]) -> tuple[Explanation, ...]:
    """Fits as explanations."""
    if not fits:
        return ()
    prior = {f.cause.name: log((1.0 - NOTHING_WRONG) / max(1, len(fits) - 1)) for f in fits}
    prior["none"] = log(NOTHING_WRONG)
    beliefs = {f.cause.name: f.log_evidence + prior[f.cause.name] for f in fits}
    top = max(beliefs.values())
    total = sum(exp(b - top) for b in beliefs.values())
    bar = tail(len(fits[0].foretold))
    order = sorted(fits, key=lambda f: (f.least > bar, -beliefs[f.cause.name]))
    measured = any(look.height is not None for look in looks)
    found = []
    for fit in order:
        alike = tuple(o.cause.name for o in order if o is not fit and o.least <= bar and _same(fit, o, common))
        struck = fit.least > bar
        rival = _rival(fit, order, alike)
        found.append(
            Explanation(
                cause=fit.cause.name,
                size=fit.size,
                unit=fit.cause.unit,
                share=exp(beliefs[fit.cause.name] - top) / total,
                struck_out=struck,
                test="" if struck else deciding_test(fit.cause.name, rival, measured),
                one_with=() if struck else alike,
                detail=fit.best.detail,
            )
        )
    return tuple(found)


def tail(readings: int) -> float:
    """The sum of squares that so many readings exceed about once in 2000 times [1] (Wilson and Hilferty 1931)."""
    part = 2.0 / (9.0 * readings)
    return readings * (1.0 - part + STRUCK * sqrt(part)) ** 3


def _rival(fit: Fit, order: Sequence[Fit], alike: tuple[str, ...]) -> str | None:
    """The most believed other cause; one that the readings do tell from it comes last."""
    others = [o.cause.name for o in order if o is not fit]
    near = [name for name in others if name in alike]
    first = next((name for name in others if name not in alike), None)
    return near[0] if near and near[0] != "none" else first


def _same(one: Fit, other: Fit, common: Spread) -> bool:
    off = common.whitened([a - b for a, b in zip(one.foretold, other.foretold, strict=True)])
    return sum(z * z for z in off) < ONE**2


# -- one cause ---------------------------------------------------------------------------------------------


def _fit(
    given: Given, looks: Sequence[Look], read: Sequence[float], cause: Cause, common: Spread, air: float
) -> Fit | None:
    """Twice: once with the common covariance to find the best size, then with that size's own."""
    foretold = [[_forecast(given, looks, node.fault) for node in track.nodes] for track in cause.tracks]
    first = _weighed(cause, foretold, read, common)
    if first is None:
        return None
    if cause.name == "none":
        return first
    try:
        own = spread(given, looks, first.best.fault, air)
    except RunbookError:
        return first
    return _weighed(cause, foretold, read, own) or first


def _forecast(given: Given, looks: Sequence[Look], fault: Fault) -> list[float] | None:
    try:
        return forecast(given, looks, fault)
    except RunbookError:
        # A state the models do not reach, as a charge that would be frozen: that size is left out.
        return None


def _weighed(
    cause: Cause, foretold: Sequence[Sequence[list[float] | None]], read: Sequence[float], with_: Spread
) -> Fit | None:
    logs: list[float] = []
    least, best, size, there = inf, cause.tracks[0].nodes[0], 0.0, [0.0] * len(read)
    for track, row in zip(cause.tracks, foretold, strict=True):
        off = [None if p is None else with_.whitened([r - v for r, v in zip(read, p, strict=True)]) for p in row]
        for a, b in _segments(track):
            start, end = off[a], off[b]
            left, right = row[a], row[b]
            if start is None or end is None or left is None or right is None:
                continue
            segment = Segment.between(start, end)
            weight = track.weight / max(1, len(track.nodes) - 1)
            logs.append(log(weight) + segment.log_integral())
            lowest, at = segment.lowest()
            if lowest < least:
                least, best = lowest, track.nodes[b if at > 0.5 else a]
                size = track.nodes[a].size + at * (track.nodes[b].size - track.nodes[a].size)
                there = [x + at * (y - x) for x, y in zip(left, right, strict=True)]
    if not logs:
        return None
    top = max(logs)
    evidence = top + log(sum(exp(v - top) for v in logs)) - 0.5 * with_.log_det if top > -inf else -inf
    return Fit(cause, evidence, least, best, size, tuple(there))


def _segments(track: Track) -> list[tuple[int, int]]:
    """Neighbouring nodes; of a single node itself twice."""
    count = len(track.nodes)
    return [(0, 0)] if count == 1 else [(k, k + 1) for k in range(count - 1)]


@dataclass(frozen=True, slots=True)
class Segment:
    """The sum of squares between two sizes, a + 2 b t + c t2 for t from 0 to 1."""

    a: float
    b: float
    c: float

    @classmethod
    def between(cls, start: Sequence[float], end: Sequence[float]) -> Segment:
        """Of whitened differences that change evenly from the one to the other."""
        step = [e - s for s, e in zip(start, end, strict=True)]
        return cls(
            sum(s * s for s in start),
            sum(s * d for s, d in zip(start, step, strict=True)),
            sum(d * d for d in step),
        )

    def lowest(self) -> tuple[float, float]:
        """The least it is, and where."""
        at = min(1.0, max(0.0, -self.b / self.c)) if self.c > 0.0 else 0.0
        return max(0.0, self.a + at * (2.0 * self.b + at * self.c)), at

    def log_integral(self) -> float:
        """Logarithm of the integral of exp(-squares/2) over the segment."""
        if self.c < 1e-9:
            return -0.5 * self.a
        root = sqrt(self.c)
        centre = -self.b / self.c
        floor = self.a - self.b * self.b / self.c
        low, high = -centre * root / sqrt(2.0), (1.0 - centre) * root / sqrt(2.0)
        # The tail that does not cancel: both ends on one side are taken from their own side.
        covered = erfc(low) - erfc(high) if low > 0.0 else erfc(-high) - erfc(-low)
        if covered < 1e-200:
            return -0.5 * self.lowest()[0] - log(max(1.0, root))
        return -0.5 * floor + log(0.5 * covered * sqrt(2.0 * pi) / root)
