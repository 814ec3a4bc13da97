"""Forms in powers of tau = 1 - T/Tref.

Wagner's equations, the saturation and sublimation ancillaries of reference
equations of state, and the ancillaries for saturated liquid density.
"""

from __future__ import annotations

import math
from collections.abc import Mapping
from typing import Any

import numpy as np

from registry.forms.form import Array, Coefficients, Fold, Folded, Form, Scratch, Units, numbered

__all__ = ["FORMS", "ReducedExponential", "ReducedSum"]


def _fill_tau(t: Array, reference: float, out: Array) -> None:
    # Tref - t is exact near Tref; the clamp absorbs the rounding of a bound at Tref
    np.subtract(reference, t, out)
    np.maximum(out, 0.0, out=out)
    np.divide(out, reference, out)


def _fill_series(tau: Array, terms: tuple[tuple[float, float], ...], out: Array, scratch: Scratch, first: int) -> None:
    """Sum of n tau^e over terms in rising order of e > 0, by nested multiplication."""
    root: Array | None = None
    out.fill(terms[-1][0])
    for index in range(len(terms) - 1, -1, -1):
        gap = terms[index][1] - (terms[index - 1][1] if index else 0.0)
        halves = round(2.0 * gap)
        if 2.0 * gap == halves and halves <= 9:
            for _ in range(halves // 2):
                np.multiply(out, tau, out)
            if halves % 2:
                if root is None:
                    root = scratch.take(first, tau)
                    np.sqrt(tau, root)
                np.multiply(out, root, out)
        else:
            work = scratch.take(first + 1, tau)
            np.power(tau, gap, work)
            np.multiply(out, work, out)
        if index:
            np.add(out, terms[index - 1][0], out)


def _series_and_rate(tau: Array, terms: tuple[tuple[float, float], ...]) -> tuple[Array, Array]:
    """The sum and its derivative with respect to tau."""
    lowest = terms[0][1]
    value, inner = np.zeros_like(tau), np.zeros_like(tau)
    for n, e in terms:
        value = value + n * np.power(tau, e)
        inner = inner + n * e * np.power(tau, e - lowest)
    # the lowest power outside: at tau = 0 the derivative is infinite with the right sign, not inf - inf
    with np.errstate(divide="ignore"):
        return value, inner * np.power(tau, lowest - 1.0)


class ReducedExponential:
    """v0 exp((Tref/T)^s sum n tau^e), s = 0 or 1.

    Parameters are ``(Tref, v0, s, terms)`` with terms as (n, e) in rising
    order of e.

    Examples
    --------
    Benzene by the 2.5-5 form (R. C. Reid et al., 4th ed.) at its boiling point, bar:

    >>> kernel = ReducedExponential()
    >>> terms = ((-7.01433, 1.0), (1.55256, 1.5), (-1.8479, 2.5), (-3.713, 5.0))
    >>> out = np.empty(1)
    >>> kernel.fill(np.array([353.24]), (562.16, 48.98, 1, terms), out, Scratch(1))
    >>> round(float(out[0]), 5)
    1.01323
    """

    stacks = False

    def fill(self, t: Array, p: tuple[Any, ...], out: Array, scratch: Scratch) -> None:
        reference, v0, s, terms = p
        tau = scratch.take(0, t)
        _fill_tau(t, reference, tau)
        _fill_series(tau, terms, out, scratch, 1)
        if s:
            np.divide(reference, t, tau)
            np.multiply(out, tau, out)
        np.exp(out, out)
        np.multiply(out, v0, out)

    def rate(self, t: Array, p: tuple[Any, ...]) -> Array:
        reference, _, s, terms = p
        value = np.empty_like(t)
        self.fill(t, p, value, Scratch(t.size))
        tau = np.empty_like(t)
        _fill_tau(t, reference, tau)
        total, slope = _series_and_rate(tau, terms)
        if s:
            return value * (-slope / t - reference * total / (t * t))
        return value * (-slope / reference)

    def domain(self, p: tuple[Any, ...]) -> tuple[float, float]:
        return 0.0, math.nextafter(p[0], math.inf)


class ReducedSum:
    """v0 (c0 + sum n tau^e); parameters ``(Tref, v0, c0, terms)``.

    Examples
    --------
    R-134a saturated liquid at 0 degC (R. Tillner-Roth, H. D. Baehr 1994), kg/m3:

    >>> kernel = ReducedSum()
    >>> terms = ((884.13, 1 / 3), (485.84, 2 / 3), (193.29, 10 / 3))
    >>> out = np.empty(1)
    >>> kernel.fill(np.array([273.15]), (374.18, 1.0, 518.20, terms), out, Scratch(1))
    >>> round(float(out[0]), 1)
    1295.1
    """

    stacks = False

    def fill(self, t: Array, p: tuple[Any, ...], out: Array, scratch: Scratch) -> None:
        reference, v0, c0, terms = p
        tau = scratch.take(0, t)
        _fill_tau(t, reference, tau)
        _fill_series(tau, terms, out, scratch, 1)
        np.add(out, c0, out)
        np.multiply(out, v0, out)

    def rate(self, t: Array, p: tuple[Any, ...]) -> Array:
        reference, v0, _, terms = p
        tau = np.empty_like(t)
        _fill_tau(t, reference, tau)
        return -v0 * _series_and_rate(tau, terms)[1] / reference

    def domain(self, p: tuple[Any, ...]) -> tuple[float, float]:
        return 0.0, math.nextafter(p[0], math.inf)


EXPONENTIAL = ReducedExponential()
SUM = ReducedSum()


def _fold_wagner(exponents: tuple[float, float, float, float]) -> Fold:
    def fold(c: Mapping[str, float], units: Units) -> Folded:
        terms = tuple(zip((c["a"], c["b"], c["c"], c["d"]), exponents, strict=True))
        return Folded(EXPONENTIAL, (c["Tc"], c["pc"], 1, terms))

    return fold


def _fold_series(reference: str, value: str, s: int) -> Fold:
    def fold(c: Mapping[str, float], units: Units) -> Folded:
        return Folded(EXPONENTIAL, (c[reference], c[value], s, _terms(c)))

    return fold


def _terms(c: Mapping[str, float]) -> tuple[tuple[float, float], ...]:
    pairs = zip(numbered(c, "n"), numbered(c, "t"), strict=True)
    return tuple(sorted(pairs, key=lambda pair: pair[1]))


def _fold_density_reduced(c: Mapping[str, float], units: Units) -> Folded:
    return Folded(SUM, (c["Tc"], c["rhoc"], 1.0, _terms(c)))


def _fold_density_power(c: Mapping[str, float], units: Units) -> Folded:
    return Folded(SUM, (c["Tc"], 1.0, c["c0"], _terms(c)))


_VAPOR = ("vapor-pressure",)
_DENSITY = ("saturated-liquid-density",)
_WAGNER = Coefficients(("Tc", "pc", "a", "b", "c", "d"), chosen=("Tc", "pc"))

FORMS = (
    Form(
        "wagner-3-6", "Wagner 3-6", "ln(p/pc) = (a tau + b tau^1.5 + c tau^3 + d tau^6)/Tr",
        _WAGNER, _fold_wagner((1.0, 1.5, 3.0, 6.0)), _VAPOR, "W. Wagner, Cryogenics 13, 470 (1973)",
    ),
    Form(
        "wagner-2.5-5", "Wagner 2.5-5", "ln(p/pc) = (a tau + b tau^1.5 + c tau^2.5 + d tau^5)/Tr",
        _WAGNER, _fold_wagner((1.0, 1.5, 2.5, 5.0)), _VAPOR, "D. Ambrose, J. Chem. Thermodyn. 18, 45 (1986)",
    ),
    Form(
        "saturation-ancillary", "saturation ancillary equation", "ln(p/pc) = (Tc/T) sum n_i (1 - T/Tc)^t_i",
        Coefficients(("Tc", "pc"), series=("n", "t"), chosen=("Tc", "pc", "t")), _fold_series("Tc", "pc", 1), _VAPOR,
        "W. Wagner, A. Pruss, J. Phys. Chem. Ref. Data 22, 783 (1993), in general form",
    ),
    Form(
        "sublimation-ancillary", "sublimation ancillary equation", "ln(p/pt) = (Tt/T) sum n_i (1 - T/Tt)^t_i",
        Coefficients(("Tt", "pt"), series=("n", "t"), chosen=("Tt", "pt", "t")),
        _fold_series("Tt", "pt", 1), ("sublimation-pressure",),
        "R. Span, W. Wagner, J. Phys. Chem. Ref. Data 25, 1509 (1996), eq. (3.12), in general form",
    ),
    Form(
        "density-ln", "density ancillary, logarithm", "ln(rho/rhoc) = sum n_i (1 - T/Tc)^t_i [M in g/mol]",
        Coefficients(("Tc", "rhoc"), ("M",), ("n", "t"), chosen=("Tc", "rhoc", "M", "t")),
        _fold_series("Tc", "rhoc", 0), _DENSITY,
        "R. Span, W. Wagner, J. Phys. Chem. Ref. Data 25, 1509 (1996), eq. (3.14), in general form",
    ),
    Form(
        "density-power-reduced", "density ancillary, reduced", "rho/rhoc = 1 + sum n_i (1 - T/Tc)^t_i",
        Coefficients(("Tc", "rhoc"), series=("n", "t"), chosen=("Tc", "rhoc", "t")), _fold_density_reduced, _DENSITY,
        "W. Wagner, A. Pruss, J. Phys. Chem. Ref. Data 22, 783 (1993), in general form",
    ),
    Form(
        "density-power", "density ancillary, powers", "rho = c0 + sum n_i (1 - T/Tc)^t_i",
        Coefficients(("Tc", "c0"), series=("n", "t"), chosen=("Tc", "t")), _fold_density_power, _DENSITY,
        "R. Tillner-Roth, H. D. Baehr, J. Phys. Chem. Ref. Data 23, 657 (1994), in general form",
    ),
)  # fmt: skip
