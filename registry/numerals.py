"""Numbers as a source prints them: text that means exactly one decimal number.

The text is what is recorded; the number is derived from it. Only what a
printed table can hold is accepted: ASCII digits, one point, an exponent, or a
fraction of two integers such as ``110/3``.
"""

from __future__ import annotations

import re
from fractions import Fraction

__all__ = ["is_number", "last_digit_unit", "parse_number", "to_float"]

# 1 to 40 digits: no printed coefficient has more, and int() stays quick
_DECIMAL = re.compile(r"[+-]?(?:\d{1,40}(?:\.\d{0,40})?|\.\d{1,40})(?:[eE][+-]?\d{1,3})?", re.ASCII)
_RATIO = re.compile(r"([+-]?\d{1,9})/(\d{1,9})", re.ASCII)


def parse_number(text: str) -> Fraction:
    """The exact value of a printed number.

    Parameters
    ----------
    text : str
        A decimal such as ``8.07131``, ``-6.74694450e5`` or ``.5``, or a
        fraction such as ``110/3``. No blanks, no thousands separators.

    Returns
    -------
    fractions.Fraction
        The value, exact.

    Raises
    ------
    ValueError
        If the text is no such number, is zero over zero, or lies beyond
        1e300 in size.

    Examples
    --------
    >>> parse_number("8.07131")
    Fraction(807131, 100000)
    >>> parse_number("110/3")
    Fraction(110, 3)
    >>> parse_number("nan")
    Traceback (most recent call last):
    ...
    ValueError: 'nan' is not a printed number
    """
    ratio = _RATIO.fullmatch(text)
    if ratio and int(ratio[2]):
        return Fraction(int(ratio[1]), int(ratio[2]))
    if not _DECIMAL.fullmatch(text):
        shown = text if len(text) <= 40 else text[:40] + "..."
        raise ValueError(f"{shown!r} is not a printed number")
    value = Fraction(text)
    if value and not -300 < _magnitude(value) < 300:
        raise ValueError(f"{text!r} is beyond what a double can hold")
    return value


def _magnitude(value: Fraction) -> int:
    """About the decimal exponent, without a logarithm of huge integers."""
    return len(str(abs(value.numerator))) - len(str(value.denominator))


def is_number(text: str) -> bool:
    """True if a text is a printed number."""
    try:
        parse_number(text)
    except ValueError:
        return False
    return True


def to_float(text: str) -> float:
    """The double nearest to a printed number.

    Examples
    --------
    >>> to_float("1730.63")
    1730.63
    """
    return float(parse_number(text))


def last_digit_unit(text: str) -> Fraction:
    """One unit in the last printed digit, exact; zero for a fraction.

    Parameters
    ----------
    text : str
        A printed number.

    Returns
    -------
    fractions.Fraction
        The place value of the last digit.

    Examples
    --------
    >>> last_digit_unit("233.426")
    Fraction(1, 1000)
    >>> last_digit_unit("1.20E3")
    Fraction(10, 1)
    """
    parse_number(text)
    if "/" in text:
        return Fraction(0)
    mantissa, _, exponent = text.lower().partition("e")
    decimals = len(mantissa.partition(".")[2])
    return Fraction(10) ** (int(exponent or 0) - decimals)
