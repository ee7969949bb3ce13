"""The same equation evaluated by other code: teqp (I. H. Bell and others, NIST), with its own coefficient file."""

from __future__ import annotations

import pytest

from runbook.fluids.catalogue import FluidData, fluids
from runbook.fluids.substance import Region, substance

CO2 = substance("carbon dioxide")


@pytest.mark.wiring
def test_pressure_agrees_with_teqp() -> None:
    """Pressure outside the dome within 1e-8 of teqp's evaluation of Span and Wagner 1996."""
    teqp = pytest.importorskip("teqp", reason="teqp has no wheel for this platform")
    np = pytest.importorskip("numpy")
    model = teqp.build_multifluid_model(["CarbonDioxide"], teqp.get_datapath())
    one = np.array([1.0])
    compared = 0
    for t in (220.0, 250.0, 290.0, 304.0, 304.2, 305.0, 313.15, 350.0, 500.0):
        for rho in (1.0, 20.0, 150.0, 300.0, 440.0, 467.6, 480.0, 720.0, 900.0, 1000.0, 1150.0):
            if CO2.region(t, rho) in (Region.LIQUID_VAPOUR, Region.SOLID_LIQUID):
                continue
            molar = rho / CO2.molar_mass
            p = molar * model.get_R(one) * t * (1.0 + model.get_Ar01(t, molar, one))
            assert CO2.pressure(t, rho) == pytest.approx(p, rel=1e-8), (t, rho)
            compared += 1
    assert compared > 60


@pytest.mark.wiring
@pytest.mark.parametrize("t", [220.0, 250.0, 280.0, 300.0, 303.0, 304.0])
def test_saturation_agrees_with_teqp(t: float) -> None:
    """Saturation pressure and both densities within 1e-8 of teqp's own solution of the equilibrium."""
    teqp = pytest.importorskip("teqp", reason="teqp has no wheel for this platform")
    np = pytest.importorskip("numpy")
    model = teqp.build_multifluid_model(["CarbonDioxide"], teqp.get_datapath())
    both = CO2.saturation(t)
    guess = both.liquid_density * 1.001 / CO2.molar_mass, both.vapour_density * 0.999 / CO2.molar_mass
    liquid, vapour = model.pure_VLE_T(t, *guess, 50)
    one = np.array([1.0])
    p = liquid * model.get_R(one) * t * (1.0 + model.get_Ar01(t, liquid, one))
    assert both.liquid_density == pytest.approx(liquid * CO2.molar_mass, rel=1e-8)
    assert both.vapour_density == pytest.approx(vapour * CO2.molar_mass, rel=1e-8)
    assert both.pressure == pytest.approx(p, rel=1e-8)


@pytest.mark.wiring
@pytest.mark.parametrize("data", fluids(), ids=lambda data: data.name)
def test_every_fluid_agrees_with_teqp(data: FluidData) -> None:
    """Pressure of one phase within 1e-8: names, molar masses and densities are those of the fluid that is meant."""
    teqp = pytest.importorskip("teqp", reason="teqp has no wheel for this platform")
    np = pytest.importorskip("numpy")
    model, one = teqp.build_multifluid_model([data.library_name], teqp.get_datapath()), np.array([1.0])
    fluid, compared = substance(data.name), 0
    for t in (share * fluid.critical_temperature for share in (0.8, 0.95, 1.02, 1.2)):
        for rho in (share * fluid.critical_density for share in (0.01, 0.3, 1.0, 1.6, 1.9)):
            if t > fluid.max_temperature or fluid.region(t, rho) is Region.LIQUID_VAPOUR:
                continue
            molar = rho / fluid.molar_mass
            p = molar * model.get_R(one) * t * (1.0 + model.get_Ar01(t, molar, one))
            assert fluid.pressure(t, rho) == pytest.approx(p, rel=1e-8), (t, rho)
            compared += 1
    assert compared >= 8
