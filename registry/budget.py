"""The uncertainty budget of a value: what is stated, what the temperature adds, what the digits leave open.

References
----------
.. [1] JCGM 100:2008, Evaluation of measurement data: Guide to the expression
   of uncertainty in measurement. The law of propagation of uncertainty, 5.1.2;
   expanded uncertainty and coverage factor, 6.2 and 6.3.
"""

from __future__ import annotations

import math
from dataclasses import dataclass

import numpy as np

from registry.candidate import Candidate
from registry.uncertainty import COVERAGE_FACTOR, Piece, expansion

__all__ = ["Budget", "combine_percents", "make_budget"]


@dataclass(frozen=True)
class Budget:
    """The parts of the uncertainty of a value, each in percent of the value.

    All but `stated_percent` are at coverage factor 2.

    Attributes
    ----------
    stated_percent : float or None
        What the source states there, as it states it; None if it does not.
    stated_factor : float or None
        The coverage factor it states; one that is not stated counts as 2.
    temperature_percent : float
        What the uncertainty of the temperature asked adds, by the slope; 0 if
        the temperature is exact.
    rounding_percent : float
        What the rounding of the printed coefficients leaves open: a part of
        its own, in no sum. Where one coefficient makes nearly all of it,
        twice its standard uncertainty lies beyond the most it can be: then
        that.
    rounding_bound_percent : float
        The most that rounding can make: every coefficient at its worst.
    """

    stated_percent: float | None
    stated_factor: float | None
    temperature_percent: float
    rounding_percent: float
    rounding_bound_percent: float

    @property
    def expanded_percent(self) -> float | None:
        """The stated uncertainty and that of the temperature together [1]_; None if none is stated."""
        return combine_percents(self.stated_percent, self.stated_factor, self.temperature_percent)


def combine_percents(stated: float | None, factor: float | None, temperature: float) -> float | None:
    """A stated uncertainty and that of the temperature together, percent at coverage factor 2 [1]_.

    Parameters
    ----------
    stated : float or None
        Percent, as stated; None if it is not.
    factor : float or None
        The coverage factor stated; None counts as 2.
    temperature : float
        What the temperature adds, percent at coverage factor 2.

    Returns
    -------
    float or None
        None if none is stated.

    Examples
    --------
    >>> combine_percents(1.5, 1.0, 4.0)
    5.0
    """
    if stated is None:
        return None
    return math.hypot(expansion(factor) * stated, temperature)


def make_budget(
    candidate: Candidate, piece: Piece | None, kelvin: float, value: float, temperature_percent: float
) -> Budget:
    """The uncertainty budget of a value.

    Parameters
    ----------
    candidate : Candidate
        What gave it.
    piece : Piece or None
        What its source states of the uncertainty there.
    kelvin : float
        The temperature, K.
    value : float
        The value there, SI.
    temperature_percent : float
        What the uncertainty of the temperature adds, percent at coverage
        factor 2.

    Returns
    -------
    Budget
        Its parts.
    """
    at = np.array([kelvin])
    rounding = candidate.rounding
    bound = float(rounding.bounds(at)[0])
    return Budget(
        piece.percent_of(value) if piece else None,
        piece.factor if piece else None,
        temperature_percent,
        min(COVERAGE_FACTOR * float(rounding.standards(at)[0]), bound),
        bound,
    )
