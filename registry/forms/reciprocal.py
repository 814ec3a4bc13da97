"""Forms that are exp(a - b/(T + c)) once their units are folded in.

Antoine's equation in all its printings, the two-constant equation, the
Clausius-Clapeyron line through one point, and Magnus' equation. Because they
share one kernel with three parameters, points of different correlations can
be evaluated together.
"""

from __future__ import annotations

import math
from collections.abc import Mapping
from typing import Any

import numpy as np

from registry.forms.form import LN10, Array, Coefficients, Fold, Folded, Form, Scratch, Units

__all__ = ["FORMS", "GAS_CONSTANT", "Reciprocal"]

GAS_CONSTANT = 8.31446261815324
"""Molar gas constant, J/mol/K, exact since 2019 (SI Brochure, 9th edition)."""


class Reciprocal:
    """exp(a - b/(T + c)), T in kelvin, value in SI.

    Examples
    --------
    Ethanol, A 16.8958, B 3795.17, C 230.918 (ln, kPa, degC) at 50 degC:

    >>> kernel = Reciprocal()
    >>> p = (16.8958 + math.log(1000.0), 3795.17, 230.918 - 273.15)
    >>> out = np.empty(1)
    >>> kernel.fill(np.array([323.15]), p, out, Scratch(1))
    >>> round(float(out[0]), 1)
    29545.0
    """

    stacks = True

    def fill(self, t: Array, p: tuple[Any, ...], out: Array, scratch: Scratch) -> None:
        a, b, c = p
        np.add(t, c, out)
        np.divide(b, out, out)
        np.subtract(a, out, out)
        np.exp(out, out)

    def rate(self, t: Array, p: tuple[Any, ...]) -> Array:
        a, b, c = p
        u = t + c
        return np.exp(a - b / u) * b / (u * u)

    def domain(self, p: tuple[Any, ...]) -> tuple[float, float]:
        return -p[2], math.inf


RECIPROCAL = Reciprocal()


def _fold_antoine(log: float, sign: float) -> Fold:
    def fold(c: Mapping[str, float], units: Units) -> Folded:
        # t + C = ratio (T + (C - shift)/ratio)
        a = log * c["A"] + math.log(units.factor)
        b = log * c["B"] / units.ratio
        offset = (sign * c.get("C", 0.0) - units.shift) / units.ratio
        return Folded(RECIPROCAL, (a, b, offset), absorbed=True)

    return fold


def _fold_clausius_clapeyron(c: Mapping[str, float], units: Units) -> Folded:
    b = c["H"] / GAS_CONSTANT
    t0 = (c["T0"] + units.shift) / units.ratio
    return Folded(RECIPROCAL, (math.log(c["p0"] * units.factor) + b / t0, b, 0.0), absorbed=True)


def _fold_magnus(c: Mapping[str, float], units: Units) -> Folded:
    # a t/(b + t) = a - a b/(t + b)
    a, b = c["a"], c["b"]
    offset = (b - units.shift) / units.ratio
    return Folded(RECIPROCAL, (math.log(c["p0"] * units.factor) + a, a * b / units.ratio, offset), absorbed=True)


_PRESSURES = ("vapor-pressure", "sublimation-pressure")
_ABC = Coefficients(("A", "B", "C"))
_AB = Coefficients(("A", "B"))
_ANTOINE = "C. Antoine, C. R. Acad. Sci. 107, 681 (1888)"
_AUGUST = "E. F. August, Ann. Phys. Chem. 13, 122 (1828) (from memory)"

FORMS = (
    Form(
        "antoine-log10", "Antoine, base 10", "log10 p = A - B/(T + C)",
        _ABC, _fold_antoine(LN10, 1.0), _PRESSURES, _ANTOINE, absolute=False,
    ),
    Form(
        "antoine-log10-minus", "Antoine, base 10, printed as T - C", "log10 p = A - B/(T - C)",
        _ABC, _fold_antoine(LN10, -1.0), _PRESSURES, _ANTOINE, absolute=False,
    ),
    Form(
        "antoine-ln", "Antoine, base e", "ln p = A - B/(T + C)",
        _ABC, _fold_antoine(1.0, 1.0), _PRESSURES, _ANTOINE, absolute=False,
    ),
    Form(
        "antoine-ln-minus", "Antoine, base e, printed as T - C", "ln p = A - B/(T - C)",
        _ABC, _fold_antoine(1.0, -1.0), _PRESSURES, _ANTOINE, absolute=False,
    ),
    Form("august-log10", "August (two constants), base 10", "log10 p = A - B/T",
         _AB, _fold_antoine(LN10, 1.0), _PRESSURES, _AUGUST),
    Form("august-ln", "August (two constants), base e", "ln p = A - B/T",
         _AB, _fold_antoine(1.0, 1.0), _PRESSURES, _AUGUST),
    Form(
        "clausius-clapeyron", "Clausius-Clapeyron through one point", "ln(p/p0) = -(H/R)(1/T - 1/T0), H in J/mol",
        Coefficients(("T0", "p0", "H")), _fold_clausius_clapeyron, _PRESSURES,
        "R. Clausius, Ann. Phys. 155, 500 (1850) (from memory)", absolute=False,
    ),
    Form(
        "magnus", "Magnus", "p = p0 exp(a t/(b + t))",
        Coefficients(("p0", "a", "b")), _fold_magnus, _PRESSURES,
        "G. Magnus, Ann. Phys. 137, 225 (1844) (from memory)", absolute=False,
    ),
)  # fmt: skip
