"""One bracketed root finder, so that no search in this program can run away or depend on a starting guess."""

from __future__ import annotations

from collections.abc import Callable


def bracketed_root(
    function: Callable[[float], float],
    low: float,
    high: float,
    tolerance: float,
    at_low: float | None = None,
    at_high: float | None = None,
) -> float:
    """Where a continuous function changes sign between low and high, to within tolerance (in their unit).

    at_low, at_high: the function's values there, where they are known already.
    ValueError where it does not change sign: the caller's bracket is wrong, never the user's input.
    Method: Chandrupatla 1997, Advances in Engineering Software 28, 145.
    """
    a, fa = low, function(low) if at_low is None else at_low
    b, fb = high, function(high) if at_high is None else at_high
    if fa == 0.0:
        return a
    if fb == 0.0:
        return b
    if (fa > 0.0) == (fb > 0.0):
        raise ValueError(f"no change of sign between {low!r} and {high!r}")
    t = 0.5
    for _ in range(200):
        x = a + t * (b - a)
        fx = function(x)
        if (fx > 0.0) == (fa > 0.0):
            c, fc = a, fa
        else:
            c, fc, b, fb = b, fb, a, fa
        a, fa = x, fx
        best = a if abs(fa) < abs(fb) else b
        span = abs(b - a)
        if fx == 0.0:
            return x
        least = (2.2e-16 * abs(best) + 0.5 * tolerance) / span
        if least > 0.5:
            return best
        t = _next_share(a, b, c, fa, fb, fc)
        t = min(1.0 - least, max(least, t))
    raise ValueError(f"no root to {tolerance!r} between {low!r} and {high!r}")


def _next_share(a: float, b: float, c: float, fa: float, fb: float, fc: float) -> float:
    """Share of the way from a to b for the next trial: inverse quadratic where trusted, else the middle."""
    xi = (a - b) / (c - b)
    phi = (fa - fb) / (fc - fb)
    if not (1.0 - (1.0 - xi) ** 0.5 < phi < xi**0.5):
        return 0.5
    return fa / (fb - fa) * fc / (fb - fc) + (c - a) / (b - a) * fa / (fc - fa) * fb / (fc - fb)
