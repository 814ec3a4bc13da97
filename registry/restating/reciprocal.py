"""Restating the forms that are exp(a - b/(T + c)), in which any unit of temperature may count."""

from __future__ import annotations

from dataclasses import dataclass
from fractions import Fraction

from registry.forms.reciprocal import GAS_CONSTANT
from registry.restating.change import Change, Numbers, Rule, Statement
from registry.restating.logarithms import LN10, exp, find_log

__all__ = ["RULES", "Line", "write_line"]

R = Fraction(repr(GAS_CONSTANT))


@dataclass(frozen=True)
class Line:
    """log p = A - B/(t + C) to one base, in one unit of the value and of t."""

    base: str
    a: Fraction
    b: Fraction
    c: Fraction

    def restate(self, change: Change) -> Line:
        """The same line in the units and to the base asked for."""
        base = change.base or self.base
        stretch = {("ln", "log10"): 1 / LN10, ("log10", "ln"): LN10}.get((self.base, base), Fraction(1))
        return Line(
            base,
            self.a * stretch + find_log(change.value, base),
            self.b * stretch * change.ratio,
            change.new_zero + change.ratio * (self.c - change.old_zero),
        )


def write_line(line: Line, change: Change, remark: str = "") -> Statement:
    """A line in new units as August's equation, or as Antoine's where it needs a C.

    Parameters
    ----------
    line : Line
        As recorded.
    change : Change
        What is asked for.
    remark : str
        Why the form is another one.

    Returns
    -------
    Statement
        With the coefficients that the form takes.
    """
    new = line.restate(change)
    if not new.c:
        return Statement(f"august-{new.base}", {"A": new.a, "B": new.b}, remark)
    return _write_antoine(new, remark=remark)


def _write_antoine(line: Line, minus: bool = False, remark: str = "") -> Statement:
    ending = "-minus" if minus else ""
    c = -line.c if minus else line.c
    return Statement(f"antoine-{line.base}{ending}", {"A": line.a, "B": line.b, "C": c}, remark)


def _rule_antoine(base: str, minus: bool = False) -> Rule:
    def apply(c: Numbers, change: Change) -> Statement:
        line = Line(base, c["A"], c["B"], -c["C"] if minus else c["C"])
        return _write_antoine(line.restate(change), minus)

    return Rule(base, apply)


def _rule_august(base: str) -> Rule:
    def apply(c: Numbers, change: Change) -> Statement:
        why = (
            "August's equation counts from absolute zero; from another zero it is Antoine's." if change.new_zero else ""
        )
        return write_line(Line(base, c["A"], c["B"], Fraction(0)), change, remark=why)

    return Rule(base, apply)


def _restate_clausius_clapeyron(c: Numbers, change: Change) -> Statement:
    if change.base != "log10":
        new = {"T0": change.temperature(c["T0"]), "p0": c["p0"] * change.value, "H": c["H"]}
        return Statement("clausius-clapeyron", new, "H stays in J/mol.")
    b = c["H"] / (R * LN10 * change.old_kelvin)
    a = find_log(c["p0"], "log10") + b / (c["T0"] + change.old_zero)
    name = "Antoine's" if change.new_zero else "August's"
    why = f"The form is written with ln; to base 10 it is {name} equation, B from H/(R ln 10)."
    return write_line(Line("log10", a, b, change.old_zero), change, remark=why)


def _restate_magnus(c: Numbers, change: Change) -> Statement:
    b = change.new_zero + change.ratio * (c["b"] - change.old_zero)
    if change.base != "log10" and not change.moves_zero:
        return Statement("magnus", {"p0": c["p0"] * change.value, "a": c["a"], "b": b})
    if change.base != "log10" and b > 0:
        a = c["a"] * c["b"] * change.ratio / b
        p0 = c["p0"] * change.value * exp(c["a"] - a)
        return Statement("magnus", {"p0": p0, "a": a, "b": b}, "p0 is the pressure at the new zero.")
    line = Line("ln", find_log(c["p0"], "ln") + c["a"], c["a"] * c["b"], c["b"])
    why = "The form is exp, base e; to base 10 it is Antoine's equation."
    if change.base != "log10":
        why = "The new zero lies where the form has no value, so p0 would mean nothing: written as Antoine's equation."
    return _write_antoine(line.restate(change), remark=why)


RULES = {
    "antoine-log10": _rule_antoine("log10"),
    "antoine-log10-minus": _rule_antoine("log10", minus=True),
    "antoine-ln": _rule_antoine("ln"),
    "antoine-ln-minus": _rule_antoine("ln", minus=True),
    "august-log10": _rule_august("log10"),
    "august-ln": _rule_august("ln"),
    "clausius-clapeyron": Rule("ln", _restate_clausius_clapeyron),
    "magnus": Rule("ln", _restate_magnus),
}
