"""Coefficients as one text: names and numbers as printed."""

from __future__ import annotations

import re
from collections.abc import Iterable

from registry.cells import Cell

__all__ = ["COEFFICIENTS", "join_coefficients", "parse_coefficients"]

COEFFICIENTS = Cell("coefficients such as A=8.07131; B=1730.63; C=233.426 are allowed.", limit=4000)

_COMMA = re.compile(r",\s*\w+\s*=")
"""Coefficients parted by commas."""


def parse_coefficients(text: str) -> dict[str, str]:
    """Names and texts of coefficients, in the order in which they stand.

    Parameters
    ----------
    text : str
        Such as ``A=8.07131; B=1730.63``.

    Returns
    -------
    dict of str to str
        Numbers as printed; not checked against a form.

    Raises
    ------
    ValueError
        If it cannot be read, with what is allowed.

    Examples
    --------
    >>> parse_coefficients("A=8.07131; B=1730.63")
    {'A': '8.07131', 'B': '1730.63'}
    """
    found: dict[str, str] = {}
    for part in text.split(";"):
        name, equals, value = (word.strip() for word in part.partition("="))
        if not equals or not name or not value or name in found or _COMMA.search(value):
            raise ValueError(f"{COEFFICIENTS.allowed[:-1]}, each once.")
        found[name] = value
    return found


def join_coefficients(pairs: Iterable[tuple[str, str]]) -> str:
    """Names and numbers as one text.

    Examples
    --------
    >>> join_coefficients([("A", "8.07131"), ("B", "1730.63")])
    'A=8.07131; B=1730.63'
    """
    return "; ".join(f"{name}={text}" for name, text in pairs)
