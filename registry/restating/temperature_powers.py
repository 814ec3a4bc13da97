"""Restating the forms in which log p is a sum of powers of T and a term in log T.

K and degR differ by a factor: each coefficient takes its power, and the
logarithm leaves a constant. To another base every term but that in log T is
multiplied; the sum then goes to the first form that has a place for each term.
"""

from __future__ import annotations

import re
from collections.abc import Mapping
from dataclasses import dataclass
from fractions import Fraction

from registry.forms.catalogue import FORMS
from registry.restating.change import Change, Impossible, Numbers, Rule, Statement
from registry.restating.logarithms import LN10, find_log, power
from registry.restating.reciprocal import Line, write_line

__all__ = ["RULES"]

LOG = "log T"
Term = Fraction | str
"""A power of T, or `LOG`."""


@dataclass(frozen=True)
class Places:
    """Where a form keeps its terms.

    Attributes
    ----------
    base : str
        Its logarithm.
    fixed : mapping of int or str to str
        The coefficient of each power of T, and of the logarithm.
    optional : tuple of str
        Coefficients that may be left out.
    free : tuple of str
        A coefficient and the exponent that goes with it, chosen by the source.
    counted : tuple
        The stem of numbered coefficients and the sign of their powers.
    """

    base: str
    fixed: Mapping[int | str, str]
    optional: tuple[str, ...] = ()
    free: tuple[str, str] | tuple[()] = ()
    counted: tuple[str, int] | tuple[()] = ()

    def read(self, c: Numbers) -> dict[Term, Fraction]:
        """The terms that coefficients make."""
        terms: dict[Term, Fraction] = {}
        named = [(_term(place), c[name]) for place, name in self._all_fixed(c).items() if name in c]
        if self.free:
            named.append((c[self.free[1]], c[self.free[0]]))
        for term, value in named:
            terms[term] = terms.get(term, Fraction(0)) + value
        return terms

    def write(self, terms: Mapping[Term, Fraction], given: Numbers) -> dict[str, Fraction] | None:
        """Terms as coefficients; None if a term has no place.

        `given` are the coefficients of the same form, whose choice of optional
        names and exponents is kept; empty for another form.
        """
        fixed = {_term(place): name for place, name in self._all_fixed(given).items()}
        left = {term: value for term, value in terms.items() if term not in fixed and value}
        new = {name: terms.get(term, Fraction(0)) for term, name in fixed.items()}
        if self.free:
            coefficient, exponent = self.free
            new[coefficient], new[exponent] = Fraction(0), given.get(exponent, Fraction(1))
            if len(left) == 1 and not isinstance(only := next(iter(left)), str):
                new[coefficient], new[exponent] = left.pop(only), only
        if left:
            return None
        return {n: v for n, v in new.items() if n in given or v or n not in self.optional}

    def _all_fixed(self, c: Numbers) -> dict[int | str, str]:
        if not self.counted:
            return dict(self.fixed)
        stem, sign = self.counted
        numbers = [int(name[len(stem) :]) for name in c if re.fullmatch(rf"{stem}[0-9]+", name)]
        return {sign * number: f"{stem}{number}" for number in sorted(numbers)}


def _term(place: int | str) -> Term:
    return place if isinstance(place, str) else Fraction(place)


PLACES = {
    "kirchhoff-rankine-ln": Places("ln", {0: "A", -1: "B", LOG: "C"}),
    "kirchhoff-rankine-log10": Places("log10", {0: "A", -1: "B", LOG: "C", 1: "D"}, ("D",)),
    "reciprocal-quadratic-log10": Places("log10", {0: "A", -1: "B", 1: "C", 2: "D"}, ("C", "D")),
    "riedel": Places("ln", {0: "C1", -1: "C2", LOG: "C3"}, free=("C4", "C5")),
    "sonntag": Places("ln", {-1: "a", 0: "b", 1: "c", 2: "d", LOG: "e"}),
    "murphy-koop-ice": Places("ln", {0: "a0", -1: "a1", LOG: "a2", 1: "a3"}),
    "hyland-wexler": Places("ln", {-1: "cm1", 0: "c0", 1: "c1", 2: "c2", 3: "c3", 4: "c4", LOG: "cl"}),
    "wexler": Places("ln", {**{i - 2: f"g{i}" for i in range(7)}, LOG: "g7"}),
    "polynomial-reciprocal-ln": Places("ln", {}, counted=("A", -1)),
    "polynomial-ln": Places("ln", {}, counted=("a", 1)),
}

SIBLINGS = {
    "ln": ("kirchhoff-rankine-ln", "riedel", "sonntag", "hyland-wexler", "wexler"),
    "log10": ("kirchhoff-rankine-log10", "reciprocal-quadratic-log10"),
}
"""Where a sum goes whose own form is written to the other base; the first that can hold it."""


def _scale(terms: Mapping[Term, Fraction], base: str, change: Change) -> dict[Term, Fraction]:
    """The terms in the new units, absolute ones, to the same base."""
    new = {t: v if isinstance(t, str) else v * power(change.ratio, -t) for t, v in terms.items()}
    constant = find_log(change.value, base) - terms.get(LOG, Fraction(0)) * find_log(change.ratio, base)
    new[Fraction(0)] = new.get(Fraction(0), Fraction(0)) + constant
    return new


def _rebase(terms: Mapping[Term, Fraction], base: str) -> dict[Term, Fraction]:
    """The terms to the base given from the other one; C log10 T in log10 p is C ln T in ln p."""
    stretch = LN10 if base == "ln" else 1 / LN10
    return {term: value if term == LOG else value * stretch for term, value in terms.items()}


def _restate(form: str, c: Numbers, change: Change) -> Statement:
    places = PLACES[form]
    terms = places.read(c)
    base = change.base or places.base
    if change.new_zero or base != places.base:
        if {term for term, value in terms.items() if value} <= {Fraction(0), Fraction(-1)}:
            line = Line(places.base, terms[Fraction(0)], -terms.get(Fraction(-1), Fraction(0)), Fraction(0))
            why = f"With only a constant and a term in 1/T it is {_name_line(change)} equation."
            return write_line(line, change, why)
        if change.new_zero:
            raise Impossible("zero")
    scaled = _scale(terms, places.base, change)
    if base == places.base:
        new = places.write(scaled, c)
        assert new is not None  # the same terms
        return Statement(form, {name: new[name] for name in c})
    return _write_sibling(_rebase(scaled, base), base)


def _name_line(change: Change) -> str:
    return "Antoine's" if change.new_zero else "August's"


def _write_sibling(terms: Mapping[Term, Fraction], base: str) -> Statement:
    for form in SIBLINGS[base]:
        new = PLACES[form].write(terms, {})
        if new is not None:
            return Statement(form, new, f"With {base} its terms are those of {FORMS[form].title} ({form}).")
    raise Impossible("base")


def _rule(form: str, places: Places) -> Rule:
    return Rule(places.base, lambda c, change: _restate(form, c, change))


RULES = {form: _rule(form, places) for form, places in PLACES.items()}
