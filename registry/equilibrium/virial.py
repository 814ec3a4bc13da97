"""The second virial coefficient and the vapour volume that follows from it.

C. Tsonopoulos, AIChE J. 20, 263 (1974), nonpolar part (coefficients from
memory, held against published values in the tests). The series in density is
cut after B, Z = 1 + B/V. Where p/pc <= Tr/4 it makes dH within 1 % of what
reference equations make of it (argon, methane, nitrogen, carbon dioxide;
water 2.2 %); the series in pressure, Z = 1 + B p/(R T), is up to 3 % off there
(water 6 %). The rule of thumb p/pc <= Tr/2 (J. M. Prausnitz, R. N.
Lichtenthaler, E. G. de Azevedo, Molecular Thermodynamics of Fluid-Phase
Equilibria, from memory) lets 7 % through on a saturation line: half of it is
taken here.
"""

from __future__ import annotations

import numpy as np

from registry.forms.form import Array
from registry.forms.reciprocal import GAS_CONSTANT

__all__ = ["HIGHEST_RATIO", "LEAST_TERM", "second_virial", "vapour_volume"]

HIGHEST_RATIO = 0.25
"""The largest (p/pc)/Tr at which the truncated series is used."""

LEAST_TERM = -0.2
"""The least B p/(R T) at which it is: at -0.25 the series in density has no vapour any more."""


def second_virial(
    kelvin: Array, critical_temperature: float, critical_pressure: float, acentric_factor: float
) -> Array:
    """The second virial coefficient by Tsonopoulos, nonpolar.

    Parameters
    ----------
    kelvin : array of float
        Temperature, K.
    critical_temperature, critical_pressure, acentric_factor : float
        K, Pa, and a number.

    Returns
    -------
    array of float
        m3/mol.

    Examples
    --------
    Argon at 100 K, cm3/mol (CRC Handbook: -184):

    >>> round(1e6 * float(second_virial(np.float64(100.0), 150.9, 4.90e6, 0.0)), 1)
    -186.1
    """
    x = critical_temperature / kelvin
    x2 = x * x
    x8 = np.square(np.square(x2))
    simple = 0.1445 - 0.330 * x - 0.1385 * x2 - 0.0121 * x2 * x - 0.000607 * x8
    other = 0.0637 + 0.331 * x2 - 0.423 * x2 * x - 0.008 * x8
    found: Array = GAS_CONSTANT * critical_temperature / critical_pressure * (simple + acentric_factor * other)
    return found


def vapour_volume(kelvin: Array, pressure: Array, virial: Array) -> Array:
    """The molar volume of the vapour by Z = 1 + B/V; NaN where there is none.

    Parameters
    ----------
    kelvin, pressure : array of float
        K and Pa.
    virial : array of float
        Second virial coefficient, m3/mol; zero for an ideal gas.

    Returns
    -------
    array of float
        m3/mol.

    Examples
    --------
    >>> float(vapour_volume(np.float64(353.24), np.float64(101325.0), np.float64(-995.3e-6)).round(5))
    0.02795
    """
    ideal = GAS_CONSTANT * kelvin / pressure
    with np.errstate(invalid="ignore"):
        found: Array = 0.5 * ideal * (1.0 + np.sqrt(1.0 + 4.0 * virial / ideal))
    return found
