"""Amounts as people type them beside an option: a percentage, a difference of temperature."""

from __future__ import annotations

import re

from registry.errors import BadQuantity
from registry.numerals import parse_number
from registry.quantities import find_unit, unit_names

__all__ = ["read_difference", "read_percent"]


def read_percent(option: str, text: str) -> float:
    """A percentage above zero.

    Examples
    --------
    >>> read_percent("--within", "2%")
    2.0
    """
    allowed = f"{option} takes a percentage above zero, such as 2%."
    text = text.replace("\u2212", "-")  # as negative temperatures are let through
    number, found, rest = text.strip().partition("%")
    try:
        percent = float(parse_number(number.strip()))
    except ValueError:
        raise BadQuantity(text, allowed) from None
    if not found or rest or percent <= 0.0:
        raise BadQuantity(text, allowed)
    return percent


_DIFFERENCE = re.compile(r"([0-9.]+(?:[eE][+-]?[0-9]+)?)\s*(.+)", re.DOTALL)


def read_difference(option: str, text: str) -> float:
    """A difference of temperature above zero, in kelvin: 9F are 5 K.

    Examples
    --------
    >>> read_difference("--beyond", "9F")
    5.0
    """
    allowed = f"{option} takes a difference of temperature above zero, such as 5K; its units are "
    allowed += f"{', '.join(unit_names('temperature'))}."
    text = text.replace("\u2212", "-")
    match = _DIFFERENCE.fullmatch(text.strip())
    try:
        if match is None:
            raise ValueError
        kelvin = float(parse_number(match[1]) * find_unit(match[2], "temperature").factor)
    except ValueError:
        raise BadQuantity(text, allowed) from None
    if kelvin <= 0.0:
        raise BadQuantity(text, allowed)
    return kelvin
