"""Exact numbers as text: exactly where that is short, else with no more digits than are asked for."""

from __future__ import annotations

import math
from decimal import Decimal
from fractions import Fraction

from registry.numerals import parse_number
from registry.restating.logarithms import PRECISE, as_decimal

__all__ = ["print_exact", "print_fully", "print_rounded"]

SHORT = 17
"""Digits up to which a number that ends is printed whole; no double tells more."""
MOST = 34
"""Digits of the longest number printed: twice those of a double."""


def print_exact(exact: Fraction, source: str = "", *, ratio: bool = False) -> str:
    """A number in full, if that is short.

    Parameters
    ----------
    exact : fractions.Fraction
        The number.
    source : str
        The printed number that it comes from: its text stays if the number is
        the same, and its digits if only the point has moved.
    ratio : bool
        True if a fraction of two integers may stand for a number that does
        not end.

    Returns
    -------
    str
        Text that means exactly this number; empty if there is no short one.

    Examples
    --------
    >>> print_exact(Fraction("0.611657"), "611.657"), print_exact(Fraction("-42.85"), "230.300")
    ('0.611657', '-42.850')
    >>> print_exact(Fraction(10, 3)), print_exact(Fraction(10, 3), ratio=True)
    ('', '10/3')
    """
    if source and parse_number(source) == exact:
        return source
    if moved := _move_point(exact, source):
        return moved
    number = as_decimal(exact)
    if Fraction(number) == exact:
        short = PRECISE.normalize(number)
        if len(short.as_tuple().digits) <= SHORT:
            return _write(_pad(short, source))
    if ratio and abs(exact.numerator) < 10**9 and exact.denominator < 10**9:
        return f"{exact.numerator}/{exact.denominator}"
    return ""


def print_rounded(exact: Fraction, unit: float, source: str = "") -> str:
    """A number rounded to a decimal place.

    Parameters
    ----------
    exact : fractions.Fraction
        The number.
    unit : float
        The last place may be worth this much, and not more.
    source : str
        The printed number it comes from; no fewer digits are kept.

    Returns
    -------
    str
        The rounded number, of at most 34 digits.

    Examples
    --------
    >>> print_rounded(Fraction(100, 3), 2e-4)
    '33.3333'
    >>> print_rounded(Fraction(100, 3), 10.0, "7.00626")
    '33.3333'
    """
    number = as_decimal(exact)
    place = number.adjusted() - _count_digits(source) + 1
    if 0.0 < unit < math.inf:
        place = min(place, math.floor(math.log10(unit)))
    place = max(place, number.adjusted() - MOST + 1)
    return str(PRECISE.quantize(number, Decimal((0, (1,), place))))


def print_fully(exact: Fraction) -> str:
    """A number exactly or to 25 digits, beyond anything that can be seen in a value."""
    return print_exact(exact) or print_rounded(exact, 0.0, "1" * 25)


def _count_digits(source: str) -> int:
    """Significant digits of a printed number; of a fraction or nothing, one."""
    return len(Decimal(source).as_tuple().digits) if source and "/" not in source else 1


def _write(number: Decimal) -> str:
    """Plainly, but for very large and very small numbers."""
    return f"{number:f}" if 0 <= number.adjusted() < SHORT else str(number)


def _move_point(exact: Fraction, source: str) -> str:
    """The digits of the source, if a power of ten lies between; else an empty text."""
    if not source or "/" in source or not exact or not (old := parse_number(source)):
        return ""
    shift = PRECISE.normalize(as_decimal(exact / old))
    if shift.as_tuple().digits != (1,) or Fraction(shift) != exact / old:
        return ""
    return str(PRECISE.multiply(Decimal(source), shift))


def _pad(number: Decimal, source: str) -> Decimal:
    """With zeros at its end, up to the digits of the source or its last place, whichever comes first."""
    if not number or not source or "/" in source:
        return number
    digits = number.adjusted() - _count_digits(source) + 1
    place = max(digits, _find_place(source))
    exponent = number.as_tuple().exponent
    assert isinstance(exponent, int)  # no infinity comes here
    return PRECISE.quantize(number, Decimal((0, (1,), place))) if place < exponent else number


def _find_place(source: str) -> int:
    """The exponent of the last printed digit."""
    exponent = Decimal(source).as_tuple().exponent
    assert isinstance(exponent, int)
    return exponent
