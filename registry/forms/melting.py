"""Melting curves.

Differences from the reference point go through expm1 and log1p, so that a
pressure close to it keeps its digits.
"""

from __future__ import annotations

import math
from collections.abc import Mapping
from typing import Any

import numpy as np

from registry.forms.elementary import Expression
from registry.forms.form import Array, Coefficients, Folded, Form, Units, fold_named, numbered
from registry.forms.roots import solve_rising_concave

__all__ = ["FORMS"]

Parameters = tuple[Any, ...]


def _simon_value(t: Array, p: Parameters) -> Array:
    """p0 + sum A (theta^b - 1), theta = T/T0."""
    t0, p0, terms = p
    log_theta = np.log1p((t - t0) / t0)
    total = np.zeros_like(t)
    for a, b in terms:
        total = total + a * np.expm1(b * log_theta)
    return p0 + total


def _simon_slope(t: Array, p: Parameters) -> Array:
    t0, _, terms = p
    log_theta = np.log1p((t - t0) / t0)
    total = np.zeros_like(t)
    for a, b in terms:
        total = total + a * b * np.exp(b * log_theta)
    return total / t


SIMON = Expression(_simon_value, _simon_slope)


def _fold_simon_glatzel(c: Mapping[str, float], units: Units) -> Folded:
    return Folded(SIMON, (c["T0"], c["p0"], ((c["a"], c["c"]),)))


def _fold_simon_sum(c: Mapping[str, float], units: Units) -> Folded:
    terms = tuple((c["pt"] * n, t) for n, t in zip(numbered(c, "n"), numbered(c, "t"), strict=True))
    return Folded(SIMON, (c["Tt"], c["pt"], terms))


def _fold_melting_ih(c: Mapping[str, float], units: Units) -> Folded:
    terms = tuple((-c["pt"] * a, b) for a, b in zip(numbered(c, "a"), numbered(c, "b"), strict=True))
    return Folded(SIMON, (c["Tt"], c["pt"], terms))


def _fold_melting_simon(c: Mapping[str, float], units: Units) -> Folded:
    return Folded(SIMON, (c["T0"], c["p0"], ((c["p0"] * c["a"], c["b"]),)))


def _power_value(t: Array, p: Parameters) -> Array:
    a, b, c = p
    return a * np.power(t, c) + b


def _power_slope(t: Array, p: Parameters) -> Array:
    a, _, c = p
    return a * c * np.power(t, c - 1.0)


def _quadratic_value(t: Array, p: Parameters) -> Array:
    t0, p0, a1, a2 = p
    x = (t - t0) / t0
    return p0 * (1.0 + x * (a1 + x * a2))


def _quadratic_slope(t: Array, p: Parameters) -> Array:
    t0, p0, a1, a2 = p
    return p0 * (a1 + 2.0 * a2 * (t - t0) / t0) / t0


def _logarithm_value(t: Array, p: Parameters) -> Array:
    """ln p = ln p0 + sum A (1 - theta^b)."""
    t0, p0, terms = p
    log_theta = np.log1p((t - t0) / t0)
    total = np.zeros_like(t)
    for a, b in terms:
        total = total - a * np.expm1(b * log_theta)
    return p0 * np.exp(total)


def _logarithm_slope(t: Array, p: Parameters) -> Array:
    t0, _, terms = p
    log_theta = np.log1p((t - t0) / t0)
    total = np.zeros_like(t)
    for a, b in terms:
        total = total - a * b * np.exp(b * log_theta)
    return _logarithm_value(t, p) * total / t


LOGARITHM = Expression(_logarithm_value, _logarithm_slope)


def _fold_melting_vii(c: Mapping[str, float], units: Units) -> Folded:
    terms = ((c["a1"], -1.0), (c["a2"], 5.0), (c["a3"], 22.0))
    return Folded(LOGARITHM, (c["T0"], c["p0"], terms))


def _clapeyron_value(t: Array, p: Parameters) -> Array:
    t0, p0, slope = p
    return p0 + slope * np.log1p((t - t0) / t0)


def _clapeyron_slope(t: Array, p: Parameters) -> Array:
    return p[2] / t


CLAPEYRON = Expression(_clapeyron_value, _clapeyron_slope)


def _fold_clapeyron(c: Mapping[str, float], units: Units) -> Folded:
    # J/mol over cm3/mol is MPa
    return Folded(CLAPEYRON, (c["T0"], c["p0"], c["H"] / c["dV"] * 1e6 / units.factor))


def _kechin_log(x: Array, p: Parameters) -> Array:
    _, a, b, c = p
    return b * np.log1p(x / a) - c * x


def _kechin_log_slope(x: Array, p: Parameters) -> Array:
    _, a, b, c = p
    return b / (a + x) - c


def _kechin_value(t: Array, p: Parameters) -> Array:
    """The pressure on the rising branch, at which the equation gives T."""
    target = np.log1p((t - p[0]) / p[0])
    return solve_rising_concave(
        lambda x: _kechin_log(x, p) - target, lambda x: _kechin_log_slope(x, p), np.zeros_like(t)
    )


def _kechin_slope(t: Array, p: Parameters) -> Array:
    return 1.0 / (t * _kechin_log_slope(_kechin_value(t, p), p))


def _kechin_bounds(p: Parameters) -> tuple[float, float]:
    t0, a, b, c = p
    if c <= 0.0:
        return math.nextafter(t0, 0.0), math.inf
    top = b / c - a
    highest = t0 * math.exp(b * math.log1p(top / a) - c * top)
    # the maximum itself is a double root: stop a little before it, where the branch still rises
    return math.nextafter(t0, 0.0), highest * (1.0 - 1e-12)


KECHIN = Expression(_kechin_value, _kechin_slope, _kechin_bounds)


_MELTING = ("melting-pressure",)
_SIMON = "F. Simon, G. Glatzel, Z. Anorg. Allg. Chem. 178, 309 (1929) (from memory)"
_R14 = "IAPWS R14-08(2011); W. Wagner et al., J. Phys. Chem. Ref. Data 40, 043103 (2011)"

FORMS = (
    Form("simon-glatzel", "Simon-Glatzel", "p = p0 + a [(T/T0)^c - 1]",
         Coefficients(("T0", "p0", "a", "c"), chosen=("T0", "p0")), _fold_simon_glatzel, _MELTING, _SIMON),
    Form("simon-glatzel-sum", "Simon-Glatzel sum", "p/pt = 1 + sum n_i [(T/Tt)^t_i - 1]",
         Coefficients(("Tt", "pt"), series=("n", "t"), chosen=("Tt", "pt", "t")), _fold_simon_sum, _MELTING, _SIMON),
    Form("simon-glatzel-power", "Simon-Glatzel, power of T", "p = a T^c + b",
         Coefficients(("a", "b", "c")), fold_named(Expression(_power_value, _power_slope), "a", "b", "c"),
         _MELTING, "F. Datchi, P. Loubeyre, R. LeToullec, Phys. Rev. B 61, 6535 (2000)"),
    Form("iapws-melting-ih", "IAPWS melting, ice Ih", "p/pt = 1 + sum a_i [1 - (T/Tt)^b_i]",
         Coefficients(("Tt", "pt"), series=("a", "b"), chosen=("Tt", "pt", "b")), _fold_melting_ih, _MELTING, _R14),
    Form("iapws-melting-simon", "IAPWS melting, ices III, V and VI", "p/p0 = 1 - a [1 - (T/T0)^b]",
         Coefficients(("T0", "p0", "a", "b"), chosen=("T0", "p0", "b")), _fold_melting_simon, _MELTING, _R14),
    Form("iapws-melting-vii", "IAPWS melting, ice VII",
         "ln(p/p0) = a1 (1 - T0/T) + a2 (1 - (T/T0)^5) + a3 (1 - (T/T0)^22)",
         Coefficients(("T0", "p0", "a1", "a2", "a3"), chosen=("T0", "p0")), _fold_melting_vii, _MELTING, _R14),
    Form("melting-polynomial", "melting polynomial", "p/pt = 1 + a1 (T/Tt - 1) + a2 (T/Tt - 1)^2",
         Coefficients(("Tt", "pt", "a1", "a2"), chosen=("Tt", "pt")),
         fold_named(Expression(_quadratic_value, _quadratic_slope), "Tt", "pt", "a1", "a2"), _MELTING,
         "R. Span, W. Wagner, J. Phys. Chem. Ref. Data 25, 1509 (1996), eq. (3.10)"),
    Form("clapeyron-melting", "Clapeyron melting line, constant enthalpy and volume",
         "p = p0 + (H/dV) ln(T/T0), H in J/mol, dV in cm3/mol",
         Coefficients(("T0", "p0", "H", "dV"), chosen=("T0", "p0")), _fold_clapeyron, _MELTING,
         "E. Clapeyron, J. Ec. Polytech. 14, 153 (1834), integrated (from memory)"),
    Form("kechin", "Kechin", "T = T0 (1 + p/a)^b exp(-c p)",
         Coefficients(("T0", "a", "b", "c"), chosen=("T0",)), fold_named(KECHIN, "T0", "a", "b", "c"), _MELTING,
         "V. V. Kechin, Phys. Rev. B 65, 052102 (2001) (from memory)"),
)  # fmt: skip
