"""Forms in which ln p is a sum of powers of T and a term in ln T.

Riedel's equation, Kirchhoff and Rankine's with its relatives, the Wexler
series, and polynomials in T or 1/T.
"""

from __future__ import annotations

import math
from collections.abc import Mapping
from typing import Any

import numpy as np

from registry.forms.form import LN10, Array, Coefficients, Fold, Folded, Form, Scratch, Units, numbered

__all__ = ["FORMS", "TemperaturePowers"]


class TemperaturePowers:
    """exp of c0 + c1 t + ... + d1/t + d2/t^2 + ... + log ln t + x t^e.

    Parameters are ``(rising, falling, log, x, e)``: `rising` starts with the
    constant term, `falling` with the one of 1/t.

    Examples
    --------
    Acetone by Riedel's equation (Perry's Handbook, 8th ed., Table 2-8) at 329.22 K, Pa:

    >>> kernel = TemperaturePowers()
    >>> p = ((69.006, 0.0, 6.2237e-6), (-5599.6,), -7.0985, 0.0, 1.0)
    >>> out = np.empty(1)
    >>> kernel.fill(np.array([329.22]), p, out, Scratch(1))
    >>> round(float(out[0]), 1)
    101094.6
    """

    stacks = False

    def fill(self, t: Array, p: tuple[Any, ...], out: Array, scratch: Scratch) -> None:
        rising, falling, log, x, e = p
        _horner(rising, t, out)
        work = scratch.take(0, t)
        if falling:
            inverse = scratch.take(1, t)
            np.divide(1.0, t, inverse)
            _horner(falling, inverse, work)
            np.multiply(work, inverse, work)
            np.add(out, work, out)
        if log:
            np.log(t, work)
            np.multiply(work, log, work)
            np.add(out, work, out)
        if x:
            np.power(t, e, work)
            np.multiply(work, x, work)
            np.add(out, work, out)
        np.exp(out, out)

    def rate(self, t: Array, p: tuple[Any, ...]) -> Array:
        rising, falling, log, x, e = p
        value = np.empty_like(t)
        self.fill(t, p, value, Scratch(t.size))
        slope = np.zeros_like(t)
        for power in range(len(rising) - 1, 0, -1):
            slope = slope * t + power * rising[power]
        inverse = 1.0 / t
        tail = np.zeros_like(t)
        for power in range(len(falling), 0, -1):
            tail = (tail + power * falling[power - 1]) * inverse
        slope = slope - tail * inverse + log * inverse
        if x:
            slope = slope + x * e * np.power(t, e - 1.0)
        return value * slope

    def domain(self, p: tuple[Any, ...]) -> tuple[float, float]:
        return 0.0, math.inf


def _horner(coefficients: tuple[float, ...], x: Array, out: Array) -> None:
    out.fill(coefficients[-1])
    for c in coefficients[-2::-1]:
        np.multiply(out, x, out)
        if c:
            np.add(out, c, out)


POWERS = TemperaturePowers()


def _fold(rising: tuple[str, ...], falling: tuple[str, ...] = (), log: str = "", base: float = 1.0) -> Fold:
    """A fold that takes the named coefficients; `base` is ln 10 for forms in log10 p."""

    def fold(c: Mapping[str, float], units: Units) -> Folded:
        up = tuple(base * c.get(name, 0.0) for name in rising)
        while len(up) > 1 and not up[-1]:
            up = up[:-1]
        down = tuple(base * c.get(name, 0.0) for name in falling)
        # C log10 T in log10 p is C ln T in ln p
        return Folded(POWERS, (up, down, c[log] if log else 0.0, 0.0, 1.0))

    return fold


def _fold_riedel(c: Mapping[str, float], units: Units) -> Folded:
    power = c["C5"]
    if power in (1.0, 2.0, 3.0, 4.0, 5.0, 6.0):  # by multiplication: quicker, and as exact
        rising = (c["C1"], *([0.0] * (int(power) - 1)), c["C4"])
        return Folded(POWERS, (rising, (c["C2"],), c["C3"], 0.0, 1.0))
    return Folded(POWERS, ((c["C1"],), (c["C2"],), c["C3"], c["C4"], power))


def _fold_counted(stem: str, first: int, rising: bool) -> Fold:
    """A fold for polynomials whose length the source chooses."""

    def fold(c: Mapping[str, float], units: Units) -> Folded:
        values = numbered(c, stem, first)
        if rising:
            return Folded(POWERS, (values, (), 0.0, 0.0, 1.0))
        return Folded(POWERS, (values[:1], values[1:], 0.0, 0.0, 1.0))

    return fold


_PRESSURES = ("vapor-pressure", "sublimation-pressure")
_KIRCHHOFF = "G. Kirchhoff, Ann. Phys. 103, 177 (1858); W. J. M. Rankine, Phil. Mag. 31, 200 (1866) (from memory)"
_WEXLER = "A. Wexler, J. Res. Natl. Bur. Stand. 80A, 775 (1976)"

FORMS = (
    Form(
        "riedel", "Riedel", "ln p = C1 + C2/T + C3 ln T + C4 T^C5",
        Coefficients(("C1", "C2", "C3", "C4", "C5"), chosen=("C5",)), _fold_riedel, _PRESSURES,
        "L. Riedel, Chem.-Ing.-Tech. 26, 83 (1954); Perry's Chemical Engineers' Handbook, 8th ed. (2008), Table 2-8",
    ),
    Form(
        "kirchhoff-rankine-ln", "Kirchhoff-Rankine, base e", "ln p = A + B/T + C ln T",
        Coefficients(("A", "B", "C")), _fold(("A",), ("B",), "C"), _PRESSURES, _KIRCHHOFF,
    ),
    Form(
        "kirchhoff-rankine-log10", "Kirchhoff-Rankine, base 10", "log10 p = A + B/T + C log10 T [+ D T]",
        Coefficients(("A", "B", "C"), ("D",)), _fold(("A", "D"), ("B",), "C", LN10), _PRESSURES, _KIRCHHOFF,
    ),
    Form(
        "reciprocal-quadratic-log10", "1/T with linear and quadratic T, base 10", "log10 p = A + B/T [+ C T [+ D T^2]]",
        Coefficients(("A", "B"), ("C", "D")), _fold(("A", "C", "D"), ("B",), base=LN10), _PRESSURES,
        "International Critical Tables 3, 207; W. F. Giauque, C. J. Egan, J. Chem. Phys. 5, 45 (1937)",
    ),
    Form(
        "sonntag", "Sonntag", "ln p = a/T + b + c T + d T^2 + e ln T",
        Coefficients(("a", "b", "c", "d", "e")), _fold(("b", "c", "d"), ("a",), "e"), _PRESSURES,
        "D. Sonntag, Meteorol. Z. 3, 51 (1994)",
    ),
    Form(
        "murphy-koop-ice", "Murphy-Koop, ice", "ln p = a0 + a1/T + a2 ln T + a3 T",
        Coefficients(("a0", "a1", "a2", "a3")), _fold(("a0", "a3"), ("a1",), "a2"), _PRESSURES,
        "D. M. Murphy, T. Koop, Q. J. R. Meteorol. Soc. 131, 1539 (2005), eq. (7)",
    ),
    Form(
        "hyland-wexler", "Hyland-Wexler", "ln p = cm1/T + c0 + c1 T + c2 T^2 + c3 T^3 + c4 T^4 + cl ln T",
        Coefficients(("cm1", "c0", "c1", "c2", "c3", "c4", "cl")),
        _fold(("c0", "c1", "c2", "c3", "c4"), ("cm1",), "cl"), _PRESSURES,
        "R. W. Hyland, A. Wexler, ASHRAE Trans. 89(2A), 500 (1983)",
    ),
    Form(
        "wexler", "Wexler series", "ln p = g0/T^2 + g1/T + g2 + g3 T + g4 T^2 + g5 T^3 + g6 T^4 + g7 ln T",
        Coefficients(tuple(f"g{i}" for i in range(8))),
        _fold(("g2", "g3", "g4", "g5", "g6"), ("g1", "g0"), "g7"), _PRESSURES, _WEXLER,
    ),
    Form(
        "polynomial-reciprocal-ln", "polynomial in 1/T, base e", "ln p = A0 + A1/T + A2/T^2 + ...",
        Coefficients(("A0",), series=("A",)), _fold_counted("A", 0, rising=False), _PRESSURES,
        "N. Fray, B. Schmitt, Planet. Space Sci. 57, 2053 (2009)",
    ),
    Form(
        "polynomial-ln", "polynomial in T, base e", "ln p = a0 + a1 T + a2 T^2 + ...",
        Coefficients(("a0",), series=("a",)), _fold_counted("a", 0, rising=True), _PRESSURES,
        "A. Faghri, Heat Pipe Science and Technology (1995) (from memory)",
    ),
)  # fmt: skip
