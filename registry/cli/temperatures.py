"""Temperatures as people type them: several, from stdin, with a blank before the unit."""

from __future__ import annotations

import sys
from collections.abc import Iterator, Sequence
from typing import NamedTuple

from registry.errors import BadInput, BadQuantity
from registry.quantities import find_unit, parse_temperature

__all__ = ["Asked", "read_temperatures"]


class Asked(NamedTuple):
    """A temperature as typed, and in kelvin."""

    text: str
    kelvin: float


def read_temperatures(words: Sequence[str]) -> list[Asked]:
    """The temperatures on a command line; `-` stands for stdin, one a line; `#` starts a remark."""
    asked: list[Asked] = []
    for word in _join_units(words):
        if word == "-":
            asked += _read_stdin()
        else:
            plain = word.replace("\u2212", "-")
            asked.append(Asked(plain, parse_temperature(plain)))
    if not asked:
        raise BadInput("No temperature was given. Give one or more, such as 298.15K, 25C or 77F, or - for stdin.")
    return asked


def _join_units(words: Sequence[str]) -> Iterator[str]:
    """`25 °C` typed as two words is one temperature."""
    left = list(words)
    while left:
        word = left.pop(0)
        if left and word[-1:].isdigit() and _is_unit(left[0]):
            word = f"{word} {left.pop(0)}"
        yield word


def _is_unit(word: str) -> bool:
    try:
        find_unit(word, "temperature")
    except BadQuantity:
        return False
    return True


def _read_stdin() -> Iterator[Asked]:
    if sys.stdin is None:
        return
    try:
        lines = sys.stdin.read().removeprefix("\ufeff").splitlines()
    except UnicodeDecodeError as error:
        raise BadInput(f"stdin is no UTF-8 text ({error.reason}).") from None
    for number, line in enumerate(lines, 1):
        text = line.strip()
        if text and not text.startswith("#"):
            try:
                yield Asked(text, parse_temperature(text))
            except BadQuantity as error:
                raise BadInput(f"stdin, line {number}: {error}") from None
