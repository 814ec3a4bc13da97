"""Turns: where a stretch is cut so that its curve only rises or only falls between."""

from __future__ import annotations

import math
from collections.abc import Iterator

import numpy as np
from numpy.typing import NDArray

from registry.candidate import Candidate
from registry.coverage import Stretch
from registry.curve import Curve
from registry.inverse.branches import Branch
from registry.sampling import find_change

__all__ = ["cut_branches"]

Array = NDArray[np.float64]

_SAMPLES = 257
"""Temperatures at which a stretch is searched; a turn and its return between two of them are not seen."""


def cut_branches(place: int, stretch: Stretch, *, positive: bool) -> list[Branch]:
    """The branches of the curve that answers in a stretch, in the order of temperature.

    Parameters
    ----------
    place : int
        Index of the stretch.
    stretch : Stretch
        Where one candidate answers.
    positive : bool
        True if a value that is not above zero is none.

    Returns
    -------
    list of Branch
        None where the curve gives no usable value; cut where it turns and where its temperature scale jumps.
    """
    candidate = stretch.candidate
    if candidate is None:
        return []
    curve = candidate.curve
    bounds = sorted({bound for low, high, _ in curve.scale.branches for bound in (low, high)})
    inner = [bound for bound in bounds if stretch.low < bound < stretch.high]
    starts = [stretch.low, *inner]
    stops = [math.nextafter(bound, 0.0) for bound in (*inner, stretch.high)]
    found = []
    with np.errstate(all="ignore"):
        for low, high in zip(starts, stops, strict=True):
            for left, right in _find_usable(curve, *_trim_level(candidate, low, high), positive):
                found += [
                    Branch(place, candidate, *ends, positive=positive) for ends in _find_turns(curve, left, right)
                ]
    return found


def _trim_level(candidate: Candidate, low: float, high: float) -> tuple[float, float]:
    """The ends without the tolerance beside a bound where the curve is level there, as beyond a critical point."""
    curve, (first, last) = candidate.curve, candidate.reach
    if low < first < high and curve.value(first) == curve.value(low):
        low = first
    if low < last < high and curve.value(last) == curve.value(high):
        high = last
    return low, high


def _is_usable(curve: Curve, kelvin: Array, positive: bool) -> NDArray[np.bool_]:
    values = curve.values(kelvin)
    return np.isfinite(values) & (values > 0.0) if positive else np.isfinite(values)


def _find_usable(curve: Curve, low: float, high: float, positive: bool) -> Iterator[tuple[float, float]]:
    """The closed intervals in which a curve gives usable values."""
    at = np.linspace(low, high, _SAMPLES)
    usable = _is_usable(curve, at, positive)

    def test(kelvin: float) -> bool:
        return bool(_is_usable(curve, np.array([kelvin]), positive)[0])

    start = low if usable[0] else None
    for i in np.flatnonzero(usable[1:] != usable[:-1]).tolist():
        left, right = find_change(test, float(at[i]), float(at[i + 1]))
        if start is None:
            start = right
        else:
            yield start, left
            start = None
    if start is not None:
        yield start, high


def _find_turns(curve: Curve, low: float, high: float) -> Iterator[tuple[float, float]]:
    """The closed intervals between the turns of a curve."""
    at = np.linspace(low, high, _SAMPLES)
    signs = np.sign(curve.rates(at))
    known = np.flatnonzero(signs == signs)
    known = known[signs[known] != 0.0]
    start = low
    # points with no slope of their own go with their neighbours
    for left, right in zip(known[:-1].tolist(), known[1:].tolist(), strict=True):
        if signs[left] != signs[right]:
            rising = signs[left] > 0.0
            before, after = find_change(
                lambda kelvin, rising=rising: (curve.rates(np.array([kelvin]))[0] > 0.0) == rising,  # type: ignore[misc]
                float(at[left]), float(at[right]),
            )  # fmt: skip
            yield start, before
            start = after
    yield start, high
