"""How well two statements of one correlation agree, and how steeply a value hangs on a coefficient."""

from __future__ import annotations

import dataclasses
from collections.abc import Mapping

import numpy as np

from registry.curve import Curve
from registry.forms.form import Array
from registry.numerals import to_float
from registry.quantities import UNITS
from registry.records import Correlation
from registry.scales import SCALES

__all__ = ["find_scale", "find_steepness", "measure_difference", "take_curve"]

FIXED = 2e-13
"""Where the last bit of T moves the value by more than this, doubles say nothing about the coefficients."""


def take_curve(record: Correlation, molar_mass: float, instead: Mapping[str, float] | None = None) -> Curve:
    """The curve fed with temperatures as the source counts them: both statements stand on one scale."""
    return dataclasses.replace(Curve.of(record, molar_mass, instead), scale=SCALES["ITS-90"])


def find_scale(record: Correlation, molar_mass: float) -> float:
    """SI units in one unit of the record's value."""
    unit = UNITS[record.value_unit]
    mass = to_float(record.coefficients["M"]) if "M" in record.coefficients else molar_mass
    return float(unit.factor) * (mass if unit.per_molar_mass else 1.0)


def find_steepness(record: Correlation, name: str, kelvin: Array, molar_mass: float) -> Array:
    """The relative change of the value for one unit of one coefficient.

    Parameters
    ----------
    record : Correlation
        The correlation.
    name : str
        The coefficient.
    kelvin : array of float, one-dimensional
        Temperatures, K, on the record's own scale.
    molar_mass : float
        Molar mass, g/mol.

    Returns
    -------
    array of float
        Without sign; zero where the value is zero or has none.
    """
    at = to_float(record.coefficients[name])
    # far above the rounding of the value, far below what bends its curve
    step = abs(at) * 1e-7 or 1e-7
    low, high = (take_curve(record, molar_mass, {name: at + side}).values(kelvin) for side in (-step, step))
    middle = take_curve(record, molar_mass).values(kelvin)
    with np.errstate(all="ignore"):
        found = np.abs((high - low) / middle) / (2.0 * step)
    return np.where(np.isfinite(found), found, 0.0)


def measure_difference(one: Curve, other: Curve, kelvin: Array) -> float:
    """The largest relative difference between two curves where T in double precision fixes the value.

    Parameters
    ----------
    one, other : Curve
        The curves.
    kelvin : array of float, one-dimensional
        Temperatures, K.

    Returns
    -------
    float
        Relative to the first.
    """
    first, second = one.values(kelvin), other.values(kelvin)
    with np.errstate(all="ignore"):
        steepness = np.abs(kelvin * one.rates(kelvin) / first)
        found = np.abs(second - first) / np.abs(first)
    fixed = steepness * 2.0**-52 < FIXED
    return float(np.max(found[fixed], initial=0.0))
