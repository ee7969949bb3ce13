"""The room's pressure, by what is known of it."""

from __future__ import annotations

import math

import pytest

from runbook.errors import OutsideValidity
from runbook.quantities import Barometer, barometer, standard_atmosphere


@pytest.mark.independent
@pytest.mark.parametrize(
    ("height_m", "hPa"), [(0, 1013.25), (500, 954.61), (1000, 898.75), (1600, 835.24), (3000, 701.09)]
)
def test_standard_atmosphere(height_m: float, hPa: float) -> None:
    """ISO 2533:1975, geopotential heights, within 0.02 hPa (values from memory of its table)."""
    assert standard_atmosphere(height_m) / 100 == pytest.approx(hPa, abs=0.02)


@pytest.mark.independent
def test_standard_atmosphere_at_5000_m() -> None:
    """US Standard Atmosphere 1976: 54 048.3 Pa at 5000 m geometric, which is 4996.07 m geopotential."""
    assert standard_atmosphere(4996.07) == pytest.approx(54048.3, abs=1.0)


@pytest.mark.parametrize("height_m", [-1000.1, 11000.1, math.nan, math.inf])
def test_outside_validity(height_m: float) -> None:
    """Beyond the layer that the formula describes there is no answer."""
    with pytest.raises(OutsideValidity, match="read a barometer"):
        standard_atmosphere(height_m)


def test_what_is_known_best_governs() -> None:
    """A reading before a height, a height before nothing, each with its own width (common practice)."""
    assert barometer(100800.0, 120.0) == Barometer(100700.0, 100900.0, "reading of the day")
    assert barometer(83000.0, None).source == "reading of the day"
    by_height = barometer(None, 1600.0)
    assert by_height.source == "height above sea level"
    assert by_height.middle_Pa == pytest.approx(83524, abs=2)
    assert by_height.high_Pa - by_height.low_Pa == pytest.approx(6000, abs=1e-6)
    unknown = barometer(None, None)
    assert unknown.source == "not known"
    assert (unknown.low_Pa, unknown.high_Pa) == pytest.approx((96235.0, 106365.0))


@pytest.mark.parametrize("reading_Pa", [101300.0, math.nan])
def test_a_sea_level_report_is_refused_on_a_mountain(reading_Pa: float) -> None:
    """A reading that cannot belong to the height is not used: it is reduced to sea level, or mistyped."""
    with pytest.raises(OutsideValidity, match="not reduced to sea level"):
        barometer(reading_Pa, 1600.0)
