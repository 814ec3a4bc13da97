"""Exact fractions with logarithms and powers to 60 digits.

What is rational stays exact; what is not is a fraction that is right to 60
digits, far beyond any coefficient's.
"""

from __future__ import annotations

from decimal import Context, Decimal
from fractions import Fraction

__all__ = ["LN10", "PRECISE", "as_decimal", "exp", "find_log", "power"]

PRECISE = Context(prec=60)


def as_decimal(value: Fraction) -> Decimal:
    """A fraction as a decimal number of 60 digits."""
    return PRECISE.divide(Decimal(value.numerator), Decimal(value.denominator))


def _ln(value: Fraction) -> Fraction:
    return Fraction(PRECISE.ln(as_decimal(value)))


LN10 = _ln(Fraction(10))


def exp(value: Fraction) -> Fraction:
    """The exponential of a fraction."""
    return Fraction(PRECISE.exp(as_decimal(value)))


def find_log(value: Fraction, base: str) -> Fraction:
    """The logarithm of a positive fraction, exact for powers of ten to base 10.

    Parameters
    ----------
    value : fractions.Fraction
        Greater than zero.
    base : str
        ``ln`` or ``log10``.

    Returns
    -------
    fractions.Fraction
        The logarithm.

    Examples
    --------
    >>> find_log(Fraction(1, 1000), "log10")
    Fraction(-3, 1)
    >>> round(float(find_log(Fraction(1000), "ln")), 12)
    6.907755278982
    """
    if base == "ln":
        return _ln(value)
    return Fraction(PRECISE.log10(as_decimal(value)))


def power(value: Fraction, exponent: Fraction) -> Fraction:
    """A positive fraction to any power, exact for small whole exponents.

    Examples
    --------
    >>> power(Fraction(9, 5), Fraction(-2))
    Fraction(25, 81)
    >>> round(float(power(Fraction(2), Fraction(1, 2))), 12)
    1.414213562373
    """
    if exponent.denominator == 1 and abs(exponent) <= 64:
        return value ** int(exponent)
    return exp(exponent * _ln(value))
