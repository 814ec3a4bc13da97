"""Evaluating an array over many curves, each point once.

Points are worked in blocks that stay in the processor's cache. Curves that
share the kernel exp(a - b/(T + c)) are evaluated together, with the
coefficients gathered per point; the others by the points they own.
"""

from __future__ import annotations

from collections.abc import Sequence
from typing import Any

import numpy as np
from numpy.typing import NDArray

from registry.curve import Curve
from registry.forms.form import Scratch
from registry.forms.reciprocal import RECIPROCAL

__all__ = ["BLOCK", "Evaluator"]

Array = NDArray[np.float64]
Intervals = NDArray[np.signedinteger[Any]]

BLOCK = 32768
"""Points a block: the working arrays then fit the second-level cache."""

_FEW_EDGES = 24
"""Up to here, adding comparisons is quicker than a binary search."""

_FLAG, _INDEX, _GATHER = 8, 9, 10
"""Working arrays beyond those that kernels use."""


class Evaluator:
    """Curves with the intervals they own.

    Parameters
    ----------
    edges : sequence of float
        Inner ends of the intervals, rising, K.
    owners : sequence of int
        For each interval the index of its curve, -1 for none.
    curves : sequence of Curve
        The curves.
    """

    def __init__(self, edges: Sequence[float], owners: Sequence[int], curves: Sequence[Curve]) -> None:
        self._edges = np.array(edges, dtype=float)
        self._owners = tuple(owners)
        self._curves = tuple(curves)
        stacked = {i for i, curve in enumerate(curves) if curve.stacks}
        self._stacked = stacked if len(stacked) > 1 else set()
        self._single = [i for i, owner in enumerate(owners) if owner >= 0 and owner not in self._stacked]
        self._columns = self._build_columns()

    def _build_columns(self) -> tuple[Array, ...]:
        """The coefficients of the shared kernel for each interval, NaN where it does not answer."""
        nothing = (np.nan, 0.0, 0.0)
        rows = [self._curves[o].parameters if o in self._stacked else nothing for o in self._owners]
        return tuple(np.array(column) for column in zip(*rows, strict=True))

    def evaluate(self, flat: Array) -> tuple[Array, Intervals]:
        """Values and intervals for temperatures in one dimension.

        Parameters
        ----------
        flat : array of float, one-dimensional and contiguous
            Temperatures, K.

        Returns
        -------
        values : array of float
            In SI units; NaN where no curve answers or it gives no finite number.
        intervals : array of int
            The interval of each temperature.
        """
        few = len(self._edges) <= _FEW_EDGES
        values = np.empty(flat.size)
        intervals: Intervals = np.empty(flat.size, dtype=np.int8 if few else np.int16)
        scratch = Scratch(min(BLOCK, max(flat.size, 1)))
        with np.errstate(all="ignore"):
            if _is_sorted(flat):
                self._evaluate_sorted(flat, values, intervals, scratch)
                return values, intervals
            for start in range(0, flat.size, BLOCK):
                part = slice(start, min(start + BLOCK, flat.size))
                self._locate(flat[part], intervals[part], scratch)
                self._fill_block(flat[part], intervals[part], values[part], scratch)
        return values, intervals

    def _evaluate_sorted(self, flat: Array, values: Array, intervals: Intervals, scratch: Scratch) -> None:
        bounds = [0, *np.searchsorted(flat, self._edges, side="left").tolist(), flat.size]
        for index, owner in enumerate(self._owners):
            first, last = bounds[index], bounds[index + 1]
            intervals[first:last] = index
            if owner < 0:
                values[first:last] = np.nan
                continue
            for start in range(first, last, BLOCK):
                part = slice(start, min(start + BLOCK, last))
                self._curves[owner].fill(flat[part], values[part], scratch)
                _refuse_infinite(values[part])

    def _locate(self, t: Array, intervals: Intervals, scratch: Scratch) -> None:
        """The interval of each point: how many edges lie at or below it."""
        if intervals.dtype != np.int8:
            intervals[:] = np.searchsorted(self._edges, t, side="right")
            return
        flag = scratch.take(_FLAG, t).view(np.bool_)[: t.size]
        ones = flag.view(np.int8)
        intervals.fill(0)
        for edge in self._edges:
            np.greater_equal(t, edge, out=flag)
            np.add(intervals, ones, out=intervals)

    def _fill_block(self, t: Array, intervals: Intervals, out: Array, scratch: Scratch) -> None:
        if self._stacked:
            where = scratch.take(_INDEX, t).view(np.intp)
            np.copyto(where, intervals)
            gathered = tuple(
                # every index is in range; wrap is the quickest way to say so
                np.take(column, where, out=scratch.take(_GATHER + i, t), mode="wrap")
                for i, column in enumerate(self._columns)
            )
            RECIPROCAL.fill(t, gathered, out, scratch)
        else:
            out.fill(np.nan)
        for index in self._single:
            mine = np.flatnonzero(intervals == index)
            if mine.size:
                at = np.take(t, mine, out=scratch.take(_INDEX, mine), mode="wrap")
                found = scratch.take(_GATHER, mine)
                self._curves[self._owners[index]].fill(at, found, scratch)
                out[mine] = found
        _refuse_infinite(out)


def _is_sorted(flat: Array) -> bool:
    head = flat[:256]
    return bool((head[1:] >= head[:-1]).all()) and bool((flat[1:] >= flat[:-1]).all())


def _refuse_infinite(values: Array) -> None:
    """A curve that gives no finite number does not answer."""
    if not np.isfinite(values).all():
        values[~np.isfinite(values)] = np.nan
