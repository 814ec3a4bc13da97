"""A correlation as a candidate for an answer: its curve, reach and rank."""

from __future__ import annotations

import math
from collections.abc import Sequence
from dataclasses import dataclass
from functools import cached_property
from typing import TYPE_CHECKING

import numpy as np
from numpy.typing import NDArray

from registry import rules
from registry.confirmation import Counted, Value, count_correlation
from registry.curve import Curve
from registry.dossier import Dossier, Entry
from registry.limits import Limits
from registry.properties import PROPERTIES
from registry.quantities import parse_temperature
from registry.records import Correlation
from registry.uncertainty import Piece, parse_uncertainty

# a lookup of a value alone needs none
if TYPE_CHECKING:
    from registry.rounding import Rounding

__all__ = ["Candidate", "build_candidate"]


@dataclass(frozen=True)
class Candidate:
    """One correlation that could answer.

    Attributes
    ----------
    entry : Entry
        The record with its revision and standing.
    curve : Curve
        The record made evaluable.
    reach : tuple of float
        Where it may answer, K: its window cut to its phase. Empty (lower
        above upper) if the two do not meet.
    counted : Counted
        The evidence it ranks by.
    pieces : tuple of Piece
        Its stated uncertainty, with the rank of each piece in percent.
    year : int
        Year of its source, 0 if not stated.
    width : float
        The width of its reach, K, without a metastable range.
    molar_mass : float
        Molar mass of its compound, g/mol.
    """

    entry: Entry[Correlation]
    curve: Curve
    reach: tuple[float, float]
    counted: Counted
    pieces: tuple[tuple[Piece, float], ...]
    year: int
    width: float
    molar_mass: float

    @property
    def key(self) -> str:
        """The key of the correlation."""
        return self.entry.key

    @property
    def record(self) -> Correlation:
        """The correlation."""
        return self.entry.record

    @property
    def empty(self) -> bool:
        """True if its window and its phase do not meet."""
        return self.reach[0] > self.reach[1]

    def covers(self, kelvin: float) -> bool:
        """True if it may answer there, its standing aside."""
        low, high = self.reach
        return not self.empty and low - rules.BOUND_TOLERANCE <= kelvin <= high + rules.BOUND_TOLERANCE

    def distance(self, kelvin: float) -> float:
        """How far a temperature lies outside its reach, K."""
        return max(self.reach[0] - kelvin, kelvin - self.reach[1], 0.0)

    def ranked_uncertainty(self, kelvin: float) -> float:
        """The stated uncertainty it ranks by there, percent; infinity if none."""
        found = self._piece_at(kelvin)
        return found[1] if found else math.inf

    def piece_at(self, kelvin: float) -> Piece | None:
        """The piece of its stated uncertainty that holds there, or None."""
        found = self._piece_at(kelvin)
        return found[0] if found else None

    @cached_property
    def rounding(self) -> Rounding:
        """What the digits of its coefficients leave open: curves that are made once, for they cost a hundred values."""
        from registry.rounding import Rounding

        return Rounding.of(self.record, self.molar_mass)

    def expanded_percents(self, kelvin: NDArray[np.float64], values: NDArray[np.float64]) -> NDArray[np.float64]:
        """The stated uncertainty at coverage factor 2, percent of the values.

        Parameters
        ----------
        kelvin, values : array of float, same shape
            Temperatures, K, and the values there in SI units.

        Returns
        -------
        array of float, same shape
            NaN where none is stated.
        """
        percents = np.full(np.shape(kelvin), np.nan)
        low = -math.inf
        for piece, _ in self.pieces:
            here = (kelvin > low) & (kelvin <= piece.upper)
            if piece.absolute is not None:
                with np.errstate(divide="ignore"):
                    percents[here] = piece.expansion * (100.0 * piece.absolute / np.abs(values[here]))
            elif piece.percent is not None:
                percents[here] = piece.expansion * piece.percent
            low = piece.upper
        return percents

    def _piece_at(self, kelvin: float) -> tuple[Piece, float] | None:
        return next((ranked for ranked in self.pieces if kelvin <= ranked[0].upper), None)


def build_candidate(
    entry: Entry[Correlation], dossier: Dossier, limits: Limits, values: Sequence[Value], *, metastable: bool = False
) -> Candidate:
    """A correlation made a candidate.

    Parameters
    ----------
    entry : Entry
        The correlation.
    dossier : Dossier
        All that is recorded about its compound.
    limits : Limits
        Phase limits of its property.
    values : sequence of Value
        Independent values that may confirm it.
    metastable : bool
        Let it answer over the metastable range that its record states.

    Returns
    -------
    Candidate
        With its reach and what it ranks by.
    """
    record = entry.record
    molar_mass = dossier.compound.record.grams_per_mole()
    curve = Curve.of(record, molar_mass)
    reach = _find_reach(record, curve, limits, metastable)
    counted = count_correlation(record, curve, values)
    pieces = parse_uncertainty(record.uncertainty, PROPERTIES[record.property].dimension)
    ranked = tuple((piece, _rank_piece(pieces, i, curve, reach)) for i, piece in enumerate(pieces))
    stable = _find_reach(record, curve, limits, metastable=False)
    width = max(stable[1] - stable[0], 0.0)
    return Candidate(entry, curve, reach, counted, ranked, dossier.year(record.source), width, molar_mass)


def _find_reach(record: Correlation, curve: Curve, limits: Limits, metastable: bool) -> tuple[float, float]:
    low, high = curve.window
    stated = metastable and record.metastable_below and parse_temperature(record.metastable_below) >= limits.lower
    if limits.lower and not stated:
        low = max(low, limits.lower - rules.TRIPLE_MARGIN)
    return low, min(high, limits.upper)


def _rank_piece(pieces: tuple[Piece, ...], index: int, curve: Curve, reach: tuple[float, float]) -> float:
    """The percent a piece ranks by, at one coverage factor: an absolute one at its worst, where the value is least."""
    piece = pieces[index]
    if piece.absolute is None:
        return math.inf if piece.percent is None else piece.expansion * piece.percent
    low = max(reach[0], pieces[index - 1].upper if index else reach[0])
    high = min(reach[1], piece.upper)
    percents = [piece.percent_of(curve.value(t)) for t in (low, high)]
    finite = [piece.expansion * p for p in percents if p is not None and math.isfinite(p)]
    return max(finite, default=math.inf)
