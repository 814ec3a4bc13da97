"""Forms in reduced temperature for enthalpy of vaporization and liquid volume."""

from __future__ import annotations

import math
from collections.abc import Mapping
from typing import Any

import numpy as np

from registry.forms.elementary import Expression
from registry.forms.form import Array, Coefficients, Folded, Form, Units, fold_named
from registry.forms.reciprocal import GAS_CONSTANT

__all__ = ["FORMS"]

Parameters = tuple[Any, ...]


def _tau(t: Array, critical: float) -> Array:
    return np.maximum(critical - t, 0.0) / critical


def _below_critical(p: Parameters) -> tuple[float, float]:
    return 0.0, math.nextafter(p[0], math.inf)


def _majer_value(t: Array, p: Parameters) -> Array:
    critical, a, alpha, beta = p
    return a * np.exp(-alpha * t / critical) * np.power(_tau(t, critical), beta)


def _majer_slope(t: Array, p: Parameters) -> Array:
    critical, a, alpha, beta = p
    tau = _tau(t, critical)
    with np.errstate(divide="ignore", invalid="ignore"):
        inner = alpha * np.power(tau, beta) + beta * np.power(tau, beta - 1.0)
    return -a * np.exp(-alpha * t / critical) * inner / critical


def _watson_value(t: Array, p: Parameters) -> Array:
    critical, t1, h1, n = p
    return h1 * np.power(np.maximum(critical - t, 0.0) / (critical - t1), n)


def _watson_slope(t: Array, p: Parameters) -> Array:
    critical, t1, h1, n = p
    u = np.maximum(critical - t, 0.0) / (critical - t1)
    with np.errstate(divide="ignore"):
        return -h1 * n * np.power(u, n - 1.0) / (critical - t1)


def _rackett_value(t: Array, p: Parameters) -> Array:
    critical, density, log_z = p
    return density * np.exp(-log_z * (1.0 + np.power(_tau(t, critical), 2.0 / 7.0)))


def _rackett_slope(t: Array, p: Parameters) -> Array:
    critical, _, log_z = p
    with np.errstate(divide="ignore"):
        inner = np.power(_tau(t, critical), -5.0 / 7.0)
    return _rackett_value(t, p) * log_z * (2.0 / 7.0) * inner / critical


MAJER = Expression(_majer_value, _majer_slope, _below_critical)
WATSON = Expression(_watson_value, _watson_slope, _below_critical)
RACKETT = Expression(_rackett_value, _rackett_slope, _below_critical)


def _fold_rackett(c: Mapping[str, float], units: Units) -> Folded:
    # pc/(R Tc): MPa over J/mol is 1e6 mol/m3, 1e3 mol/dm3
    density = 1e3 * c["pc"] / (GAS_CONSTANT * c["Tc"] / units.ratio)
    return Folded(RACKETT, (c["Tc"], density, math.log(c["ZRA"])))


_ENTHALPY = ("enthalpy-of-vaporization",)

FORMS = (
    Form(
        "majer-svoboda", "Majer-Svoboda", "H = A exp(-alpha Tr) (1 - Tr)^beta",
        Coefficients(("A", "alpha", "beta", "Tc"), chosen=("Tc",)),
        fold_named(MAJER, "Tc", "A", "alpha", "beta"), _ENTHALPY,
        "V. Majer, V. Svoboda, Enthalpies of Vaporization of Organic Compounds, IUPAC Chem. Data Ser. 32 (1985)",
    ),
    Form(
        "watson", "Watson", "H = H1 [(1 - Tr)/(1 - T1/Tc)]^n",
        Coefficients(("H1", "T1", "Tc", "n"), chosen=("T1", "Tc", "n")),
        fold_named(WATSON, "Tc", "T1", "H1", "n"), _ENTHALPY,
        "K. M. Watson, Ind. Eng. Chem. 35, 398 (1943)",
    ),
    Form(
        "rackett", "Rackett", "1/rho = (R Tc/pc) ZRA^(1 + (1 - Tr)^(2/7)), pc in MPa, rho in mol/dm3 [M in g/mol]",
        Coefficients(("Tc", "pc", "ZRA"), ("M",), chosen=("Tc", "pc", "M")),
        _fold_rackett, ("saturated-liquid-density",),
        "H. G. Rackett, J. Chem. Eng. Data 15, 514 (1970); C. F. Spencer, R. P. Danner, ibid. 17, 236 (1972)",
        value_unit="mol/dm3",
    ),
)  # fmt: skip
