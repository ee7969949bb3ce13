"""The bracketed root finder."""

from __future__ import annotations

from math import cos, exp

import pytest
from hypothesis import given
from hypothesis import strategies as st

from runbook.fluids.roots import bracketed_root


def test_known_roots() -> None:
    """Roots of smooth, flat and steep functions come within the tolerance."""
    assert bracketed_root(lambda x: cos(x) - x, 0.0, 1.0, 1e-12) == pytest.approx(0.7390851332151607, abs=1e-12)
    assert bracketed_root(lambda x: (x - 1.0) ** 9, 0.0, 1.7, 1e-6) == pytest.approx(1.0, abs=1e-6)
    assert bracketed_root(lambda x: exp(50.0 * x) - 2.0, -1.0, 1.0, 1e-12) == pytest.approx(0.013862943611, abs=1e-9)


def test_a_step_is_bracketed() -> None:
    """A jump in place of a root is found as well: nothing but the sign is needed."""
    assert bracketed_root(lambda x: -1.0 if x < 0.3 else 1.0, 0.0, 1.0, 1e-9) == pytest.approx(0.3, abs=1e-9)


def test_a_root_at_an_end() -> None:
    """A root at either end of the bracket is that end."""
    assert bracketed_root(lambda x: x, 0.0, 1.0, 1e-9) == 0.0
    assert bracketed_root(lambda x: x - 1.0, 0.0, 1.0, 1e-9) == 1.0


def test_no_change_of_sign_is_an_error() -> None:
    """A bracket without a root is the caller's mistake."""
    with pytest.raises(ValueError, match="no change of sign"):
        bracketed_root(lambda x: x * x + 1.0, -1.0, 1.0, 1e-9)


@given(root=st.floats(-10.0, 10.0), power=st.sampled_from([1, 3, 5]))
def test_any_odd_power(root: float, power: int) -> None:
    """The root of an odd power is found wherever it lies in the bracket."""
    assert bracketed_root(lambda x: (x - root) ** power, -11.0, 11.0, 1e-8) == pytest.approx(root, abs=1e-8)
