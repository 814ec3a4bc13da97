"""By how many percent one curve deviates from another over a range of temperature."""

from __future__ import annotations

import math
from collections.abc import Callable, Iterator, Sequence
from typing import NamedTuple

import numpy as np
from numpy.typing import NDArray

from registry.curve import Curve
from registry.sampling import find_steps, grade_points, weigh_points

__all__ = ["Deviation", "Piece", "agree", "find_pieces", "join_deviations", "measure_deviation"]

Array = NDArray[np.float64]

_INTERVALS = 256
"""Intervals of the grid on which features are looked for."""

_FINEST = 8192
"""Intervals after which a mean that has not settled is none."""

_NOISE = 1e-11
"""Percent below which a difference is rounding: some hundred units in the last place of the value."""

_CLOSINGS = 12
"""Rounds, each to an eighth, in which a peak is closed in upon; a smooth one takes about four."""

_CROSSINGS = 16
"""Crossings of zero that are followed; more of them are rounding."""


class Deviation(NamedTuple):
    """By how many percent one curve deviates from another.

    Attributes
    ----------
    largest_percent : float or None
        The signed change 100 (after/before - 1) where it is largest either
        way; None where no number bounds it, because the value before is or
        passes through zero and the other is not.
    at : float
        Where that is, K; the lowest temperature if it is so at several.
    mean_percent : float or None
        The mean over temperature of the change without its sign, so that a
        rise does not cancel a fall; None if it has no bound.
    """

    largest_percent: float | None
    at: float
    mean_percent: float | None


class Piece(NamedTuple):
    """A closed range of temperature over which the same curves give a usable value.

    Attributes
    ----------
    low, high : float
        K.
    before, after : bool
        Whether the first, the second curve does.
    """

    low: float
    high: float
    before: bool
    after: bool


def agree(before: Curve, after: Curve) -> bool:
    """True if two curves give the same bits at every temperature, their windows aside."""
    first, second = (
        (curve.kernel, curve.parameters, curve.factor, curve.ratio, curve.scale) for curve in (before, after)
    )
    return first == second


def find_pieces(before: Curve | None, after: Curve | None, low: float, high: float, least: float) -> Iterator[Piece]:
    """A closed range cut where either curve begins or ceases to give a usable value.

    Parameters
    ----------
    before, after : Curve or None
        The curves; None gives no value.
    low, high : float
        The range, K; both ends belong to it.
    least : float
        A usable value is finite and above this.

    Yields
    ------
    Piece
        In the order of temperature, without those where neither is usable.
    """

    def code(kelvin: Array) -> NDArray[np.int64]:
        usable = [
            np.zeros(kelvin.size, bool) if curve is None else _is_usable(curve.values(kelvin), least)
            for curve in (before, after)
        ]
        return usable[0] * 2 + usable[1]

    at = grade_points(low, high, _INTERVALS)
    codes = code(at)
    start = low
    for last, first in find_steps(code, at, codes):
        yield from _cut_piece(start, last, code)
        start = first
    yield from _cut_piece(start, high, code)


def _cut_piece(low: float, high: float, code: Callable[[Array], NDArray[np.int64]]) -> Iterator[Piece]:
    found = int(code(np.array([low]))[0])
    if found:
        yield Piece(low, high, bool(found & 2), bool(found & 1))


def _is_usable(values: Array, least: float) -> NDArray[np.bool_]:
    return np.isfinite(values) & (values > least)


def measure_deviation(before: Curve, after: Curve, low: float, high: float) -> Deviation:
    """By how many percent a curve deviates from another over a range.

    Parameters
    ----------
    before, after : Curve
        The curves, which give finite values all over the range.
    low, high : float
        The range, K; both ends belong to it.

    Returns
    -------
    Deviation
        The mean is good to about 1e-6 of itself; to 1e-5 where a curve has a
        kink or a step, as those on older temperature scales have.

    Examples
    --------
    >>> from registry.forms.catalogue import FORMS
    >>> from registry.forms.form import Units
    >>> from registry.scales import SCALES
    >>> def antoine(A):
    ...     folded = FORMS["antoine-log10"].fold({"A": A, "B": 1700.0, "C": -40.0}, Units())
    ...     return Curve(folded.kernel, folded.parameters, 1.0, 1.0, SCALES["ITS-90"], *2 * ((280.0, 380.0),))
    >>> found = measure_deviation(antoine(9.0), antoine(9.01), 280.0, 380.0)
    >>> f"{found.largest_percent:.6f} % = {100.0 * (10.0**0.01 - 1.0):.6f} %, at {found.at} K"
    '2.329299 % = 2.329299 %, at 280.0 K'
    """
    at = grade_points(low, high, _INTERVALS)
    earlier, later = before.values(at), after.values(at)
    percent = _percent(earlier, later)
    poles = list(find_steps(lambda t: before.values(t) < 0.0, at, earlier < 0.0))
    roots = _find_crossings(before, after, at, later > earlier)
    bounded = not poles and bool(np.isfinite(percent).all())
    ends = [low, *(end for cut in sorted({*poles, *roots}) for end in cut), high]
    mean = _find_mean(before, after, ends, bounded)
    if bounded:
        return Deviation(*_find_largest(before, after, at, percent), mean)
    return Deviation(None, poles[0][0] if poles else _find_unbounded(before, after, at, percent), mean)


def join_deviations(parts: Sequence[tuple[float, Deviation]]) -> Deviation:
    """The deviation over several ranges, in the order of temperature, from the width, K, and deviation of each."""
    mean = _join_means([(width, deviation.mean_percent) for width, deviation in parts])
    found = [deviation for _, deviation in parts]
    largest, where = _choose_largest(
        [(d.at, math.inf if d.largest_percent is None else d.largest_percent) for d in found]
    )
    return Deviation(largest if math.isfinite(largest) else None, where, mean)


def _percent(before: Array, after: Array) -> Array:
    """100 (after/before - 1), without the digits that the subtraction of 1 would cost."""
    with np.errstate(all="ignore"):
        change = 100.0 * ((after - before) / before)
    change[after == before] = 0.0
    return change


def _find_unbounded(before: Curve, after: Curve, at: Array, percent: Array) -> float:
    """The lowest temperature at which the value before is zero and the other is not."""
    finite = np.isfinite(percent)
    if not finite[0]:
        return float(at[0])
    steps = find_steps(lambda t: np.isfinite(_percent(before.values(t), after.values(t))), at, finite)
    return next(first for _, first in steps)


def _find_largest(before: Curve, after: Curve, at: Array, percent: Array) -> tuple[float, float]:
    """The signed percent largest either way, and its lowest temperature: every peak of the grid is closed in upon."""
    size = np.abs(percent)
    rise = np.minimum(size[1:-1] - size[:-2], size[1:-1] - size[2:])
    bend = 2.0 * size[1:-1] - size[:-2] - size[2:]
    # a smooth peak passes the highest point of its grid by less than the bend of its three points
    worth = (rise >= 0.0) & (bend > _NOISE) & (size[1:-1] + bend >= size.max())
    found = [(float(t), float(p)) for t, p in zip(at, percent, strict=True)]
    found += [_close_in(before, after, at[i : i + 3]) for i in np.flatnonzero(worth).tolist()]
    return _choose_largest(found)


def _choose_largest(found: Sequence[tuple[float, float]]) -> tuple[float, float]:
    """From pairs of temperature and percent the percent largest either way, and where, the lowest if at several."""
    top = max(abs(percent) for _, percent in found)
    limit = top - min(_NOISE, 5e-7 * top) if math.isfinite(top) else top
    where, largest = min((t, percent) for t, percent in found if abs(percent) >= limit)
    return largest, where


def _close_in(before: Curve, after: Curve, bracket: Array) -> tuple[float, float]:
    """The temperature and percent of the peak between the ends of a bracket."""
    low, high = float(bracket[0]), float(bracket[-1])
    best = (low, 0.0)
    for _ in range(_CLOSINGS):
        at = np.linspace(low, high, 17)
        percent = _percent(before.values(at), after.values(at))
        size = np.abs(percent)
        top = int(np.argmax(size))
        if size[top] > abs(best[1]):
            best = (float(at[top]), float(percent[top]))
        if size[top] - size.min() <= _NOISE:
            break
        low, high = float(at[max(top - 1, 0)]), float(at[min(top + 1, 16)])
    return best


def _find_mean(before: Curve, after: Curve, ends: Sequence[float], bounded: bool) -> float | None:
    """The mean size of the percent over ranges that begin and end in turn."""
    pairs = list(zip(ends[::2], ends[1::2], strict=True))
    return _join_means([(high - low, _settle_mean(before, after, low, high, bounded)) for low, high in pairs])


def _settle_mean(before: Curve, after: Curve, low: float, high: float, bounded: bool) -> float | None:
    """The mean size of the percent over one range; the grid is halved until it settles.

    Where the percent has no bound, its mean may still have one; it has none if it never settles.
    """
    last = math.inf
    intervals = 64
    while intervals <= _FINEST:
        at, weights = grade_points(low, high, intervals)[1:-1], weigh_points(intervals)[1:-1]
        size = np.abs(_percent(before.values(at), after.values(at)))
        # the ends count nothing, so a value before that is zero there does no harm
        mean = float(np.dot(weights, size))
        step, last = abs(mean - last), mean
        if step <= 1e-8 * mean + _NOISE:
            return mean
        intervals *= 2
    return mean if bounded or step <= 1e-5 * mean else None


def _join_means(parts: Sequence[tuple[float, float | None]]) -> float | None:
    """The mean over several ranges, from the width and mean of each."""
    means = [mean for _, mean in parts if mean is not None]
    if len(means) < len(parts):
        return None
    widths = [width for width, _ in parts]
    if not any(widths):
        return sum(means) / len(means)
    return sum(width * mean for width, mean in zip(widths, means, strict=True)) / sum(widths)


def _find_crossings(before: Curve, after: Curve, at: Array, above: NDArray[np.bool_]) -> list[tuple[float, float]]:
    """Where the change passes through zero; the size of the change has a kink there."""
    if np.count_nonzero(above[1:] != above[:-1]) > _CROSSINGS:
        return []
    return list(find_steps(lambda t: after.values(t) > before.values(t), at, above))
