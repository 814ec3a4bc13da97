"""Pressures as people type them: several, from stdin, with a blank before the unit."""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from fractions import Fraction
from typing import NamedTuple

from registry.cli.temperatures import read_each
from registry.errors import BadInput, BadQuantity, GaugePressure
from registry.quantities import is_unit, parse_pressure

__all__ = ["AskedPressure", "read_atmosphere", "read_pressures"]


class AskedPressure(NamedTuple):
    """A pressure as typed, and absolute in pascal."""

    text: str
    pascal: float


def read_pressures(words: Sequence[str], atmosphere: Fraction | None) -> list[AskedPressure]:
    """The pressures on a command line; `-` stands for stdin, one a line; `#` starts a remark.

    Parameters
    ----------
    words : sequence of str
        As typed.
    atmosphere : fractions.Fraction or None
        The local atmosphere, Pa; without it gauge units are refused.

    Returns
    -------
    list of AskedPressure
        At least one.

    Examples
    --------
    >>> read_pressures(["1", "atm", "760 mmHg"], None)
    [AskedPressure(text='1 atm', pascal=101325.0), AskedPressure(text='760 mmHg', pascal=101325.0144354)]
    """

    def parse(text: str) -> float:
        return float(parse_pressure(text, atmosphere))

    asked = [AskedPressure(*one) for one in read_each(_join_units(words), parse)]
    if not asked:
        raise BadInput("No pressure was given. Give one or more, such as 101.325kPa, 1atm or 760mmHg, or - for stdin.")
    return asked


def read_atmosphere(text: str) -> Fraction:
    """The local atmosphere, Pa, exact."""
    text = text.replace("\u2212", "-")
    try:
        return parse_pressure(text)
    except GaugePressure:
        raise BadQuantity(text, "the local atmosphere is an absolute pressure, such as 101.325kPa.") from None


def _join_units(words: Sequence[str]) -> Iterator[str]:
    """`1 atm` typed as two words is one pressure."""
    left = list(words)
    while left:
        word = left.pop(0)
        if left and word[-1:].isdigit() and is_unit(left[0], "pressure"):
            word = f"{word} {left.pop(0)}"
        yield word
