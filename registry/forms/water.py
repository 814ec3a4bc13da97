"""Forms made for water: meteorological equations and IAPWS saturation."""

from __future__ import annotations

from typing import Any

import numpy as np

from registry.forms.elementary import Expression
from registry.forms.form import LN10, Array, Coefficients, Folded, Form, fold_named, numbered

__all__ = ["FORMS"]

Parameters = tuple[Any, ...]


def _ten(x: Array) -> Array:
    return np.exp(LN10 * x)


def _goff_gratch_parts(t: Array, p: Parameters) -> tuple[Array, Array, Array]:
    _, _, k3, k4, k5, k6, ts, _ = p
    u = ts / t
    hot = k3 * _ten(k4 * (1.0 - t / ts))
    cold = k5 * _ten(-k6 * (u - 1.0))
    return u, hot, cold


def _goff_gratch_value(t: Array, p: Parameters) -> Array:
    k1, k2, k3, _, k5, _, _, ps = p
    u, hot, cold = _goff_gratch_parts(t, p)
    return ps * _ten(-k1 * (u - 1.0) + k2 * np.log(u) / LN10 - (hot - k3) + (cold - k5))


def _goff_gratch_slope(t: Array, p: Parameters) -> Array:
    k1, k2, _, k4, _, k6, ts, _ = p
    u, hot, cold = _goff_gratch_parts(t, p)
    du = -u / t
    log_slope = -k1 * du + k2 * du / u / LN10 + hot * LN10 * k4 / ts - cold * LN10 * k6 * du
    return _goff_gratch_value(t, p) * LN10 * log_slope


def _wmo_parts(t: Array, p: Parameters) -> tuple[Array, Array, Array, Array]:
    _, _, k3, k4, k5, k6, _, tt = p
    u, theta = tt / t, t / tt
    hot = k3 * _ten(-k4 * (theta - 1.0))
    cold = k5 * _ten(k6 * (1.0 - u))
    return u, theta, hot, cold


def _wmo_value(t: Array, p: Parameters) -> Array:
    k1, k2, k3, _, k5, _, k7, _ = p
    u, theta, hot, cold = _wmo_parts(t, p)
    return _ten(k1 * (1.0 - u) - k2 * np.log(theta) / LN10 + (k3 - hot) + (cold - k5) + k7)


def _wmo_slope(t: Array, p: Parameters) -> Array:
    k1, k2, _, k4, _, k6, _, tt = p
    u, _, hot, cold = _wmo_parts(t, p)
    log_slope = (k1 * u - k2 / LN10 + cold * LN10 * k6 * u) / t + hot * LN10 * k4 / tt
    return _wmo_value(t, p) * LN10 * log_slope


def _murphy_koop_parts(t: Array, p: Parameters) -> tuple[Array, Array, Array]:
    a, b, c = p
    log_t = np.log(t)
    first = a[0] + a[1] / t + a[2] * log_t + a[3] * t
    second = c[0] + c[1] / t + c[2] * log_t + c[3] * t
    return first, np.tanh(b[0] * (t - b[1])), second


def _murphy_koop_value(t: Array, p: Parameters) -> Array:
    first, step, second = _murphy_koop_parts(t, p)
    return np.exp(first + step * second)


def _murphy_koop_slope(t: Array, p: Parameters) -> Array:
    a, b, c = p
    first, step, second = _murphy_koop_parts(t, p)
    first_rate = -a[1] / (t * t) + a[2] / t + a[3]
    second_rate = -c[1] / (t * t) + c[2] / t + c[3]
    log_slope = first_rate + step * second_rate + b[0] * (1.0 - step * step) * second
    return np.exp(first + step * second) * log_slope


def _if97_parts(t: Array, n: Parameters) -> tuple[Array, Array, Array, Array]:
    v = t + n[8] / (t - n[9])
    return v, (v + n[0]) * v + n[1], (n[2] * v + n[3]) * v + n[4], (n[5] * v + n[6]) * v + n[7]


def _if97_value(t: Array, n: Parameters) -> Array:
    _, a, b, c = _if97_parts(t, n)
    beta = 2.0 * c / (-b + np.sqrt(b * b - 4.0 * a * c))
    square = beta * beta
    return square * square


def _if97_slope(t: Array, n: Parameters) -> Array:
    v, a, b, c = _if97_parts(t, n)
    root = np.sqrt(b * b - 4.0 * a * c)
    beta = 2.0 * c / (-b + root)
    # A beta^2 + B beta + C = 0, differentiated
    a_rate, b_rate, c_rate = 2.0 * v + n[0], 2.0 * n[2] * v + n[3], 2.0 * n[5] * v + n[6]
    beta_rate = -((a_rate * beta + b_rate) * beta + c_rate) / (2.0 * a * beta + b)
    v_rate = 1.0 - n[8] / ((t - n[9]) * (t - n[9]))
    return 4.0 * beta * beta * beta * beta_rate * v_rate


def _sublimation_sums(t: Array, p: Parameters) -> tuple[Array, Array]:
    tt, _, terms = p
    theta = t / tt
    total, moment = np.zeros_like(t), np.zeros_like(t)
    for a, b in terms:
        part = a * np.power(theta, b - 1.0)
        total, moment = total + part, moment + (b - 1.0) * part
    return total, moment


def _sublimation_value(t: Array, p: Parameters) -> Array:
    return p[1] * np.exp(_sublimation_sums(t, p)[0])


def _sublimation_slope(t: Array, p: Parameters) -> Array:
    total, moment = _sublimation_sums(t, p)
    return p[1] * np.exp(total) * moment / t


GOFF_GRATCH = Expression(_goff_gratch_value, _goff_gratch_slope)
WMO = Expression(_wmo_value, _wmo_slope)
MURPHY_KOOP = Expression(_murphy_koop_value, _murphy_koop_slope)
IF97 = Expression(_if97_value, _if97_slope)
SUBLIMATION = Expression(_sublimation_value, _sublimation_slope)

_VAPOR = ("vapor-pressure",)
_MURPHY = tuple(f"{stem}{i}" for stem, count in (("a", 4), ("b", 2), ("c", 4)) for i in range(count))
_K6 = ("k1", "k2", "k3", "k4", "k5", "k6")

FORMS = (
    Form(
        "goff-gratch", "Goff-Gratch",
        "log10(p/ps) = -k1(Ts/T - 1) + k2 log10(Ts/T) - k3(10^(k4(1 - T/Ts)) - 1) + k5(10^(-k6(Ts/T - 1)) - 1)",
        Coefficients((*_K6, "Ts", "ps"), chosen=("Ts", "ps")),
        fold_named(GOFF_GRATCH, *_K6, "Ts", "ps"), _VAPOR,
        "J. A. Goff, S. Gratch, Trans. Am. Soc. Heat. Vent. Eng. 52, 95 (1946)",
    ),
    Form(
        "wmo-goff", "WMO (Goff 1957)",
        "log10 p = k1(1 - Tt/T) - k2 log10(T/Tt) + k3(1 - 10^(-k4(T/Tt - 1))) + k5(10^(k6(1 - Tt/T)) - 1) + k7",
        Coefficients((*_K6, "k7", "Tt"), chosen=("Tt",)),
        fold_named(WMO, *_K6, "k7", "Tt"), _VAPOR,
        "J. A. Goff, Trans. ASHVE 63, 347 (1957); WMO Technical Regulations",
    ),
    Form(
        "murphy-koop-liquid", "Murphy-Koop, liquid",
        "ln p = a0 + a1/T + a2 ln T + a3 T + tanh(b0(T - b1))(c0 + c1/T + c2 ln T + c3 T)",
        Coefficients(_MURPHY),
        lambda c, units: Folded(
            MURPHY_KOOP, tuple(tuple(c[n] for n in _MURPHY if n.startswith(stem)) for stem in "abc")
        ), _VAPOR,
        "D. M. Murphy, T. Koop, Q. J. R. Meteorol. Soc. 131, 1539 (2005), eq. (10)",
    ),
    Form(
        "iapws-if97-saturation", "IAPWS-IF97 region 4",
        "p = [2C/(-B + sqrt(B^2 - 4AC))]^4 in MPa; v = T + n9/(T - n10), A = v^2 + n1 v + n2, "
        "B = n3 v^2 + n4 v + n5, C = n6 v^2 + n7 v + n8",
        Coefficients(tuple(f"n{i}" for i in range(1, 11))),
        fold_named(IF97, *(f"n{i}" for i in range(1, 11))), _VAPOR,
        "IAPWS R7-97(2012), eq. (30)", value_unit="MPa",
    ),
    Form(
        "iapws-sublimation", "IAPWS sublimation", "ln(p/pt) = (Tt/T) sum a_i (T/Tt)^b_i",
        Coefficients(("Tt", "pt"), series=("a", "b"), chosen=("Tt", "pt", "b")),
        lambda c, units: Folded(
            SUBLIMATION, (c["Tt"], c["pt"], tuple(zip(numbered(c, "a"), numbered(c, "b"), strict=True)))
        ), ("sublimation-pressure",),
        "IAPWS R14-08(2011)",
    ),
)  # fmt: skip
