"""Temperatures at which curves are sampled, and where what is sampled steps.

Points are graded: T = low + (high - low) s(u), s(u) = u^3 (10 - 15 u + 6 u^2),
u uniform from 0 to 1. They crowd at both ends, where curves run into a pole
or a critical point, and the trapezoidal rule in u converges quickly.
"""

from __future__ import annotations

import math
from collections.abc import Callable, Iterator
from functools import lru_cache

import numpy as np
from numpy.typing import NDArray

__all__ = ["find_change", "find_steps", "grade_points", "weigh_points"]

Array = NDArray[np.float64]
Codes = NDArray[np.generic]


def grade_points(low: float, high: float, intervals: int) -> Array:
    """The ends of so many graded intervals between two temperatures, K, both among them.

    Examples
    --------
    >>> grade_points(300.0, 400.0, 4).tolist()
    [300.0, 310.3515625, 350.0, 389.6484375, 400.0]
    """
    at = low + (high - low) * _spread(intervals)
    at[-1] = high
    # a product may round past the end
    return np.minimum(at, high, out=at)


@lru_cache
def _spread(intervals: int) -> Array:
    u = np.linspace(0.0, 1.0, intervals + 1)
    return u**3 * (10.0 - 15.0 * u + 6.0 * u**2)


@lru_cache
def weigh_points(intervals: int) -> Array:
    """Weights of the mean over a graded grid; those of the two ends are zero."""
    u = np.linspace(0.0, 1.0, intervals + 1)
    weights = 30.0 * u**2 * (1.0 - u) ** 2 / intervals
    total: Array = weights / weights.sum()
    return total


def find_steps(code: Callable[[Array], Codes], at: Array, codes: Codes) -> Iterator[tuple[float, float]]:
    """Where a code of temperature changes: the neighbouring doubles on either side, from its values on a grid."""
    for i in np.flatnonzero(codes[1:] != codes[:-1]).tolist():
        low, high = float(at[i]), float(at[i + 1])
        while True:
            last, first = _close_step(code, low, high)
            yield last, first
            # two curves may change between the same two points of the grid
            if code(np.array([first]))[0] == codes[i + 1]:
                break
            low = first


def _close_step(code: Callable[[Array], Codes], low: float, high: float) -> tuple[float, float]:
    while math.nextafter(low, math.inf) < high:
        at = np.linspace(low, high, 33)
        codes = code(at)
        first = int(np.argmax(codes != codes[0]))
        if at[first - 1] == low and at[first] == high:
            break
        low, high = float(at[first - 1]), float(at[first])
    return low, high


def find_change(test: Callable[[float], bool], low: float, high: float) -> tuple[float, float]:
    """The neighbouring doubles between which a test changes; it differs at the two ends.

    Examples
    --------
    >>> find_change(lambda kelvin: kelvin < 300.0, 200.0, 400.0)
    (299.99999999999994, 300.0)
    """
    first = test(low)
    while low < (middle := 0.5 * (low + high)) < high:
        low, high = (middle, high) if test(middle) == first else (low, middle)
    return low, high
