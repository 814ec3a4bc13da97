"""Printed numbers: what is one, what it is exactly, and what float() would have let through."""

from __future__ import annotations

import math
from decimal import Decimal
from fractions import Fraction

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from registry.numerals import last_digit_unit, parse_number, to_float
from tests.shelf import CORRELATIONS

REFUSED = r"is not a printed number|is beyond what a double can hold"
QUIET = settings(derandomize=True, max_examples=200, deadline=None, database=None)


@pytest.mark.parametrize(
    ("text", "value"),
    [
        ("8.07131", Fraction(807131, 100000)),
        ("0.65017534844798e3", Fraction("650.17534844798")),
        ("-7.85951783", Fraction(-785951783, 10**8)),
        ("+.5", Fraction(1, 2)),
        ("5.", Fraction(5)),
        ("1.20E3", Fraction(1200)),
        ("4.6e-3", Fraction(46, 10000)),
        ("110/3", Fraction(110, 3)),
        ("-1/3", Fraction(-1, 3)),
        ("10/6", Fraction(5, 3)),
        ("-0", Fraction(0)),
        ("0e999", Fraction(0)),
        ("9.99e299", Fraction("9.99e299")),
        ("1e-299", Fraction(1, 10**299)),
        ("9" * 40, Fraction(10**40 - 1)),
    ],
)
def test_printed_number_is_exact(text, value):
    """A printed number means one exact fraction, and becomes the double nearest to it."""
    assert parse_number(text) == value
    assert to_float(text) == value.numerator / value.denominator


# what Python's float() reads without a word: each of these is accepted by it
FLOAT_TRAPS = [
    "1_000.5", "\u0663", "\uff11\uff12", " 1.5\n", "1.5\n", "\t1.5", "1.5\u00a0", "nan", "NaN", "inf", "-inf",
    "Infinity", "1e400", "1e-400",
]  # fmt: skip


@pytest.mark.parametrize("text", FLOAT_TRAPS)
def test_what_float_lets_through_is_refused(text):
    """Underscores, other digits, blanks, nan, infinities, overflow and underflow are no printed numbers."""
    float(text)
    with pytest.raises(ValueError, match=REFUSED):
        parse_number(text)


@pytest.mark.parametrize(
    "text",
    [
        "", ".", "-", "+", "e5", "1e", "1e5.0", "--1", "+-1", "- 1", "1 5", "1,5", "1,000.5", "0x1p3", "1d5", "1f",
        "\u00bd", "\u00b2", "\u22121.5", "1/0", "0/0", "1/-3", "1/3/5", "1.5/2", "1/3e2", "1/ 3", "1234567890/3",
        "1e1000", "1e999999999", "9" * 41, "0." + "1" * 41, "1" * 5000, "1.5\x00", "(1.5)", "1.5 mmHg", "1e300",
        "1e-300",
    ],
)  # fmt: skip
def test_other_text_is_refused(text):
    """Nothing else is a number: not a minus sign of typography, not a decimal comma, not a huge exponent."""
    with pytest.raises(ValueError, match=REFUSED):
        parse_number(text)


def test_message_does_not_flood_the_screen():
    """A text of any length is shown in part."""
    with pytest.raises(ValueError, match=r"^'1{40}\.\.\.' is not a printed number$"):
        parse_number("1" * 100_000)


@pytest.mark.parametrize(
    ("text", "unit"),
    [
        ("233.426", Fraction(1, 1000)), ("8.07131", Fraction(1, 100000)), ("5", Fraction(1)), ("5.", Fraction(1)),
        ("0.00", Fraction(1, 100)), ("1.20E3", Fraction(10)), ("1.20e-3", Fraction(1, 10**5)), (".5", Fraction(1, 10)),
        ("-0.65017534844798e3", Fraction(1, 10**11)), ("110/3", Fraction(0)),
    ],
)  # fmt: skip
def test_last_digit(text, unit):
    """The last printed digit has its place value, trailing zeros and exponents counted; a fraction has none."""
    assert last_digit_unit(text) == unit


@pytest.mark.parametrize("text", ["1_0", "nan", "", " 1"])
def test_last_digit_of_no_number(text):
    """What is no number has no last digit."""
    with pytest.raises(ValueError, match="is not a printed number"):
        last_digit_unit(text)


def test_every_coefficient_of_the_shelf_is_the_double_nearest_to_its_text():
    """All published coefficients read to the double that Python's own correctly rounded reader gives."""
    texts = [text for record in CORRELATIONS.values() for text in record.coefficients.values()]
    assert len(texts) > 700
    for text in texts:
        if "/" not in text:
            assert to_float(text) == float(text)
        else:
            numerator, denominator = map(int, text.split("/"))
            assert to_float(text) == numerator / denominator


@QUIET
@given(st.decimals(allow_nan=False, allow_infinity=False, places=6, min_value=-(10**9), max_value=10**9))
def test_any_decimal_is_read_exactly(value):
    """A decimal, plainly or with an exponent, comes back as the same number."""
    assert parse_number(f"{value:f}") == Fraction(value)
    assert parse_number(f"{value:E}") == Fraction(value)


@QUIET
@given(st.floats(allow_nan=False, allow_infinity=False, min_value=-1e290, max_value=1e290))
def test_double_survives_its_shortest_text(value):
    """The shortest text of a double reads back to the same double, unless it is below the smallest number kept."""
    if value == 0.0 or abs(value) > 1e-290:
        assert to_float(repr(value)) == value
    else:
        with pytest.raises(ValueError, match="beyond"):
            to_float("1e-310")


@QUIET
@given(st.text(max_size=12))
def test_any_text_is_a_finite_number_or_a_value_error(text):
    """Whatever the text, the outcome is an exact finite number or a ValueError, nothing else."""
    try:
        value = parse_number(text)
    except ValueError:
        return
    assert math.isfinite(float(value))
    assert text.isascii()


@QUIET
@given(st.text(alphabet="0123456789.eE+-/_ ", max_size=12))
def test_what_is_read_means_what_decimal_says(text):
    """A text of digits, points, signs and exponents that is read means the decimal it looks like."""
    try:
        value = parse_number(text)
    except ValueError:
        return
    if "/" in text:
        assert value == Fraction(text)
    else:
        assert value == Fraction(Decimal(text))
        unit = last_digit_unit(text)
        assert (value / unit).denominator == 1
