"""Forms anchored at chosen temperatures: Cox and Chebyshev."""

from __future__ import annotations

import math
from collections.abc import Mapping
from typing import Any

import numpy as np

from registry.forms.elementary import Expression
from registry.forms.form import LN10, Array, Coefficients, Folded, Form, Units, fold_named, numbered

__all__ = ["FORMS"]

Parameters = tuple[Any, ...]


def _cox_exponent(t: Array, p: Parameters) -> Array:
    _, _, a0, a1, a2 = p
    return np.exp(a0 + t * (a1 + t * a2))


def _cox_value(t: Array, p: Parameters) -> Array:
    t0, p0, *_ = p
    return p0 * np.exp((t - t0) / t * _cox_exponent(t, p))


def _cox_slope(t: Array, p: Parameters) -> Array:
    t0, _, _, a1, a2 = p
    u = (t - t0) / t
    return _cox_value(t, p) * _cox_exponent(t, p) * (t0 / (t * t) + u * (a1 + 2.0 * a2 * t))


COX = Expression(_cox_value, _cox_slope)


def _chebyshev_sums(t: Array, p: Parameters) -> tuple[Array, Array]:
    """The sum a0/2 + a1 E1 + ... and its derivative with respect to t."""
    low, high, a = p
    x = (2.0 * t - (high + low)) / (high - low)
    previous, current = np.ones_like(t), x
    previous_rate, current_rate = np.zeros_like(t), np.ones_like(t)
    total, rate = np.full_like(t, 0.5 * a[0]), np.zeros_like(t)
    for coefficient in a[1:]:
        total, rate = total + coefficient * current, rate + coefficient * current_rate
        following = 2.0 * x * current - previous
        following_rate = 2.0 * current + 2.0 * x * current_rate - previous_rate
        previous, current = current, following
        previous_rate, current_rate = current_rate, following_rate
    return total, rate * 2.0 / (high - low)


def _chebyshev_value(t: Array, p: Parameters) -> Array:
    return np.exp(LN10 * _chebyshev_sums(t, p)[0] / t)


def _chebyshev_slope(t: Array, p: Parameters) -> Array:
    total, rate = _chebyshev_sums(t, p)
    return np.exp(LN10 * total / t) * LN10 * (rate / t - total / (t * t))


CHEBYSHEV = Expression(_chebyshev_value, _chebyshev_slope, lambda p: (0.0, math.inf))


def _fold_chebyshev(c: Mapping[str, float], units: Units) -> Folded:
    return Folded(CHEBYSHEV, (c["Tmin"], c["Tmax"], numbered(c, "a", first=0)))


_PRESSURES = ("vapor-pressure", "sublimation-pressure")

FORMS = (
    Form(
        "cox", "Cox", "ln(p/p0) = (1 - T0/T) exp(A0 + A1 T + A2 T^2)",
        Coefficients(("T0", "p0", "A0", "A1", "A2"), chosen=("T0", "p0")),
        fold_named(COX, "T0", "p0", "A0", "A1", "A2"), _PRESSURES,
        "E. R. Cox, Ind. Eng. Chem. 28, 613 (1936); K. Ruzicka, V. Majer, J. Phys. Chem. Ref. Data 23, 1 (1994)",
    ),
    Form(
        "chebyshev-log10", "Chebyshev series in T log10 p",
        "T log10 p = a0/2 + sum a_s E_s(x), x = (2T - (Tmax + Tmin))/(Tmax - Tmin)",
        Coefficients(("a0", "Tmin", "Tmax"), series=("a",), chosen=("Tmin", "Tmax")), _fold_chebyshev, _PRESSURES,
        "D. Ambrose et al., J. Chem. Thermodyn. 7, 1173 (1975)",
    ),
)  # fmt: skip
