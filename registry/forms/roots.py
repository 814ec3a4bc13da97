"""Roots that implicit forms need, elementwise and reproducible.

Each element stops by its own convergence, so that an array and its elements
give the same bits.
"""

from __future__ import annotations

from collections.abc import Callable

import numpy as np

from registry.forms.form import Array

__all__ = ["solve_bracketed", "solve_rising_concave"]

_EPS = 2.0**-52

_ROUNDS = 200
"""Far more than halving alone needs."""


def solve_rising_concave(f: Callable[[Array], Array], slope: Callable[[Array], Array], start: Array) -> Array:
    """The lower root of a concave function by Newton's rule from its left.

    Parameters
    ----------
    f, slope : callable
        The function and its derivative, elementwise.
    start : array of float
        Points at or left of the root, where `f` is not positive.

    Returns
    -------
    array of float
        The roots; NaN where the function does not rise to zero.

    Notes
    -----
    The tangent of a concave function lies above it, so each step stays left
    of the root: no step can overshoot.

    Examples
    --------
    >>> root = solve_rising_concave(lambda x: 2.0 * x - x * x - 0.75, lambda x: 2.0 - 2.0 * x, np.array([0.0]))
    >>> round(float(root[0]), 15)
    0.5
    """
    x = np.array(start, dtype=float)
    active = np.ones(x.shape, dtype=bool)
    for _ in range(_ROUNDS):
        with np.errstate(all="ignore"):
            gradient = slope(x)
            step = -f(x) / gradient
            rises = (gradient > 0.0) & np.isfinite(step)
        x = np.where(active & ~rises, np.nan, x)
        active = active & rises
        x = np.where(active, x + step, x)
        active = active & (step > 2.0 * _EPS * np.abs(x))
        if not active.any():
            return x
    return np.where(active, np.nan, x)


def solve_bracketed(
    f: Callable[[Array], Array], slope: Callable[[Array], Array], low: float, high: float, like: Array
) -> Array:
    """The root of a rising function between two bounds, Newton kept inside the bracket.

    Parameters
    ----------
    f, slope : callable
        The function and its derivative, elementwise over arrays of the shape
        of `like`.
    low, high : float
        Bounds with f(low) <= 0 <= f(high).
    like : array of float
        Gives the shape.

    Returns
    -------
    array of float
        The roots; NaN where the bounds do not bracket one.

    Examples
    --------
    >>> root = solve_bracketed(lambda x: x**3 - 8.0, lambda x: 3.0 * x * x, 0.0, 5.0, np.zeros(1))
    >>> float(root[0])
    2.0
    """
    a, b = np.full_like(like, low), np.full_like(like, high)
    bracketed = (f(a) <= 0.0) & (f(b) >= 0.0)
    x = 0.5 * (a + b)
    active = bracketed.copy()
    held = x, a, b
    for left in reversed(range(_ROUNDS)):
        value = f(x)
        a = np.where(active & (value <= 0.0), x, a)
        b = np.where(active & (value >= 0.0), x, b)
        with np.errstate(all="ignore"):
            step = -value / slope(x)
        newton = x + step
        inside = (newton >= a) & (newton <= b)
        target = np.where(inside, newton, 0.5 * (a + b))
        moved = np.abs(target - x)
        x = np.where(active, target, x)
        active = active & (moved > 2.0 * _EPS * np.abs(x)) & (value != 0.0)
        if left % 2 == 0:
            # rounding can swing for ever between two neighbours: here is where the last round would end
            active = active & ~((x == held[0]) & (a == held[1]) & (b == held[2]))
            held = x, a, b
        if not active.any():
            break
    return np.where(bracketed, x, np.nan)
