"""The safeguarded search for the temperatures at which a curve has given values."""

from __future__ import annotations

import numpy as np
from numpy.typing import NDArray

from registry.curve import Curve

__all__ = ["find_roots"]

Array = NDArray[np.float64]

_CLOSE = 4e-16
"""Relative step below which a temperature is found: two neighbouring doubles."""

_NOISE = 1e-13
"""Relative step below which one that does not shrink is the rounding of the curve itself."""

_ROUNDS = 200
"""Halving alone needs about 60."""


def find_roots(curve: Curve, wanted: Array, below: Array, above: Array, start: Array, *, positive: bool) -> Array:
    """Temperatures at which a monotone curve has given values, by Newton's steps inside a bracket.

    A step that leaves the bracket, or is not half the one before, is replaced
    by halving. Each element goes its own way, so an array gives what its
    elements give alone.

    Parameters
    ----------
    curve : Curve
        Rising or falling all the way between `below` and `above`.
    wanted : array of float, one-dimensional
        Values, SI.
    below, above : array of float, same shape
        Temperatures at which the value is at most, and at least, the one wanted, K.
    start : array of float, same shape
        First guesses, K.
    positive : bool
        True if the logarithm of the value is stepped with.

    Returns
    -------
    array of float, same shape
        Temperatures, K.
    """
    found = start.copy()
    left = np.arange(wanted.size)
    a, b, t = below.copy(), above.copy(), np.clip(start, np.minimum(below, above), np.maximum(below, above))
    last = np.full(wanted.size, np.inf)
    with np.errstate(all="ignore"):
        for _ in range(_ROUNDS):
            value = curve.values(t)
            a, b = np.where(value <= wanted, t, a), np.where(value >= wanted, t, b)
            rate = curve.rates(t)
            step = np.log(wanted / value) * value / rate if positive else (wanted - value) / rate
            step[value == wanted] = 0.0
            size = np.abs(step)
            low, high = np.minimum(a, b), np.maximum(a, b)
            small = size <= _NOISE * t
            # a small step beyond the bracket ends at it; a large one is not believed
            trusted = small | ((size < 0.5 * last) & (t + step >= low) & (t + step <= high))
            nearer = np.where(trusted, np.clip(t + step, low, high), 0.5 * (low + high))
            done = (size <= _CLOSE * t) | (small & (size >= 0.5 * last)) | (high - low <= _CLOSE * t)
            found[left] = nearer
            go = ~done
            if not go.any():
                break
            left, wanted, a, b, t, last = left[go], wanted[go], a[go], b[go], nearer[go], size[go]
    return found
