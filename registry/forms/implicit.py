"""Vapour-pressure forms that must be solved for the pressure."""

from __future__ import annotations

from collections.abc import Mapping
from typing import Any

import numpy as np

from registry.forms.elementary import Expression
from registry.forms.form import Array, Coefficients, Folded, Form, Units, fold_named
from registry.forms.roots import solve_bracketed, solve_rising_concave
from registry.polynomial import polynomial_and_slope

__all__ = ["FORMS"]

Parameters = tuple[Any, ...]

_BRACKET = 1.05
"""|x| up to which the ITS-90 helium equations are solved; their ranges lie within |x| = 1.01."""


def _thodos_log(t: Array, p: Parameters) -> Array:
    """ln p: the lower root of y = A - B/T + C ln T + (D/T^2) e^y."""
    a, b, c, d = p
    explicit = a - b / t + c * np.log(t)
    k = d / (t * t)
    return solve_rising_concave(lambda y: y - explicit - k * np.exp(y), lambda y: 1.0 - k * np.exp(y), explicit)


def _thodos_value(t: Array, p: Parameters) -> Array:
    return np.exp(_thodos_log(t, p))


def _thodos_slope(t: Array, p: Parameters) -> Array:
    _, b, c, d = p
    value = _thodos_value(t, p)
    k = d / (t * t)
    explicit_rate = b / (t * t) + c / t - 2.0 * d * value / (t * t * t)
    return value * explicit_rate / (1.0 - k * value)


THODOS = Expression(_thodos_value, _thodos_slope)


def _helium_argument(t: Array, p: Parameters) -> Array:
    """x = (ln p - B)/C at which the ITS-90 equation gives T."""
    a, _, _ = p
    return solve_bracketed(
        lambda x: polynomial_and_slope(a, x)[0] - t, lambda x: polynomial_and_slope(a, x)[1], -_BRACKET, _BRACKET, t
    )


def _helium_value(t: Array, p: Parameters) -> Array:
    _, b, c = p
    return np.exp(b + c * _helium_argument(t, p))


def _helium_slope(t: Array, p: Parameters) -> Array:
    a, b, c = p
    x = _helium_argument(t, p)
    return np.exp(b + c * x) * c / polynomial_and_slope(a, x)[1]


def _helium_bounds(p: Parameters) -> tuple[float, float]:
    """The temperatures at the ends of the bracket: beyond them the equation is not solved."""
    low, high = polynomial_and_slope(p[0], np.array([-_BRACKET, _BRACKET]))[0].tolist()
    return low, high


HELIUM = Expression(_helium_value, _helium_slope, _helium_bounds)


def _fold_helium(c: Mapping[str, float], units: Units) -> Folded:
    return Folded(HELIUM, (tuple(c[f"A{i}"] for i in range(10)), c["B"], c["C"]))


# they define the scale: exact as printed
_HELIUM = (*(f"A{i}" for i in range(10)), "B", "C")

FORMS = (
    Form(
        "frost-kalkwarf-thodos", "Frost-Kalkwarf-Thodos", "ln p = A - B/T + C ln T + D p/T^2 (lower root)",
        Coefficients(("A", "B", "C", "D")), fold_named(THODOS, "A", "B", "C", "D"), ("vapor-pressure",),
        "A. A. Frost, D. R. Kalkwarf, J. Chem. Phys. 21, 264 (1953); G. Thodos et al. (from memory)",
    ),
    Form(
        "helium-its90", "ITS-90 helium vapour pressure", "T = A0 + sum A_i [(ln p - B)/C]^i, p in Pa",
        Coefficients(_HELIUM, chosen=_HELIUM), _fold_helium, ("vapor-pressure",),
        "H. Preston-Thomas, Metrologia 27, 3 (1990), Table 3", value_unit="Pa",
    ),
)  # fmt: skip
