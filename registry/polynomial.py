"""Polynomials with their derivatives."""

from __future__ import annotations

from collections.abc import Sequence

import numpy as np
from numpy.typing import NDArray

__all__ = ["polynomial_and_slope"]

Array = NDArray[np.float64]


def polynomial_and_slope(coefficients: Sequence[float], x: Array) -> tuple[Array, Array]:
    """A polynomial, constant term first, and its derivative, by Horner's rule.

    Examples
    --------
    1 + 2x + 3x^2 and 2 + 6x at 2:

    >>> value, slope = polynomial_and_slope((1.0, 2.0, 3.0), np.array([2.0]))
    >>> float(value[0]), float(slope[0])
    (17.0, 14.0)
    """
    value, slope = np.full_like(x, coefficients[-1]), np.zeros_like(x)
    for c in coefficients[-2::-1]:
        slope = slope * x + value
        value = value * x + c
    return value, slope
