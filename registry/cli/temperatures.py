"""Temperatures as people type them: several, from stdin, with a blank before the unit."""

from __future__ import annotations

import sys
from collections.abc import Callable, Iterable, Iterator, Sequence
from typing import NamedTuple, TypeVar

from registry.errors import BadInput, BadQuantity
from registry.quantities import is_unit
from registry.readings import Reading, parse_reading

__all__ = ["Asked", "read_each", "read_temperatures"]

_Read = TypeVar("_Read")


class Asked(NamedTuple):
    """A temperature as typed, and as read: on ITS-90, with its uncertainty."""

    text: str
    reading: Reading

    @property
    def kelvin(self) -> float:
        """On ITS-90, K."""
        return self.reading.kelvin


def read_temperatures(words: Sequence[str]) -> list[Asked]:
    """The temperatures on a command line; `-` stands for stdin, one a line; `#` starts a remark."""
    asked = [Asked(*one) for one in read_each(_join_units(words), parse_reading)]
    if not asked:
        raise BadInput("No temperature was given. Give one or more, such as 298.15K, 25C or 77F, or - for stdin.")
    return asked


def _join_units(words: Sequence[str]) -> Iterator[str]:
    """`25 °C` typed as two words is one temperature, and so is `25 +/- 0.1 degC (k=2)`."""
    left = list(words)
    while left:
        word = left.pop(0)
        while left and _goes_on(word, left[0]):
            word = f"{word} {left.pop(0)}"
        yield word


_SPREAD = ("+/-", "+-", "±")


def _goes_on(word: str, following: str) -> bool:
    if following.startswith((*_SPREAD, "(")) or word.endswith(_SPREAD):
        return True
    return word[-1:].isdigit() and is_unit(following, "temperature")


def read_each(words: Iterable[str], parse: Callable[[str], _Read]) -> Iterator[tuple[str, _Read]]:
    """Each word as typed and as parsed; `-` stands for the lines of stdin."""
    for word in words:
        if word == "-":
            yield from _read_lines(parse)
        else:
            plain = word.replace("\u2212", "-")
            yield plain, parse(plain)


def _read_lines(parse: Callable[[str], _Read]) -> Iterator[tuple[str, _Read]]:
    """Each line of stdin that is no remark, as typed and as parsed."""
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
                yield text, parse(text)
            except BadQuantity as error:
                raise BadInput(f"stdin, line {number}: {error}") from None
