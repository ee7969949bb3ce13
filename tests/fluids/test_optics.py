"""What light does in a fluid: index, step at the meniscus, turbidity near the critical point."""

from __future__ import annotations

from math import cos, degrees, exp, pi, sqrt

import pytest

from runbook.fluids.catalogue import fluids
from runbook.fluids.optics import (
    capillary_length,
    grazing_angle,
    index_of,
    reflectance,
    refractive_index,
    scattered,
    turbidity,
)
from runbook.fluids.substance import substance

CO2 = substance("carbon dioxide")
TC = CO2.critical_temperature


@pytest.mark.independent
def test_index_of_carbon_dioxide_at_the_ice_point() -> None:
    """n - 1 = 448.87e-6 at 0 degC and 1 atm (Bideau-Mehu and others 1973) at 1.9768 kg/m3: within 0.05 %."""
    found = index_of(CO2, 1.9768)
    assert found is not None
    assert found - 1.0 == pytest.approx(448.87e-6, rel=5e-4)


@pytest.mark.wiring
def test_index_at_critical_density() -> None:
    """1.1084 for carbon dioxide: the refractivity of 1973 at the critical density of Span and Wagner, in 1e-4."""
    assert index_of(CO2, CO2.critical_density) == pytest.approx(1.1084, abs=5e-5)


@pytest.mark.independent
@pytest.mark.parametrize(
    ("name", "density", "index", "within"),
    [
        # Xenon at its critical point, about 1.138 (from memory); the file's figure is 10.5 +- 0.1 cm3/mol.
        ("xenon", substance("xenon").critical_density, 1.138, 0.003),
        # CRC Handbook: n-butane at 20 degC, 1.3326; liquid of 578.9 kg/m3.
        ("n-butane", 578.9, 1.3326, 0.002),
        # IAPWS R9-97: water at 25 degC, 1.3325; 997.05 kg/m3.
        ("water", 997.05, 1.3325, 0.0005),
        # Vukovic and others 1996: SF6 at 288 K, 729.6e-6; 6.27 kg/m3 at 1 atm.
        ("sulfur hexafluoride", 6.27, 1.0007296, 4e-6),
        # Peck and Khanna 1966: nitrogen at 0 degC and 1 atm, 298.4e-6; 1.2504 kg/m3.
        ("nitrogen", 1.2504, 1.0002984, 2e-7),
    ],
)
def test_index_of_other_fluids(name: str, density: float, index: float, within: float) -> None:
    """The index that the source beside each row measured comes out of the data file's refractivity."""
    assert index_of(substance(name), density) == pytest.approx(index, abs=within)


@pytest.mark.independent
def test_index_of_thin_gas_is_straight() -> None:
    """For a thin gas Lorentz and Lorenz is n - 1 = 1.5 L rho (Gladstone and Dale)."""
    assert refractive_index(6.662e-6, 1.0) - 1.0 == pytest.approx(1.5 * 6.662e-6, rel=1e-5)


@pytest.mark.wiring
@pytest.mark.parametrize(
    ("away", "liquid", "vapour", "angle", "back", "through"),
    [
        (10.0, 1.17963, 1.04627, 27.5, 3.6e-3, 0.999),
        (5.0, 1.16302, 1.05864, 24.5, 2.2e-3, 0.998),
        (1.0, 1.13866, 1.07930, 18.6, 7.2e-4, 0.989),
        (0.1, 1.12216, 1.09508, 12.6, 1.5e-4, 0.85),
        (0.01, 1.11526, 1.10214, 8.8, 3.5e-5, 0.22),
    ],
)
def test_the_meniscus_of_carbon_dioxide(
    away: float, liquid: float, vapour: float, angle: float, back: float, through: float
) -> None:
    """Index in 2e-5, angle in 0.1 deg, reflectance in 3 %, light through 30 mm in 0.002 beyond 0.5 K and 0.05 nearer,
    where the scaling law replaces the equation the table was computed with."""
    both = CO2.saturation(TC - away)
    dense, thin = index_of(CO2, both.liquid_density), index_of(CO2, both.vapour_density)
    assert dense is not None
    assert thin is not None
    assert dense == pytest.approx(liquid, abs=2e-5)
    assert thin == pytest.approx(vapour, abs=2e-5)
    assert degrees(grazing_angle(dense, thin)) == pytest.approx(angle, abs=0.1)
    assert reflectance(dense, thin) == pytest.approx(back, rel=0.03)
    haze = turbidity(CO2, TC - away, CO2.critical_density)
    assert haze is not None
    assert haze.transmission(0.030) == pytest.approx(through, abs=0.002 if away > 0.5 else 0.05)


@pytest.mark.wiring
@pytest.mark.parametrize(("away", "tau"), [(10.0, 0.095), (5.0, 0.21), (1.0, 1.39), (0.5, 3.0)])
def test_turbidity_by_the_equation(away: float, tau: float) -> None:
    """Above critical, beyond 0.2 K: Einstein with Ornstein and Zernike on Span and Wagner's compressibility, 2 %."""
    found = turbidity(CO2, TC + away, CO2.critical_density)
    assert found is not None
    assert found.turbidity == pytest.approx(tau, rel=0.02)


@pytest.mark.wiring
@pytest.mark.parametrize(
    ("away", "tau", "length", "through"),
    [(0.1, 22.2, 23.5e-9, 0.51), (0.05, 45.0, 36e-9, 0.26), (0.01, 156.0, 100e-9, 0.009), (0.001, 416.0, 427e-9, 0.0)],
)
def test_turbidity_by_the_scaling_law(away: float, tau: float, length: float, through: float) -> None:
    """Within 0.2 K: Puglielli and Ford 1970 with the amplitudes of the fluid, 1 % (light through 30 mm: 0.005)."""
    found = turbidity(CO2, TC + away, CO2.critical_density)
    assert found is not None
    assert found.turbidity == pytest.approx(tau, rel=0.01)
    assert found.correlation_length == pytest.approx(length, rel=0.02)
    assert found.transmission(0.030) == pytest.approx(through, abs=0.005)


@pytest.mark.independent
@pytest.mark.parametrize("length", [0.0, 1e-9, 5e-9, 8e-9, 30e-9, 100e-9, 400e-9])
def test_the_angles_of_ornstein_and_zernike(length: float) -> None:
    """The closed form is the integral of (1 + cos2) / (1 + q2 xi2) over all angles, by Simpson's rule: 1e-4."""
    index, steps = 1.1084, 20000
    a = 2.0 * (2.0 * pi * index * length / 589.3e-9) ** 2

    def at(angle: float) -> float:
        c = cos(angle)
        # d(cos) = -sin d(angle): the sine comes from the ring of solid angle.
        return (1.0 + c * c) / (1.0 + a * (1.0 - c)) * sqrt(max(0.0, 1.0 - c * c))

    h = pi / steps
    whole = sum((1 if k in (0, steps) else 4 if k % 2 else 2) * at(k * h) for k in range(steps + 1)) * h / 3.0
    uncorrelated = scattered(index, 305.0, 1e-5, 0.0)
    assert scattered(index, 305.0, 1e-5, length) / uncorrelated == pytest.approx(whole / (8.0 / 3.0), rel=1e-4)


@pytest.mark.independent
def test_einstein_without_correlation() -> None:
    """tau = 8 pi3 / (3 lambda4) [(n2-1)(n2+2)/3]2 kT kappa (Einstein 1910): for water at 25 degC, kappa 4.525e-10 1/Pa,
    1.5e-3 to 2.2e-3 1/m at 589 nm, where 1.6e-3 is measured (Morel 1974, from memory, between 575 and 600 nm)."""
    found = scattered(1.3325, 298.15, 4.525e-10, 0.0)
    n = 1.3325
    plain = 8.0 * pi**3 / 3.0 / 589.3e-9**4 * ((n**2 - 1) * (n**2 + 2) / 3) ** 2 * 1.380649e-23 * 298.15 * 4.525e-10
    assert found == pytest.approx(plain, rel=1e-9)
    assert 1.0e-3 < found < 2.5e-3


def test_light_goes_down_with_the_way() -> None:
    """Lambert's law: twice the way, the square of the share."""
    haze = turbidity(CO2, TC + 1.0, CO2.critical_density)
    assert haze is not None
    assert haze.transmission(0.06) == pytest.approx(haze.transmission(0.03) ** 2, rel=1e-12)
    assert haze.transmission(0.03) == pytest.approx(exp(-0.03 * haze.turbidity), rel=1e-12)


@pytest.mark.wiring
@pytest.mark.parametrize(("sigma", "step", "length"), [(1.086e-3, 560.52, 0.4445e-3), (0.0605e-3, 250.12, 0.157e-3)])
def test_capillary_length(sigma: float, step: float, length: float) -> None:
    """sqrt(sigma / drho g) for carbon dioxide 10 K and 1 K below critical: 0.2 %."""
    assert capillary_length(sigma, step) == pytest.approx(length, rel=2e-3)


@pytest.mark.parametrize("name", [fluid.name for fluid in fluids()])
def test_every_fluid_has_a_haze_or_says_that_it_is_not_known(name: str) -> None:
    """With refractivity and amplitudes a haze that grows towards critical, without them none; never an error."""
    fluid = substance(name)
    far = turbidity(fluid, fluid.critical_temperature + 3.0, fluid.critical_density)
    near = turbidity(fluid, fluid.critical_temperature + 0.1, fluid.critical_density)
    data = next(f for f in fluids() if f.name == name)
    if data.molar_refractivity is None or data.haze is None:
        assert far is None
        assert near is None
    else:
        assert far is not None
        assert near is not None
        assert near.turbidity > 5.0 * far.turbidity > 0.0


def test_no_haze_is_computed_with_solid_in_it() -> None:
    """Powder is white for another reason."""
    assert turbidity(CO2, 200.0, CO2.critical_density) is None


def test_no_index_of_what_the_relation_does_not_bear() -> None:
    """A density beyond the pole of Lorentz and Lorenz has no index, and no error."""
    from runbook.fluids.optics import index_of
    from runbook.fluids.substance import substance

    assert index_of(substance("carbon dioxide"), 1e6) is None
