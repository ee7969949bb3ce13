"""How a fluid looks in visible light: its index, the step at the meniscus, the haze near the critical point.

Formulas take plain numbers; `turbidity` joins them to the equation of state. An equation of state has the wrong
compressibility close to the critical point, so within 0.2 K of it the scaling law takes over. Refuses (None)
where a fluid's refractivity or its amplitudes are not known: nothing is guessed from a similar fluid.
"""

from __future__ import annotations

from dataclasses import dataclass
from math import acos, exp, log1p, pi, sqrt

from runbook.errors import OutsideValidity
from runbook.fluids.catalogue import find
from runbook.fluids.substance import Substance

SODIUM = 589.3e-9
"""Wavelength in vacuum [m]: the sodium D lines, the middle of what the eye sees."""
SCALING_WITHIN = 0.2
"""Nearer to critical than this the scaling law is nearer to nature than any equation of state [K]."""
_BOLTZMANN = 1.380649e-23
"""[J/K], SI (exact)."""
_GAMMA, _NU = 1.239, 0.630
"""Exponents of compressibility and correlation length: three-dimensional Ising, as the conductivity models use."""
_COMPRESSIBILITY_RATIO, _LENGTH_RATIO = 4.76, 1.96
"""Amplitude above critical over that on the coexistence curve below (Pelissetto and Vicari 2002; from memory)."""
_REFERENCE = 1.5
"""Temperature, in critical ones, at which nothing critical is left (Olchowy and Sengers 1988)."""
_BESIDE = 1e-6
"""How far outside the dome a saturated phase is asked for its compressibility, relative [1]."""


@dataclass(frozen=True, slots=True)
class Haze:
    """Light scattered by a fluid at one temperature and density."""

    turbidity: float
    """Share of the light that is lost in a metre, for little of it [1/m]."""
    correlation_length: float
    """[m]."""

    def transmission(self, path: float) -> float:
        """Share of the light [1] that comes straight through a path [m]."""
        return exp(-self.turbidity * path)


def refractive_index(molar_refractivity: float, molar_density: float) -> float:
    """Index [1] by Lorentz and Lorenz; refractivity [m3/mol], density [mol/m3]."""
    x = molar_refractivity * molar_density
    return sqrt((1.0 + 2.0 * x) / (1.0 - x))


def index_of(substance: Substance, density: float) -> float | None:
    """Index [1] of a phase of that density [kg/m3]; None where the fluid's refractivity is not known."""
    refractivity = find(substance.name).molar_refractivity
    if refractivity is None or refractivity * density / substance.molar_mass >= 1.0:
        # Denser than the relation bears: nothing that anybody looks at.
        return None
    return refractive_index(refractivity, density / substance.molar_mass)


def grazing_angle(dense: float, thin: float) -> float:
    """Largest angle to the surface [rad] at which light from the denser side (index [1]) is reflected whole."""
    return acos(min(1.0, thin / dense))


def reflectance(dense: float, thin: float) -> float:
    """Share of the light [1] that a surface between two indices [1] throws straight back (Fresnel)."""
    return ((dense - thin) / (dense + thin)) ** 2


def capillary_length(surface_tension: float, density_step: float) -> float:
    """How far a meniscus climbs its wall, about [m]; tension [N/m], step of density [kg/m3]."""
    return sqrt(surface_tension / (9.80665 * density_step))


def scattered(index: float, temperature: float, compressibility: float, length: float) -> float:
    """Turbidity [1/m] of a fluid of that index [1] at a temperature [K].

    compressibility [1/Pa], isothermal; correlation length [m]. Einstein's density fluctuations with the
    angles of Ornstein and Zernike: Puglielli and Ford 1970, Phys. Rev. Lett. 25, 143 (form from memory;
    without correlation it becomes Einstein's 8/3, which a test holds).
    """
    strength = ((index**2 - 1.0) * (index**2 + 2.0) / 3.0) ** 2
    a = 2.0 * (2.0 * pi * index * length / SODIUM) ** 2
    return pi**3 / SODIUM**4 * strength * _BOLTZMANN * temperature * compressibility * _angles(a)


def _angles(a: float) -> float:
    """8/3 for an uncorrelated fluid, falling as correlation grows [1]."""
    if a < 0.02:
        # The closed form is a difference of nearly equal numbers there; the next term of the series is under 5e-5.
        return 8.0 / 3.0 * (1.0 - a + 1.4 * a * a)
    return (2.0 * a * a + 2.0 * a + 1.0) / a**3 * log1p(2.0 * a) - 2.0 * (1.0 + a) / a**2


def haze_known(substance: Substance) -> bool:
    """Whether refractivity and amplitudes of a fluid are known: without them nobody can say that no haze comes."""
    data = find(substance.name)
    return data.molar_refractivity is not None and data.haze is not None


def turbidity(substance: Substance, temperature: float, density: float) -> Haze | None:
    """Haze of a charge of that density [kg/m3] at a temperature [K]; beside vapour, that of the vapour.

    Liquid and vapour scatter alike near critical, where it is seen. None where refractivity or amplitudes are
    not known, with solid, and where the models end.
    """
    data = find(substance.name)
    index = index_of(substance, density)
    if index is None or data.haze is None:
        return None
    length, amplitude = data.haze
    try:
        phase = _phase(substance, temperature, density)
        if phase is None:
            return None
        near = abs(temperature - substance.critical_temperature) < SCALING_WITHIN
        compressed, correlated = (_scaling if near else _equation)(substance, temperature, phase, length, amplitude)
    except (OutsideValidity, ZeroDivisionError):
        # Solid under pressure has no slope.
        return None
    seen = index_of(substance, phase)
    assert seen is not None, "the same fluid's index was known a moment ago"
    return Haze(scattered(seen, temperature, compressed, correlated), correlated)


def _phase(substance: Substance, temperature: float, density: float) -> float | None:
    """Density [kg/m3] of the one phase that is looked at; None where there may be solid."""
    if temperature <= substance.triple_temperature:
        return None
    if temperature < substance.critical_temperature:
        both = substance.saturation(temperature)
        if both.vapour_density <= density <= both.liquid_density:
            return both.vapour_density * (1.0 - _BESIDE)
    return density


def _equation(
    substance: Substance, temperature: float, density: float, length: float, amplitude: float
) -> tuple[float, float]:
    """Compressibility [1/Pa] and correlation length [m] by the equation of state (Olchowy and Sengers 1988)."""
    slope = substance.dp_ddensity(temperature, density)
    reference = min(_REFERENCE * substance.critical_temperature, substance.max_temperature)
    far = substance.dp_ddensity(reference, density)
    scale = substance.critical_pressure * density / substance.critical_density**2
    excess = max(0.0, scale * (1.0 / slope - reference / temperature / far))
    return 1.0 / (density * slope), length * (excess / amplitude) ** (_NU / _GAMMA)


def _scaling(
    substance: Substance, temperature: float, density: float, length: float, amplitude: float
) -> tuple[float, float]:
    """The same by the scaling law; off the critical density weaker, as the equation of state has it."""
    critical = substance.critical_temperature
    away = max(abs(temperature - critical), 1e-6) / critical
    compressed = amplitude * away**-_GAMMA / substance.critical_pressure
    if temperature < critical:
        return compressed / _COMPRESSIBILITY_RATIO, length * away**-_NU / _LENGTH_RATIO
    middle = substance.critical_density
    stiff = density * substance.dp_ddensity(temperature, density)
    softest = middle * substance.dp_ddensity(temperature, middle)
    share = min(1.0, softest / stiff) if stiff > 0.0 and softest > 0.0 else 1.0
    return compressed * share, length * away**-_NU * share ** (_NU / _GAMMA)
