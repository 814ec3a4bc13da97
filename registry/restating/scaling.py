"""Restating the forms whose coefficients each take powers of the two units.

The number of a coefficient is multiplied by a power of the factor of the value
and one of the factor of the temperature; a constant beside a logarithm gains
the logarithm of a factor. They count from absolute zero and have no second
printing to another base.
"""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass, field
from fractions import Fraction

from registry.restating.change import Change, Impossible, Numbers, Rule, Statement
from registry.restating.logarithms import find_log, power

__all__ = ["RULES"]


@dataclass(frozen=True)
class Powers:
    """The powers that one coefficient takes: of the value, and of the temperature.

    `against` names a coefficient that is the exponent of T beside this one.
    """

    value: int = 0
    temperature: int = 0
    against: str = ""

    def apply(self, number: Fraction, c: Numbers, change: Change) -> Fraction:
        """The number in the new units."""
        exponent = self.temperature - (c[self.against] if self.against else 0)
        return number * change.value**self.value * power(change.ratio, Fraction(exponent))


VALUE = Powers(value=1)
PER_VALUE = Powers(value=-1)
T = Powers(temperature=1)
T2 = Powers(temperature=2)
PER_T = Powers(temperature=-1)
PER_T2 = Powers(temperature=-2)


@dataclass(frozen=True)
class Constant:
    """A constant beside a logarithm: gains that of the value's factor, loses `log` times that of the ratio."""

    value: bool = True
    log: str = ""


@dataclass(frozen=True)
class Scaling:
    """The row of one form."""

    base: str
    powers: Mapping[str, Powers] = field(default_factory=dict)
    constants: Mapping[str, Constant] = field(default_factory=dict)
    remark: str = ""

    def restate(self, form: str, c: Numbers, change: Change) -> Statement:
        """The coefficients in the new units."""
        if change.new_zero:
            raise Impossible("zero")
        if change.base not in ("", self.base):
            raise Impossible("base")
        new = {name: self.powers[name].apply(x, c, change) if name in self.powers else x for name, x in c.items()}
        for name, constant in self.constants.items():
            if constant.value:
                new[name] += find_log(change.value, self.base)
            if constant.log:
                new[name] -= c[constant.log] * find_log(change.ratio, self.base)
        return Statement(form, new, self.remark)


def _restate_chebyshev(c: Numbers, change: Change) -> Statement:
    """T log10 k, which another unit adds, is linear in x: it goes into a0 and a1."""
    statement = Scaling("log10", dict.fromkeys(c, T)).restate("chebyshev-log10", c, change)
    new, log = statement.coefficients, find_log(change.value, "log10")
    new["a0"] += (new["Tmax"] + new["Tmin"]) * log
    new["a1"] += (new["Tmax"] - new["Tmin"]) / 2 * log
    return statement


_TC_PC = {"Tc": T, "pc": VALUE}
_TT_PT = {"Tt": T, "pt": VALUE}
_T0_P0 = {"T0": T, "p0": VALUE}
_TC_RHOC = {"Tc": T, "rhoc": VALUE}
_IF97 = {"n1": T, "n2": T2, "n4": T, "n5": T2, "n7": T, "n8": T2, "n9": T2, "n10": T}
_MURPHY = {"a1": T, "a3": PER_T, "b0": PER_T, "b1": T, "c1": T, "c3": PER_T}
_CRITICAL = "In R Tc/pc the temperature counts in kelvin and pc in MPa, whatever the unit of T."

ROWS = {
    "wagner-3-6": Scaling("ln", _TC_PC),
    "wagner-2.5-5": Scaling("ln", _TC_PC),
    "saturation-ancillary": Scaling("ln", _TC_PC),
    "sublimation-ancillary": Scaling("ln", _TT_PT),
    "density-ln": Scaling("ln", _TC_RHOC),
    "density-power-reduced": Scaling("", _TC_RHOC),
    # c0 and each n are densities
    "density-power": Scaling("", {"Tc": T, "c0": VALUE, **{f"n{i}": VALUE for i in range(1, 100)}}),
    "cox": Scaling("ln", {**_T0_P0, "A1": PER_T, "A2": PER_T2}),
    "frost-kalkwarf-thodos": Scaling("ln", {"B": T, "D": Powers(-1, 2)}, {"A": Constant(log="C")}),
    "helium-its90": Scaling("ln", {f"A{i}": T for i in range(10)}),
    "goff-gratch": Scaling("log10", {"Ts": T, "ps": VALUE}),
    "wmo-goff": Scaling("log10", {"Tt": T}, {"k7": Constant()}),
    "murphy-koop-liquid": Scaling("ln", _MURPHY, {"a0": Constant(log="a2"), "c0": Constant(value=False, log="c2")}),
    "iapws-if97-saturation": Scaling("", _IF97),
    "iapws-sublimation": Scaling("ln", _TT_PT),
    "simon-glatzel": Scaling("", {**_T0_P0, "a": VALUE}),
    "simon-glatzel-sum": Scaling("", _TT_PT),
    "simon-glatzel-power": Scaling("", {"a": Powers(1, against="c"), "b": VALUE}),
    "iapws-melting-ih": Scaling("", _TT_PT),
    "iapws-melting-simon": Scaling("", _T0_P0),
    "iapws-melting-vii": Scaling("ln", _T0_P0),
    "melting-polynomial": Scaling("", _TT_PT),
    "clapeyron-melting": Scaling("", _T0_P0, remark="H stays in J/mol and dV in cm3/mol."),
    "kechin": Scaling("", {"T0": T, "a": VALUE, "c": PER_VALUE}),
    "majer-svoboda": Scaling("", {"Tc": T, "A": VALUE}),
    "watson": Scaling("", {"Tc": T, "T1": T, "H1": VALUE}),
    "rackett": Scaling("", {"Tc": T}, remark=_CRITICAL),
}


def _rule(form: str, row: Scaling) -> Rule:
    return Rule(row.base, lambda c, change: row.restate(form, c, change))


RULES = {
    **{form: _rule(form, row) for form, row in ROWS.items()},
    "chebyshev-log10": Rule("log10", _restate_chebyshev),
}
