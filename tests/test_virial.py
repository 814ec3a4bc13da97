"""Second virial coefficients and liquid volumes against published values; how far the truncated series holds."""

from __future__ import annotations

from collections.abc import Callable
from typing import NamedTuple

import numpy as np
import pytest

from registry.equilibrium.virial import second_virial, vapour_volume
from registry.equilibrium.volumes import rackett_volume
from registry.forms.reciprocal import GAS_CONSTANT

# CRC Handbook of Chemistry and Physics, second virial coefficients, cm3/mol (seen); critical constants of the shelf.
# The nonpolar form knows no dipole and no hydrogen bond: its value is too small in size for the last two.
CRC = [
    ("argon", 100.0, -184.0, (150.687, 4.863e6, -0.00219), 1.23),
    ("ammonia", 290.0, -302.0, (405.56, 11.3635e6, 0.256), -23.95),
    ("acetone", 300.0, -1996.0, (508.2, 4.709e6, 0.307), -37.13),
]


def test_argon_of_methods():
    """C. Tsonopoulos (1974) with 150.9 K, 4.90 MPa, omega 0: -186.1 cm3/mol at 100 K."""
    assert 1e6 * second_virial(np.float64(100.0), 150.9, 4.90e6, 0.0) == pytest.approx(-186.1, abs=0.05)


@pytest.mark.parametrize(("name", "kelvin", "published", "constants", "deviation"), CRC)
def test_handbook_values(name, kelvin, published, constants, deviation):
    """1.2 % for a nonpolar gas; how far off a polar one is stands here, so that it is known."""
    found = 1e6 * second_virial(np.float64(kelvin), *constants)
    assert 100.0 * (found / published - 1.0) == pytest.approx(deviation, abs=0.01), name


def test_coefficient_rises_through_the_boyle_temperature():
    """Negative along any saturation line; zero near Tr 2.7 for a simple fluid (argon: 411 K, Tr 2.73, memory)."""
    tr = np.linspace(0.4, 3.5, 500)
    values = second_virial(tr, 1.0, 1.0, 0.0)
    assert (np.diff(values) > 0.0).all()
    boyle = np.interp(0.0, values, tr)
    assert boyle == pytest.approx(411.0 / 150.687, rel=0.03)


def test_benzene_of_methods():
    """Benzene at 353.24 K with 562.16 K, 48.98 bar, omega 0.210: -995.3 cm3/mol."""
    assert 1e6 * second_virial(np.float64(353.24), 562.16, 4.898e6, 0.210) == pytest.approx(-995.3, abs=0.1)


RACKETT = [
    # C. Tegeler, R. Span, W. Wagner (1999): 1395.4 kg/m3
    ("argon", 87.302, (150.687, 4.863e6, -0.00219), 39.948, 1395.4, 0.27),
    # E. W. Lemmon, M. O. McLinden, W. Wagner (2009): 580.9 kg/m3
    ("propane", 231.036, (369.89, 4.2512e6, 0.1521), 44.09562, 580.9, -0.18),
    # U. Setzmann, W. Wagner (1991): 422.4 kg/m3
    ("methane", 111.667, (190.564, 4.5992e6, 0.01142), 16.0428, 422.36, -0.22),
]


@pytest.mark.parametrize(("name", "kelvin", "constants", "mass", "published", "deviation"), RACKETT)
def test_rackett_volumes(name, kelvin, constants, mass, published, deviation):
    """Rackett's equation with Z_RA of Yamada and Gunn, within 0.3 % of reference equations."""
    density = 1e-3 * mass / float(rackett_volume(np.array(kelvin), *constants))
    assert 100.0 * (density / published - 1.0) == pytest.approx(deviation, abs=0.006), name


def test_rackett_at_the_critical_point():
    """There the exponent is 1: V = Z_RA R Tc/pc."""
    found = float(rackett_volume(np.array(369.89), 369.89, 4.2512e6, 0.1521))
    assert found == pytest.approx((0.29056 - 0.08775 * 0.1521) * GAS_CONSTANT * 369.89 / 4.2512e6, rel=1e-12)


def test_volume_solves_the_series():
    """p V/(R T) = 1 + B/V, on the branch that joins the ideal gas; no vapour below B p/(R T) = -1/4."""
    pressure = np.geomspace(1.0, 2e6, 50)
    kelvin, virial = np.full(50, 353.24), np.full(50, -995.3e-6)
    volume = vapour_volume(kelvin, pressure, virial)
    here = virial * pressure / (GAS_CONSTANT * kelvin) >= -0.25
    assert here.any()
    assert not here.all()
    z = pressure * volume / (GAS_CONSTANT * kelvin)
    np.testing.assert_allclose(z[here], 1.0 + virial[here] / volume[here], rtol=1e-12)
    assert np.isnan(volume[~here]).all()
    assert (z[here] >= 0.5).all()
    assert vapour_volume(np.float64(300.0), np.float64(1e5), np.float64(0.0)) == GAS_CONSTANT * 300.0 / 1e5


# where the truncated series holds


class Fluid(NamedTuple):
    """A published equation for the saturated vapour's density (from memory), with a value it must give."""

    key: str
    critical: float
    density: float
    mass: float
    log_ratio: Callable[[float], float]
    at: float
    published: float
    worst: float
    in_pressure: float


def _sum(tau: float, terms: tuple[tuple[float, float], ...]) -> float:
    return sum(n * tau**e for n, e in terms)


WATER = ((-2.03150240, 1 / 3), (-2.68302940, 2 / 3), (-5.38626492, 4 / 3), (-17.2991605, 3), (-44.7586581, 37 / 6),
         (-63.9201063, 71 / 6))  # fmt: skip
ARGON = ((-1.70695656, 0.345), (-4.02739448, 5 / 6), (1.55177558, 1), (-2.30683228, 13 / 3))
METHANE = ((-1.8802840, 0.354), (-2.8526531, 5 / 6), (-3.0006480, 1.5), (-5.2511690, 2.5), (-13.191859, 25 / 6),
           (-37.553961, 47 / 6))  # fmt: skip
NITROGEN = ((-1.70127164, 0.34), (-3.70402649, 5 / 6), (1.29859383, 7 / 6), (-0.561424977, 13 / 6),
            (-2.68505381, 14 / 3))  # fmt: skip
DIOXIDE = ((-1.7074879, 0.34), (-0.82274670, 0.5), (-4.6008549, 1), (-10.111178, 7 / 3), (-29.742252, 14 / 3))

FLUIDS = [
    # IAPWS SR1-86: 0.597586 kg/m3 at 373.1243 K
    Fluid("water", 647.096, 322.0, 18.015268, lambda x: _sum(x, WATER), 373.1243, 0.597586, 2.21, 6.02),
    # Tegeler, Span, Wagner (1999): 5.7736 kg/m3 at the boiling point
    Fluid("argon", 150.687, 535.6, 39.948, lambda x: _sum(x, ARGON) / (1 - x), 87.302, 5.7736, 0.65, 2.75),
    # Setzmann, Wagner (1991): 1.8164 kg/m3
    Fluid("methane", 190.564, 162.66, 16.0428, lambda x: _sum(x, METHANE), 111.667, 1.8164, 0.59, 2.74),
    # Span et al. (2000): 4.6120 kg/m3
    Fluid("nitrogen", 126.192, 313.3, 28.01348, lambda x: _sum(x, NITROGEN) / (1 - x), 77.355, 4.6120, 0.97, 2.4),
    # Span, Wagner (1996): 13.761 kg/m3 at the triple point
    Fluid("carbon-dioxide", 304.1282, 467.6, 44.0098, lambda x: _sum(x, DIOXIDE), 216.592, 13.761, 0.8, 2.91),
]


def reference_volume(fluid: Fluid, kelvin: float) -> float:
    """The saturated vapour's molar volume, m3/mol."""
    ratio = np.exp(fluid.log_ratio(1.0 - kelvin / fluid.critical))
    return 1e-3 * fluid.mass / (fluid.density * float(ratio))


@pytest.mark.parametrize("fluid", FLUIDS, ids=lambda f: f.key)
def test_reference_density_gives_its_published_value(fluid):
    """The coefficients are from memory: a published value of each equation stands for them, within 0.02 %."""
    found = 1e-3 * fluid.mass / reference_volume(fluid, fluid.at)
    assert found == pytest.approx(fluid.published, rel=2e-4)


@pytest.mark.parametrize("fluid", FLUIDS, ids=lambda f: f.key)
def test_clapeyron_holds_up_to_the_limit(fluid, published):
    """Up to where the series is used the enthalpy lies within the error that the module states; beyond, it would not.

    Truth is the slope of the library with the reference equations' volumes. So the error is that of the series alone.
    """
    boundary = published.slope(fluid.key, fluid.at).boundary
    anchor = boundary.anchor
    errors = {}
    for kelvin in np.linspace(boundary.coverage.limits.lower, 0.95 * fluid.critical, 200).tolist():
        row = published.slope(fluid.key, kelvin)
        liquid = row.condensed_volume
        assert row.condensed.method.startswith("recorded")
        true = reference_volume(fluid, kelvin) - liquid
        p, t, b = row.pressure, kelvin, row.second_virial
        density_series = float(vapour_volume(np.float64(t), np.float64(p), np.float64(b))) - liquid
        pressure_series = GAS_CONSTANT * t / p + b - liquid
        errors[kelvin] = tuple(100.0 * (found / true - 1.0) for found in (density_series, pressure_series))
        if kelvin <= anchor.temperature:
            assert row.volume_change == pytest.approx(density_series, rel=1e-12)
    within = [error for kelvin, error in errors.items() if kelvin <= anchor.temperature]
    worst, worst_of_other = (max(abs(error[i]) for error in within) for i in (0, 1))
    assert worst == pytest.approx(fluid.worst, abs=0.01)
    # the series in pressure does worse there, which is why it is not used
    assert worst_of_other == pytest.approx(fluid.in_pressure, abs=0.01)
    assert anchor.temperature < 0.95 * fluid.critical
