"""The arithmetic of gauges, thermometers, relief devices and guard bands against published standards."""

from __future__ import annotations

import datetime
import math

import pytest

from runbook.apparatus.dial import Dial
from runbook.apparatus.instruments import (
    class_reach,
    expanded_uncertainty,
    gauge_error,
    permissible_error,
    thermometer_tolerance,
)
from runbook.apparatus.parts import Instrument, Relief
from runbook.apparatus.relief import PSI, ceiling, code_tolerance, disc_burst_tolerance, lowest_opening
from runbook.apparatus.relief import valve_set_tolerance as set_tolerance

pytestmark = pytest.mark.independent
BAR = 1e5


def device(**given: object) -> Relief:
    """A relief device of these figures."""
    rest = {
        "tag": "R1",
        "space": "cell",
        "tolerance": "3 %",
        "run_below": "90 %",
        "fitted": datetime.date(2031, 1, 1),
        "valid_until": datetime.date(2032, 1, 1),
        "source": "test sheet",
    }
    return Relief.model_validate(rest | given)


def disc(run_below: str, tolerance: str = "5 %", **given: object) -> Relief:
    """A bursting disc."""
    return device(kind="bursting disc", run_below=run_below, tolerance=tolerance, **given)


def instrument(**given: object) -> Instrument:
    """An instrument of these figures."""
    rest = {"tag": "X1", "of": "cell", "read_from": "shield", "valid_until": datetime.date(2032, 1, 1)}
    return Instrument.model_validate(rest | given)


@pytest.mark.parametrize(
    ("dial", "klass", "division", "error"),
    [
        ("0 bar(g) to 10 bar(g)", 1.6, "0.2 bar", 0.16),
        ("-1 bar(g) to 5 bar(g)", 1.0, "0.1 bar", 0.06),
        ("0 bar(g) to 160 bar(g)", 1.6, "1 bar", 2.56),
        ("0 bar(g) to 160 bar(g)", 2.5, "1 bar", 4.0),
        ("0 bar(g) to 160 bar(g)", 0.6, "1 bar", 0.96),
        ("0 bar(g) to 10 bar(g)", 1.0, "0.1 bar", 0.1),
    ],
)
def test_the_error_of_a_gauge_is_its_class_in_percent_of_the_span(
    dial: str, klass: float, division: str, error: float
) -> None:
    """EN 837-1:1996 table 11: the class is the permissible error as a percentage of span, at any point."""
    one = instrument(reads="pressure", dial=dial, division=division, **{"class": klass})
    for value in (0.0, 1 * BAR, 10 * BAR):
        assert permissible_error(one, value) == pytest.approx(error * BAR, rel=1e-12)


def test_a_span_below_zero_counts_whole() -> None:
    """EN 837-1: from -1 to 5 bar the span is 6 bar, so class 1.0 is 0.06 bar."""
    assert gauge_error(1.0, 6.0) == pytest.approx(0.06, rel=1e-12)


@pytest.mark.parametrize(
    ("klass", "celsius", "tolerance"),
    [
        ("A", 100.0, 0.35),
        ("B", 100.0, 0.80),
        ("A", 31.0, 0.212),
        ("B", 31.0, 0.455),
        ("AA", 100.0, 0.27),
        ("C", 100.0, 1.6),
        ("A", -100.0, 0.35),
        ("B", 0.0, 0.3),
    ],
)
def test_the_tolerance_of_a_platinum_thermometer(klass: str, celsius: float, tolerance: float) -> None:
    """IEC 60751: AA 0.1 + 0.0017|t|, A 0.15 + 0.002|t|, B 0.3 + 0.005|t|, C 0.6 + 0.01|t|, t in degC."""
    assert thermometer_tolerance(klass, celsius) == pytest.approx(tolerance, rel=1e-12)


def test_a_thermometer_in_a_file_takes_its_class() -> None:
    """The kelvin of the file become the degrees Celsius of IEC 60751: class A at 100 degC is 0.35 K."""
    one = instrument(reads="temperature", of="wall", dial="-100 degC to 200 degC", division="0.1 K", **{"class": "A"})
    assert permissible_error(one, 373.15) == pytest.approx(0.35, rel=1e-9)
    assert permissible_error(one, 173.15) == pytest.approx(0.35, rel=1e-9)


def test_classes_end_where_the_standard_ends() -> None:
    """IEC 60751:2008, wire-wound resistors (from memory): A -100 to 450 degC, B -196 to 600 degC."""
    assert class_reach("A") == pytest.approx((173.15, 723.15))
    assert class_reach("B") == pytest.approx((77.15, 873.15))


def test_guard_band_of_a_gauge() -> None:
    """JCGM 100 and 106, worked: class 1.6, 0 to 160 bar, half a division of 1 bar, calibration 0.4 (k = 2),
    barometer 0.01 bar: u_c 1.599 bar; below a limit of 100 bar one accepts up to 97.37 (1.645 u) or 96.80 (2 u)."""
    eye_and_class = expanded_uncertainty(2.56, 1.0) / 2.0
    u_c = math.sqrt(eye_and_class**2 + 0.200**2 + (0.01 / math.sqrt(3.0)) ** 2)
    assert u_c == pytest.approx(1.599, abs=5e-4)
    assert 100.0 - 1.645 * u_c == pytest.approx(97.37, abs=0.01)
    assert 100.0 - 2.0 * u_c == pytest.approx(96.80, abs=0.01)


def test_expanded_uncertainty_of_two_rectangles() -> None:
    """JCGM 100, 4.3.7: a rectangular half-width a has u = a/sqrt(3); U = 2 u_c."""
    assert expanded_uncertainty(0.96, 0.5) == pytest.approx(2 * math.hypot(0.5543, 0.2887), rel=1e-3)
    assert expanded_uncertainty(3.0, 0.0) == pytest.approx(2 * 3.0 / 1.7320508, rel=1e-6)


def test_ceiling_below_a_relief_valve() -> None:
    """Set 100 bar +-3 % opens at 97 at the lowest; run at 90 % of it (ASME VIII-1 appendix M): 87.3 bar."""
    valve = device(kind="relief valve", opens_at="100 bar(g)")
    assert lowest_opening(valve).pascal == pytest.approx(97.0 * BAR, rel=1e-12)
    assert ceiling(valve).pascal == pytest.approx(87.3 * BAR, rel=1e-12)
    assert ceiling(valve).reference == "gauge"


@pytest.mark.parametrize(("share", "bar"), [("90 %", 85.5), ("80 %", 76.0), ("70 %", 66.5)])
def test_ceiling_below_a_disc(share: str, bar: float) -> None:
    """A disc of 100 bar +-5 % may burst at 95; operating ratios 0.9, 0.8, 0.7 (Valve Selection Handbook,
    rupture discs) leave 85.5, 76.0, 66.5 bar."""
    assert ceiling(disc(share, bursts_at="100 bar(g)")).pascal == pytest.approx(bar * BAR, rel=1e-12)


def test_ceiling_below_the_shipped_disc() -> None:
    """130 bar, manufacturing range +0/-4 %, +-5 %, ratio 0.8: 130 x 0.96 x 0.95 x 0.8 = 94.848 bar."""
    one = disc("80 %", bursts_at="130 bar(g)", manufacturing_range="-4 % to 0 %")
    assert ceiling(one).pascal == pytest.approx(94.848 * BAR, rel=1e-12)


def test_manufacturing_range_of_a_disc() -> None:
    """Valve Selection Handbook: ordered at 10 bar with +7/-4 % a disc may be rated from 9.6 to 10.7 bar."""
    lowest = disc("100 %", "0 %", bursts_at="10 bar(g)", manufacturing_range="-4 % to 7 %")
    assert lowest_opening(lowest).pascal == pytest.approx(9.6 * BAR, rel=1e-12)
    assert lowest.manufacturing_range is not None
    assert lowest.manufacturing_range.high == pytest.approx(0.07, rel=1e-12)


@pytest.mark.parametrize(("psig", "psi"), [(50.0, 2.0), (70.0, 2.0), (100.0, 3.0), (71.0, 2.13)])
def test_set_tolerance_of_a_valve(psig: float, psi: float) -> None:
    """ASME BPVC VIII-1 UG-134(d): +-2 psi up to 70 psi, +-3 % above."""
    assert set_tolerance(psig * PSI) / PSI == pytest.approx(psi, rel=1e-9)


@pytest.mark.parametrize(("psig", "psi"), [(30.0, 2.0), (40.0, 2.0), (100.0, 5.0)])
def test_burst_tolerance_of_a_disc(psig: float, psi: float) -> None:
    """ASME BPVC VIII-1 UG-127: +-2 psi up to 40 psi, +-5 % above."""
    assert disc_burst_tolerance(psig * PSI) / PSI == pytest.approx(psi, rel=1e-9)


def test_code_tolerance_is_a_share() -> None:
    """Of a 9 bar(g) valve 3 %, of a 130 bar(g) disc 5 %, as UG-134 and UG-127 have them above 70 and 40 psi."""
    assert code_tolerance(device(kind="relief valve", opens_at="9 bar(g)")) == pytest.approx(0.03, rel=1e-12)
    assert code_tolerance(disc("80 %", bursts_at="130 bar(g)")) == pytest.approx(0.05, rel=1e-12)


def test_span_of_a_dial() -> None:
    """A dial from -1 to 5 bar spans 6 bar (EN 837-1)."""
    one = instrument(reads="pressure", dial="-1 bar(g) to 5 bar(g)", division="0.1 bar", **{"class": 1.0})
    assert isinstance(one.dial, Dial)
    assert one.dial.span == pytest.approx(6 * BAR, rel=1e-12)
    assert one.dial.unit == "bar(g)"
