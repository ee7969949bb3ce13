"""Ice Ih by IAPWS R10-06(2009), after Feistel and Wagner 2006, J. Phys. Chem. Ref. Data 35, 1021.

Valid to 273.16 K and 210 MPa; used here from 180 K. Its zeros are those of IAPWS-95.
"""

from __future__ import annotations

from cmath import log
from typing import Final

from runbook.fluids.solids.gibbs import Phase

_TT, _PT, _P0 = 273.16, 611.657, 101325.0
"""[K], [Pa], [Pa]"""
_S0: Final = -0.332733756492168e4
"""[J/kg/K], zero of IAPWS-95."""
_G0: Final = (
    -0.632020233335886e6, 0.655022213658955, -0.189369929326131e-7, 0.339746123271053e-14, -0.556464869058991e-21,
)  # fmt: skip
_T1: Final = complex(0.368017112855051e-1, 0.510878114959572e-1)
_T2: Final = complex(0.337315741065416, 0.335449415919309)
_R1: Final = complex(0.447050716285388e2, 0.656876847463481e2)
_R2: Final = (
    complex(-0.725974574329220e2, -0.781008427112870e2),
    complex(-0.557107698030123e-4, 0.464578634580806e-4),
    complex(0.234801409215913e-10, -0.285651142904972e-10),
)


class Ice:
    """Water's solid, ice Ih."""

    lowest_temperature = 180.0
    highest_pressure = 210.0e6

    def phase(self, temperature: float, pressure: float) -> Phase:
        """At a temperature [K] and a pressure [Pa]."""
        tau, x = temperature / _TT, (pressure - _P0) / _PT
        g0 = sum(c * x**k for k, c in enumerate(_G0))
        g0_p = sum(k * c * x ** (k - 1) for k, c in enumerate(_G0) if k) / _PT
        r2 = _R2[0] + _R2[1] * x + _R2[2] * x * x
        r2_p = (_R2[1] + 2.0 * _R2[2] * x) / _PT
        one, two = _bend(_T1, tau), _bend(_T2, tau)
        gibbs = g0 - _S0 * temperature + _TT * (_R1 * one + r2 * two).real
        entropy = _S0 - (_R1 * _lean(_T1, tau) + r2 * _lean(_T2, tau)).real
        return Phase(gibbs, g0_p + _TT * (r2_p * two).real, entropy)

    def heat_capacity(self, temperature: float, pressure: float) -> float:
        """At constant pressure [J/kg/K], at a temperature [K] and a pressure [Pa]."""
        tau, x = temperature / _TT, (pressure - _P0) / _PT
        r2 = _R2[0] + _R2[1] * x + _R2[2] * x * x
        return -tau * (_R1 * _curve(_T1, tau) + r2 * _curve(_T2, tau)).real


def _bend(t: complex, tau: float) -> complex:
    return (t - tau) * log(t - tau) + (t + tau) * log(t + tau) - 2.0 * t * log(t) - tau * tau / t


def _lean(t: complex, tau: float) -> complex:
    return log(t + tau) - log(t - tau) - 2.0 * tau / t


def _curve(t: complex, tau: float) -> complex:
    return 1.0 / (t - tau) + 1.0 / (t + tau) - 2.0 / t
