"""Stated uncertainties: pieces over temperature, as the source words them.

The text is a list of pieces in rising temperature, parted by semicolons; all
but the last say up to where they hold::

    0.025 % up to 373 K; 0.1 %
    not stated up to 185 K; 250 Pa
    0.5 % (k=2)

The coverage factor stands in brackets where the source states one (JCGM 100,
6.2 and 7.2.3).
"""

from __future__ import annotations

import math
import re
from dataclasses import dataclass

from registry.errors import BadQuantity
from registry.numerals import parse_number
from registry.quantities import find_unit, parse_temperature

__all__ = ["COVERAGE_FACTOR", "Piece", "expansion", "parse_factor", "parse_uncertainty"]

COVERAGE_FACTOR = 2.0
"""The coverage factor to which uncertainties are brought; one that is not stated counts as this (JCGM 100, 6.3.3)."""

_ALLOWED = "pieces such as '0.025 % up to 373 K; 0.1 % (k=2)' are allowed."
_PIECE = re.compile(r"(not stated|(\S+) (%|\S+)(?: \(k=([0-9.]+)\))?)(?: up to (.+))?", re.ASCII)


def expansion(factor: float | None) -> float:
    """What brings an uncertainty of a coverage factor to the one that all are brought to.

    Examples
    --------
    >>> expansion(1.0), expansion(None)
    (2.0, 1.0)
    """
    return COVERAGE_FACTOR / factor if factor else 1.0


@dataclass(frozen=True)
class Piece:
    """One stretch of a stated uncertainty.

    Attributes
    ----------
    upper : float
        Temperature up to which it holds, K; infinity for the last.
    percent : float or None
        The uncertainty in percent of the value.
    absolute : float or None
        The uncertainty in SI units. Both None: not stated.
    factor : float or None
        Its coverage factor; None if not stated.
    """

    upper: float
    percent: float | None = None
    absolute: float | None = None
    factor: float | None = None

    def percent_of(self, value: float) -> float | None:
        """The uncertainty as a percent of a value in SI."""
        if self.absolute is None:
            return self.percent
        return 100.0 * self.absolute / abs(value) if value else None

    @property
    def expansion(self) -> float:
        """What brings it to the coverage factor that all are brought to."""
        return expansion(self.factor)


def parse_uncertainty(text: str, dimension: str) -> tuple[Piece, ...]:
    """The pieces of a stated uncertainty.

    Parameters
    ----------
    text : str
        As described in the module; empty for not stated.
    dimension : str
        The dimension of absolute uncertainties.

    Returns
    -------
    tuple of Piece
        In rising temperature; empty if nothing is stated.

    Raises
    ------
    ValueError
        If the text cannot be read; says what is allowed.

    Examples
    --------
    >>> parse_uncertainty("not stated up to 185 K; 250 Pa", "pressure")[1]
    Piece(upper=inf, percent=None, absolute=250.0, factor=None)
    """
    if not text:
        return ()
    pieces: list[Piece] = []
    parts = text.split("; ")
    for index, part in enumerate(parts):
        match = _PIECE.fullmatch(part)
        if match is None or (match[5] is None) != (index == len(parts) - 1):
            raise ValueError(_ALLOWED)
        upper = parse_temperature(match[5]) if match[5] else math.inf
        if pieces and upper <= pieces[-1].upper:
            raise ValueError("the pieces of an uncertainty must rise in temperature.")
        pieces.append(_read_piece(match, upper, dimension))
    return tuple(pieces)


def _read_piece(match: re.Match[str], upper: float, dimension: str) -> Piece:
    if match[1] == "not stated":
        return Piece(upper)
    try:
        amount = parse_number(match[2])
    except ValueError:
        raise ValueError(_ALLOWED) from None
    if amount <= 0:
        raise ValueError("an uncertainty is greater than zero; leave it empty if none is stated.")
    factor = parse_factor(match[4]) if match[4] else None
    if match[3] == "%":
        return Piece(upper, percent=float(amount), factor=factor)
    try:
        return Piece(upper, absolute=float(amount * find_unit(match[3], dimension).factor), factor=factor)
    except BadQuantity as error:
        raise ValueError(f"{match[3]!r}: {error.allowed}") from None


def parse_factor(text: str) -> float:
    """A coverage factor: a number from 1 to 10.

    Examples
    --------
    >>> parse_factor("2")
    2.0
    """
    try:
        factor = float(parse_number(text))
    except ValueError:
        factor = 0.0
    if not 1.0 <= factor <= 10.0:
        raise ValueError(f"a coverage factor is a number from 1 to 10, not {text!r}; write it as (k=2).")
    return factor
