"""What is asked of a form, and what a form makes of it."""

from __future__ import annotations

from collections.abc import Callable, Mapping
from dataclasses import dataclass
from fractions import Fraction
from typing import NamedTuple

__all__ = ["Change", "Impossible", "Numbers", "Rule", "Statement"]

Numbers = Mapping[str, Fraction]


class Impossible(Exception):
    """A form that cannot say what is asked of it; `cause` is `zero` or `base`."""

    def __init__(self, cause: str) -> None:
        self.cause = cause
        super().__init__(cause)


@dataclass(frozen=True)
class Change:
    """From the recorded units and log base to those asked for.

    Attributes
    ----------
    value : fractions.Fraction
        The new number of a value is this times the old one.
    old_kelvin, new_kelvin : fractions.Fraction
        Kelvin in one old and one new unit of temperature.
    old_zero, new_zero : fractions.Fraction
        What must be added to a number in the unit to count from absolute zero.
    base : str
        ``ln`` or ``log10``; empty if the form's own may stay.
    """

    value: Fraction = Fraction(1)
    old_kelvin: Fraction = Fraction(1)
    new_kelvin: Fraction = Fraction(1)
    old_zero: Fraction = Fraction(0)
    new_zero: Fraction = Fraction(0)
    base: str = ""

    @property
    def ratio(self) -> Fraction:
        """New units of temperature in one old one."""
        return self.old_kelvin / self.new_kelvin

    @property
    def moves_zero(self) -> bool:
        """True if the new unit counts from another zero than the old one."""
        return self.new_zero != self.ratio * self.old_zero

    def temperature(self, number: Fraction) -> Fraction:
        """A temperature in the new unit."""
        return (number + self.old_zero) * self.ratio - self.new_zero


class Statement(NamedTuple):
    """A form with its coefficients, exact, and what must be said beside them."""

    form: str
    coefficients: dict[str, Fraction]
    remark: str = ""


@dataclass(frozen=True)
class Rule:
    """How one form is restated: one row of the table.

    Attributes
    ----------
    base : str
        The logarithm of the value it is written with, ``ln`` or ``log10``;
        empty for a form that takes none.
    apply : callable
        ``apply(coefficients, change)`` gives the new statement, or raises
        `Impossible`.
    """

    base: str
    apply: Callable[[Numbers, Change], Statement]
