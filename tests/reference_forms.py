"""Every equation form once more, from its equation text alone, in 50 digits.

A reference takes the temperature as printed, the coefficients as printed (as
the doubles the program sees) and what the printed units are worth; it gives
the value in the printed unit. Nothing here knows how the program computes.
"""

from __future__ import annotations

from collections.abc import Callable, Mapping
from fractions import Fraction
from typing import TYPE_CHECKING, NamedTuple

import mpmath
from mpmath import mp, mpf

from registry.quantities import UNITS

if TYPE_CHECKING:
    from registry.records import Correlation

__all__ = ["DIGITS", "REFERENCES", "Printed", "double", "exact", "kechin_temperature", "reference_of"]

DIGITS = 50
# exact since 2019: SI Brochure, 9th edition
GAS_CONSTANT = "8.31446261815324"

Coefficients = Mapping[str, mpf]


class Printed(NamedTuple):
    """What the printed units are worth.

    Attributes
    ----------
    kelvin : callable
        The kelvin temperature of a printed one.
    si : mpf
        SI units in one printed unit of the value.
    """

    kelvin: Callable[[mpf], mpf]
    si: mpf


Reference = Callable[[mpf, Coefficients, Printed], mpf]


def _plain(equation: Callable[[mpf, Coefficients], mpf]) -> Reference:
    """An equation in which the units of the coefficients do not show."""
    return lambda t, c, printed: equation(t, c)


def _series(c: Coefficients, stem: str, first: int = 1) -> list[mpf]:
    values = []
    while f"{stem}{first + len(values)}" in c:
        values.append(c[f"{stem}{first + len(values)}"])
    return values


def _pairs(c: Coefficients, one: str, other: str) -> list[tuple[mpf, mpf]]:
    return list(zip(_series(c, one), _series(c, other), strict=True))


def _root(f: Callable[[mpf], mpf], low: mpf, high: mpf) -> mpf:
    """The root between two bounds, to the working precision."""
    return mpmath.findroot(f, (low, high), solver="anderson", tol=mpf(10) ** (-2 * mp.dps + 12), maxsteps=500)


def _clausius_clapeyron(t: mpf, c: Coefficients, printed: Printed) -> mpf:
    inverse = 1 / printed.kelvin(t) - 1 / printed.kelvin(c["T0"])
    return c["p0"] * mp.exp(-c["H"] / mpf(GAS_CONSTANT) * inverse)


def _clapeyron_melting(t: mpf, c: Coefficients, printed: Printed) -> mpf:
    # J/mol over cm3/mol is 1e6 Pa
    return c["p0"] + c["H"] / c["dV"] * 10**6 / printed.si * mp.log(t / c["T0"])


def _rackett(t: mpf, c: Coefficients, printed: Printed) -> mpf:
    # R Tc counts in kelvin whatever the printed unit; J/mol over MPa is cm3/mol; 1000 cm3/dm3
    unit = mpf(GAS_CONSTANT) * printed.kelvin(c["Tc"]) / c["pc"]
    return 1000 / (unit * c["ZRA"] ** (1 + (1 - t / c["Tc"]) ** (mpf(2) / 7)))


def _wagner(c: Coefficients, t: mpf, third: mpf, fourth: mpf) -> mpf:
    reduced = t / c["Tc"]
    tau = 1 - reduced
    total = c["a"] * tau + c["b"] * tau ** mpf("1.5") + c["c"] * tau**third + c["d"] * tau**fourth
    return c["pc"] * mp.exp(total / reduced)


def _tau_sum(t: mpf, c: Coefficients, reference: str) -> mpf:
    tau = 1 - t / c[reference]
    return mpmath.fsum(n * tau**e for n, e in _pairs(c, "n", "t"))


def _if97(t: mpf, c: Coefficients) -> mpf:
    n = [mpf(0), *_series(c, "n")]
    v = t + n[9] / (t - n[10])
    a, b, cc = v**2 + n[1] * v + n[2], n[3] * v**2 + n[4] * v + n[5], n[6] * v**2 + n[7] * v + n[8]
    return (2 * cc / (-b + mp.sqrt(b**2 - 4 * a * cc))) ** 4


def _goff_gratch(t: mpf, c: Coefficients) -> mpf:
    u = c["Ts"] / t
    exponent = (
        -c["k1"] * (u - 1)
        + c["k2"] * mp.log10(u)
        - c["k3"] * (mpf(10) ** (c["k4"] * (1 - 1 / u)) - 1)
        + c["k5"] * (mpf(10) ** (-c["k6"] * (u - 1)) - 1)
    )
    return c["ps"] * mpf(10) ** exponent


def _wmo_goff(t: mpf, c: Coefficients) -> mpf:
    u = c["Tt"] / t
    exponent = (
        c["k1"] * (1 - u)
        - c["k2"] * mp.log10(1 / u)
        + c["k3"] * (1 - mpf(10) ** (-c["k4"] * (1 / u - 1)))
        + c["k5"] * (mpf(10) ** (c["k6"] * (1 - u)) - 1)
        + c["k7"]
    )
    return mpf(10) ** exponent


def _murphy_koop_liquid(t: mpf, c: Coefficients) -> mpf:
    first = c["a0"] + c["a1"] / t + c["a2"] * mp.log(t) + c["a3"] * t
    second = c["c0"] + c["c1"] / t + c["c2"] * mp.log(t) + c["c3"] * t
    return mp.exp(first + mp.tanh(c["b0"] * (t - c["b1"])) * second)


def _chebyshev(t: mpf, c: Coefficients) -> mpf:
    x = (2 * t - (c["Tmax"] + c["Tmin"])) / (c["Tmax"] - c["Tmin"])
    total = c["a0"] / 2 + mpmath.fsum(a * mpmath.chebyt(s, x) for s, a in enumerate(_series(c, "a"), 1))
    return mpf(10) ** (total / t)


def _thodos(t: mpf, c: Coefficients) -> mpf:
    """The lower root in y = ln p: left of the maximum of y - k e^y, which lies at -ln k."""
    explicit = c["A"] - c["B"] / t + c["C"] * mp.log(t)
    k = c["D"] / t**2
    return mp.exp(_root(lambda y: y - explicit - k * mp.exp(y), explicit - 1, -mp.log(k)))


def helium_temperature(p: mpf, c: Coefficients) -> mpf:
    """The ITS-90 helium equation as printed: the temperature at a pressure."""
    x = (mp.log(p) - c["B"]) / c["C"]
    return mpmath.fsum(a * x**i for i, a in enumerate(_series(c, "A", 0)))


def _helium(t: mpf, c: Coefficients) -> mpf:
    # x runs from -1 to 1 over the range of each of the three printed sets
    log = _root(lambda y: helium_temperature(mp.exp(y), c) - t, c["B"] - c["C"] * 1.05, c["B"] + c["C"] * 1.05)
    return mp.exp(log)


def kechin_temperature(p: mpf, c: Coefficients) -> mpf:
    """Kechin's equation as printed: the melting temperature at a pressure."""
    return c["T0"] * (1 + p / c["a"]) ** c["b"] * mp.exp(-c["c"] * p)


def _kechin(t: mpf, c: Coefficients) -> mpf:
    """The pressure on the rising branch, which ends at p = b/c - a."""
    top = c["b"] / c["c"] - c["a"]
    return _root(lambda p: mp.log(kechin_temperature(p, c) / t), -c["a"] / 2, top)


def _antoine(c: Coefficients, u: mpf, base: mpf) -> mpf:
    return base ** (c["A"] - c["B"] / u)


def _hyland_wexler(t: mpf, c: Coefficients) -> mpf:
    powers = mpmath.fsum(c[f"c{i}"] * t**i for i in range(5))
    return mp.exp(c["cm1"] / t + powers + c["cl"] * mp.log(t))


def _ten(x: mpf) -> mpf:
    return mpf(10) ** x


_PLAIN: dict[str, Callable[[mpf, Coefficients], mpf]] = {
    "antoine-log10": lambda t, c: _antoine(c, t + c["C"], mpf(10)),
    "antoine-log10-minus": lambda t, c: _antoine(c, t - c["C"], mpf(10)),
    "antoine-ln": lambda t, c: _antoine(c, t + c["C"], mp.e),
    "antoine-ln-minus": lambda t, c: _antoine(c, t - c["C"], mp.e),
    "august-log10": lambda t, c: _antoine(c, t, mpf(10)),
    "august-ln": lambda t, c: _antoine(c, t, mp.e),
    "magnus": lambda t, c: c["p0"] * mp.exp(c["a"] * t / (c["b"] + t)),
    "riedel": lambda t, c: mp.exp(c["C1"] + c["C2"] / t + c["C3"] * mp.log(t) + c["C4"] * t ** c["C5"]),
    "kirchhoff-rankine-ln": lambda t, c: mp.exp(c["A"] + c["B"] / t + c["C"] * mp.log(t)),
    "kirchhoff-rankine-log10": lambda t, c: _ten(c["A"] + c["B"] / t + c["C"] * mp.log10(t) + c.get("D", 0) * t),
    "reciprocal-quadratic-log10": lambda t, c: _ten(c["A"] + c["B"] / t + c.get("C", 0) * t + c.get("D", 0) * t**2),
    "sonntag": lambda t, c: mp.exp(c["a"] / t + c["b"] + c["c"] * t + c["d"] * t**2 + c["e"] * mp.log(t)),
    "murphy-koop-ice": lambda t, c: mp.exp(c["a0"] + c["a1"] / t + c["a2"] * mp.log(t) + c["a3"] * t),
    "hyland-wexler": _hyland_wexler,
    "wexler": lambda t, c: mp.exp(mpmath.fsum(c[f"g{i}"] * t ** (i - 2) for i in range(7)) + c["g7"] * mp.log(t)),
    "polynomial-reciprocal-ln": lambda t, c: mp.exp(mpmath.fsum(a / t**i for i, a in enumerate(_series(c, "A", 0)))),
    "polynomial-ln": lambda t, c: mp.exp(mpmath.fsum(a * t**i for i, a in enumerate(_series(c, "a", 0)))),
    "wagner-3-6": lambda t, c: _wagner(c, t, mpf(3), mpf(6)),
    "wagner-2.5-5": lambda t, c: _wagner(c, t, mpf("2.5"), mpf(5)),
    "saturation-ancillary": lambda t, c: c["pc"] * mp.exp(c["Tc"] / t * _tau_sum(t, c, "Tc")),
    "sublimation-ancillary": lambda t, c: c["pt"] * mp.exp(c["Tt"] / t * _tau_sum(t, c, "Tt")),
    "density-ln": lambda t, c: c["rhoc"] * mp.exp(_tau_sum(t, c, "Tc")),
    "density-power-reduced": lambda t, c: c["rhoc"] * (1 + _tau_sum(t, c, "Tc")),
    "density-power": lambda t, c: c["c0"] + _tau_sum(t, c, "Tc"),
    "cox": lambda t, c: c["p0"] * mp.exp((1 - c["T0"] / t) * mp.exp(c["A0"] + c["A1"] * t + c["A2"] * t**2)),
    "chebyshev-log10": _chebyshev,
    "frost-kalkwarf-thodos": _thodos,
    "helium-its90": _helium,
    "goff-gratch": _goff_gratch,
    "wmo-goff": _wmo_goff,
    "murphy-koop-liquid": _murphy_koop_liquid,
    "iapws-if97-saturation": _if97,
    "iapws-sublimation": lambda t, c: (
        c["pt"] * mp.exp(c["Tt"] / t * mpmath.fsum(a * (t / c["Tt"]) ** b for a, b in _pairs(c, "a", "b")))
    ),
    "simon-glatzel": lambda t, c: c["p0"] + c["a"] * ((t / c["T0"]) ** c["c"] - 1),
    "simon-glatzel-sum": lambda t, c: (
        c["pt"] * (1 + mpmath.fsum(n * ((t / c["Tt"]) ** e - 1) for n, e in _pairs(c, "n", "t")))
    ),
    "simon-glatzel-power": lambda t, c: c["a"] * t ** c["c"] + c["b"],
    "iapws-melting-ih": lambda t, c: (
        c["pt"] * (1 + mpmath.fsum(a * (1 - (t / c["Tt"]) ** b) for a, b in _pairs(c, "a", "b")))
    ),
    "iapws-melting-simon": lambda t, c: c["p0"] * (1 - c["a"] * (1 - (t / c["T0"]) ** c["b"])),
    "iapws-melting-vii": lambda t, c: (
        c["p0"]
        * mp.exp(c["a1"] * (1 - c["T0"] / t) + c["a2"] * (1 - (t / c["T0"]) ** 5) + c["a3"] * (1 - (t / c["T0"]) ** 22))
    ),
    "melting-polynomial": lambda t, c: c["pt"] * (1 + c["a1"] * (t / c["Tt"] - 1) + c["a2"] * (t / c["Tt"] - 1) ** 2),
    "kechin": _kechin,
    "majer-svoboda": lambda t, c: c["A"] * mp.exp(-c["alpha"] * t / c["Tc"]) * (1 - t / c["Tc"]) ** c["beta"],
    "watson": lambda t, c: c["H1"] * ((1 - t / c["Tc"]) / (1 - c["T1"] / c["Tc"])) ** c["n"],
}

REFERENCES: dict[str, Reference] = {
    **{form: _plain(equation) for form, equation in _PLAIN.items()},
    "clausius-clapeyron": _clausius_clapeyron,
    "clapeyron-melting": _clapeyron_melting,
    "rackett": _rackett,
}


def double(text: str) -> float:
    """The double nearest to a printed number, without the program's own reader."""
    return float(Fraction(text)) if "/" in text else float(text)


def exact(value: Fraction) -> mpf:
    """A fraction, rounded once to the working precision."""
    return mpf(value.numerator) / value.denominator


def reference_of(record: Correlation, molar_mass: float = 1.0) -> Callable[[mpf], mpf]:
    """The SI value at a kelvin temperature in 50 digits, units by exact fractions."""
    unit, temperature = UNITS[record.value_unit], UNITS[record.temperature_unit]
    coefficients = {name: mpf(double(text)) for name, text in record.coefficients.items()}
    mass = coefficients.get("M", mpf(molar_mass)) if unit.per_molar_mass else mpf(1)
    si = exact(unit.to_si(Fraction(1))) * mass
    factor, shift = exact(temperature.factor), exact(temperature.shift)
    printed = Printed(lambda t: (t + shift) * factor, si)
    equation = REFERENCES[record.form]
    return lambda kelvin: equation(kelvin / factor - shift, coefficients, printed) * si
